import {
  type AirframeListQuery,
  airframePageSchema,
  type AirframeRevision,
  airframeRevisionSchema,
  type AirframeSummary,
} from '#shared/contracts/airframes.ts';
import type { Page } from '#shared/contracts/paging.ts';
import { api } from './http-client.ts';

export const listAirframes = (
  query: Partial<AirframeListQuery>,
  signal?: AbortSignal,
): Promise<Page<AirframeSummary>> => api.get('/api/airframes', airframePageSchema, { query, signal });

export const getAirframeRevision = (slug: string, revision: number, signal?: AbortSignal): Promise<AirframeRevision> =>
  api.get(`/api/airframes/${encodeURIComponent(slug)}/revisions/${revision}`, airframeRevisionSchema, { signal });
