import {
  createdScenarioSchema,
  scenarioDetailSchema,
  scenarioDraftSchema,
  scenarioFileSchema,
  scenarioLineSchema,
  type CreateScenario,
  type ScenarioDetail,
  type ScenarioDraft,
  type ScenarioFile,
} from '#shared/contracts/scenario-editing.ts';
import { api } from './http-client.ts';

const at = (slug: string, rest = ''): string => `/api/scenarios/${encodeURIComponent(slug)}${rest}`;

export const getScenarioDetail = (slug: string, signal?: AbortSignal): Promise<ScenarioDetail> =>
  api.get(at(slug, '/detail'), scenarioDetailSchema, { signal });

export const getScenarioDraft = (slug: string, revision: number, signal?: AbortSignal): Promise<ScenarioDraft> =>
  api.get(at(slug, `/drafts/${revision}`), scenarioDraftSchema, { signal });

export const getScenarioFile = (slug: string, revision: number, signal?: AbortSignal): Promise<ScenarioFile> =>
  api.get(at(slug, `/revisions/${revision}/file`), scenarioFileSchema, { signal });

export const createScenario = (body: CreateScenario) => api.post('/api/scenarios', body, createdScenarioSchema);

export const duplicateScenario = (slug: string, revision: number, title: string) =>
  api.post(at(slug, '/duplicate'), { revision, title }, createdScenarioSchema);

export const startScenarioDraft = (slug: string, from: number, note = '') =>
  api.post(at(slug, '/drafts'), { from, note }, createdScenarioSchema);

export const saveScenarioDraft = (slug: string, revision: number, version: string, document: object) =>
  api.put(at(slug, `/drafts/${revision}`), { document }, scenarioDraftSchema, {
    headers: { 'if-match': `"${version}"` },
  });

export const discardScenarioDraft = (slug: string, revision: number): Promise<undefined> =>
  api.delete(at(slug, `/drafts/${revision}`));

export const publishScenario = (slug: string, revision: number, version: string, note: string) =>
  api.post(at(slug, `/revisions/${revision}/publish`), { note }, scenarioLineSchema, {
    headers: { 'if-match': `"${version}"` },
  });

export const archiveScenario = (slug: string): Promise<ScenarioDetail> =>
  api.post(at(slug, '/archive'), undefined, scenarioDetailSchema);

export const restoreScenario = (slug: string): Promise<ScenarioDetail> =>
  api.post(at(slug, '/restore'), undefined, scenarioDetailSchema);
