/** Thread that opens uploaded tables: a hostile one ends its thread, not the server. */
import { z } from 'zod';
import { readSheet } from '../../reports/sheets/read-sheet.ts';
import { SheetRefusal } from '../../reports/sheets/sheet-refusal.ts';
import { answerJobs } from './answer-jobs.ts';

const jobSchema = z.object({ fileName: z.string(), bytes: z.instanceof(Uint8Array) });

answerJobs(async (message) => {
  const { fileName, bytes } = jobSchema.parse(message);
  try {
    return await readSheet(bytes, fileName);
  } catch (error) {
    if (error instanceof SheetRefusal) return { refused: error.message };
    throw error;
  }
});
