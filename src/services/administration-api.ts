/** People, outbox, audit trail and organisation of the administrator; links from messages; the own password. */
import { z } from 'zod';
import {
  auditCheckSchema,
  auditPageSchema,
  linkSchema,
  outboxPageSchema,
  peoplePageSchema,
  personSchema,
  rosterAnswerSchema,
  type AuditQuery,
  type ChangePassword,
  type OutboxQuery,
  type PeopleQuery,
  type Roster,
  type TakeLink,
} from '#shared/contracts/administration.ts';
import { organisationBodySchema, type OrganisationBody, type Role } from '#shared/contracts/session.ts';
import { api } from './http-client.ts';
import { ifStill } from './if-still.ts';

const NOTHING = z.undefined();
const person = (id: string, rest: string): string => `/api/people/${encodeURIComponent(id)}/${rest}`;

export const listPeople = (query: Partial<PeopleQuery>, signal?: AbortSignal) =>
  api.get('/api/people', peoplePageSchema, { query, signal });
export const getPerson = (id: string, signal?: AbortSignal) =>
  api.get(`/api/people/${encodeURIComponent(id)}`, personSchema, { signal });
export const sendRoster = (roster: Roster) => api.post('/api/people/roster', roster, rosterAnswerSchema);
export const inviteAgain = (id: string) => api.post(person(id, 'invitation'), undefined, NOTHING);
export const saveRoles = (id: string, roles: Role[], read: readonly Role[]) =>
  api.put(person(id, 'roles'), { roles }, NOTHING, { headers: ifStill([...read].sort()) });
export const deactivatePerson = (id: string) => api.post(person(id, 'deactivation'), undefined, NOTHING);
export const restorePerson = (id: string) => api.delete(person(id, 'deactivation'));
export const signPersonOut = (id: string) => api.post(person(id, 'sign-out'), undefined, NOTHING);

export const listOutbox = (query: Partial<OutboxQuery>, signal?: AbortSignal) =>
  api.get('/api/outbox', outboxPageSchema, { query, signal });
export const sendMailAgain = (id: string) =>
  api.post(`/api/outbox/${encodeURIComponent(id)}/again`, undefined, NOTHING);

export const listAudit = (query: Partial<AuditQuery>, signal?: AbortSignal) =>
  api.get('/api/audit', auditPageSchema, { query, signal });
export const checkAudit = () => api.post('/api/audit/check', undefined, auditCheckSchema);
/** Address of the trail as a CSV with the same filters. */
export function auditFileAddress({ search, kind, from, to }: AuditQuery): string {
  const given = Object.entries({ search, kind, from, to }).flatMap(([name, value]) => (value ? [[name, value]] : []));
  const query = new URLSearchParams(given).toString();
  return `/api/audit.csv${query === '' ? '' : `?${query}`}`;
}

export const getOrganisation = (signal?: AbortSignal) =>
  api.get('/api/organisation', organisationBodySchema, { signal });
export const saveOrganisation = (body: OrganisationBody, read: OrganisationBody) =>
  api.put('/api/organisation', body, NOTHING, { headers: ifStill(read) });

export const lookAtLink = (token: string, signal?: AbortSignal) =>
  api.post('/api/session/link/look', { token }, linkSchema, { signal });
export const takeLink = (body: TakeLink) => api.post('/api/session/link/take', body, NOTHING);
export const askReset = (email: string) => api.post('/api/session/reset', { email }, NOTHING);
export const changePassword = (body: ChangePassword) => api.put('/api/session/password', body, NOTHING);
export const signOutEverywhere = () => api.delete('/api/session/everywhere');
