/** Records: who has shown what, its matrix, drill-down, corrections, exports, statements and retention. */
import { z } from 'zod';
import { criterionResultSchema } from './attempts.ts';
import { signOffSchema } from './debrief.ts';
import { pageQueryShape, searchShape, slugSchema } from './paging.ts';
import { verdictSchema } from './scenarios.ts';

const personSchema = z.object({ id: z.uuid(), displayName: z.string() });
const daySchema = z.iso.date('A day is written as 2026-05-01.');
const flagSchema = z.enum(['yes', 'no']);

const filterShape = {
  ...searchShape,
  cohort: z.uuid().optional(),
  playlist: z.uuid().optional(),
  /** Days, UTC, both included. */
  from: daySchema.optional(),
  to: daySchema.optional(),
  /** Also people who are deactivated. */
  deactivated: flagSchema.default('no'),
};
export const recordFilterSchema = z.strictObject(filterShape);
export type RecordFilter = z.infer<typeof recordFilterSchema>;
export const MATRIX_SHOWS = ['last', 'best'] as const;
export const matrixQuerySchema = z.strictObject({
  ...filterShape,
  ...pageQueryShape,
  /** Which attempt speaks for a cell. */
  show: z.enum(MATRIX_SHOWS).default('last'),
});
export type MatrixQuery = z.infer<typeof matrixQuerySchema>;

export const matrixCellSchema = z.object({
  /** Index into `scenarios`. */
  s: z.number().int().min(0),
  attempts: z.number().int().min(0),
  /** Of the attempt that speaks; null without a result. */
  attemptId: z.uuid().nullable(),
  /** A standing sign-off decides over the computed result. */
  met: z.boolean().nullable(),
  lastMet: z.boolean(),
  verdict: verdictSchema.nullable(),
  margin: z.number().nullable(),
  unit: z.string(),
  signed: z.enum(['no', 'signed', 'counter-signed']),
  corrected: z.boolean(),
  /** When it is due, where it is assigned and not flown. */
  dueAt: z.iso.datetime().nullable(),
});
export type MatrixCell = z.infer<typeof matrixCellSchema>;
export const matrixRowSchema = z.object({
  person: personSchema,
  active: z.boolean(),
  cells: z.array(matrixCellSchema),
});
export type MatrixRow = z.infer<typeof matrixRowSchema>;
export const matrixSchema = z.object({
  scenarios: z.array(z.object({ slug: slugSchema, title: z.string() })),
  rows: z.array(matrixRowSchema),
  page: z.number().int(),
  pageSize: z.number().int(),
  total: z.number().int(),
});
export type Matrix = z.infer<typeof matrixSchema>;

/** Over everyone whom the filter finds, by scenario: how many have flown it and how many have met it at least once. */
export const totalsSchema = z.object({
  people: z.number().int(),
  scenarios: z.array(z.object({ slug: slugSchema, flown: z.number().int(), met: z.number().int() })),
});
export type Totals = z.infer<typeof totalsSchema>;

/** What the filters offer. */
export const recordChoicesSchema = z.object({
  cohorts: z.array(z.object({ id: z.uuid(), name: z.string(), members: z.number().int() })),
  playlists: z.array(z.object({ id: z.uuid(), name: z.string() })),
});
export type RecordChoices = z.infer<typeof recordChoicesSchema>;

export const CORRECTION_EFFECTS = ['note', 'set-aside', 'restored'] as const;
export const newCorrectionSchema = z.strictObject({
  effect: z.enum(CORRECTION_EFFECTS),
  reason: z.string().trim().min(3, 'Say why in a few words.').max(2000, 'A reason has at most 2,000 characters.'),
});
export type NewCorrection = z.input<typeof newCorrectionSchema>;
export const correctionSchema = z.object({
  id: z.uuid(),
  effect: z.enum(CORRECTION_EFFECTS),
  reason: z.string(),
  author: z.string(),
  at: z.iso.datetime(),
});
export type Correction = z.infer<typeof correctionSchema>;

