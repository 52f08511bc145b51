import { randomUUID } from 'node:crypto';
import type { QueueMail } from './notices.ts';

/** Writes a message with the running transaction, where it waits for the mail queue to take it. */
export function createKeepMail(now: () => Date): QueueMail {
  return (on, { organisationId, person, subject, text, calendar }) =>
    on.noticeMail.insert({
      id: randomUUID(),
      organisationId,
      personId: person.id,
      email: person.email,
      subject,
      text,
      calendarMethod: calendar?.method ?? null,
      calendar: calendar?.content ?? null,
      createdAt: now(),
    });
}
