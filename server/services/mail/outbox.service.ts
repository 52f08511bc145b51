import type { OutboxPage, OutboxQuery } from '#shared/contracts/administration.ts';
import type { Database } from '../../data/database.ts';
import { type Actor, requireDeed } from '../permissions.ts';
import { notFound } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';

/** Where mail goes: a configured server, the local sink, or nowhere while neither is known. */
export interface MailRoute {
  server: string | null;
  sinkFolder: string | null;
}

export function createOutboxService(setup: { database: Database; mailRoute: () => MailRoute; now: () => Date }) {
  const { database, mailRoute, now } = setup;
  return {
    async list(actor: Actor, query: OutboxQuery): Promise<OutboxPage> {
      requireDeed(actor, 'outbox.read');
      const { items, total } = await database.outbox.list(actor.organisationId, query);
      return {
        items: items.map(({ id, email, subject, state, tries, createdAt, nextTryAt, sentAt, lastError }) => ({
          ...{ id, email, subject, state, tries, lastError },
          createdAt: createdAt.toISOString(),
          nextTryAt: nextTryAt?.toISOString() ?? null,
          sentAt: sentAt?.toISOString() ?? null,
        })),
        page: query.page,
        pageSize: query.pageSize,
        total,
        ...mailRoute(),
      };
    },

    async again(actor: Actor, id: string, caller: Caller): Promise<void> {
      requireDeed(actor, 'outbox.read');
      await database.transaction(async (on) => {
        if (!(await on.outbox.again(actor.organisationId, id, now()))) throw notFound('refused message');
        await on.audit.append({
          organisationId: actor.organisationId,
          at: now(),
          actorId: actor.personId,
          deed: 'mail.sent-again',
          subjectKind: 'mail',
          subjectId: id,
          detail: {},
          address: caller.address,
        });
      });
    },
  };
}
export type OutboxService = ReturnType<typeof createOutboxService>;
