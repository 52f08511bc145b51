import type { EntityManager } from 'typeorm';
import { z } from 'zod';

const tableRow = z.object({ name: z.string(), bytes: z.coerce.number(), rowCount: z.coerce.number() });
const mailRow = z.object({
  state: z.enum(['waiting', 'sent', 'refused']),
  count: z.coerce.number(),
  failing: z.coerce.number(),
  oldest: z.date().nullable(),
  latest: z.date().nullable(),
});
const backupRow = z.object({
  at: z.date(),
  file: z.string().nullable(),
  detail: z.preprocess(
    (value) => (typeof value === 'string' ? JSON.parse(value) : value),
    z.object({ bytes: z.number(), rows: z.number() }),
  ),
});

/** What the database says of itself. */
export function createSystemRepository(manager: EntityManager) {
  const all = async <S extends z.ZodType>(schema: S, sql: string, values: unknown[] = []): Promise<z.output<S>[]> => {
    const rows: unknown = await manager.query(sql, values);
    return z.array(schema).parse(rows);
  };
  return {
    async version(): Promise<string> {
      const [row] = await all(z.object({ version: z.string() }), 'SELECT VERSION() AS version');
      return row?.version ?? '';
    },

    async migration(): Promise<string> {
      const [row] = await all(
        z.object({ name: z.string() }),
        'SELECT name FROM schema_migration ORDER BY timestamp DESC LIMIT 1',
      );
      return row?.name ?? '';
    },

    /** Sizes as the storage engine reports them, indexes included; rows are its estimate. */
    tables: () =>
      all(
        tableRow,
        `SELECT table_name AS name, COALESCE(data_length + index_length, 0) AS bytes, COALESCE(table_rows, 0) AS rowCount
         FROM information_schema.tables WHERE table_schema = DATABASE() AND table_type = 'BASE TABLE'`,
      ),

    mail: (organisationId: string) =>
      all(
        mailRow,
        `SELECT state, COUNT(*) AS count, SUM(last_error IS NOT NULL) AS failing, MIN(created_at) AS oldest,
           MAX(sent_at) AS latest
         FROM outbox_mail WHERE organisation_id = ? GROUP BY state`,
        [organisationId],
      ),

    async lastMailError(organisationId: string): Promise<string | null> {
      const [row] = await all(
        z.object({ error: z.string() }),
        `SELECT last_error AS error FROM outbox_mail WHERE organisation_id = ? AND state <> 'sent'
           AND last_error IS NOT NULL ORDER BY created_at DESC LIMIT 1`,
        [organisationId],
      );
      return row?.error ?? null;
    },

    async lastBackup(organisationId: string) {
      const [row] = await all(
        backupRow,
        `SELECT at, subject_id AS file, detail FROM audit_entry
         WHERE organisation_id = ? AND subject_kind = 'backup' ORDER BY id DESC LIMIT 1`,
        [organisationId],
      );
      return row === undefined ? null : { at: row.at, file: row.file ?? '', ...row.detail };
    },
  };
}
export type SystemRepository = ReturnType<typeof createSystemRepository>;
