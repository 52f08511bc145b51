/** Airframes and their revisions. */
import { z } from 'zod';
import { airframeSchema } from '../model/airframe-schema.ts';
import { bothWays, pageOf, pageQueryShape, searchShape, slugSchema } from './paging.ts';

export const AIRFRAME_STATUSES = ['draft', 'released', 'retired'] as const;
export const airframeStatusSchema = z.enum(AIRFRAME_STATUSES);
export type AirframeStatus = z.infer<typeof airframeStatusSchema>;

export const AIRPLANE_CLASSES = ['I', 'II-L', 'II-C', 'III', 'IV'] as const;
/** "mixed" has engines of both kinds. */
export const ENGINE_KINDS = ['none', 'propeller', 'jet', 'mixed'] as const;
export type EngineKinds = (typeof ENGINE_KINDS)[number];

export const airframeListQuerySchema = z.strictObject({
  ...pageQueryShape,
  ...searchShape,
  tag: z.string().trim().max(40).optional(),
  status: airframeStatusSchema.optional(),
  /** "II-L" finds airframes that say "II" too, which means the same. */
  class: z.enum(AIRPLANE_CLASSES).optional(),
  engineKind: z.enum(ENGINE_KINDS).optional(),
  sort: z.enum(bothWays(['name', 'class', 'revision', 'updatedAt'])).default('name'),
});
export type AirframeListQuery = z.infer<typeof airframeListQuerySchema>;

export const airframeSummarySchema = z.object({
  slug: slugSchema,
  name: z.string(),
  /** Airplane class of the handling-quality requirements: "I" … "IV". */
  class: z.string(),
  engines: z.number().int().min(0),
  engineKind: z.enum(ENGINE_KINDS),
  revision: z.number().int().min(1),
  status: airframeStatusSchema,
  tags: z.array(z.string()),
  updatedAt: z.iso.datetime(),
});
export type AirframeSummary = z.infer<typeof airframeSummarySchema>;
export const airframePageSchema = pageOf(airframeSummarySchema);

export const airframeRevisionSchema = z.object({
  slug: slugSchema,
  revision: z.number().int().min(1),
  status: airframeStatusSchema,
  /** Why this revision exists, in its author's words. */
  note: z.string(),
  createdBy: z.string().nullable(),
  createdAt: z.iso.datetime(),
  releasedAt: z.iso.datetime().nullable(),
  airframe: airframeSchema,
});
export type AirframeRevision = z.infer<typeof airframeRevisionSchema>;
