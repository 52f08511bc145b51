import { randomUUID } from 'node:crypto';
import type { CellAttempt, newCorrectionSchema, RecordCell } from '#shared/contracts/records.ts';
import type { z } from 'zod';
import type { Database, Repositories } from '../../data/database.ts';
import { may, requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import { setAsideNow, standingSignatures } from './entries.ts';
import { metOf, readerOf } from './matrix.ts';

/** Hook for what follows from a correction, within its transaction. */
export type OnCorrected = (
  on: Repositories,
  organisationId: string,
  attemptId: string,
  effect: 'note' | 'set-aside' | 'restored',
  at: Date,
) => Promise<void>;

/** One person's attempts on one scenario, and corrections of them. */
export function createCells(setup: { database: Database; now: () => Date; onCorrected: OnCorrected }) {
  const { database, now, onCorrected } = setup;

  const read = async (actor: Actor, personId: string, slug: string): Promise<RecordCell> => {
    const reader = readerOf(actor);
    if (reader !== null && reader !== personId) throw notFound('record');
    const { organisationId } = actor;
    const profile = await database.people.findProfile(organisationId, personId);
    const [scenario] = await database.playlists.choose(organisationId, [slug]);
    if (profile === null || scenario === undefined) throw notFound('record');
    const [attempts, signatures, corrections, due] = await Promise.all([
      database.records.full(organisationId, [personId], [scenario.scenarioId], {}),
      database.records.signatures([personId]),
      database.records.corrections([personId]),
      database.records.due([personId]),
    ]);
    const standing = standingSignatures(signatures);
    const aside = setAsideNow(corrections);
    return {
      person: { id: profile.person.id, displayName: profile.person.displayName },
      scenario: { slug, title: scenario.title },
      attempts: attempts.map((attempt): CellAttempt => ({
        id: attempt.id,
        number: attempt.number,
        at: (attempt.completedAt ?? attempt.startedAt).toISOString(),
        revision: attempt.revision,
        met: metOf(attempt, standing.get(attempt.id)),
        verdict: attempt.verdict,
        margin: attempt.worst?.margin ?? null,
        unit: attempt.worst?.unit ?? '',
        marginOf: attempt.worst?.title ?? '',
        firstPedalS: attempt.firstPedalS,
        criteria: attempt.criteria,
        signOffs: signatures
          .filter(({ attemptId }) => attemptId === attempt.id)
          .map(({ id, kind, verdict, note, signerId, signer, at }) => ({
            id,
            kind,
            verdict,
            note,
            signer: { id: signerId, displayName: signer },
            at: at.toISOString(),
          })),
        corrections: corrections
          .filter(({ attemptId }) => attemptId === attempt.id)
          .map(({ id, effect, reason, author, at }) => ({ id, effect, reason, author, at: at.toISOString() })),
        setAside: aside.has(attempt.id),
        assignment: attempt.assignment,
      })),
      dueAt: due.find(({ scenarioId }) => scenarioId === scenario.scenarioId)?.dueAt.toISOString() ?? null,
      mayCorrect: may(actor, 'record.correct') && personId !== actor.personId,
    };
  };

  return {
    cell: read,

    /** A correction is a new entry; what it corrects stays as it was. */
    async correct(
      actor: Actor,
      attemptId: string,
      body: z.output<typeof newCorrectionSchema>,
      caller: Caller,
    ): Promise<RecordCell> {
      requireDeed(actor, 'record.correct');
      const at = now();
      const { organisationId, personId } = actor;
      const place = await database.transaction(async (on) => {
        const attempt = await on.attempts.lock(organisationId, attemptId);
        if (attempt === null) throw notFound('attempt');
        if (attempt.personId === personId) throw new ProblemError('conflict', 'Nobody corrects a record of their own.');
        if (attempt.status !== 'complete') {
          throw new ProblemError('conflict', 'A record is corrected once the attempt is complete.');
        }
        const aside = setAsideNow(await on.records.correctionsOf(attemptId)).has(attemptId);
        if (body.effect === 'set-aside' && aside) throw new ProblemError('conflict', 'It is set aside already.');
        if (body.effect === 'restored' && !aside) throw new ProblemError('conflict', 'It is not set aside.');
        const entry = { id: randomUUID(), organisationId, attemptId, authorId: personId, ...body, at };
        await on.records.insertCorrection(entry);
        await onCorrected(on, organisationId, attemptId, body.effect, at);
        await on.audit.append({
          organisationId,
          at,
          actorId: personId,
          deed: 'record.corrected',
          subjectKind: 'attempt',
          subjectId: attemptId,
          detail: { entry: entry.id, effect: body.effect, reason: body.reason },
          address: caller.address,
        });
        const detail = await on.attempts.findDetail(organisationId, attemptId);
        return { personId: attempt.personId, slug: detail?.scenario.slug ?? '' };
      });
      return read(actor, place.personId, place.slug);
    },
  };
}
