/** Keeping airframe data: detail, drafts, release, retiring, what uses a revision, skins. */
import { z } from 'zod';
import { airframeRevisionSchema, airframeStatusSchema } from './airframes.ts';
import { slugSchema } from './paging.ts';

export const tagSchema = z
  .string()
  .trim()
  .min(1, 'A tag has at least one character.')
  .max(40, 'A tag has at most 40 characters.');
export const noteSchema = z.string().trim().max(2000, 'A note has at most 2,000 characters.');

/** A warning of the data as it was answered in words at release. */
export const releaseAnswerSchema = z.object({
  field: z.string(),
  rule: z.string(),
  message: z.string(),
  answer: z.string(),
});
export type ReleaseAnswer = z.infer<typeof releaseAnswerSchema>;

export const revisionLineSchema = z.object({
  revision: z.number().int().min(1),
  status: airframeStatusSchema,
  name: z.string(),
  note: z.string(),
  createdBy: z.string().nullable(),
  createdAt: z.iso.datetime(),
  releasedBy: z.string().nullable(),
  releasedAt: z.iso.datetime().nullable(),
  retiredAt: z.iso.datetime().nullable(),
  changedAt: z.iso.datetime(),
  changedBy: z.string().nullable(),
  /** The warnings of a released revision with their answers; empty for a draft. */
  answers: z.array(releaseAnswerSchema),
});
export type RevisionLine = z.infer<typeof revisionLineSchema>;

export const airframeUseSchema = z.object({
  kind: z.enum(['scenario', 'study']),
  /** Slug of the scenario, id of the study. */
  id: z.string(),
  title: z.string(),
  /** Revision of the scenario; null for a study. */
  revision: z.number().int().nullable(),
  status: z.string(),
  airframeRevision: z.number().int().min(1),
});
export type AirframeUse = z.infer<typeof airframeUseSchema>;

export const airframeDetailSchema = z.object({
  slug: slugSchema,
  name: z.string(),
  tags: z.array(z.string()),
  revisions: z.array(revisionLineSchema),
  usedBy: z.array(airframeUseSchema),
  skin: z.object({ fileName: z.string(), bytes: z.number().int(), uploadedAt: z.iso.datetime() }).nullable(),
  mayEdit: z.boolean(),
});
export type AirframeDetail = z.infer<typeof airframeDetailSchema>;

/** `document` is the file as it stands: a draft may be unfinished. It must be a JSON object of at most 512 KiB. */
export const createAirframeSchema = z.strictObject({
  slug: slugSchema.optional(),
  document: z.record(z.string(), z.unknown()),
  note: noteSchema.default(''),
  tags: z.array(tagSchema).max(20).default([]),
});
export type CreateAirframe = z.input<typeof createAirframeSchema>;

export const duplicateAirframeSchema = z.strictObject({
  revision: z.number().int().min(1),
  name: z.string().trim().min(1).max(80),
});
export const startDraftSchema = z.strictObject({ from: z.number().int().min(1), note: noteSchema.default('') });

/** Sent with `If-Match: "<version>"`; a draft that someone else saved meanwhile answers 412 and is left as it is. */
export const saveDraftSchema = z.strictObject({
  document: z.record(z.string(), z.unknown()),
  note: noteSchema.optional(),
});

export const draftSchema = airframeRevisionSchema.omit({ airframe: true }).extend({
  /** The document as saved; may not parse yet. */
  document: z.record(z.string(), z.unknown()),
  /** Opaque; goes back in `If-Match`. */
  version: z.string(),
  changedBy: z.string().nullable(),
  changedAt: z.iso.datetime(),
});
export type AirframeDraft = z.infer<typeof draftSchema>;

/** Address query of a value's history: a JSON Pointer into the document (RFC 6901). */
export const valueHistoryQuerySchema = z.strictObject({
  field: z.string().min(1).max(300).regex(/^\//, 'A field starts with /, as /mass/mass_kg.'),
});

/** One value over all revisions, newest first. */
export const valueHistorySchema = z.object({
  field: z.string(),
  entries: z.array(
    z.object({
      revision: z.number().int().min(1),
      status: airframeStatusSchema,
      /** False when the revision has no such member; `value` is null then. */
      given: z.boolean(),
      value: z.unknown(),
      /** What the revision says about this value: the entry of `sources` that names it or the nearest member around it. */
      source: z.string().nullable(),
      uncertaintyPct: z.number().nullable(),
      /** True when the revision before has another value, or none. */
      changed: z.boolean(),
      by: z.string().nullable(),
      at: z.iso.datetime(),
      note: z.string(),
    }),
  ),
});
export type ValueHistory = z.infer<typeof valueHistorySchema>;

/** Release needs every warning of the data answered in words, and a note. */
export const releaseSchema = z.strictObject({
  note: z.string().trim().min(3, 'Say in a few words why this revision is released.').max(2000),
  answers: z
    .array(
      z.strictObject({
        field: z.string().max(200),
        rule: z.string().max(80),
        answer: z.string().trim().min(3, 'Answer the warning in a few words.').max(1000),
      }),
    )
    .max(200),
});
export type ReleaseRequest = z.input<typeof releaseSchema>;

export const setTagsSchema = z.strictObject({ tags: z.array(tagSchema).max(20) });

/** Largest file that is read as a sheet, and largest skin; bytes. */
export const MAX_SHEET_BYTES = 10 * 1024 * 1024;
export const MAX_SKIN_BYTES = 8 * 1024 * 1024;
export const MAX_DOCUMENT_BYTES = 512 * 1024;

/**
 * Cells of an uploaded sheet, as read; formulas come as their text and are never run. Cells of a CSV file are all text
 * (null where empty); those of a workbook have their own type. Rows and columns of remarks count from 1.
 */
export const sheetCellsSchema = z.object({
  fileName: z.string(),
  sheets: z.array(
    z.object({
      name: z.string(),
      rows: z.array(z.array(z.union([z.string(), z.number(), z.boolean(), z.null()]))),
      remarks: z.array(z.object({ row: z.number().int(), column: z.number().int().nullable(), message: z.string() })),
    }),
  ),
});
export type SheetCells = z.infer<typeof sheetCellsSchema>;
