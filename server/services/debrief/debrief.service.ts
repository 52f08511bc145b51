import { randomUUID } from 'node:crypto';
import type { Debrief, newRemarkSchema, newSignOffSchema, ReceivedRemark } from '#shared/contracts/debrief.ts';
import type { Page } from '#shared/contracts/paging.ts';
import type { z } from 'zod';
import type { Database, Repositories } from '../../data/database.ts';
import type { AttemptDetailRecord } from '../../data/repositories/attempts.repository.ts';
import type { PageRequest } from '../../data/repositories/paging.ts';
import type { SignOffRecord } from '../../data/repositories/debrief.repository.ts';
import { may, requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';

type NewRemark = z.output<typeof newRemarkSchema>;
type NewSignOff = z.output<typeof newSignOffSchema>;

/** The entry of a kind that stands: the last one. */
export function standingEntry(entries: readonly SignOffRecord[], kind: SignOffRecord['kind']): SignOffRecord | null {
  return entries.filter((entry) => entry.kind === kind).at(-1) ?? null;
}

export interface DebriefSetup {
  database: Database;
  now: () => Date;
  /** What follows from a signature, within its transaction. */
  onSigned: (
    on: Repositories,
    organisationId: string,
    signed: Pick<SignOffRecord, 'kind' | 'verdict' | 'signer'> & { entryId: string; attemptId: string },
    at: Date,
  ) => Promise<void>;
}

export function createDebriefService({ database, now, onSigned }: DebriefSetup) {
  const readable = async (actor: Actor, id: string): Promise<AttemptDetailRecord> => {
    requireDeed(actor, 'attempt.read-own');
    const detail = await database.attempts.findDetail(actor.organisationId, id);
    const allowed = detail !== null && (detail.personId === actor.personId || may(actor, 'attempt.read-others'));
    if (!allowed) throw notFound('attempt');
    return detail;
  };

  /** Why this actor cannot sign this attempt now; null when nothing is in the way. */
  const hindrance = (
    actor: Actor,
    detail: AttemptDetailRecord,
    entries: readonly SignOffRecord[],
    kind: SignOffRecord['kind'],
  ): string | null => {
    if (!may(actor, 'attempt.sign-off')) return 'Only an instructor signs.';
    if (detail.personId === actor.personId) return 'Nobody signs an attempt of their own.';
    if (detail.result === null) return 'An attempt is signed once it is complete.';
    const first = standingEntry(entries, 'sign-off');
    if (kind === 'sign-off') return null;
    if (first === null) return 'A counter-signature needs a sign-off first.';
    if (first.signer.id === actor.personId) return 'A counter-signature needs a second instructor.';
    return null;
  };

  const read = async (actor: Actor, id: string): Promise<Debrief> => {
    const detail = await readable(actor, id);
    const [remarks, entries] = await Promise.all([
      database.debrief.remarks(actor.organisationId, id),
      database.debrief.signOffs(actor.organisationId, id),
    ]);
    const why = hindrance(actor, detail, entries, 'sign-off');
    const standing = new Set([standingEntry(entries, 'sign-off')?.id, standingEntry(entries, 'counter-signature')?.id]);
    return {
      remarks: remarks.map((remark) => ({
        id: remark.id,
        tick: remark.tick,
        text: remark.withdrawnAt === null ? remark.text : '',
        author: remark.author,
        at: remark.createdAt.toISOString(),
        withdrawnAt: remark.withdrawnAt?.toISOString() ?? null,
        mayWithdraw: remark.withdrawnAt === null && remark.author.id === actor.personId,
      })),
      signOffs: entries.map((entry) => ({
        id: entry.id,
        kind: entry.kind,
        verdict: entry.verdict,
        note: entry.note,
        signer: entry.signer,
        at: entry.createdAt.toISOString(),
        standing: standing.has(entry.id),
      })),
      mayRemark: may(actor, 'attempt.remark'),
      maySignOff: why === null,
      mayCounterSign: hindrance(actor, detail, entries, 'counter-signature') === null,
      why: why ?? '',
    };
  };

  return {
    read,

    async received(actor: Actor, page: PageRequest): Promise<Page<ReceivedRemark>> {
      requireDeed(actor, 'attempt.read-own');
      const rows = await database.debrief.received(actor.organisationId, actor.personId, page);
      return { ...rows, page: page.page, pageSize: page.pageSize };
    },

    async remark(actor: Actor, id: string, { tick, text }: NewRemark): Promise<Debrief> {
      requireDeed(actor, 'attempt.remark');
      const detail = await readable(actor, id);
      const lastTick = detail.result === null ? null : Math.round(detail.result.durationS * 120);
      if (lastTick === null) throw new ProblemError('conflict', 'Remarks are written once the attempt is complete.');
      if (tick > lastTick) {
        throw new ProblemError('validation', `The attempt lasts ${detail.result?.durationS.toFixed(1)} s.`, {
          errors: [
            {
              field: '/tick',
              rule: 'within-attempt',
              message: `tick ${tick} lies after the last, ${lastTick}`,
              remedy: 'Pin the remark to a moment of the attempt.',
            },
          ],
        });
      }
      await database.debrief.insertRemark({
        id: randomUUID(),
        organisationId: actor.organisationId,
        attemptId: id,
        authorId: actor.personId,
        tick,
        text,
        createdAt: now(),
      });
      return read(actor, id);
    },

    async withdraw(actor: Actor, id: string, remarkId: string): Promise<Debrief> {
      requireDeed(actor, 'attempt.remark');
      await readable(actor, id);
      const known = await database.debrief.remarks(actor.organisationId, id);
      if (!known.some((remark) => remark.id === remarkId)) throw notFound('remark');
      if (!(await database.debrief.withdrawRemark(actor.organisationId, remarkId, actor.personId, now()))) {
        throw new ProblemError('forbidden', 'A remark is withdrawn by its author, once.');
      }
      return read(actor, id);
    },

    async sign(actor: Actor, id: string, body: NewSignOff, caller: Caller): Promise<Debrief> {
      requireDeed(actor, 'attempt.sign-off');
      const detail = await readable(actor, id);
      await database.transaction(async (on) => {
        // The attempt's row serialises two instructors who sign at once.
        await on.attempts.lock(actor.organisationId, id);
        const entries = await on.debrief.signOffs(actor.organisationId, id);
        const why = hindrance(actor, detail, entries, body.kind);
        if (why !== null) throw new ProblemError('conflict', why);
        const computed = detail.result?.passed ? 'met' : 'not-met';
        const corrects = standingEntry(entries, body.kind) !== null;
        if (body.note.length < 3 && (body.verdict !== computed || corrects)) {
          throw new ProblemError('validation', 'A note is needed.', {
            errors: [
              {
                field: '/note',
                rule: 'reason-needed',
                message: corrects ? 'this corrects an earlier signature' : `the computed result is "${computed}"`,
                remedy: 'Say why in a few words.',
              },
            ],
          });
        }
        const entryId = randomUUID();
        const at = now();
        await on.debrief.insertSignOff({
          id: entryId,
          organisationId: actor.organisationId,
          attemptId: id,
          signerId: actor.personId,
          kind: body.kind,
          verdict: body.verdict,
          note: body.note,
          createdAt: at,
        });
        const profile = await on.people.findProfile(actor.organisationId, actor.personId);
        const signer = { id: actor.personId, displayName: profile?.person.displayName ?? '' };
        const { kind, verdict } = body;
        await onSigned(on, actor.organisationId, { entryId, attemptId: id, kind, verdict, signer }, at);
        await on.audit.append({
          organisationId: actor.organisationId,
          at,
          actorId: actor.personId,
          deed: body.kind === 'sign-off' ? 'attempt.signed-off' : 'attempt.counter-signed',
          subjectKind: 'attempt',
          subjectId: id,
          detail: { entry: entryId, verdict: body.verdict, corrects },
          address: caller.address,
        });
      });
      return read(actor, id);
    },
  };
}
export type DebriefService = ReturnType<typeof createDebriefService>;
