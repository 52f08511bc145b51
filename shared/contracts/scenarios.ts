/** Scenarios and their revisions. */
import { z } from 'zod';
import { airframeSchema } from '../model/airframe-schema.ts';
import { scenarioSchema } from '../scenario/scenario-schema.ts';
import { bothWays, pageOf, pageQueryShape, searchShape, slugSchema } from './paging.ts';

export const SCENARIO_STATUSES = ['draft', 'published', 'archived'] as const;
export const scenarioStatusSchema = z.enum(SCENARIO_STATUSES);
export type ScenarioStatus = z.infer<typeof scenarioStatusSchema>;

export const verdictSchema = z.enum(['met', 'near', 'not-met', 'not-reached']);
export const laneSchema = z.enum(['engines', 'air', 'controls', 'systems', 'notes']);

export const scenarioListQuerySchema = z.strictObject({
  ...pageQueryShape,
  ...searchShape,
  airframe: slugSchema.optional(),
  /** Of each scenario the newest revision of this status; archived: only where nothing is published. Drafts for authors. */
  status: scenarioStatusSchema.default('published'),
  sort: z.enum(bothWays(['title', 'updatedAt', 'duration'])).default('title'),
});
export type ScenarioListQuery = z.infer<typeof scenarioListQuerySchema>;

export const scenarioSummarySchema = z.object({
  slug: slugSchema,
  title: z.string(),
  summary: z.string(),
  purpose: z.string(),
  airframeSlug: slugSchema,
  airframeRevision: z.number().int().min(1),
  airframeName: z.string(),
  revision: z.number().int().min(1),
  status: scenarioStatusSchema,
  durationS: z.number().positive(),
  criteria: z.number().int().min(0),
  /** Marks for the small time line. `atS` is null when the event waits for a condition. */
  lanes: z.array(z.object({ lane: laneSchema, kind: z.string(), atS: z.number().nullable() })),
  updatedAt: z.iso.datetime(),
  /** The reader's own attempts on any revision; null for a reader who has none. */
  attempts: z.object({ mine: z.number().int().min(1), lastVerdict: verdictSchema.nullable() }).nullable(),
});
export type ScenarioSummary = z.infer<typeof scenarioSummarySchema>;
export const scenarioPageSchema = pageOf(scenarioSummarySchema);

/** The airframe revision that a scenario revision is pinned to, with its data. */
export const pinnedAirframeSchema = z.object({
  slug: slugSchema,
  revision: z.number().int().min(1),
  airframe: airframeSchema,
});
export type PinnedAirframe = z.infer<typeof pinnedAirframeSchema>;

export const scenarioRevisionSchema = z.object({
  slug: slugSchema,
  revision: z.number().int().min(1),
  /** True when no later revision is published. */
  latest: z.boolean(),
  status: scenarioStatusSchema,
  note: z.string(),
  createdBy: z.string().nullable(),
  createdAt: z.iso.datetime(),
  publishedAt: z.iso.datetime().nullable(),
  scenario: scenarioSchema,
  airframe: pinnedAirframeSchema,
});
export type ScenarioRevision = z.infer<typeof scenarioRevisionSchema>;
