/** A file that is not read, with the reason and the remedy in words for whoever sent it. */
export class SheetRefusal extends Error {
  override readonly name = 'SheetRefusal';
}

export type Cell = string | number | boolean | null;
export interface Remark {
  /** From 1. */
  row: number;
  /** From 1; null when the remark is about the whole row. */
  column: number | null;
  message: string;
}
export interface SheetOfCells {
  name: string;
  rows: Cell[][];
  remarks: Remark[];
}

/** Largest table that is read. An airframe has a few hundred values. */
export const LARGEST = { rows: 20_000, columns: 256, cells: 200_000, cellCharacters: 40_000, remarks: 200 } as const;

/** Adds a remark unless there are too many; the last one says so. */
export function addRemark(remarks: Remark[], row: number, column: number | null, message: string): void {
  if (remarks.length < LARGEST.remarks) remarks.push({ row, column, message });
  else if (remarks.length === LARGEST.remarks)
    remarks.push({ row, column: null, message: 'More remarks are left out.' });
}

const DECIMAL_COMMA = /^[+-]?(?:\d{1,3}(?:\.\d{3})+|\d+),\d+(?:[eE][+-]?\d+)?$/;

/** Remarks on a cell of text: a decimal comma, a formula. */
export function remarkOnText(remarks: Remark[], row: number, column: number, text: string): void {
  const trimmed = text.trim();
  if (DECIMAL_COMMA.test(trimmed)) {
    const written = trimmed.replaceAll('.', '').replace(',', '.');
    addRemark(remarks, row, column, `“${trimmed}” has a decimal comma and is kept as text. Write ${written}.`);
  } else if (trimmed.startsWith('=')) {
    addRemark(remarks, row, column, 'A formula is kept as its text and is not computed. Paste its value instead.');
  }
}
