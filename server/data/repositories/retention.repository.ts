import type { EntityManager } from 'typeorm';
import { z } from 'zod';

const idRow = z.object({ id: z.string(), chunks: z.coerce.number() });
const effectRow = z.tuple([z.object({ attempts: z.coerce.number(), bytes: z.coerce.number() })]);
/** Completed attempts that were started before a day and still have their recording. */
const OLD = `FROM attempt t INNER JOIN attempt_chunk c ON c.attempt_id = t.id
  WHERE t.organisation_id = ? AND t.status = 'complete' AND t.started_at < ?`;

export function createRetentionRepository(manager: EntityManager) {
  const all = async <S extends z.ZodType>(schema: S, sql: string, values: unknown[]): Promise<z.output<S>[]> => {
    const rows: unknown = await manager.query(sql, values);
    return z.array(schema).parse(rows);
  };
  return {
    async days(organisationId: string): Promise<number | null> {
      const [row] = await all(
        z.object({ days: z.number().nullable() }),
        'SELECT recording_days AS days FROM retention_rule WHERE organisation_id = ?',
        [organisationId],
      );
      return row?.days ?? null;
    },
    rules: () =>
      all(
        z.object({ organisationId: z.string(), days: z.number() }),
        'SELECT organisation_id AS organisationId, recording_days AS days FROM retention_rule WHERE recording_days IS NOT NULL',
        [],
      ),
    async set(organisationId: string, days: number | null, by: string, at: Date): Promise<void> {
      await manager.query(
        'REPLACE INTO retention_rule (organisation_id, recording_days, changed_by, changed_at) VALUES (?, ?, ?, ?)',
        [organisationId, days, by, at],
      );
    },
    async effect(organisationId: string, before: Date): Promise<{ attempts: number; bytes: number }> {
      const rows: unknown = await manager.query(
        `SELECT COUNT(DISTINCT t.id) AS attempts, COALESCE(SUM(LENGTH(c.bytes)), 0) AS bytes ${OLD}`,
        [organisationId, before],
      );
      return effectRow.parse(rows)[0];
    },
    /** Removes recordings, oldest first, and notes each; returns the attempts. */
    async remove(organisationId: string, before: Date, most: number, at: Date): Promise<string[]> {
      const rows = await all(
        idRow,
        `SELECT t.id, COUNT(*) AS chunks ${OLD} GROUP BY t.id, t.started_at ORDER BY t.started_at LIMIT ?`,
        [organisationId, before, most],
      );
      const ids = rows.map(({ id }) => id);
      if (ids.length === 0) return [];
      await manager.query('DELETE FROM attempt_chunk WHERE attempt_id IN (?)', [ids]);
      await manager.query(
        'INSERT IGNORE INTO recording_removal (attempt_id, organisation_id, chunk_count, removed_at) VALUES ?',
        [rows.map(({ id, chunks }) => [id, organisationId, chunks, at])],
      );
      return ids;
    },
    /** When the recording of an attempt was removed; null when it was not. */
    async removedAt(attemptId: string): Promise<Date | null> {
      const [row] = await all(
        z.object({ at: z.date() }),
        'SELECT removed_at AS at FROM recording_removal WHERE attempt_id = ?',
        [attemptId],
      );
      return row?.at ?? null;
    },
  };
}
export type RetentionRepository = ReturnType<typeof createRetentionRepository>;
