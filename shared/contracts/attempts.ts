/** Attempts: start, chunks, completion, lists and what a replay needs. */
import { z } from 'zod';
import { eventSchema, scenarioSchema } from '../scenario/scenario-schema.ts';
import { bothWays, pageOf, pageQueryShape, slugSchema } from './paging.ts';
import { pinnedAirframeSchema, verdictSchema } from './scenarios.ts';

/** Largest body of one chunk; one second of eight engines flown wildly stays far below it. */
export const MAX_CHUNK_BYTES = 64 * 1024;
/** Most ticks in one chunk. */
export const MAX_CHUNK_TICKS = 120;

export const hash16Schema = z.string().regex(/^[0-9a-f]{16}$/);
export const endReasonSchema = z.enum(['completed', 'touchdown', 'ground', 'non-finite', 'left']);
export const drawnValuesSchema = z.record(z.string(), z.record(z.string(), z.number()));

/** An event that a class added to a run. */
export const injectedEventSchema = z.object({
  tick: z.number().int().min(0),
  event: eventSchema,
  until: z.number().int().min(0).nullable(),
});
/** One list for each branch of a class's run. */
export const injectedBranchesSchema = z.array(z.array(injectedEventSchema));

export const startAttemptBodySchema = z.strictObject({
  scenarioSlug: slugSchema,
  /** The latest published revision when absent. */
  revision: z.number().int().min(1).optional(),
  /** Made by the client, once per press of "Fly": a repeated request with the same key answers with the same attempt. */
  startKey: z.uuid().optional(),
  /** Counts it as a try of this assignment, on the revision that the assignment sets. */
  assignmentId: z.uuid().optional(),
});
export type StartAttemptBody = z.infer<typeof startAttemptBodySchema>;

export const startedAttemptSchema = z.object({
  id: z.uuid(),
  /** How often this person has started this scenario, this time included. */
  number: z.number().int().min(1),
  seed: z.number().int().min(0),
  drawn: drawnValuesSchema,
  startedAt: z.iso.datetime(),
  /** Start of the chunk hash chain. */
  chunkKey: hash16Schema,
  modelVersion: z.string(),
  scenarioSlug: slugSchema,
  scenarioRevision: z.number().int().min(1),
  scenario: scenarioSchema,
  airframe: pinnedAirframeSchema,
});
export type StartedAttempt = z.infer<typeof startedAttemptSchema>;

export const chunkReceiptSchema = z.object({
  acknowledged: z.number().int().min(0),
  /** Chunks of this attempt that the server holds. */
  stored: z.number().int().min(0),
});
export type ChunkReceipt = z.infer<typeof chunkReceiptSchema>;

export const completeAttemptBodySchema = z.strictObject({
  chunkCount: z.number().int().min(0).max(100_000),
  /** How the client saw the run end; "left" when the person stopped before its end. */
  ended: endReasonSchema,
});
export type CompleteAttemptBody = z.infer<typeof completeAttemptBodySchema>;

const limitSchema = z.object({
  max: z.number().optional(),
  min: z.number().optional(),
  within: z.tuple([z.number(), z.number()]).optional(),
  unit: z.string(),
});

export const criterionResultSchema = z.object({
  id: z.string(),
  title: z.string(),
  measure: z.string(),
  required: z.boolean(),
  value: z.number().nullable(),
  limit: limitSchema,
  margin: z.number().nullable(),
  atS: z.number().nullable(),
  verdict: verdictSchema,
  note: z.string().optional(),
});

export const attemptResultSchema = z.object({
  ended: endReasonSchema,
  durationS: z.number().min(0),
  criteria: z.array(criterionResultSchema),
  passed: z.boolean(),
  /** State hash of the server's own re-run at its last tick. */
  stateHash: hash16Schema,
  /** The client's state hashes agreed with the re-run at every chunk. */
  statesAgree: z.boolean(),
  /** Last tick of the first chunk whose state hash differed; null when all agreed. */
  firstDifferenceTick: z.number().int().min(0).nullable(),
  /** How often the flight went back and on from there; the last branch counts. */
  rewinds: z.number().int().min(0),
  modelVersion: z.string(),
  computedAt: z.iso.datetime(),
});
export type AttemptResult = z.infer<typeof attemptResultSchema>;

export const attemptStatusSchema = z.enum(['flying', 'complete', 'abandoned']);
export type AttemptStatus = z.infer<typeof attemptStatusSchema>;

/** Small series for the thumbnail: sideslip over run time, evenly thinned. */
export const stripSchema = z.object({ tS: z.array(z.number()), betaDeg: z.array(z.number()) });
export type AttemptStrip = z.infer<typeof stripSchema>;

export const attemptListQuerySchema = z.strictObject({
  ...pageQueryShape,
  scenario: slugSchema.optional(),
  /** Another person's attempts; instructors and administrators only. */
  person: z.uuid().optional(),
  status: attemptStatusSchema.optional(),
  sort: z.enum(bothWays(['startedAt', 'scenario', 'duration'])).default('-startedAt'),
});
export type AttemptListQuery = z.infer<typeof attemptListQuerySchema>;

export const attemptSummarySchema = z.object({
  id: z.uuid(),
  scenarioSlug: slugSchema,
  scenarioTitle: z.string(),
  scenarioRevision: z.number().int().min(1),
  airframeName: z.string(),
  number: z.number().int().min(1),
  startedAt: z.iso.datetime(),
  status: attemptStatusSchema,
  ended: endReasonSchema.nullable(),
  durationS: z.number().min(0).nullable(),
  passed: z.boolean().nullable(),
  /** The worst verdict among the required criteria. */
  verdict: verdictSchema.nullable(),
  /** The criterion with the smallest margin relative to its limit. */
  worst: z.object({ title: z.string(), margin: z.number(), unit: z.string() }).nullable(),
  strip: stripSchema.nullable(),
});
export type AttemptSummary = z.infer<typeof attemptSummarySchema>;
export const attemptPageSchema = pageOf(attemptSummarySchema);

export const attemptDetailSchema = attemptSummarySchema.extend({
  person: z.object({ id: z.uuid(), displayName: z.string() }),
  seed: z.number().int().min(0),
  drawn: drawnValuesSchema,
  chunkKey: hash16Schema,
  modelVersion: z.string(),
  storedChunks: z.number().int().min(0),
  completedAt: z.iso.datetime().nullable(),
  scenario: scenarioSchema,
  airframe: pinnedAirframeSchema,
  result: attemptResultSchema.nullable(),
  /** Flown in a class: events it added, for each branch; a replay hands them to the run as `branches`. */
  liveClass: z
    .object({
      id: z.uuid(),
      title: z.string(),
      run: z.number().int().min(1),
      branches: injectedBranchesSchema,
    })
    .optional(),
});
export type AttemptDetail = z.infer<typeof attemptDetailSchema>;

export const attemptChunksSchema = z.object({
  chunks: z.array(
    z.object({
      index: z.number().int().min(0),
      startTick: z.number().int().min(0),
      tickCount: z.number().int().min(0),
      hash: hash16Schema,
      bytesBase64: z.base64(),
    }),
  ),
});
export type AttemptChunks = z.infer<typeof attemptChunksSchema>;
