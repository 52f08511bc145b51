import type { Database } from '../../data/database.ts';
import { type Courier, LetterRefused } from '../../mail/courier.ts';

const AT_ONCE = 20;
const MOST_TRIES = 8;
const FIRST_PAUSE_S = 30;
const LONGEST_PAUSE_S = 6 * 3600;

/** Time of the try after `tries` of them: pauses double from half a minute to six hours. */
export function nextTry(tries: number, at: Date): Date {
  return new Date(at.getTime() + Math.min(LONGEST_PAUSE_S, FIRST_PAUSE_S * 2 ** (tries - 1)) * 1000);
}

/**
 * Sends what is due. A message is taken, with its next try already set, before it is sent: two servers never hold the
 * same one, and a server that dies between sending and noting repeats it under the same message id.
 *
 * @returns how many were sent
 */
export function createSendMail({ database, now }: { database: Database; now: () => Date }) {
  /** Messages of assignments wait in a table of their own, written with their deeds. */
  const collect = async (): Promise<void> => {
    await database.transaction(async (on) => {
      for (const mail of await on.noticeMail.take(AT_ONCE, now())) {
        const { id, organisationId, displayName: name, email, subject, text, calendarMethod, calendar } = mail;
        const message = { id, organisationId, email, name, subject, text, calendarMethod, calendar };
        await on.outbox.insert({ ...message, createdAt: mail.createdAt });
      }
    });
  };

  return async (courier: Courier): Promise<number> => {
    await collect();
    const due = await database.transaction((on) => on.outbox.take(AT_ONCE, now(), (tries) => nextTry(tries, now())));
    let sent = 0;
    for (const mail of due) {
      const { id, name, email: address, subject, text, calendarMethod: method, calendar: content } = mail;
      const calendar = method !== null && content !== null ? { method, content } : null;
      try {
        await courier.send({ id, to: { name, address }, subject, text, calendar });
        await database.outbox.markSent(id, now());
        sent++;
      } catch (error) {
        if (!(error instanceof LetterRefused)) throw error;
        await database.outbox.markFailed(id, error.message, error.final || mail.tries + 1 >= MOST_TRIES);
      }
    }
    return sent;
  };
}
