export type CsvCell = string | number | boolean | Date | null;

/** What spreadsheet programs take for the start of a formula, also after white space or in full-width form. */
const FORMULA = /^[\s\u00a0\ufeff]*[=+\-@\t\r\uff1d\uff0b\uff0d\uff20]/u;
const QUOTED = /[",\r\n\t;]|^\s|\s$/u;

/**
 * One field of a CSV file. Text that a spreadsheet would run as a formula gets an apostrophe in front; numbers stay
 * numbers, also negative ones.
 */
export function csvField(cell: CsvCell): string {
  if (cell === null) return '';
  if (typeof cell === 'number') return Number.isFinite(cell) ? String(cell) : '';
  if (typeof cell === 'boolean') return cell ? 'yes' : 'no';
  if (cell instanceof Date) return cell.toISOString();
  const text = FORMULA.test(cell) ? `'${cell}` : cell;
  return QUOTED.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

export const csvLine = (cells: readonly CsvCell[]): string => `${cells.map(csvField).join(',')}\r\n`;

/** A CSV file (RFC 4180) with a byte-order mark, so that spreadsheets read it as UTF-8. */
export const csvText = (rows: readonly (readonly CsvCell[])[]): string => `\ufeff${rows.map(csvLine).join('')}`;
