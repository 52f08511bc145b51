/** What is used where the browser keeps nothing (IndexedDB refused or full): the flight goes on, closing the page loses what is not yet delivered. */
import type { ChunkStore, KeptAttempt, KeptChunk } from './chunk-store.ts';

export function createMemoryChunkStore(): ChunkStore {
  const attempts = new Map<string, KeptAttempt>();
  const chunks = new Map<string, Map<number, KeptChunk>>();
  const chunksOf = (attemptId: string): Map<number, KeptChunk> => {
    const known = chunks.get(attemptId) ?? new Map<number, KeptChunk>();
    chunks.set(attemptId, known);
    return known;
  };
  return {
    durable: false,
    openAttempt(attempt) {
      attempts.set(attempt.id, attempt);
      return Promise.resolve();
    },
    keep(chunk) {
      chunksOf(chunk.attemptId).set(chunk.index, chunk);
      const attempt = attempts.get(chunk.attemptId);
      if (attempt && attempt.chunkCount <= chunk.index) {
        attempts.set(attempt.id, { ...attempt, chunkCount: chunk.index + 1 });
      }
      return Promise.resolve();
    },
    end(attemptId, ended) {
      const attempt = attempts.get(attemptId);
      if (attempt) attempts.set(attemptId, { ...attempt, ended });
      return Promise.resolve();
    },
    attempt: (attemptId) => Promise.resolve(attempts.get(attemptId) ?? null),
    attemptsOf: (personId) => Promise.resolve([...attempts.values()].filter((a) => a.personId === personId)),
    chunk: (attemptId, index) => Promise.resolve(chunksOf(attemptId).get(index) ?? null),
    indices: (attemptId) => Promise.resolve([...chunksOf(attemptId).keys()].sort((a, b) => a - b)),
    dropChunk(attemptId, index) {
      chunksOf(attemptId).delete(index);
      return Promise.resolve();
    },
    dropAttempt(attemptId) {
      chunks.delete(attemptId);
      attempts.delete(attemptId);
      return Promise.resolve();
    },
    close() {
      attempts.clear();
      chunks.clear();
    },
  };
}
