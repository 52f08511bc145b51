import * as account from '#shared/contracts/account.ts';
import * as administration from '#shared/contracts/administration.ts';
import * as cohorts from '#shared/contracts/cohorts.ts';
import { searchShape } from '#shared/contracts/paging.ts';
import { systemStateSchema } from '#shared/contracts/system.ts';
import { organisationBodySchema, organisationSettingsSchema } from '#shared/contracts/session.ts';
import { z } from 'zod';
import { type Area, fileOf, made, NO_CONTENT, ok } from './operation.ts';

const lookAfter = { deed: 'people.look-after' } as const;
const keepCohorts = { deed: 'cohort.edit' } as const;

export const ADMINISTRATION_AREAS: readonly Area[] = [
  {
    area: 'people',
    title: 'People',
    operations: [
      {
        ...lookAfter,
        method: 'get',
        path: '/people',
        summary: 'List people',
        query: administration.peopleQuerySchema,
        answer: ok(administration.peoplePageSchema),
      },
      {
        ...lookAfter,
        method: 'get',
        path: '/people/:id',
        summary: 'Read a person',
        answer: ok(administration.personSchema),
      },
      {
        ...lookAfter,
        method: 'post',
        path: '/people/roster',
        summary: 'Judge the rows of a roster, and invite the good ones if asked to',
        body: administration.rosterSchema,
        answer: ok(administration.rosterAnswerSchema),
      },
      {
        ...lookAfter,
        method: 'post',
        path: '/people/:id/invitation',
        summary: 'Send the invitation again',
        answer: NO_CONTENT,
        refusals: ['conflict'],
      },
      {
        ...lookAfter,
        method: 'put',
        path: '/people/:id/roles',
        summary: 'Set the roles of a person',
        body: administration.rolesBodySchema,
        answer: NO_CONTENT,
        version: 'possible',
        refusals: ['conflict'],
      },
      {
        ...lookAfter,
        method: 'post',
        path: '/people/:id/deactivation',
        summary: 'Deactivate a person; nothing of theirs is deleted',
        answer: NO_CONTENT,
        refusals: ['conflict'],
      },
      {
        ...lookAfter,
        method: 'delete',
        path: '/people/:id/deactivation',
        summary: 'Let a person sign in again',
        answer: NO_CONTENT,
        refusals: ['conflict'],
      },
      {
        ...lookAfter,
        method: 'post',
        path: '/people/:id/sign-out',
        summary: 'End all sessions of a person',
        answer: NO_CONTENT,
      },
      {
        ...lookAfter,
        method: 'get',
        path: '/people/:id/sessions',
        summary: 'List the open sessions of a person',
        answer: ok(account.openSessionsSchema),
      },
      {
        ...lookAfter,
        method: 'delete',
        path: '/people/:id/sessions/:session',
        summary: 'End one session of a person',
        answer: NO_CONTENT,
      },
    ],
  },
  {
    area: 'cohorts',
    title: 'Cohorts',
    operations: [
      {
        ...keepCohorts,
        method: 'get',
        path: '/cohorts',
        summary: 'List cohorts',
        query: cohorts.cohortQuerySchema,
        answer: ok(cohorts.cohortPageSchema),
      },
      {
        ...keepCohorts,
        method: 'post',
        path: '/cohorts',
        summary: 'Make a cohort',
        body: cohorts.cohortBodySchema,
        answer: made(cohorts.cohortSchema),
        refusals: ['conflict'],
      },
      {
        ...keepCohorts,
        method: 'get',
        path: '/cohorts/:id',
        summary: 'Read a cohort with its people',
        answer: ok(cohorts.cohortSchema),
      },
      {
        ...keepCohorts,
        method: 'put',
        path: '/cohorts/:id',
        summary: 'Rename a cohort',
        body: cohorts.cohortBodySchema,
        answer: ok(cohorts.cohortSchema),
        refusals: ['conflict'],
      },
      {
        ...keepCohorts,
        method: 'get',
        path: '/cohorts/:id/candidates',
        summary: 'Find people who could join a cohort',
        query: z.strictObject(searchShape),
        answer: ok(cohorts.cohortCandidatesSchema),
      },
      {
        ...keepCohorts,
        method: 'post',
        path: '/cohorts/:id/members',
        summary: 'Add people to a cohort',
        body: cohorts.cohortMembersSchema,
        answer: ok(cohorts.cohortSchema),
        refusals: ['conflict'],
      },
      {
        ...keepCohorts,
        method: 'delete',
        path: '/cohorts/:id/members/:person',
        summary: 'Take a person out of a cohort',
        answer: NO_CONTENT,
      },
      {
        ...keepCohorts,
        method: 'post',
        path: '/cohorts/:id/archive',
        summary: 'Archive a cohort',
        answer: ok(cohorts.cohortSchema),
      },
      {
        ...keepCohorts,
        method: 'delete',
        path: '/cohorts/:id/archive',
        summary: 'Bring an archived cohort back',
        answer: NO_CONTENT,
        refusals: ['conflict'],
      },
    ],
  },
  {
    area: 'organisation',
    title: 'Organisation',
    operations: [
      {
        deed: 'organisation.edit',
        method: 'get',
        path: '/organisation',
        summary: 'Read the settings of the organisation',
        answer: ok(z.object({ name: z.string(), settings: organisationSettingsSchema }), true),
      },
      {
        deed: 'organisation.edit',
        method: 'put',
        path: '/organisation',
        summary: 'Change the settings of the organisation',
        body: organisationBodySchema,
        answer: NO_CONTENT,
        version: 'possible',
      },
    ],
  },
  {
    area: 'outbox',
    title: 'Outbox',
    operations: [
      {
        deed: 'outbox.read',
        method: 'get',
        path: '/outbox',
        summary: 'List messages and what became of them',
        query: administration.outboxQuerySchema,
        answer: ok(administration.outboxPageSchema),
      },
      {
        deed: 'outbox.read',
        method: 'post',
        path: '/outbox/:id/again',
        summary: 'Send a refused message again',
        answer: NO_CONTENT,
        refusals: ['conflict'],
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
    area: 'audit',
    title: 'Audit trail',
    operations: [
      {
        deed: 'audit.read',
        method: 'get',
        path: '/audit',
        summary: 'List entries, newest first',
        query: administration.auditQuerySchema,
        answer: ok(administration.auditPageSchema),
      },
      {
        deed: 'audit.read',
        method: 'post',
        path: '/audit/check',
        summary: 'Compute the chain of seals again',
        answer: ok(administration.auditCheckSchema),
      },
      {
        deed: 'audit.read',
        method: 'get',
        path: '/audit.csv',
        summary: 'Export the trail as CSV',
        query: administration.auditQuerySchema,
        answer: fileOf('text/csv'),
      },
    ],
  },
];
