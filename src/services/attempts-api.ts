import {
  attemptChunksSchema,
  type AttemptChunks,
  type AttemptDetail,
  attemptDetailSchema,
  type AttemptListQuery,
  attemptPageSchema,
  type AttemptResult,
  attemptResultSchema,
  type AttemptSummary,
  type ChunkReceipt,
  chunkReceiptSchema,
  type CompleteAttemptBody,
  type StartAttemptBody,
  type StartedAttempt,
  startedAttemptSchema,
} from '#shared/contracts/attempts.ts';
import type { Page } from '#shared/contracts/paging.ts';
import { CHUNK_HASH_HEADER } from '#shared/contracts/wire-names.ts';
import { api } from './http-client.ts';

const place = (id: string): string => `/api/attempts/${encodeURIComponent(id)}`;

export const startAttempt = (body: StartAttemptBody): Promise<StartedAttempt> =>
  api.post('/api/attempts', body, startedAttemptSchema);

export const putChunk = (
  id: string,
  index: number,
  bytes: Uint8Array<ArrayBuffer>,
  hash: string,
  signal?: AbortSignal,
): Promise<ChunkReceipt> =>
  api.putBytes(`${place(id)}/chunks/${index}`, bytes, chunkReceiptSchema, {
    headers: { [CHUNK_HASH_HEADER]: hash },
    signal,
  });

export const completeAttempt = (id: string, body: CompleteAttemptBody): Promise<AttemptResult> =>
  api.post(`${place(id)}/complete`, body, attemptResultSchema);

export const listAttempts = (query: Partial<AttemptListQuery>, signal?: AbortSignal): Promise<Page<AttemptSummary>> =>
  api.get('/api/attempts', attemptPageSchema, { query, signal });

export const getAttempt = (id: string, signal?: AbortSignal): Promise<AttemptDetail> =>
  api.get(place(id), attemptDetailSchema, { signal });

export const getAttemptChunks = (id: string, signal?: AbortSignal): Promise<AttemptChunks> =>
  api.get(`${place(id)}/chunks`, attemptChunksSchema, { signal });
