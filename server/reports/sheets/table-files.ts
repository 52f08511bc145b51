import ExcelJS from 'exceljs';
import Papa from 'papaparse';
import { EXACT_TABLE_HEAD, type ExactRow } from '#shared/model/airframe-table.ts';

const BYTE_ORDER_MARK = '\ufeff';

/** The table as CSV in UTF-8, marked so that spreadsheet programs see that it is. */
export function tableCsv(rows: readonly ExactRow[]): Buffer {
  const text = Papa.unparse([[...EXACT_TABLE_HEAD], ...rows], { newline: '\r\n' });
  return Buffer.from(`${BYTE_ORDER_MARK}${text}\r\n`, 'utf8');
}

/** The table as a workbook of one sheet; texts are cells of text, never formulas. */
export async function tableWorkbook(rows: readonly ExactRow[], sheetName: string): Promise<Buffer> {
  const workbook = new ExcelJS.Workbook();
  workbook.creator = 'Sidewash';
  const sheet = workbook.addWorksheet(sheetName.replace(/[\\/?*[\]:]/g, ' ').slice(0, 31) || 'Airframe', {
    views: [{ state: 'frozen', ySplit: 1 }],
  });
  sheet.columns = [{ width: 48 }, { width: 24 }, { width: 10 }];
  sheet.addRow([...EXACT_TABLE_HEAD]).font = { bold: true };
  for (const row of rows) sheet.addRow([...row]);
  return Buffer.from(await workbook.xlsx.writeBuffer());
}
