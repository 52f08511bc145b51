import { once } from 'node:events';
import type { Writable } from 'node:stream';
import ExcelJS from 'exceljs';

export interface WorkbookColumn {
  head: string;
  width?: number;
  /** Number format of the column, e.g. 0.00. */
  format?: string;
}
export type WorkbookCell = string | number | boolean | Date | null;

/**
 * Streams a workbook row by row: memory stays flat however many rows come. Text cells are written as text, never as
 * formulas. Ends the stream when done.
 * @returns how many rows were written
 */
export async function streamWorkbook(
  out: Writable,
  sheets: readonly {
    name: string;
    columns: readonly WorkbookColumn[];
    rows: AsyncIterable<WorkbookCell[]> | Iterable<WorkbookCell[]>;
  }[],
): Promise<number> {
  const workbook = new ExcelJS.stream.xlsx.WorkbookWriter({ stream: out, useStyles: true, useSharedStrings: false });
  workbook.creator = 'Sidewash';
  let count = 0;
  for (const given of sheets) {
    const sheet = workbook.addWorksheet(given.name.slice(0, 31), { views: [{ state: 'frozen', ySplit: 1 }] });
    sheet.columns = given.columns.map((c) => ({
      header: c.head,
      width: c.width ?? 16,
      style: c.format ? { numFmt: c.format } : {},
    }));
    sheet.getRow(1).font = { bold: true };
    for await (const row of given.rows) {
      sheet.addRow(row).commit();
      count++;
      // The writer buffers while its consumer is slow: give way regularly so that pressure reaches it.
      if (count % 250 === 0) await new Promise((resolve) => setImmediate(resolve));
      while (out.writableNeedDrain && !out.destroyed) await Promise.race([once(out, 'drain'), once(out, 'close')]);
      if (out.destroyed) throw new Error('The reader went away.');
    }
    sheet.commit();
  }
  await workbook.commit();
  return count;
}
