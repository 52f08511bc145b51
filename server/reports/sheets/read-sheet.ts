import type { SheetCells } from '#shared/contracts/airframe-editing.ts';
import { SheetRefusal } from './sheet-refusal.ts';
import { textCells } from './text-cells.ts';
import { workbookCells } from './workbook-cells.ts';

const starts = (bytes: Uint8Array, ...signature: number[]): boolean => signature.every((byte, i) => bytes[i] === byte);

/**
 * Cells of an uploaded table, told by its content and not by its name.
 *
 * @throws {SheetRefusal}
 */
export async function readSheet(bytes: Uint8Array, fileName: string): Promise<SheetCells> {
  if (bytes.length === 0) throw new SheetRefusal('The file is empty.');
  if (starts(bytes, 0x50, 0x4b, 0x03, 0x04)) return { fileName, sheets: await workbookCells(bytes) };
  if (starts(bytes, 0xd0, 0xcf, 0x11, 0xe0))
    throw new SheetRefusal('The workbook is encrypted or in the old .xls format. Save it as .xlsx without a password.');
  if (starts(bytes, 0x25, 0x50, 0x44, 0x46))
    throw new SheetRefusal('The file is a PDF. Send the table as a .xlsx workbook or a CSV file.');
  if (/\.(?:xlsx|xlsm|ods)$/i.test(fileName))
    throw new SheetRefusal(
      `The file is named “${fileName.slice(0, 80)}” but is no workbook. Open it, save it as .xlsx and send that.`,
    );
  return { fileName, sheets: [textCells(bytes, fileName.replace(/\.[^.]*$/, '') || 'Table')] };
}
