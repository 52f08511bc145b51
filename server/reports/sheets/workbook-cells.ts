import ExcelJS from 'exceljs';
import { strFromU8, strToU8, zipSync } from 'fflate';
import {
  addRemark,
  type Cell,
  LARGEST,
  type Remark,
  remarkOnText,
  SheetRefusal,
  type SheetOfCells,
} from './sheet-refusal.ts';
import { readZipEntries } from './zip-entries.ts';

/** Parts that hold cells. Macros, pictures, links to other files and all else is left behind unread. */
const WANTED =
  /^(?:\[Content_Types\]\.xml|_rels\/\.rels|xl\/workbook\.xml|xl\/_rels\/workbook\.xml\.rels|xl\/sharedStrings\.xml|xl\/styles\.xml|xl\/worksheets\/[^/]+\.xml)$/;
const SHEET = /^xl\/worksheets\//;
const MOST_SHEETS = 20;

interface Merge {
  row: number;
  column: number;
  lastRow: number;
  lastColumn: number;
  range: string;
}

/**
 * Cells of a workbook, sheet by sheet. Only cells survive: before the workbook is opened, everything that could make a
 * reader work for hours (merged ranges, validations, names over whole sheets) is taken out, merges being remembered.
 *
 * @throws {SheetRefusal}
 */
export async function workbookCells(bytes: Uint8Array): Promise<SheetOfCells[]> {
  const parts = readZipEntries(bytes, (name) => WANTED.test(name));
  const book = parts.get('xl/workbook.xml');
  if (book === undefined)
    throw new SheetRefusal('The file is a zip archive but no workbook. Send a .xlsx workbook or a CSV file.');
  const merges = new Map<string, Merge[]>();
  const kept: Record<string, Uint8Array> = {};
  for (const [name, content] of parts) {
    if (SHEET.test(name)) {
      const sheet = cellsOnly(strFromU8(content));
      merges.set(name, sheet.merges);
      kept[name] = strToU8(sheet.xml);
    } else kept[name] = content;
  }
  kept['xl/workbook.xml'] = strToU8(strFromU8(book).replace(/<definedNames>[\s\S]*?<\/definedNames>/g, ''));
  const workbook = new ExcelJS.Workbook();
  try {
    const vetted = zipSync(kept, { level: 0 });
    await workbook.xlsx.load(vetted.buffer);
  } catch {
    throw new SheetRefusal('The workbook is damaged and cannot be read. Open it, save it again and send that.');
  }
  if (workbook.worksheets.length === 0) throw new SheetRefusal('The workbook has no sheet with cells.');
  if (workbook.worksheets.length > MOST_SHEETS)
    throw new SheetRefusal(
      `The workbook has ${workbook.worksheets.length} sheets; at most ${MOST_SHEETS} are read. Send the one with the airframe.`,
    );
  const files = sheetFiles(strFromU8(book), strFromU8(parts.get('xl/_rels/workbook.xml.rels') ?? new Uint8Array()));
  const found = files.filter((name) => merges.has(name));
  return workbook.worksheets.map((sheet, i) =>
    cellsOf(sheet, (found.length === workbook.worksheets.length && merges.get(found[i])) || []),
  );
}

/** Files of the sheets in the order of the workbook. */
function sheetFiles(book: string, relations: string): string[] {
  const targets = new Map<string, string>();
  for (const [tag] of relations.matchAll(/<Relationship\b[^>]*>/g)) {
    const id = /\bId="([^"]*)"/.exec(tag)?.[1];
    const target = /\bTarget="([^"]*)"/.exec(tag)?.[1];
    if (id !== undefined && target !== undefined) targets.set(id, target.replace(/^\/?(?:xl\/)?/, 'xl/'));
  }
  return [...book.matchAll(/<sheet\b[^>]*\br:id="([^"]*)"/g)].map(([, id]) => targets.get(id) ?? '');
}

