import Papa from 'papaparse';
import {
  addRemark,
  type Cell,
  LARGEST,
  type Remark,
  remarkOnText,
  SheetRefusal,
  type SheetOfCells,
} from './sheet-refusal.ts';

/** Control characters that no text file has: all but tab, line ends and form feed. */
const CONTROL = /[\u0000-\u0008\u000b\u000e-\u001f\ufffd]/u;
const NOT_TEXT =
  'The file is neither a workbook nor text: it holds bytes that no table has. Send a .xlsx workbook or a CSV file in UTF-8.';

interface DecodedText {
  text: string;
  /** Said when the encoding had to be guessed. */
  remark: string | null;
}

/**
 * Text of a file in UTF-8, UTF-16 or Latin-1.
 *
 * @throws {SheetRefusal} when it is no text in any of them
 */
export function decodeText(bytes: Uint8Array): DecodedText {
  const decoded = decoded16(bytes) ?? decoded8(bytes) ?? decodedLatin(bytes);
  if (decoded === null || CONTROL.test(decoded.text)) throw new SheetRefusal(NOT_TEXT);
  return decoded;
}

/** UTF-16 by its mark, or by every other byte being zero as Latin letters and digits have it. */
function decoded16(bytes: Uint8Array): DecodedText | null {
  const [a, b] = bytes;
  const marked = a === 0xff && b === 0xfe ? 'utf-16le' : a === 0xfe && b === 0xff ? 'utf-16be' : null;
  const sample = bytes.subarray(0, 2000);
  const zeros = [0, 0];
  sample.forEach((byte, i) => {
    if (byte === 0) zeros[i % 2]++;
  });
  const many = sample.length / 2 / 3;
  const guessed =
    zeros[1] > many && zeros[0] === 0 ? 'utf-16le' : zeros[0] > many && zeros[1] === 0 ? 'utf-16be' : null;
  const encoding = marked ?? guessed;
  if (encoding === null) return null;
  try {
    return { text: new TextDecoder(encoding, { fatal: true }).decode(bytes), remark: null };
  } catch {
    return null;
  }
}

function decoded8(bytes: Uint8Array): DecodedText | null {
  try {
    return { text: new TextDecoder('utf-8', { fatal: true }).decode(bytes), remark: null };
  } catch {
    return null;
  }
}

/** Latin-1 only where most of it is plain: random bytes would pass as letters otherwise. */
function decodedLatin(bytes: Uint8Array): DecodedText | null {
  let high = 0;
  for (const byte of bytes) {
    if (byte > 0x7e) high++;
    else if (byte < 0x20 && byte !== 9 && byte !== 10 && byte !== 13) return null;
  }
  if (high > bytes.length / 5) return null;
  return {
    text: new TextDecoder('windows-1252').decode(bytes),
    remark: 'The file is not UTF-8; it is read as Latin-1. Check letters with accents and signs such as °.',
  };
}

/**
 * Cells of a CSV file: all text, null where empty. Comma, semicolon, tab or bar between cells is found by itself.
 *
 * @throws {SheetRefusal}
 */
export function textCells(bytes: Uint8Array, name: string): SheetOfCells {
  const { text, remark } = decodeText(bytes);
  if (text.trim() === '') throw new SheetRefusal('The file is empty.');
  const lineEnd = /[\r\n]/.exec(text)?.index ?? text.length;
  if (lineEnd > LARGEST.columns * LARGEST.cellCharacters)
    throw new SheetRefusal('The file has no lines of a table. Send a CSV file with one value or one row a line.');
  const remarks: Remark[] = [];
  if (remark !== null) addRemark(remarks, 1, null, remark);
  const parsed = Papa.parse<string[]>(text, { header: false, skipEmptyLines: false, preview: LARGEST.rows + 2 });
  const open = parsed.errors.find((error) => error.type === 'Quotes');
  if (open)
    throw new SheetRefusal(
      `A quotation mark in row ${(open.row ?? 0) + 1} is not closed, so the rows after it cannot be told apart. Close it or remove it.`,
    );
  const rows: Cell[][] = [];
  const lines = parsed.data;
  while (lines.length > 0 && lines[lines.length - 1].every((cell) => cell === '')) lines.pop();
  if (lines.length > LARGEST.rows || parsed.meta.truncated) throw tooLarge();
  if (lines.length === 0) throw new SheetRefusal('The file has no values.');
  const width = lines[0]?.length ?? 0;
  let count = 0;
  lines.forEach((line, i) => {
    count += line.length;
    if (line.length > LARGEST.columns || count > LARGEST.cells) throw tooLarge();
    if (line.length > width && line.some((cell) => cell !== ''))
      addRemark(
        remarks,
        i + 1,
        null,
        `The row has ${line.length} cells, the first has ${width}. A comma within a number does this.`,
      );
    rows.push(line.map((cell, j) => cellOf(cell, remarks, i + 1, j + 1)));
  });
  return { name, rows, remarks };
}

const tooLarge = (): SheetRefusal =>
  new SheetRefusal(
    `The table is larger than ${LARGEST.rows} rows by ${LARGEST.columns} columns. Send the part with the airframe.`,
  );

function cellOf(cell: string, remarks: Remark[], row: number, column: number): Cell {
  if (cell === '') return null;
  if (cell.length > LARGEST.cellCharacters)
    throw new SheetRefusal(
      `Row ${row}, column ${column} holds ${cell.length} characters; a cell has at most ${LARGEST.cellCharacters}. Is this a table?`,
    );
  remarkOnText(remarks, row, column, cell);
  return cell;
}
