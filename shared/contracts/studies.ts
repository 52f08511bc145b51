/** Saved states of the Analysis screen, shared within an organisation, and the printed report of one. */
import { z } from 'zod';
import { airframeStatusSchema } from './airframes.ts';
import { bothWays, pageOf, pageQueryShape, searchShape, slugSchema } from './paging.ts';

/** All members of a state together, as JSON text; bytes. */
export const MAX_STUDY_STATE_BYTES = 8 * 1024;

/**
 * Address members of the Analysis screen, as they stand in its address. `airframe` (slug) is needed; without `revision` the
 * server pins the latest one and writes it into the state. `compare` holds further revisions, "slug:revision" with commas.
 */
export const studyStateSchema = z
  .record(z.string().regex(/^[a-zA-Z][a-zA-Z0-9_-]{0,39}$/, 'A member has a short plain name.'), z.string().max(4000))
  .refine((state) => JSON.stringify(state).length <= MAX_STUDY_STATE_BYTES, 'A study holds at most 8 KB of settings.');
export type StudyState = z.infer<typeof studyStateSchema>;

export const studyNameSchema = z
  .string()
  .trim()
  .min(1, 'Give the study a name.')
  .max(120, 'A name has at most 120 characters.');
export const studyNoteSchema = z.string().trim().max(2000, 'A note has at most 2,000 characters.');

export const saveStudySchema = z.strictObject({
  name: studyNameSchema,
  note: studyNoteSchema.default(''),
  state: studyStateSchema,
});
export type SaveStudy = z.input<typeof saveStudySchema>;
/** A new study. `id` puts one that was removed back at its address. */
export const createStudySchema = saveStudySchema.extend({ id: z.uuid().optional() });
export type CreateStudy = z.input<typeof createStudySchema>;

export const studyListQuerySchema = z.strictObject({
  ...pageQueryShape,
  ...searchShape,
  /** Studies that pin any revision of this airframe. */
  airframe: slugSchema.optional(),
  sort: z.enum(bothWays(['name', 'updatedAt'])).default('-updatedAt'),
});
export type StudyListQuery = z.infer<typeof studyListQuerySchema>;

export const pinnedRevisionSchema = z.object({
  slug: slugSchema,
  revision: z.number().int().min(1),
  name: z.string(),
  status: airframeStatusSchema,
});
export type PinnedRevision = z.infer<typeof pinnedRevisionSchema>;

export const studySummarySchema = z.object({
  id: z.uuid(),
  name: z.string(),
  note: z.string(),
  /** The revision looked at first, then the compared ones. */
  airframes: z.array(pinnedRevisionSchema),
  author: z.string().nullable(),
  createdAt: z.iso.datetime(),
  updatedAt: z.iso.datetime(),
  changedBy: z.string().nullable(),
});
export type StudySummary = z.infer<typeof studySummarySchema>;
export const studyPageSchema = pageOf(studySummarySchema);

export const studySchema = studySummarySchema.extend({
  state: studyStateSchema,
  /** Opaque; also the ETag, and goes back in `If-Match` of a PUT. */
  version: z.string(),
  mayEdit: z.boolean(),
});
export type Study = z.infer<typeof studySchema>;

/**
 * A printed report of a saved study, or of a state that was not saved, in the units of whoever prints it.
 * The answer is a PDF file.
 */
const reportUnits = z.enum(['aviation', 'si']).default('aviation');
export const analysisReportSchema = z.union([
  z.strictObject({ study: z.uuid(), units: reportUnits }),
  z.strictObject({ state: studyStateSchema, units: reportUnits }),
]);
export type AnalysisReportRequest = z.output<typeof analysisReportSchema>;
export type AnalysisReportBody = z.input<typeof analysisReportSchema>;
