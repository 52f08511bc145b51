import { z } from 'zod';
import {
  airframeDetailSchema,
  draftSchema,
  sheetCellsSchema,
  type AirframeDetail,
  type AirframeDraft,
  type CreateAirframe,
  type ReleaseRequest,
  type SheetCells,
  type ValueHistory,
  valueHistorySchema,
} from '#shared/contracts/airframe-editing.ts';
import { airframeRevisionSchema, type AirframeRevision } from '#shared/contracts/airframes.ts';
import { api } from './http-client.ts';

const at = (slug: string, rest = ''): string => `/api/airframes/${encodeURIComponent(slug)}${rest}`;
const created = z.object({ slug: z.string(), revision: z.number().int() });

export const getAirframe = (slug: string, signal?: AbortSignal): Promise<AirframeDetail> =>
  api.get(at(slug), airframeDetailSchema, { signal });

export const getDraft = (slug: string, revision: number, signal?: AbortSignal): Promise<AirframeDraft> =>
  api.get(at(slug, `/drafts/${revision}`), draftSchema, { signal });

export const createAirframe = (body: CreateAirframe) => api.post('/api/airframes', body, created);

export const duplicateAirframe = (slug: string, revision: number, name: string) =>
  api.post(at(slug, '/duplicate'), { revision, name }, created);

export const startDraft = (slug: string, from: number, note = '') =>
  api.post(at(slug, '/drafts'), { from, note }, created);

export const saveDraft = (slug: string, revision: number, version: string, document: unknown, note?: string) =>
  api.put(at(slug, `/drafts/${revision}`), { document, note }, draftSchema, {
    headers: { 'if-match': `"${version}"` },
  });

export const discardDraft = (slug: string, revision: number): Promise<void> =>
  api.delete(at(slug, `/drafts/${revision}`));

export const releaseDraft = (slug: string, revision: number, body: ReleaseRequest): Promise<AirframeRevision> =>
  api.post(at(slug, `/revisions/${revision}/release`), body, airframeRevisionSchema);

export const retireRevision = (slug: string, revision: number) =>
  api.post(at(slug, `/revisions/${revision}/retire`), undefined, z.unknown());

export const setTags = (slug: string, tags: readonly string[]) =>
  api.put(at(slug, '/tags'), { tags }, z.object({ tags: z.array(z.string()) }));

/** Reads an uploaded CSV or XLSX into cells; nothing is stored. */
export const readSheet = (file: Uint8Array<ArrayBuffer>, fileName: string): Promise<SheetCells> =>
  api.putBytes(`/api/airframes/read-sheet?name=${encodeURIComponent(fileName)}`, file, sheetCellsSchema);

export const uploadSkin = (slug: string, file: Uint8Array<ArrayBuffer>, fileName: string) =>
  api.putBytes(at(slug, `/skin?name=${encodeURIComponent(fileName)}`), file, z.object({ bytes: z.number() }));

export const removeSkin = (slug: string): Promise<void> => api.delete(at(slug, '/skin'));

/** Address of an export; the browser downloads it with the session's cookies. */
export const exportAddress = (slug: string, revision: number, format: 'json' | 'csv' | 'xlsx'): string =>
  at(slug, `/revisions/${revision}/export.${format}`);

/** One value over all revisions, newest first; `field` is a JSON Pointer. */
export const getValueHistory = (slug: string, field: string, signal?: AbortSignal): Promise<ValueHistory> =>
  api.get(at(slug, '/history'), valueHistorySchema, { query: { field }, signal });

/** Content of an airframe's skin, a GLB file. */
export const getSkin = async (slug: string, signal?: AbortSignal): Promise<ArrayBuffer> =>
  (await api.getFile(at(slug, '/skin'), { signal })).content.arrayBuffer();
