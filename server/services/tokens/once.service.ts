import type { Database } from '../../data/database.ts';
import { ProblemError } from '../problem-error.ts';

const KEPT_MS = 24 * 3600 * 1000;
/** A request that has not ended by then died with its server; its key is free again. */
const LOST_AFTER_MS = 5 * 60_000;
const CLEAN_EVERY_MS = 10 * 60_000;

export interface Answer {
  status: number;
  location: string | null;
  etag: string | null;
  body: string;
}

/** Creations under an idempotency key: the first is carried out, later ones get its answer. */
export function createOnceService({ database, now }: { database: Database; now: () => Date }) {
  let cleanedAt = 0;

  return {
    /**
     * @returns null when the key is now taken and the request is to be carried out; the kept answer otherwise
     * @throws {ProblemError} validation when the key stands for another request; conflict while the first still runs
     */
    async begin(personId: string, key: string, fingerprint: string): Promise<Answer | null> {
      const at = now();
      if (at.getTime() - cleanedAt > CLEAN_EVERY_MS) {
        cleanedAt = at.getTime();
        await database.idempotency.removeBegunBefore(new Date(at.getTime() - KEPT_MS));
      }
      for (let tries = 0; tries < 2; tries++) {
        if (await database.idempotency.take(personId, key, fingerprint, at)) return null;
        const kept = await database.idempotency.find(personId, key);
        if (kept === null) continue; // freed in between
        const ageMs = at.getTime() - kept.begunAt.getTime();
        if (ageMs > KEPT_MS || (kept.status === null && ageMs > LOST_AFTER_MS)) {
          await database.idempotency.free(personId, key);
          continue;
        }
        if (kept.fingerprint !== fingerprint) {
          const message = 'This idempotency key was used for another request';
          throw new ProblemError('validation', `${message}.`, {
            errors: [{ field: 'idempotency-key', rule: 'same-request', message, remedy: 'Take a new key.' }],
          });
        }
        if (kept.status === null) throw new ProblemError('conflict', 'The first request with this key still runs.');
        return { status: kept.status, location: kept.location, etag: kept.etag, body: kept.body ?? '' };
      }
      throw new ProblemError('conflict', 'The first request with this key still runs.');
    },
    keep: (personId: string, key: string, answer: Answer): Promise<void> =>
      database.idempotency.keep(personId, key, answer),
    free: (personId: string, key: string): Promise<void> => database.idempotency.free(personId, key),
  };
}
export type OnceService = ReturnType<typeof createOnceService>;
