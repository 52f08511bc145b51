import type { Airframe } from './airframe-schema.ts';

export interface SourceLetter {
  letter: string;
  text: string;
}

/**
 * A letter for each text of a source, in the order of the file; the same on the screen and in print.
 *
 * @param airframe  Its sources.
 * @returns         A, B … Z, AA … each with its text.
 * @throws          Nothing.
 * @sign            none
 * @source          Ours.
 */
export function sourceLetters(airframe: Pick<Airframe, 'sources'>): SourceLetter[] {
  const texts = [...new Set((airframe.sources ?? []).map(({ text }) => text))];
  return texts.map((text, i) => ({ letter: letterAt(i), text }));
}
const letterAt = (i: number): string =>
  (i < 26 ? '' : letterAt(Math.floor(i / 26) - 1)) + String.fromCharCode(65 + (i % 26));

/**
 * The letter of a text; empty for one that is not listed.
 *
 * @param letters  As of `sourceLetters`.
 * @param text     A source's text, or null.
 * @returns        Its letter.
 * @throws         Nothing.
 * @sign           none
 * @source         Ours.
 */
export const letterOf = (letters: readonly SourceLetter[], text: string | null): string =>
  letters.find((source) => source.text === text)?.letter ?? '';
