import {
  scenarioPageSchema,
  type ScenarioListQuery,
  type ScenarioRevision,
  scenarioRevisionSchema,
  type ScenarioSummary,
} from '#shared/contracts/scenarios.ts';
import type { Page } from '#shared/contracts/paging.ts';
import { api } from './http-client.ts';

export const listScenarios = (
  query: Partial<ScenarioListQuery>,
  signal?: AbortSignal,
): Promise<Page<ScenarioSummary>> => api.get('/api/scenarios', scenarioPageSchema, { query, signal });

/** The latest published revision, or the revision named. */
export const getScenario = (slug: string, revision?: number, signal?: AbortSignal): Promise<ScenarioRevision> =>
  api.get(
    `/api/scenarios/${encodeURIComponent(slug)}${revision === undefined ? '' : `/revisions/${revision}`}`,
    scenarioRevisionSchema,
    { signal },
  );
