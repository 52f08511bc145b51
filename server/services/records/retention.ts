import type { Retention } from '#shared/contracts/records.ts';
import type { Database } from '../../data/database.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { requireEdition } from '../versions.ts';
import type { Caller } from '../sessions/sessions.service.ts';

const DAY_MS = 24 * 3600 * 1000;
const AT_ONCE = 200;

/** How long input recordings are kept. Results, signatures and corrections always stay; every removal is noted. */
export function createRetention({ database, now }: { database: Database; now: () => Date }) {
  const before = (days: number): Date => new Date(now().getTime() - days * DAY_MS);
  return {
    async retention(actor: Actor): Promise<Retention> {
      requireDeed(actor, 'record.rule');
      return { recordingDays: await database.retention.days(actor.organisationId) };
    },

    /** What a rule would remove now. */
    async effect(actor: Actor, { recordingDays }: Retention): Promise<{ attempts: number; bytes: number }> {
      requireDeed(actor, 'record.rule');
      if (recordingDays === null) return { attempts: 0, bytes: 0 };
      return database.retention.effect(actor.organisationId, before(recordingDays));
    },

    async setRetention(
      actor: Actor,
      { recordingDays }: Retention,
      caller: Caller,
      version: string | null = null,
    ): Promise<Retention> {
      requireDeed(actor, 'record.rule');
      const at = now();
      const { organisationId, personId } = actor;
      await database.transaction(async (on) => {
        await on.organisations.takeTurn(organisationId);
        const was = await on.retention.days(organisationId);
        requireEdition(version, { recordingDays: was }, 'the rule');
        await on.retention.set(organisationId, recordingDays, personId, at);
        await on.audit.append({
          organisationId,
          at,
          actorId: personId,
          deed: 'record.retention-set',
          subjectKind: 'organisation',
          subjectId: organisationId,
          detail: { before: was, after: recordingDays },
          address: caller.address,
        });
      });
      return { recordingDays };
    },

    /** Removes what the rules say; called by the clock. */
    async applyRetention(): Promise<number> {
      let removed = 0;
      for (const { organisationId, days } of await database.retention.rules()) {
        for (;;) {
          const count = await database.transaction(async (on) => {
            const at = now();
            const done = await on.retention.remove(organisationId, before(days), AT_ONCE, at);
            if (done.length === 0) return 0;
            await on.audit.append({
              organisationId,
              at,
              actorId: null,
              deed: 'record.recordings-removed',
              subjectKind: 'organisation',
              subjectId: organisationId,
              detail: { days, attempts: done },
              address: null,
            });
            return done.length;
          });
          removed += count;
          if (count < AT_ONCE) break;
        }
      }
      return removed;
    },
  };
}
