import type { EntityManager } from 'typeorm';
import { z } from 'zod';

const flag = z.coerce.number().transform((value) => value !== 0);
const json = z.union([z.string().transform((text): unknown => JSON.parse(text)), z.unknown()]);
const endpointRow = z.object({
  organisationId: z.string(),
  address: z.string(),
  userName: z.string(),
  secret: z.string(),
  active: flag,
});
export type EndpointRecord = z.infer<typeof endpointRow>;
const deliveryRow = z.object({
  id: z.string(),
  organisationId: z.string(),
  attemptId: z.string(),
  statement: json,
  tries: z.number(),
});
export type DeliveryRecord = z.infer<typeof deliveryRow>;
const affected = z.object({ affectedRows: z.number() });

/** The endpoint that receives statements, and the statements that wait for it. */
export function createStatementsRepository(manager: EntityManager) {
  const all = async <S extends z.ZodType>(schema: S, sql: string, values: unknown[]): Promise<z.output<S>[]> => {
    const rows: unknown = await manager.query(sql, values);
    return z.array(schema).parse(rows);
  };
  return {
    async endpoint(organisationId: string): Promise<EndpointRecord | null> {
      const [row] = await all(
        endpointRow,
        `SELECT organisation_id AS organisationId, address, user_name AS userName, secret, active
         FROM statement_endpoint WHERE organisation_id = ?`,
        [organisationId],
      );
      return row ?? null;
    },

    async saveEndpoint(endpoint: EndpointRecord, by: string, at: Date): Promise<void> {
      const { organisationId, address, userName, secret, active } = endpoint;
      await manager.query(
        `REPLACE INTO statement_endpoint (organisation_id, address, user_name, secret, active, changed_by, changed_at)
         VALUES (?, ?, ?, ?, ?, ?, ?)`,
        [organisationId, address, userName, secret, active, by, at],
      );
    },

    /** False when a statement of this identifier waits or went already. */
    async enqueue(delivery: Omit<DeliveryRecord, 'tries'>, at: Date): Promise<boolean> {
      const done: unknown = await manager.query(
        `INSERT IGNORE INTO statement_delivery
           (id, organisation_id, attempt_id, statement, state, tries, next_at, problem, created_at)
         VALUES (?, ?, ?, ?, 'waiting', 0, ?, '', ?)`,
        [delivery.id, delivery.organisationId, delivery.attemptId, JSON.stringify(delivery.statement), at, at],
      );
      return affected.parse(done).affectedRows > 0;
    },

    async enqueued(id: string): Promise<boolean> {
      const rows: unknown = await manager.query('SELECT 1 FROM statement_delivery WHERE id = ?', [id]);
      return z.array(z.unknown()).parse(rows).length > 0;
    },

    /**
     * Takes statements that are due, for `leaseS` seconds; another server passes over them. Call in a transaction.
     */
    async claim(at: Date, leaseS: number, most: number): Promise<DeliveryRecord[]> {
      const rows = await all(
        deliveryRow,
        `SELECT d.id, d.organisation_id AS organisationId, d.attempt_id AS attemptId, d.statement, d.tries
         FROM statement_delivery d INNER JOIN statement_endpoint e ON e.organisation_id = d.organisation_id AND e.active = 1
         WHERE d.state = 'waiting' AND d.next_at <= ? ORDER BY d.next_at LIMIT ? FOR UPDATE SKIP LOCKED`,
        [at, most],
      );
      if (rows.length > 0) {
        await manager.query(
          'UPDATE statement_delivery SET tries = tries + 1, next_at = ? + INTERVAL ? SECOND WHERE id IN (?)',
          [at, leaseS, rows.map(({ id }) => id)],
        );
      }
      return rows;
    },

    async settle(id: string, state: 'sent' | 'refused', problem: string, at: Date): Promise<void> {
      await manager.query('UPDATE statement_delivery SET state = ?, problem = ?, sent_at = ? WHERE id = ?', [
        state,
        problem.slice(0, 500),
        state === 'sent' ? at : null,
        id,
      ]);
    },

    async postpone(id: string, until: Date, problem: string): Promise<void> {
      await manager.query('UPDATE statement_delivery SET next_at = ?, problem = ? WHERE id = ?', [
        until,
        problem.slice(0, 500),
        id,
      ]);
    },

    async counts(organisationId: string) {
      const rows = await all(
        z.object({ state: z.enum(['waiting', 'sent', 'refused']), count: z.coerce.number() }),
        'SELECT state, COUNT(*) AS count FROM statement_delivery WHERE organisation_id = ? GROUP BY state',
        [organisationId],
      );
      const problems = await all(
        z.object({ problem: z.string() }),
        `SELECT problem FROM statement_delivery WHERE organisation_id = ? AND problem <> '' AND state <> 'sent'
         ORDER BY next_at DESC LIMIT 1`,
        [organisationId],
      );
      const of = (state: string): number => rows.find((row) => row.state === state)?.count ?? 0;
      return {
        waiting: of('waiting'),
        sent: of('sent'),
        refused: of('refused'),
        lastProblem: problems[0]?.problem ?? '',
      };
    },

    /** Refused ones wait again. */
    async retryRefused(organisationId: string, at: Date): Promise<number> {
      const done: unknown = await manager.query(
        `UPDATE statement_delivery SET state = 'waiting', next_at = ?, problem = '' WHERE organisation_id = ? AND state = 'refused'`,
        [at, organisationId],
      );
      return affected.parse(done).affectedRows;
    },
  };
}
export type StatementsRepository = ReturnType<typeof createStatementsRepository>;
