import type { EntityManager } from 'typeorm';
import { z } from 'zod';

const rowSchema = z.object({
  id: z.string(),
  organisationId: z.string(),
  personId: z.string(),
  displayName: z.string(),
  email: z.string(),
  subject: z.string(),
  text: z.string(),
  calendarMethod: z.enum(['REQUEST', 'CANCEL']).nullable(),
  calendar: z.string().nullable(),
  createdAt: z.date(),
});
export type NoticeMailRecord = z.infer<typeof rowSchema>;

/** Messages that wait for the mail queue. */
export function createNoticeMailRepository(manager: EntityManager) {
  return {
    async insert(mail: Omit<NoticeMailRecord, 'displayName'>): Promise<void> {
      await manager.query(
        `INSERT INTO notice_mail
           (id, organisation_id, person_id, email, subject, text, calendar_method, calendar, created_at)
         VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?)`,
        [
          ...[mail.id, mail.organisationId, mail.personId, mail.email, mail.subject.slice(0, 300), mail.text],
          ...[mail.calendarMethod, mail.calendar, mail.createdAt],
        ],
      );
    },

    /**
     * Takes waiting messages, oldest first; call in the transaction that puts them into the mail queue. Another server
     * passes over what this one holds.
     */
    async take(most: number, at: Date): Promise<NoticeMailRecord[]> {
      const rows: unknown = await manager.query(
        `SELECT m.id, m.organisation_id AS organisationId, m.person_id AS personId, p.display_name AS displayName,
           m.email, m.subject, m.text, m.calendar_method AS calendarMethod, m.calendar, m.created_at AS createdAt
         FROM notice_mail m INNER JOIN person p ON p.id = m.person_id
         WHERE m.handed_at IS NULL ORDER BY m.created_at, m.id LIMIT ? FOR UPDATE SKIP LOCKED`,
        [most],
      );
      const taken = z.array(rowSchema).parse(rows);
      if (taken.length > 0) {
        await manager.query('UPDATE notice_mail SET handed_at = ? WHERE id IN (?)', [at, taken.map(({ id }) => id)]);
      }
      return taken;
    },
  };
}
export type NoticeMailRepository = ReturnType<typeof createNoticeMailRepository>;
