/** Assignments: scenarios for people, with opening and due dates, tries, a pass rule and notices. */
import { z } from 'zod';
import { bothWays, pageOf, pageQueryShape, searchShape, slugSchema } from './paging.ts';
import { LONGEST_PLAYLIST } from './playlists.ts';

export const PASS_RULES = ['one', 'two-in-a-row', 'sign-off'] as const;
export const passRuleSchema = z.enum(PASS_RULES);
export type PassRule = z.infer<typeof passRuleSchema>;

/** A time as a clock on the wall shows it; the server finds the instant, also across a clock change. */
export const wallTimeSchema = z
  .string()
  .regex(/^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}$/, 'A time is written as 2026-06-05T17:00.');
export const zoneSchema = z.string().min(1).max(64);

const termsShape = {
  title: z.string().trim().max(200, 'A title has at most 200 characters.').default(''),
  words: z.string().trim().max(2000, 'The words to the trainees have at most 2,000 characters.').default(''),
  /** Zone of the two times below, by its name in the time-zone database. */
  zone: zoneSchema,
  /** Opens at once when absent. */
  opens: wallTimeSchema.optional(),
  due: wallTimeSchema,
  tries: z.number().int().min(1).max(99).nullable(),
  passRule: passRuleSchema,
  /** False: until it is passed, starts outside the assignment are refused. */
  practice: z.boolean(),
  byMail: z.boolean(),
  calendar: z.boolean(),
  reminderDays: z.number().int().min(1).max(30).nullable(),
  tellAuthor: z.boolean(),
};

const peopleShape = {
  people: z.array(z.uuid()).max(3000).default([]),
  cohorts: z.array(z.uuid()).max(100).default([]),
  /** Members of the cohorts who are left out. */
  without: z.array(z.uuid()).max(3000).default([]),
};

export const newAssignmentSchema = z.strictObject({
  ...termsShape,
  ...peopleShape,
  /** Either scenarios, or a playlist whose scenarios are taken as they stand now. */
  scenarios: z.array(slugSchema).max(LONGEST_PLAYLIST).default([]),
  playlist: z.uuid().optional(),
});
export type NewAssignment = z.input<typeof newAssignmentSchema>;
export const changeAssignmentSchema = z.strictObject(termsShape);
export type ChangeAssignment = z.input<typeof changeAssignmentSchema>;
export const addPeopleSchema = z.strictObject(peopleShape);
export const closeAssignmentSchema = z.strictObject({
  reason: z.string().trim().max(500, 'A reason has at most 500 characters.').default(''),
});
export const extendSchema = z.strictObject({
  people: z.array(z.uuid()).min(1, 'Choose at least one person.').max(3000),
  zone: zoneSchema,
  due: wallTimeSchema,
  extraTries: z.number().int().min(0).max(20).default(0),
  reason: z.string().trim().min(3, 'Say why in a few words.').max(500, 'A reason has at most 500 characters.'),
});
export type Extend = z.input<typeof extendSchema>;
export const remindSchema = z.strictObject({
  people: z.array(z.uuid()).min(1, 'Choose at least one person.').max(3000),
});
export const excuseSchema = z.strictObject({ people: z.array(z.uuid()).min(1).max(3000) });

export const assignedScenarioSchema = z.object({
  slug: slugSchema,
  title: z.string(),
  /** Pinned when it was assigned; a later revision does not change an open assignment. */
  revision: z.number().int().min(1),
  airframeName: z.string(),
});

/** Where one person stands. */
export const STANDINGS = ['passed', 'flown', 'to-fly', 'late'] as const;
export const standingSchema = z.enum(STANDINGS);
export type Standing = z.infer<typeof standingSchema>;
const countsSchema = z.object({
  passed: z.number().int(),
  flown: z.number().int(),
  toFly: z.number().int(),
  late: z.number().int(),
});

export const assignmentSummarySchema = z.object({
  id: z.uuid(),
  title: z.string(),
  scenarios: z.array(assignedScenarioSchema),
  /** "Cohort 26-A" and names, as they were when it was set. */
  to: z.string(),
  people: z.number().int(),
  opensAt: z.iso.datetime(),
  dueAt: z.iso.datetime(),
  zone: z.string(),
  closedAt: z.iso.datetime().nullable(),
  author: z.string(),
  counts: countsSchema,
});
export type AssignmentSummary = z.infer<typeof assignmentSummarySchema>;

