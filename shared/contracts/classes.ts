/** Live classes: HTTP bodies. What travels over the socket: class-socket.ts; the log itself: scenario/class-log.ts. */
import { z } from 'zod';
import {
  classEntrySchema,
  classModeSchema,
  classOptionsSchema,
  MAX_MEMBER_NAME,
  MAX_PLAYLIST,
  MAX_SEATS,
  memberRoleSchema,
} from '../scenario/class-log.ts';
import {
  attemptResultSchema,
  attemptStatusSchema,
  drawnValuesSchema,
  hash16Schema,
  injectedBranchesSchema,
  stripSchema,
} from './attempts.ts';
import { bothWays, pageOf, pageQueryShape, searchShape, slugSchema } from './paging.ts';
import { scenarioRevisionSchema } from './scenarios.ts';

/** Characters of a join code: no two of them look alike. */
export const JOIN_CODE_ALPHABET = '23456789ABCDEFGHJKLMNPQRSTUVWXYZ';
export const JOIN_CODE_LENGTH = 6;

/** A code as people type it: lower case and blanks are taken, what it cannot be is refused. */
export const joinCodeSchema = z
  .string()
  .max(40)
  .transform((text) => text.toUpperCase().replace(/[\s-]/gu, ''))
  .refine(
    (text) => text.length === JOIN_CODE_LENGTH && [...text].every((letter) => JOIN_CODE_ALPHABET.includes(letter)),
    'A join code has six letters and digits, such as K7Q 4MD.',
  );

export const memberNameSchema = z
  .string()
  .trim()
  .min(1, 'Give a name for the roster.')
  .max(MAX_MEMBER_NAME, `A name has at most ${MAX_MEMBER_NAME} characters.`)
  .regex(/^[^\p{Cc}\p{Cf}<>]+$/u, 'A name has letters, digits and blanks.');

/** POST /api/classes (instructor) → 201 ClassPass */
export const openClassBodySchema = z.strictObject({
  title: z.string().trim().min(1, 'Give the class a title.').max(120),
  playlist: z
    .array(z.strictObject({ scenarioSlug: slugSchema, revision: z.number().int().min(1).optional() }))
    .min(1, 'Choose at least one scenario.')
    .max(MAX_PLAYLIST),
  mode: classModeSchema.default('demonstration'),
  seats: z.number().int().min(1).max(MAX_SEATS).default(30),
  /** Whether guests may join by code; only where the organisation lets guests in at all. */
  guests: z.boolean().default(false),
  /** Seats are kept for the people of these cohorts. */
  cohorts: z.array(z.uuid()).max(20).default([]),
  options: classOptionsSchema.partial().default({}),
  /** Made by the client once per press: a repeated request opens nothing twice. */
  key: z.uuid().optional(),
});
export type OpenClassBody = z.input<typeof openClassBodySchema>;

/** POST /api/classes/join → 200 ClassPass. Without a session a guest's cookie is set. `displayName` is for guests. */
export const joinClassBodySchema = z.strictObject({
  code: joinCodeSchema,
  displayName: memberNameSchema.optional(),
});
export type JoinClassBody = z.input<typeof joinClassBodySchema>;

/** GET /api/classes/door/:code → 200: what the code opens, before joining; throttled like joining. */
export const doorSchema = z.object({
  title: z.string(),
  organisation: z.string(),
  instructor: z.string(),
  /** Guests may join. */
  guests: z.boolean(),
  guestsAsk: z.boolean(),
  locked: z.boolean(),
});
export type Door = z.infer<typeof doorSchema>;

/** Who one is in a class. */
export const classPassSchema = z.object({
  classId: z.uuid(),
  member: z.uuid(),
  name: z.string(),
  role: memberRoleSchema,
  /** False for a guest who waits at the door. */
  admitted: z.boolean(),
  /** For instructors. */
  joinCode: z.string().nullable(),
});
export type ClassPass = z.infer<typeof classPassSchema>;

