/** IndexedDB while it works; from the first refusal (storage full, storage taken away) memory takes over and says so. */
import type { ChunkStore, KeptChunk } from './chunk-store.ts';
import { createMemoryChunkStore } from './memory-chunk-store.ts';

export interface FallingBackStore extends ChunkStore {
  /** Called once, when writing to the browser's storage failed. */
  onFallBack(callback: (cause: unknown) => void): void;
}

export function createFallingBackStore(kept: ChunkStore): FallingBackStore {
  const memory = createMemoryChunkStore();
  let failed = false;
  let tell: (cause: unknown) => void = () => undefined;
  const fall = (cause: unknown): void => {
    if (failed) return;
    failed = true;
    tell(cause);
  };
  /** Writes to the browser; what it refuses goes to memory. */
  async function write(durable: () => Promise<void>, otherwise: () => Promise<void>): Promise<void> {
    try {
      await durable();
    } catch (cause) {
      fall(cause);
      await otherwise();
    }
  }
  /** Reads from memory first: what is there was refused by the browser. */
  async function read<T>(fromMemory: () => Promise<T | null>, fromKept: () => Promise<T | null>): Promise<T | null> {
    const held = await fromMemory();
    if (held !== null) return held;
    try {
      return await fromKept();
    } catch (cause) {
      fall(cause);
      return null;
    }
  }
  const orNothing = async <T>(reading: () => Promise<T[]>): Promise<T[]> => {
    try {
      return await reading();
    } catch (cause) {
      fall(cause);
      return [];
    }
  };
  return {
    get durable() {
      return kept.durable && !failed;
    },
    onFallBack(callback) {
      tell = callback;
    },
    async openAttempt(attempt) {
      await memory.openAttempt(attempt);
      await write(
        () => kept.openAttempt(attempt),
        () => Promise.resolve(),
      );
    },
    async keep(chunk: KeptChunk) {
      await write(
        () => kept.keep(chunk),
        () => memory.keep(chunk),
      );
    },
    async end(attemptId, ended) {
      await memory.end(attemptId, ended);
      await write(
        () => kept.end(attemptId, ended),
        () => Promise.resolve(),
      );
    },
    attempt: (attemptId) =>
      read(
        () => memory.attempt(attemptId),
        () => kept.attempt(attemptId),
      ),
    async attemptsOf(personId) {
      const known = new Map((await orNothing(() => kept.attemptsOf(personId))).map((a) => [a.id, a]));
      for (const attempt of await memory.attemptsOf(personId)) known.set(attempt.id, attempt);
      return [...known.values()];
    },
    chunk: (attemptId, index) =>
      read(
        () => memory.chunk(attemptId, index),
        () => kept.chunk(attemptId, index),
      ),
    async indices(attemptId) {
      const all = new Set([...(await memory.indices(attemptId)), ...(await orNothing(() => kept.indices(attemptId)))]);
      return [...all].sort((a, b) => a - b);
    },
    async dropChunk(attemptId, index) {
      await memory.dropChunk(attemptId, index);
      await write(
        () => kept.dropChunk(attemptId, index),
        () => Promise.resolve(),
      );
    },
    async dropAttempt(attemptId) {
      await memory.dropAttempt(attemptId);
      await write(
        () => kept.dropAttempt(attemptId),
        () => Promise.resolve(),
      );
    },
    close() {
      memory.close();
      kept.close();
    },
  };
}
