import { cohortCandidatesSchema, cohortPageSchema, cohortSchema, type CohortQuery } from '#shared/contracts/cohorts.ts';
import { api } from './http-client.ts';

const ROOT = '/api/cohorts';
const one = (id: string, rest = ''): string => `${ROOT}/${encodeURIComponent(id)}${rest}`;

export const listCohorts = (query: Partial<CohortQuery>, signal?: AbortSignal) =>
  api.get(ROOT, cohortPageSchema, { query, signal });
export const getCohort = (id: string, signal?: AbortSignal) => api.get(one(id), cohortSchema, { signal });
export const createCohort = (name: string) => api.post(ROOT, { name }, cohortSchema);
export const renameCohort = (id: string, name: string) => api.put(one(id), { name }, cohortSchema);
export const findCandidates = (id: string, search: string, signal?: AbortSignal) =>
  api.get(one(id, '/candidates'), cohortCandidatesSchema, { query: { search }, signal });
export const addToCohort = (id: string, people: string[]) => api.post(one(id, '/members'), { people }, cohortSchema);
export const removeFromCohort = (id: string, person: string): Promise<undefined> =>
  api.delete(one(id, `/members/${encodeURIComponent(person)}`));
export const archiveCohort = (id: string) => api.post(one(id, '/archive'), undefined, cohortSchema);
export const restoreCohort = (id: string): Promise<undefined> => api.delete(one(id, '/archive'));
