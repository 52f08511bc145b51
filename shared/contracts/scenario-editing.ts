/** Writing scenarios: detail, drafts, publishing, archiving. */
import { z } from 'zod';
import { noteSchema } from './airframe-editing.ts';
import { slugSchema } from './paging.ts';
import { scenarioStatusSchema } from './scenarios.ts';

export const scenarioLineSchema = z.object({
  revision: z.number().int().min(1),
  status: scenarioStatusSchema,
  title: z.string(),
  note: z.string(),
  airframeSlug: slugSchema,
  airframeRevision: z.number().int().min(1),
  createdBy: z.string().nullable(),
  createdAt: z.iso.datetime(),
  publishedBy: z.string().nullable(),
  publishedAt: z.iso.datetime().nullable(),
  archivedAt: z.iso.datetime().nullable(),
  changedBy: z.string().nullable(),
  changedAt: z.iso.datetime(),
});
export type ScenarioLine = z.infer<typeof scenarioLineSchema>;

export const scenarioDetailSchema = z.object({
  slug: slugSchema,
  title: z.string(),
  /** Newest first. Drafts only for those who may read them. */
  revisions: z.array(scenarioLineSchema),
  /** The newest released revision of the airframe of the newest revision, when it is newer than the pinned one. */
  newerAirframe: z.object({ slug: slugSchema, revision: z.number().int().min(1) }).nullable(),
  mayEdit: z.boolean(),
  mayExport: z.boolean(),
});
export type ScenarioDetail = z.infer<typeof scenarioDetailSchema>;

/** `document` is the file as it stands: a draft may be unfinished. It must name a released airframe revision. */
export const createScenarioSchema = z.strictObject({
  slug: slugSchema.optional(),
  document: z.record(z.string(), z.unknown()),
  note: noteSchema.default(''),
});
export type CreateScenario = z.input<typeof createScenarioSchema>;

export const duplicateScenarioSchema = z.strictObject({
  revision: z.number().int().min(1),
  title: z.string().trim().min(1).max(200),
});
export const startScenarioDraftSchema = z.strictObject({ from: z.number().int().min(1), note: noteSchema.default('') });

/** Sent with `If-Match: "<version>"`; a draft that someone else saved meanwhile answers 412 and is left as it is. */
export const saveScenarioDraftSchema = z.strictObject({
  document: z.record(z.string(), z.unknown()),
  note: noteSchema.optional(),
});

export const scenarioDraftSchema = z.object({
  slug: slugSchema,
  revision: z.number().int().min(1),
  note: z.string(),
  createdBy: z.string().nullable(),
  createdAt: z.iso.datetime(),
  changedBy: z.string().nullable(),
  changedAt: z.iso.datetime(),
  /** The document as saved; may not parse yet. */
  document: z.record(z.string(), z.unknown()),
  /** Opaque; goes back in `If-Match`. */
  version: z.string(),
});
export type ScenarioDraft = z.infer<typeof scenarioDraftSchema>;

/** A revision as a file: the document as it was given, without defaults filled in. */
export const scenarioFileSchema = z.object({ document: z.record(z.string(), z.unknown()) });
export type ScenarioFile = z.infer<typeof scenarioFileSchema>;

export const createdScenarioSchema = z.object({ slug: slugSchema, revision: z.number().int().min(1) });

export const publishScenarioSchema = z.strictObject({
  note: z.string().trim().min(3, 'Say in a few words what is new in this revision.').max(2000),
});
