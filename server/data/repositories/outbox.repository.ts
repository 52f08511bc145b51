import { mailStateSchema, type OutboxQuery } from '#shared/contracts/administration.ts';
import type { EntityManager } from 'typeorm';
import { z } from 'zod';
import { anywhere } from './like-pattern.ts';
import { offsetOf, type Rows } from './paging.ts';

const mailSchema = z.object({
  id: z.string(),
  organisationId: z.string(),
  email: z.string(),
  name: z.string(),
  subject: z.string(),
  text: z.string(),
  calendarMethod: z.enum(['REQUEST', 'CANCEL']).nullable(),
  calendar: z.string().nullable(),
  state: mailStateSchema,
  tries: z.coerce.number(),
  createdAt: z.date(),
  nextTryAt: z.date().nullable(),
  sentAt: z.date().nullable(),
  lastError: z.string().nullable(),
});
export type OutboxRecord = z.infer<typeof mailSchema>;
export type NewMail = Pick<
  OutboxRecord,
  'id' | 'organisationId' | 'email' | 'name' | 'subject' | 'text' | 'calendarMethod' | 'calendar' | 'createdAt'
>;

const COLUMNS = `id, organisation_id AS organisationId, email, name, subject, text, calendar_method AS calendarMethod,
  calendar, state, tries, created_at AS createdAt, next_try_at AS nextTryAt, sent_at AS sentAt, last_error AS lastError`;

/** The mail queue; a message is written in the transaction of the deed that causes it. */
export function createOutboxRepository(manager: EntityManager) {
  return {
    async insert(mail: NewMail): Promise<void> {
      await manager.query(
        `INSERT INTO outbox_mail (id, organisation_id, email, name, subject, text, calendar_method, calendar, state,
           created_at, next_try_at) VALUES (?, ?, ?, ?, ?, ?, ?, ?, 'waiting', ?, ?)`,
        [
          ...[mail.id, mail.organisationId, mail.email, mail.name.slice(0, 200), mail.subject.slice(0, 300), mail.text],
          ...[mail.calendarMethod, mail.calendar, mail.createdAt, mail.createdAt],
        ],
      );
    },

    /** Takes messages that are due and puts their next try to `retryAt`; another server passes over what this one holds. */
    async take(most: number, at: Date, retryAt: (tries: number) => Date): Promise<OutboxRecord[]> {
      const rows: unknown = await manager.query(
        `SELECT ${COLUMNS} FROM outbox_mail WHERE state = 'waiting' AND next_try_at <= ?
         ORDER BY next_try_at, id LIMIT ? FOR UPDATE SKIP LOCKED`,
        [at, most],
      );
      const taken = z.array(mailSchema).parse(rows);
      for (const { id, tries } of taken) {
        await manager.query('UPDATE outbox_mail SET tries = tries + 1, next_try_at = ? WHERE id = ?', [
          retryAt(tries + 1),
          id,
        ]);
      }
      return taken;
    },

    /** The text is let go: links in it open accounts. */
    async markSent(id: string, at: Date): Promise<void> {
      await manager.query(
        `UPDATE outbox_mail SET state = 'sent', sent_at = ?, next_try_at = NULL, last_error = NULL, text = '',
           calendar = NULL WHERE id = ?`,
        [at, id],
      );
    },

    async markFailed(id: string, error: string, final: boolean): Promise<void> {
      await manager.query(
        `UPDATE outbox_mail SET last_error = ?${final ? `, state = 'refused', next_try_at = NULL` : ''} WHERE id = ?`,
        [error.slice(0, 500), id],
      );
    },

    /** @returns false when there is no such refused message. */
    async again(organisationId: string, id: string, at: Date): Promise<boolean> {
      const answer: unknown = await manager.query(
        `UPDATE outbox_mail SET state = 'waiting', tries = 0, next_try_at = ?
         WHERE id = ? AND organisation_id = ? AND state = 'refused'`,
        [at, id, organisationId],
      );
      return z.object({ affectedRows: z.number() }).parse(answer).affectedRows === 1;
    },

    async list(organisationId: string, query: OutboxQuery): Promise<Rows<OutboxRecord>> {
      const where = ['organisation_id = ?'];
      const values: unknown[] = [organisationId];
      if (query.search !== '') {
        where.push('(email LIKE ? OR subject LIKE ?)');
        values.push(anywhere(query.search), anywhere(query.search));
      }
      if (query.state !== undefined) {
        where.push('state = ?');
        values.push(query.state);
      }
      const rows: unknown = await manager.query(
        `SELECT ${COLUMNS} FROM outbox_mail WHERE ${where.join(' AND ')} ORDER BY created_at DESC, id LIMIT ? OFFSET ?`,
        [...values, query.pageSize, offsetOf(query)],
      );
      const counted: unknown = await manager.query(
        `SELECT COUNT(*) AS total FROM outbox_mail WHERE ${where.join(' AND ')}`,
        values,
      );
      const [{ total }] = z.tuple([z.object({ total: z.coerce.number() })]).parse(counted);
      return { items: z.array(mailSchema).parse(rows), total };
    },
  };
}
export type OutboxRepository = ReturnType<typeof createOutboxRepository>;
