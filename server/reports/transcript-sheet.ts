import { Sheet, type ResultState } from './pdf/sheet.ts';

/** Everything a transcript shows, as plain data in display units. */
export interface TranscriptData {
  organisation: string;
  number: string;
  trainee: string;
  subtitle: string;
  trace: string;
  printed: string;
  /** Words of the organisation below the fixed caution. */
  caution: string;
  totals: { scenarios: number; met: number; signed: number; attempts: number };
  scenarios: readonly {
    title: string;
    revision: number;
    attempts: number;
    last: string;
    state: ResultState;
    word: string;
    margin: string;
    signed: string;
  }[];
  attempts: readonly {
    at: string;
    title: string;
    number: string;
    duration: string;
    reaction: string;
    margin: string;
    state: ResultState;
    word: string;
  }[];
  entries: readonly string[];
}

/** A4 transcript of one trainee: scenarios, every attempt, signatures and corrections. */
export async function transcriptSheet(data: TranscriptData): Promise<Buffer> {
  const sheet = new Sheet({
    organisation: data.organisation,
    kind: 'Transcript',
    number: data.number,
    title: data.trainee,
    subtitle: data.subtitle,
    trace: data.trace,
    printed: data.printed,
    caution: data.caution,
  });
  const { totals } = data;
  sheet.boxes([
    { label: 'Scenarios flown', value: String(totals.scenarios), mono: true },
    { label: 'Met', value: `${totals.met} of ${totals.scenarios}`, mono: true },
    { label: 'Signed off', value: `${totals.signed} of ${totals.scenarios}`, mono: true },
    { label: 'Attempts', value: String(totals.attempts), mono: true },
  ]);
  sheet.section(1, 'Scenarios', 'a standing sign-off decides over the computed result', 60);
  if (data.scenarios.length === 0) sheet.paragraph('No scenario has been flown.');
  else {
    sheet.table(
      [
        { head: 'Scenario', share: 0.32, bold: true },
        { head: 'Rev.', share: 0.06, align: 'right', mono: true },
        { head: 'Tries', share: 0.07, align: 'right', mono: true },
        { head: 'Last flown', share: 0.13, align: 'right', mono: true },
        { head: 'Margin', share: 0.13, align: 'right', mono: true },
        { head: 'Result', share: 0.13 },
        { head: 'Signed off', share: 0.16 },
      ],
      data.scenarios.map((row) => [
        row.title,
        String(row.revision),
        String(row.attempts),
        row.last,
        row.margin,
        { state: row.state, text: row.word },
        row.signed,
      ]),
    );
  }
  sheet.section(2, 'Attempts', 'computed by the server from the recorded inputs', 60);
  if (data.attempts.length === 0) sheet.paragraph('None.');
  else {
    sheet.table(
      [
        { head: 'Flown (UTC)', share: 0.19, mono: true },
        { head: 'Scenario', share: 0.32, bold: true },
        { head: 'No.', share: 0.06, align: 'right', mono: true },
        { head: 'Time', share: 0.09, align: 'right', mono: true },
        { head: 'First pedal', share: 0.1, align: 'right', mono: true },
        { head: 'Margin', share: 0.12, align: 'right', mono: true },
        { head: 'Result', share: 0.12 },
      ],
      data.attempts.map((row) => [
        row.at,
        row.title,
        row.number,
        row.duration,
        row.reaction,
        row.margin,
        { state: row.state, text: row.word },
      ]),
    );
  }
  sheet.section(3, 'Signatures and corrections', 'every entry, oldest first', 40);
  if (data.entries.length === 0) sheet.paragraph('None.');
  for (const entry of data.entries) sheet.paragraph(entry);
  return sheet.finish();
}