export const CLASS_STATUSES = ['open', 'ended'] as const;
export const classStatusSchema = z.enum(CLASS_STATUSES);

/** GET /api/classes */
export const classListQuerySchema = z.strictObject({
  ...pageQueryShape,
  ...searchShape,
  status: classStatusSchema.optional(),
  sort: z.enum(bothWays(['openedAt', 'title'])).default('-openedAt'),
});
export type ClassListQuery = z.infer<typeof classListQuerySchema>;

export const classSummarySchema = z.object({
  id: z.uuid(),
  title: z.string(),
  status: classStatusSchema,
  instructor: z.string(),
  openedAt: z.iso.datetime(),
  endedAt: z.iso.datetime().nullable(),
  scenarios: z.array(z.string()),
  /** People and guests who took part; instructors not counted. */
  people: z.number().int().min(0),
  runs: z.number().int().min(0),
  attempts: z.number().int().min(0),
  /** The reader's own membership; null for a reader who only looks (an instructor or administrator). */
  member: z.uuid().nullable(),
});
export type ClassSummary = z.infer<typeof classSummarySchema>;
export const classPageSchema = pageOf(classSummarySchema);

/** An attempt of a class. A guest's belongs to the class alone. */
export const classAttemptSchema = z.object({
  id: z.uuid(),
  run: z.number().int().min(1),
  member: z.uuid(),
  name: z.string(),
  role: memberRoleSchema,
  seat: z.number().int().min(0),
  /** Of the demonstration: flown by whoever had the controls. */
  demonstration: z.boolean(),
  status: attemptStatusSchema,
  startedAt: z.iso.datetime(),
  storedChunks: z.number().int().min(0),
  chunkKey: hash16Schema,
  result: attemptResultSchema.nullable(),
  strip: stripSchema.nullable(),
});
export type ClassAttempt = z.infer<typeof classAttemptSchema>;

export const classRunSummarySchema = z.object({
  run: z.number().int().min(1),
  mode: classModeSchema,
  index: z.number().int().min(0),
  scenarioSlug: slugSchema,
  scenarioRevision: z.number().int().min(1),
  title: z.string(),
  seed: z.number().int().min(0),
  drawn: drawnValuesSchema,
  startedAt: z.iso.datetime(),
  overAtTick: z.number().int().min(0).nullable(),
  /** Events in force on each branch: what a replay of its attempts needs. */
  branches: injectedBranchesSchema,
  attempts: z.array(classAttemptSchema),
});
export type ClassRunSummary = z.infer<typeof classRunSummarySchema>;

/**
 * GET /api/classes/:id (instructors, administrators; a member sees own attempts only).
 * GET /api/classes/:id/log → ClassLog. GET /api/classes/:id/qr.svg: the join address as a code, for instructors.
 * GET /api/classes/:id/scenarios/:index → ClassScenario, also for guests.
 * GET /api/classes/:id/attempts/:attemptId/chunks → attemptChunksSchema: for replay and comparison, members included while shown.
 */
export const classDetailSchema = classSummarySchema.extend({
  mode: classModeSchema,
  guests: z.boolean(),
  seats: z.number().int().min(1),
  joinCode: z.string().nullable(),
  /** Path of the page that joins with the code. */
  joinPath: z.string().nullable(),
  runsFlown: z.array(classRunSummarySchema),
  /** Frames and events that were refused: forged, malformed, too many. For instructors; null for others. */
  refused: z.number().int().min(0).nullable(),
});
export type ClassDetail = z.infer<typeof classDetailSchema>;

export const classLogSchema = z.object({ entries: z.array(classEntrySchema) });
export type ClassLog = z.infer<typeof classLogSchema>;

export const classScenarioSchema = scenarioRevisionSchema.pick({
  slug: true,
  revision: true,
  scenario: true,
  airframe: true,
});
export type ClassScenario = z.infer<typeof classScenarioSchema>;