export const triesSchema = z.object({
  slug: slugSchema,
  title: z.string(),
  revision: z.number().int().min(1),
  tries: z.array(
    z.object({
      attemptId: z.uuid(),
      /** Null while it is flown or when it was left. */
      met: z.boolean().nullable(),
      verdict: z.enum(['met', 'near', 'not-met', 'not-reached']).nullable(),
      at: z.iso.datetime(),
      signed: z.boolean(),
    }),
  ),
  /** Null: as many as wanted. */
  allowed: z.number().int().nullable(),
  passedAt: z.iso.datetime().nullable(),
});
export type Tries = z.infer<typeof triesSchema>;

export const assignedPersonSchema = z.object({
  person: z.object({ id: z.uuid(), displayName: z.string() }),
  active: z.boolean(),
  cohort: z.string().nullable(),
  dueAt: z.iso.datetime(),
  extended: z.boolean(),
  excusedAt: z.iso.datetime().nullable(),
  standing: standingSchema,
  /** Passed after the due time. */
  passedLate: z.boolean(),
  scenarios: z.array(triesSchema),
  reminded: z.array(z.iso.datetime()),
});
export type AssignedPerson = z.infer<typeof assignedPersonSchema>;

export const extensionSchema = z.object({
  person: z.string(),
  dueAt: z.iso.datetime(),
  extraTries: z.number().int(),
  reason: z.string(),
  by: z.string(),
  at: z.iso.datetime(),
});

export const assignmentSchema = assignmentSummarySchema.extend({
  words: z.string(),
  tries: z.number().int().nullable(),
  passRule: passRuleSchema,
  practice: z.boolean(),
  byMail: z.boolean(),
  calendar: z.boolean(),
  reminderDays: z.number().int().nullable(),
  tellAuthor: z.boolean(),
  closedFor: z.string().nullable(),
  createdAt: z.iso.datetime(),
  version: z.string(),
  members: z.array(assignedPersonSchema),
  extensions: z.array(extensionSchema),
  mayEdit: z.boolean(),
});
export type Assignment = z.infer<typeof assignmentSchema>;

export const assignmentListQuerySchema = z.strictObject({
  ...pageQueryShape,
  ...searchShape,
  state: z.enum(['open', 'closed']).default('open'),
  sort: z.enum(bothWays(['due', 'title', 'created'])).default('due'),
});
export type AssignmentListQuery = z.infer<typeof assignmentListQuerySchema>;
export const assignmentPageSchema = pageOf(assignmentSummarySchema);

/** Who is late or nearly so, over all open assignments. */
export const lateQuerySchema = z.strictObject({ ...pageQueryShape });
export const lateRowSchema = z.object({
  assignmentId: z.uuid(),
  title: z.string(),
  person: z.object({ id: z.uuid(), displayName: z.string() }),
  dueAt: z.iso.datetime(),
  late: z.boolean(),
  attempts: z.number().int(),
  allowed: z.number().int().nullable(),
  lastFlown: z.object({ attemptId: z.uuid(), at: z.iso.datetime(), met: z.boolean().nullable() }).nullable(),
  reminded: z.array(z.iso.datetime()),
});
export type LateRow = z.infer<typeof lateRowSchema>;
export const latePageSchema = pageOf(lateRowSchema);

/** What is set for the reader, by due date. */
export const ownAssignmentSchema = z.object({
  id: z.uuid(),
  title: z.string(),
  words: z.string(),
  author: z.string(),
  opensAt: z.iso.datetime(),
  dueAt: z.iso.datetime(),
  closedAt: z.iso.datetime().nullable(),
  passRule: passRuleSchema,
  practice: z.boolean(),
  standing: standingSchema,
  passedLate: z.boolean(),
  scenarios: z.array(triesSchema),
});
export type OwnAssignment = z.infer<typeof ownAssignmentSchema>;
export const ownAssignmentsSchema = z.array(ownAssignmentSchema);

/** Whom one can assign to. */
export const targetsSchema = z.object({
  cohorts: z.array(z.object({ id: z.uuid(), name: z.string(), members: z.array(z.uuid()) })),
  people: z.array(z.object({ id: z.uuid(), displayName: z.string(), active: z.boolean() })),
});
export type Targets = z.infer<typeof targetsSchema>;

/** What a preview shows: the message as the first person would get it, and the instants found. */
export const noticePreviewSchema = z.object({
  subject: z.string(),
  text: z.string(),
  dueAt: z.iso.datetime(),
  opensAt: z.iso.datetime(),
  /** Said when the due time comes twice because clocks go back. */
  remark: z.string(),
  people: z.number().int(),
});
export type NoticePreview = z.infer<typeof noticePreviewSchema>;