export const cellAttemptSchema = z.object({
  id: z.uuid(),
  number: z.number().int(),
  at: z.iso.datetime(),
  revision: z.number().int(),
  met: z.boolean().nullable(),
  verdict: verdictSchema.nullable(),
  margin: z.number().nullable(),
  unit: z.string(),
  marginOf: z.string(),
  firstPedalS: z.number().nullable(),
  criteria: z.array(criterionResultSchema),
  signOffs: z.array(signOffSchema.omit({ standing: true })),
  corrections: z.array(correctionSchema),
  setAside: z.boolean(),
  assignment: z.string().nullable(),
});
export type CellAttempt = z.infer<typeof cellAttemptSchema>;
export const cellSchema = z.object({
  person: personSchema,
  scenario: z.object({ slug: slugSchema, title: z.string() }),
  attempts: z.array(cellAttemptSchema),
  dueAt: z.iso.datetime().nullable(),
  mayCorrect: z.boolean(),
});
export type RecordCell = z.infer<typeof cellSchema>;
export const cellQuerySchema = z.strictObject({ person: z.uuid(), scenario: slugSchema });

/** Reaction times of a group, beside the computed budget. */
export const distributionQuerySchema = z.strictObject({ ...filterShape, scenario: slugSchema });
export type DistributionQuery = z.infer<typeof distributionQuerySchema>;
export const distributionSchema = z.object({
  revision: z.number().int(),
  budget: z.object({
    budgetS: z.number().nullable(),
    reason: z.enum(['met-hands-off', 'not-met-at-0', 'no-criteria']).nullable(),
    capped: z.boolean(),
    binding: z.string().nullable(),
  }),
  /** The organisation's own recognition time; null when it states none. */
  recognitionTimeS: z.number().nullable(),
  binS: z.number().positive(),
  /** Last attempt of each person; the last bin holds all later ones. */
  bins: z.array(z.number().int()),
  within: z.number().int(),
  beyond: z.number().int(),
  never: z.number().int(),
  /** Middle reaction by attempt number, over the group. */
  byNumber: z.array(z.object({ number: z.number().int(), people: z.number().int(), medianS: z.number() })),
});
export type Distribution = z.infer<typeof distributionSchema>;

export const endpointSchema = z.object({
  address: z.string(),
  userName: z.string(),
  active: z.boolean(),
  hasSecret: z.boolean(),
  waiting: z.number().int(),
  sent: z.number().int(),
  refused: z.number().int(),
  lastProblem: z.string(),
});
export type Endpoint = z.infer<typeof endpointSchema>;
/** What of an endpoint is edited; its version is made of this. */
export const endpointEdited = ({ address, userName, active, hasSecret }: Endpoint) => ({
  address,
  userName,
  active,
  hasSecret,
});
export const saveEndpointSchema = z.strictObject({
  address: z
    .url({ protocol: /^https?$/, error: 'An address begins with https:// or http://.' })
    .max(500)
    .refine((text) => !text.includes('@') && !text.includes('?') && !text.includes('#'), {
      error: 'The address has no name, query or fragment in it.',
    }),
  userName: z.string().trim().max(200),
  /** Kept as it is when absent. */
  secret: z.string().max(500).optional(),
  active: z.boolean(),
});
export type SaveEndpoint = z.input<typeof saveEndpointSchema>;
export const queuedSchema = z.object({ queued: z.number().int() });

export const retentionSchema = z.object({
  /** Days after which input recordings are removed; null: kept. Results, sign-offs and corrections always stay. */
  recordingDays: z.number().int().min(30).max(36_500).nullable(),
});
export type Retention = z.infer<typeof retentionSchema>;
export const saveRetentionSchema = z.strictObject({
  recordingDays: z
    .number()
    .int()
    .min(30, 'Recordings are kept for at least 30 days.')
    .max(36_500, 'At most 36,500 days.')
    .nullable(),
});
export const retentionEffectSchema = z.object({ attempts: z.number().int(), bytes: z.number().int() });
