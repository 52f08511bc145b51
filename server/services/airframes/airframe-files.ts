import { MAX_SHEET_BYTES, sheetCellsSchema, type SheetCells } from '#shared/contracts/airframe-editing.ts';
import { documentToExactTable } from '#shared/model/airframe-table.ts';
import { z } from 'zod';
import type { Database } from '../../data/database.ts';
import { tableCsv, tableWorkbook } from '../../reports/sheets/table-files.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { ProblemError } from '../problem-error.ts';
import { JobTimeout, type WorkerPool } from '../workers/worker-pool.ts';
import { foundAirframe, foundRevision } from './airframe-deeds.ts';

export const EXPORT_FORMATS = ['json', 'csv', 'xlsx'] as const;
export type ExportFormat = (typeof EXPORT_FORMATS)[number];
export interface ExportedFile {
  fileName: string;
  type: string;
  bytes: Buffer;
}

const TYPES: Record<ExportFormat, string> = {
  json: 'application/json; charset=utf-8',
  csv: 'text/csv; charset=utf-8',
  xlsx: 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet',
};
const LONGEST_READING_MS = 20_000;

/** The bytes of a document's JSON export; digests of printed reports are of these. */
export const exportedJson = (document: unknown): Buffer =>
  Buffer.from(`${JSON.stringify(document, null, 2)}\n`, 'utf8');

const readingSchema = z.union([z.object({ refused: z.string() }), sheetCellsSchema]);

function memoryRanOut(error: unknown): boolean {
  const cause: unknown = error instanceof Error ? error.cause : null;
  return typeof cause === 'object' && cause !== null && Reflect.get(cause, 'code') === 'ERR_WORKER_OUT_OF_MEMORY';
}

/** Airframes as files: reading an uploaded table, writing a revision out. */
export function createAirframeFiles({ database, sheets }: { database: Database; sheets: WorkerPool }) {
  return {
    /** Cells of an uploaded table. Nothing is stored. */
    async readSheet(actor: Actor, upload: { fileName: string; bytes: Buffer }): Promise<SheetCells> {
      requireDeed(actor, 'airframe.edit');
      const { fileName, bytes } = upload;
      if (bytes.length > MAX_SHEET_BYTES)
        throw new ProblemError('too-large', `A table has at most ${MAX_SHEET_BYTES / 1024 / 1024} MB.`);
      const answer = await sheets
        .run({ fileName, bytes: new Uint8Array(bytes) }, { withinMs: LONGEST_READING_MS })
        .catch((error: unknown) => {
          if (error instanceof JobTimeout) return { refused: 'The file takes too long to read. Send a smaller table.' };
          if (memoryRanOut(error)) return { refused: 'The file is too large to read. Send a smaller table.' };
          throw error;
        });
      const read = readingSchema.parse(answer);
      if (!('refused' in read)) return read;
      const error = { field: '', rule: 'readable', message: read.refused, remedy: '' };
      throw new ProblemError('validation', read.refused, { errors: [error] });
    },

    /** A revision or draft exactly as it is stored. */
    async export(actor: Actor, slug: string, number: number, format: ExportFormat): Promise<ExportedFile> {
      requireDeed(actor, 'airframe.read');
      const { document } = await foundRevision(database, await foundAirframe(database, actor, slug), number);
      const bytes =
        format === 'json'
          ? exportedJson(document)
          : format === 'csv'
            ? tableCsv(documentToExactTable(document))
            : await tableWorkbook(documentToExactTable(document), slug);
      return { fileName: `${slug}-revision-${number}.${format}`, type: TYPES[format], bytes };
    },
  };
}
