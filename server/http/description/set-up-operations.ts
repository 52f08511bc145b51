import * as cohorts from '#shared/contracts/cohorts.ts';
import { searchShape } from '#shared/contracts/paging.ts';
import { setUpBodySchema, setUpStateSchema } from '#shared/contracts/set-up.ts';
import { systemStateSchema } from '#shared/contracts/system.ts';
import { z } from 'zod';
import { type Area, made, NO_CONTENT, ok } from './operation.ts';

const edit = { deed: 'cohort.edit' } as const;
const anyone = { anyone: true } as const;

/** Cohorts, the state of the server and the first set-up: by browser alone, tokens do not reach them. */
export const SET_UP_AREAS: readonly Area[] = [
  {
    area: 'cohorts',
    title: 'Cohorts',
    operations: [
      {
        ...edit,
        method: 'get',
        path: '/cohorts',
        summary: 'List cohorts',
        query: cohorts.cohortQuerySchema,
        answer: ok(cohorts.cohortPageSchema),
      },
      {
        ...edit,
        method: 'post',
        path: '/cohorts',
        summary: 'Make a cohort',
        body: cohorts.cohortBodySchema,
        answer: made(cohorts.cohortSchema),
      },
      {
        ...edit,
        method: 'get',
        path: '/cohorts/:id',
        summary: 'Read a cohort with its people',
        answer: ok(cohorts.cohortSchema),
      },
      {
        ...edit,
        method: 'put',
        path: '/cohorts/:id',
        summary: 'Rename a cohort',
        body: cohorts.cohortBodySchema,
        answer: ok(cohorts.cohortSchema),
        refusals: ['conflict'],
      },
      {
        ...edit,
        method: 'get',
        path: '/cohorts/:id/candidates',
        summary: 'List people who can be added',
        query: z.strictObject(searchShape),
        answer: ok(cohorts.cohortCandidatesSchema),
      },
      {
        ...edit,
        method: 'post',
        path: '/cohorts/:id/members',
        summary: 'Add people to a cohort',
        body: cohorts.cohortMembersSchema,
        answer: ok(cohorts.cohortSchema),
        refusals: ['conflict'],
      },
      {
        ...edit,
        method: 'delete',
        path: '/cohorts/:id/members/:person',
        summary: 'Take a person out of a cohort; what is set for them stays',
        answer: NO_CONTENT,
        refusals: ['conflict'],
      },
      {
        ...edit,
        method: 'post',
        path: '/cohorts/:id/archive',
        summary: 'Archive a cohort',
        answer: ok(cohorts.cohortSchema),
      },
      {
        ...edit,
        method: 'delete',
        path: '/cohorts/:id/archive',
        summary: 'Restore an archived cohort',
        answer: NO_CONTENT,
      },
    ],
  },
  {
    area: 'system',
    title: 'System',
    operations: [
      {
        deed: 'system.read',
        method: 'get',
        path: '/system',
        summary: 'Read storage, mail, versions and health',
        answer: ok(systemStateSchema),
      },
    ],
  },
  {
    area: 'set-up',
    title: 'First set-up',
    operations: [
      {
        ...anyone,
        method: 'get',
        path: '/set-up',
        summary: 'Read whether the first set-up is still to be done',
        answer: ok(setUpStateSchema),
      },
      {
        ...anyone,
        method: 'post',
        path: '/set-up',
        summary: 'Make the organisation and its first administrator, once',
        body: setUpBodySchema,
        answer: NO_CONTENT,
        refusals: ['conflict', 'throttled'],
      },
    ],
  },
];
