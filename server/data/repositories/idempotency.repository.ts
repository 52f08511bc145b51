import type { EntityManager } from 'typeorm';
import { z } from 'zod';

const rowSchema = z.object({
  fingerprint: z.string(),
  begunAt: z.date(),
  status: z.coerce.number().nullable(),
  location: z.string().nullable(),
  etag: z.string().nullable(),
  body: z.string().nullable(),
});
export type KeptAnswer = z.infer<typeof rowSchema>;

/** Answers kept under the keys that programs send with a creation, by person and key. */
export function createIdempotencyRepository(manager: EntityManager) {
  return {
    /** @returns true when the key was free and is now taken */
    async take(personId: string, key: string, fingerprint: string, at: Date): Promise<boolean> {
      const done: unknown = await manager.query(
        'INSERT IGNORE INTO idempotency_key (person_id, key_text, fingerprint, begun_at) VALUES (?, ?, ?, ?)',
        [personId, key, fingerprint, at],
      );
      return z.object({ affectedRows: z.number() }).parse(done).affectedRows === 1;
    },

    async find(personId: string, key: string): Promise<KeptAnswer | null> {
      const rows: unknown = await manager.query(
        `SELECT fingerprint, begun_at AS begunAt, status, location, etag, body
         FROM idempotency_key WHERE person_id = ? AND key_text = ?`,
        [personId, key],
      );
      return z.array(rowSchema).parse(rows)[0] ?? null;
    },

    async keep(
      personId: string,
      key: string,
      answer: { status: number; location: string | null; etag: string | null; body: string },
    ): Promise<void> {
      await manager.query(
        'UPDATE idempotency_key SET status = ?, location = ?, etag = ?, body = ? WHERE person_id = ? AND key_text = ?',
        [answer.status, answer.location, answer.etag, answer.body, personId, key],
      );
    },

    async free(personId: string, key: string): Promise<void> {
      await manager.query('DELETE FROM idempotency_key WHERE person_id = ? AND key_text = ?', [personId, key]);
    },

    async removeBegunBefore(before: Date): Promise<void> {
      await manager.query('DELETE FROM idempotency_key WHERE begun_at < ?', [before]);
    },
  };
}
export type IdempotencyRepository = ReturnType<typeof createIdempotencyRepository>;
