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
  let text: string;
  try {
    text = new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    throw new RosterFileError('The file is not UTF-8. Save it as CSV UTF-8 and choose it again.');
  }
  if (text.includes('\0')) throw new RosterFileError('The file is not text. Save it as CSV UTF-8 and choose it again.');
  const { data } = Papa.parse<string[]>(text, { skipEmptyLines: false });
  const [heading = [], ...lines] = data;
  const names = heading.map((cell) =>
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
  const rows = lines.flatMap((cells, i) =>
    cells.every((text) => text.trim() === '')
      ? []
      : [
          {
            line: i + 2,
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
