/** Recorded attempts in IndexedDB until the server has them. Bound to person and attempt. */
import { type DBSchema, type IDBPDatabase, openDB } from 'idb';
import type { EndReason } from '#shared/scenario/run-types.ts';

export interface KeptAttempt {
  id: string;
  personId: string;
  title: string;
  startedAt: string;
  /** Chunks recorded so far. */
  chunkCount: number;
  /** Null while it is being flown, or after a crash. */
  ended: EndReason | null;
}

export interface KeptChunk {
  attemptId: string;
  index: number;
  hash: string;
  sealed: Uint8Array<ArrayBuffer>;
}

export interface ChunkStore {
  /** False when nothing survives closing the page. */
  readonly durable: boolean;
  openAttempt(attempt: KeptAttempt): Promise<void>;
  /** Keeps a chunk and counts it, in one transaction. */
  keep(chunk: KeptChunk): Promise<void>;
  end(attemptId: string, ended: EndReason): Promise<void>;
  attempt(attemptId: string): Promise<KeptAttempt | null>;
  attemptsOf(personId: string): Promise<KeptAttempt[]>;
  chunk(attemptId: string, index: number): Promise<KeptChunk | null>;
  /** Numbers of the chunks still kept, ascending. */
  indices(attemptId: string): Promise<number[]>;
  dropChunk(attemptId: string, index: number): Promise<void>;
  dropAttempt(attemptId: string): Promise<void>;
  close(): void;
}

interface Schema extends DBSchema {
  attempts: { key: string; value: KeptAttempt; indexes: { 'by-person': string } };
  chunks: { key: [string, number]; value: KeptChunk };
}

const NAME = 'sidewash-flights';
const VERSION = 1;

const chunkRange = (attemptId: string): IDBKeyRange =>
  IDBKeyRange.bound([attemptId, 0], [attemptId, Number.MAX_SAFE_INTEGER]);

export async function openChunkStore(name = NAME): Promise<ChunkStore> {
  const db: IDBPDatabase<Schema> = await openDB<Schema>(name, VERSION, {
    upgrade(database) {
      database.createObjectStore('attempts', { keyPath: 'id' }).createIndex('by-person', 'personId');
      database.createObjectStore('chunks', { keyPath: ['attemptId', 'index'] });
    },
    blocking(_current, _blocked, event) {
      // A newer version of the program in another tab wants to upgrade: give way.
      (event.target as IDBDatabase).close(); // idb types the target as EventTarget; it is the connection
    },
  });
  return {
    durable: true,
    async openAttempt(attempt) {
      await db.put('attempts', attempt);
    },
    async keep(chunk) {
      const tx = db.transaction(['attempts', 'chunks'], 'readwrite');
      const attempt = await tx.objectStore('attempts').get(chunk.attemptId);
      await tx.objectStore('chunks').put(chunk);
      if (attempt && attempt.chunkCount <= chunk.index) {
        await tx.objectStore('attempts').put({ ...attempt, chunkCount: chunk.index + 1 });
      }
      await tx.done;
    },
    async end(attemptId, ended) {
      const tx = db.transaction('attempts', 'readwrite');
      const attempt = await tx.store.get(attemptId);
      if (attempt) await tx.store.put({ ...attempt, ended });
      await tx.done;
    },
    attempt: async (attemptId) => (await db.get('attempts', attemptId)) ?? null,
    attemptsOf: (personId) => db.getAllFromIndex('attempts', 'by-person', personId),
    chunk: async (attemptId, index) => (await db.get('chunks', [attemptId, index])) ?? null,
    async indices(attemptId) {
      const keys = await db.getAllKeys('chunks', chunkRange(attemptId));
      return keys.map(([, index]) => index);
    },
    async dropChunk(attemptId, index) {
      await db.delete('chunks', [attemptId, index]);
    },
    async dropAttempt(attemptId) {
      const tx = db.transaction(['attempts', 'chunks'], 'readwrite');
      await tx.objectStore('chunks').delete(chunkRange(attemptId));
      await tx.objectStore('attempts').delete(attemptId);
      await tx.done;
    },
    close: () => db.close(),
  };
}
