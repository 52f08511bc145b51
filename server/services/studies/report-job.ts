import { releaseAnswerSchema } from '#shared/contracts/airframe-editing.ts';
import { studyStateSchema } from '#shared/contracts/studies.ts';
import { z } from 'zod';

/** What the thread that makes analysis reports is handed. */
export const reportJobSchema = z.object({
  head: z.object({
    number: z.string(),
    organisation: z.string(),
    caution: z.string(),
    printed: z.string(),
    programVersion: z.string(),
    study: z.string(),
    slug: z.string(),
    name: z.string(),
    revision: z.number(),
    status: z.string(),
    provenance: z.string(),
    digest: z.string(),
  }),
  state: studyStateSchema,
  units: z.enum(['aviation', 'si']),
  /** The revision looked at, then those compared with it. */
  subjects: z.array(z.object({ label: z.string(), document: z.unknown() })).min(1),
  answers: z.array(releaseAnswerSchema),
});
export type ReportJob = z.infer<typeof reportJobSchema>;

export const reportAnswerSchema = z.union([
  z.object({ refused: z.string() }),
  z.object({ pdf: z.instanceof(Uint8Array), computeMs: z.number(), drawMs: z.number() }),
]);
