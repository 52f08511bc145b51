/** Cohorts: named groups of people to assign to and to look at together. */
import { z } from 'zod';
import { personStateSchema } from './administration.ts';
import { roleSchema } from './session.ts';
import { bothWays, pageOf, pageQueryShape, searchShape } from './paging.ts';

const MAX_NAME = 80;
const BIDI_OVERRIDES = /[\u202A-\u202E\u2066-\u2069]/u;
export const cohortNameSchema = z
  .string()
  .transform((text) => text.normalize('NFC').trim().replace(/\s+/gu, ' '))
  .pipe(
    z
      .string()
      .min(1, 'is empty; give the cohort a name')
      .max(MAX_NAME, `has more than ${MAX_NAME} characters; shorten it`)
      .refine((text) => !/[\p{Cc}\uFFFD]/u.test(text) && !BIDI_OVERRIDES.test(text), 'holds unreadable characters'),
  );
export const cohortBodySchema = z.strictObject({ name: cohortNameSchema });
export const cohortMembersSchema = z.strictObject({
  people: z.array(z.uuid()).min(1, 'names nobody; choose at least one person').max(500),
});

export const cohortQuerySchema = z.strictObject({
  ...pageQueryShape,
  ...searchShape,
  state: z.enum(['current', 'archived']).default('current'),
  sort: z.enum(bothWays(['name', 'created'])).default('name'),
});
export type CohortQuery = z.infer<typeof cohortQuerySchema>;

export const cohortSummarySchema = z.object({
  id: z.uuid(),
  name: z.string(),
  /** Everybody in it, deactivated people included. */
  members: z.number().int().min(0),
  createdAt: z.iso.datetime(),
  archivedAt: z.iso.datetime().nullable(),
});
export type CohortSummary = z.infer<typeof cohortSummarySchema>;
export const cohortPageSchema = pageOf(cohortSummarySchema);

export const cohortMemberSchema = z.object({
  id: z.uuid(),
  displayName: z.string(),
  state: personStateSchema,
  roles: z.array(roleSchema),
  joinedAt: z.iso.datetime(),
  /** Open assignments this person has through the cohort; they stay when the person leaves it. */
  openAssignments: z.number().int().min(0),
});
export type CohortMember = z.infer<typeof cohortMemberSchema>;
export const cohortSchema = cohortSummarySchema.extend({ people: z.array(cohortMemberSchema) });
export type Cohort = z.infer<typeof cohortSchema>;

/** Who can be added to a cohort, by name. */
export const cohortCandidatesSchema = z.array(z.object({ id: z.uuid(), displayName: z.string(), email: z.string() }));
