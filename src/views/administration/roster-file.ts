import Papa from 'papaparse';
import type { RosterRow } from '#shared/contracts/administration.ts';

const MOST_BYTES = 1_000_000;
const MOST_TEXT = 400;

export class RosterFileError extends Error {
  override readonly name = 'RosterFileError';
}

/**
 * Rows of a CSV roster: headings name, email and, where wanted, roles and cohort, in any order and letter case.
 *
 * @throws {RosterFileError} with the rule and the remedy
 */
export function readRoster(bytes: Uint8Array): RosterRow[] {
  if (bytes.length > MOST_BYTES) throw new RosterFileError('The file is larger than 1 MB. Split it.');
  const text = textOf(bytes);
  const [heading, ...lines] = numberedLines(text);
  if (heading === undefined)
    throw new RosterFileError('The file is empty. Use the headings name, email, roles, cohort.');
  const names = heading.cells.map((cell) =>
    cell
      .trim()
      .toLowerCase()
      .replace(/^e-mail$/, 'email'),
  );
  const column = (name: string): number => names.indexOf(name);
  for (const needed of ['name', 'email']) {
    if (column(needed) < 0) {
      throw new RosterFileError(
        `The first line has no heading “${needed}”. Use the headings name, email, roles, cohort.`,
      );
    }
  }
  const cell = (cells: string[], name: string): string => (cells[column(name)] ?? '').trim().slice(0, MOST_TEXT);
  const rows = lines.flatMap(({ cells, line }) =>
    cells.every((text) => text.trim() === '')
      ? []
      : [
          {
            line,
            name: cell(cells, 'name'),
            email: cell(cells, 'email'),
            roles: cell(cells, 'roles').slice(0, 200),
            cohort: cell(cells, 'cohort').slice(0, 200),
          },
        ],
  );
  if (rows.length === 0) throw new RosterFileError('The file has a heading but no rows. Add one line a person.');
  return rows;
}

/** UTF-8, or UTF-16 that says so by its first two bytes; other encodings are not guessed: that would spoil names. */
function textOf(bytes: Uint8Array): string {
  const [first, second] = bytes;
  const utf16 = first === 0xff && second === 0xfe ? 'utf-16le' : first === 0xfe && second === 0xff ? 'utf-16be' : null;
  let text: string;
  try {
    text = new TextDecoder(utf16 ?? 'utf-8', { fatal: true }).decode(bytes);
  } catch {
    throw new RosterFileError('The file is not UTF-8. Save it as CSV UTF-8 and choose it again.');
  }
  if (text.includes('\0')) throw new RosterFileError('The file is not text. Save it as CSV UTF-8 and choose it again.');
  return text;
}

/** What stands most often between the headings. */
function delimiterOf(text: string): string {
  const heading = /^[^\r\n]*/.exec(text)?.[0] ?? '';
  const count = (mark: string): number => heading.split(mark).length;
  return [';', '\t'].reduce((best, mark) => (count(mark) > count(best) ? mark : best), ',');
}

/** Rows of cells with the line each begins in, line breaks within quotes counted. */
function numberedLines(text: string): { cells: string[]; line: number }[] {
  const found: { cells: string[]; line: number }[] = [];
  let line = 1;
  let from = 0;
  Papa.parse<string[]>(text, {
    delimiter: delimiterOf(text),
    skipEmptyLines: false,
    step: ({ data, meta }) => {
      found.push({ cells: data, line });
      line += text.slice(from, meta.cursor).match(/\r\n|\r|\n/g)?.length ?? 0;
      from = meta.cursor;
    },
  });
  return found;
}

/** Rows of the invitation box: one line a person, "Name, address" or an address alone. */
export function readLines(text: string, roles: string, cohort: string): RosterRow[] {
  return text.split('\n').flatMap((written, i) => {
    const line = written.trim();
    if (line === '') return [];
    const comma = line.lastIndexOf(',');
    const email = line.slice(comma + 1).trim();
    const name = comma < 0 ? (email.split('@')[0] ?? '') : line.slice(0, comma).trim();
    return [{ line: i + 1, name: name.slice(0, MOST_TEXT), email: email.slice(0, MOST_TEXT), roles, cohort }];
  });
}
