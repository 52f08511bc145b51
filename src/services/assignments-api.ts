import { z } from 'zod';
import {
  assignmentPageSchema,
  assignmentSchema,
  latePageSchema,
  noticePreviewSchema,
  ownAssignmentsSchema,
  targetsSchema,
  type AssignmentListQuery,
  type ChangeAssignment,
  type Extend,
  type NewAssignment,
} from '#shared/contracts/assignments.ts';
import { api } from './http-client.ts';

const at = (id: string, rest = ''): string => `/api/assignments/${encodeURIComponent(id)}${rest}`;

export const listAssignments = (query: Partial<AssignmentListQuery>, signal?: AbortSignal) =>
  api.get('/api/assignments', assignmentPageSchema, { query, signal });

export const listLate = (query: { page?: number; pageSize?: number }, signal?: AbortSignal) =>
  api.get('/api/assignments/late', latePageSchema, { query, signal });

export const getAssignment = (id: string, signal?: AbortSignal) => api.get(at(id), assignmentSchema, { signal });

export const getOwnAssignments = (signal?: AbortSignal) =>
  api.get('/api/assignments/mine', ownAssignmentsSchema, { signal });

export const getTargets = (signal?: AbortSignal) => api.get('/api/assignments/targets', targetsSchema, { signal });

export const createAssignment = (body: NewAssignment) => api.post('/api/assignments', body, assignmentSchema);

export const previewAssignment = (body: NewAssignment) =>
  api.post('/api/assignments/preview', body, noticePreviewSchema);

export const changeAssignment = (id: string, version: string, body: ChangeAssignment) =>
  api.put(at(id), body, assignmentSchema, { headers: { 'if-match': `"${version}"` } });

export const extendAssignment = (id: string, body: Extend) => api.post(at(id, '/extensions'), body, assignmentSchema);

export const remindPeople = (id: string, people: readonly string[]) =>
  api.post(at(id, '/reminders'), { people }, z.object({ reminded: z.number().int() }));

export const excusePeople = (id: string, people: readonly string[]) =>
  api.post(at(id, '/excuse'), { people }, assignmentSchema);

export const addPeople = (
  id: string,
  body: { people: readonly string[]; cohorts: readonly string[]; without: readonly string[] },
) => api.post(at(id, '/people'), body, assignmentSchema);

export const closeAssignment = (id: string, reason: string) => api.post(at(id, '/close'), { reason }, assignmentSchema);

export const calendarAddress = (id: string): string => at(id, '/calendar.ics');
export const assignmentsTableAddress = (state: string): string => `/api/assignments/table.csv?state=${state}`;
