import { attemptChunksSchema } from '#shared/contracts/attempts.ts';
import {
  classDetailSchema,
  classLogSchema,
  type ClassLog,
  classPageSchema,
  classPassSchema,
  classScenarioSchema,
  doorSchema,
  type ClassDetail,
  type ClassListQuery,
  type ClassPass,
  type ClassScenario,
  type ClassSummary,
  type Door,
  type JoinClassBody,
  type OpenClassBody,
} from '#shared/contracts/classes.ts';
import type { Page } from '#shared/contracts/paging.ts';
import { api } from './http-client.ts';

const at = (id: string, rest = ''): string => `/api/classes/${encodeURIComponent(id)}${rest}`;

export const openClass = (body: OpenClassBody): Promise<ClassPass> => api.post('/api/classes', body, classPassSchema);
export const joinClass = (body: JoinClassBody): Promise<ClassPass> =>
  api.post('/api/classes/join', body, classPassSchema);
export const lookAtDoor = (code: string, signal?: AbortSignal): Promise<Door> =>
  api.get(`/api/classes/door/${encodeURIComponent(code)}`, doorSchema, { signal });
export const listClasses = (query: Partial<ClassListQuery>, signal?: AbortSignal): Promise<Page<ClassSummary>> =>
  api.get('/api/classes', classPageSchema, { query, signal });
export const getClass = (id: string, signal?: AbortSignal): Promise<ClassDetail> =>
  api.get(at(id), classDetailSchema, { signal });
export const getClassScenario = (id: string, index: number, signal?: AbortSignal): Promise<ClassScenario> =>
  api.get(at(id, `/scenarios/${index}`), classScenarioSchema, { signal });
export const getClassChunks = (id: string, attempt: string, signal?: AbortSignal) =>
  api.get(at(id, `/attempts/${encodeURIComponent(attempt)}/chunks`), attemptChunksSchema, { signal });
/** Address of the picture that joins with the code. */
export const qrAddress = (id: string): string => at(id, '/qr.svg');

export const getClassLog = (id: string, signal?: AbortSignal): Promise<ClassLog> =>
  api.get(at(id, '/log'), classLogSchema, { signal });
