import type { Page } from '#shared/contracts/paging.ts';
import {
  studyPageSchema,
  studySchema,
  type AnalysisReportBody,
  type CreateStudy,
  type SaveStudy,
  type Study,
  type StudyListQuery,
  type StudySummary,
} from '#shared/contracts/studies.ts';
import { api, type NamedFile } from './http-client.ts';

const at = (id: string): string => `/api/studies/${encodeURIComponent(id)}`;

export const listStudies = (query: Partial<StudyListQuery>, signal?: AbortSignal): Promise<Page<StudySummary>> =>
  api.get('/api/studies', studyPageSchema, { query, signal });

export const getStudy = (id: string, signal?: AbortSignal): Promise<Study> => api.get(at(id), studySchema, { signal });

export const createStudy = (body: CreateStudy): Promise<Study> => api.post('/api/studies', body, studySchema);

/** Refused when somebody else saved the study since `version` was read. */
export const saveStudy = (id: string, version: string, body: SaveStudy): Promise<Study> =>
  api.put(at(id), body, studySchema, { headers: { 'if-match': `"${version}"` } });

export const deleteStudy = (id: string): Promise<void> => api.delete(at(id));

/** The printed report of a saved or an unsaved state. */
export const printAnalysis = (body: AnalysisReportBody, signal?: AbortSignal): Promise<NamedFile> =>
  api.postForFile('/api/reports/analysis', body, { signal });