/** A worksheet's text up to its last cell, and the merges that followed. */
function cellsOnly(xml: string): { xml: string; merges: Merge[] } {
  const empty = /<sheetData\s*\/>/.exec(xml);
  const end = empty ? empty.index + empty[0].length : xml.indexOf('</sheetData>') + '</sheetData>'.length;
  if (!empty && end < '</sheetData>'.length)
    throw new SheetRefusal('A sheet of the workbook is written in an unusual way and cannot be read. Send it as CSV.');
  const merges: Merge[] = [];
  for (const match of xml
    .slice(end)
    .matchAll(/<mergeCell\b[^>]*\bref="([A-Z]{1,3})(\d{1,7}):([A-Z]{1,3})(\d{1,7})"/g)) {
    const [, from, row, to, lastRow] = match;
    const range = `${from}${row}:${to}${lastRow}`;
    merges.push({
      range,
      row: Number(row),
      column: columnNumber(from),
      lastRow: Number(lastRow),
      lastColumn: columnNumber(to),
    });
    if (merges.length >= LARGEST.remarks) break;
  }
  return { xml: `${xml.slice(0, end)}</worksheet>`, merges };
}

const columnNumber = (letters: string): number =>
  [...letters].reduce((sum, letter) => sum * 26 + letter.charCodeAt(0) - 64, 0);

function cellsOf(sheet: ExcelJS.Worksheet, merges: readonly Merge[]): SheetOfCells {
  const rows: Cell[][] = [];
  const remarks: Remark[] = [];
  let count = 0;
  sheet.eachRow({ includeEmpty: false }, (row, rowNumber) => {
    row.eachCell({ includeEmpty: false }, (cell, columnNumber) => {
      const value = valueOf(cell.value, remarks, rowNumber, columnNumber);
      if (value === null) return;
      count++;
      if (rowNumber > LARGEST.rows || columnNumber > LARGEST.columns || count > LARGEST.cells)
        throw new SheetRefusal(
          `The sheet “${sheet.name}” is larger than ${LARGEST.rows} rows by ${LARGEST.columns} columns. Send the part with the airframe.`,
        );
      while (rows.length < rowNumber) rows.push([]);
      const cells = rows[rowNumber - 1];
      while (cells.length < columnNumber) cells.push(null);
      cells[columnNumber - 1] = value;
    });
  });
  for (const merge of merges) {
    addRemark(
      remarks,
      merge.row,
      merge.column,
      `The cells ${merge.range} are merged: only the first holds the value, the others are empty. Split them.`,
    );
  }
  return { name: sheet.name, rows, remarks };
}

function valueOf(value: ExcelJS.CellValue, remarks: Remark[], row: number, column: number): Cell {
  if (value === null || value === undefined) return null;
  if (typeof value === 'number') return Number.isFinite(value) ? value : null;
  if (typeof value === 'boolean') return value;
  if (typeof value === 'string') return textOf(value, remarks, row, column);
  if (value instanceof Date) {
    addRemark(remarks, row, column, 'The cell is a date. Format it as a number or text if it is not meant as one.');
    return Number.isNaN(value.getTime()) ? null : value.toISOString().slice(0, 10);
  }
  if ('error' in value) {
    addRemark(remarks, row, column, `The cell shows an error (${value.error}). Correct it in the workbook.`);
    return String(value.error);
  }
  if ('richText' in value) return textOf(value.richText.map((part) => part.text).join(''), remarks, row, column);
  if ('hyperlink' in value) return textOf(String(value.text), remarks, row, column);
  if ('formula' in value || 'sharedFormula' in value) {
    const formula = 'formula' in value ? value.formula : value.sharedFormula;
    return textOf(`=${formula}`, remarks, row, column);
  }
  return null;
}

function textOf(text: string, remarks: Remark[], row: number, column: number): Cell {
  if (text === '') return null;
  if (text.length > LARGEST.cellCharacters) {
    addRemark(remarks, row, column, `The text is cut at ${LARGEST.cellCharacters} characters.`);
    return text.slice(0, LARGEST.cellCharacters);
  }
  remarkOnText(remarks, row, column, text);
  return text;
}
