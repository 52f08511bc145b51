import { createHash } from 'node:crypto';
import { endpointEdited, type Endpoint, type saveEndpointSchema } from '#shared/contracts/records.ts';
import type { z } from 'zod';
import type { Database, Repositories } from '../../data/database.ts';
import type { FullAttempt } from '../../data/repositories/records.repository.ts';
import { attemptStatement, signOffStatement, voidingStatement } from '../../reports/learning-statements.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { requireEdition } from '../versions.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import type { Secrets } from './secrets.ts';

/** A UUID (version 5 by layout) that is the same whenever it is made from the same words. */
export function stableUuid(...words: string[]): string {
  const bytes = createHash('sha1')
    .update(`sidewash statement ${words.join(' ')}`)
    .digest()
    .subarray(0, 16);
  bytes[6] = (bytes[6] & 0x0f) | 0x50;
  bytes[8] = (bytes[8] & 0x3f) | 0x80;
  const hex = bytes.toString('hex');
  return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join('-');
}

export interface StatementsSetup {
  database: Database;
  secrets: Secrets;
  address: () => string;
  now: () => Date;
}

/** Statements of attempts, signatures and corrections, and the queue that takes them to an endpoint. */
export function createStatements({ database, secrets, address, now }: StatementsSetup) {
  /** After a restoration the result is stated anew: a voided statement never comes back. */
  const idOf = (attemptId: string, restored: number): string =>
    restored === 0 ? stableUuid(attemptId) : stableUuid(attemptId, String(restored));

  const statementOf = (attempt: FullAttempt, restored: number): Record<string, unknown> =>
    attemptStatement(
      {
        id: attempt.id,
        statementId: idOf(attempt.id, restored),
        person: { id: attempt.personId, displayName: attempt.person },
        scenario: {
          slug: attempt.slug,
          title: attempt.title,
          summary: attempt.summary,
          revision: attempt.revision,
        },
        airframe: { slug: attempt.airframeSlug, revision: attempt.airframeRevision },
        modelVersion: attempt.modelVersion ?? '',
        completedAt: (attempt.completedAt ?? attempt.startedAt).toISOString(),
        durationS: attempt.durationS ?? 0,
        ended: attempt.ended ?? 'left',
        passed: attempt.passed !== null && attempt.passed !== 0,
        criteria: attempt.criteria.map(({ limit, ...criterion }) => ({ ...criterion, unit: limit.unit })),
      },
      address(),
    );

  const restorations = async (on: Repositories, attemptId: string): Promise<number> =>
    (await on.records.correctionsOf(attemptId)).filter(({ effect }) => effect === 'restored').length;

  const enqueue = (
    on: Repositories,
    organisationId: string,
    attemptId: string,
    statement: Record<string, unknown>,
    at: Date,
  ) => on.statements.enqueue({ id: String(statement['id']), organisationId, attemptId, statement }, at);

  const active = async (on: Repositories, organisationId: string): Promise<boolean> =>
    (await on.statements.endpoint(organisationId))?.active === true;

  const completed = async (on: Repositories, organisationId: string, attemptId: string, at: Date): Promise<boolean> => {
    const [attempt] = await on.records.fullByIds(organisationId, [attemptId]);
    if (attempt?.passed == null) return false;
    return enqueue(on, organisationId, attemptId, statementOf(attempt, await restorations(on, attemptId)), at);
  };

  const endpointOf = async (on: Repositories, organisationId: string): Promise<Endpoint> => {
    const [endpoint, counts] = await Promise.all([
      on.statements.endpoint(organisationId),
      on.statements.counts(organisationId),
    ]);
    return {
      address: endpoint?.address ?? '',
      userName: endpoint?.userName ?? '',
      active: endpoint?.active ?? false,
      hasSecret: endpoint !== null && endpoint.secret !== '',
      ...counts,
    };
  };

  return {
    statementOf,

    /** Within the transaction that completes an attempt. */
    async onCompleted(on: Repositories, organisationId: string, attemptId: string, at: Date): Promise<void> {
      if (await active(on, organisationId)) await completed(on, organisationId, attemptId, at);
    },

    /** Within the transaction of a signature. */
    async onSigned(
      on: Repositories,
      organisationId: string,
      signed: {
        entryId: string;
        attemptId: string;
        kind: 'sign-off' | 'counter-signature';
        verdict: 'met' | 'not-met';
        signer: { id: string; displayName: string };
      },
      at: Date,
    ): Promise<void> {
      if (!(await active(on, organisationId))) return;
      const statement = signOffStatement(
        {
          statementId: stableUuid(signed.entryId),
          signer: signed.signer,
          about: idOf(signed.attemptId, await restorations(on, signed.attemptId)),
          kind: signed.kind,
          met: signed.verdict === 'met',
          at: at.toISOString(),
        },
        address(),
      );
      await enqueue(on, organisationId, signed.attemptId, statement, at);
    },

    /** Within the transaction of a correction: setting aside voids the statement, restoring states it anew. */
    async onCorrected(
      on: Repositories,
      organisationId: string,
      attemptId: string,
      effect: 'note' | 'set-aside' | 'restored',
      at: Date,
    ): Promise<void> {
      if (effect === 'note') return;
      const restored = await restorations(on, attemptId);
      if (effect === 'restored') {
        if (await active(on, organisationId)) await completed(on, organisationId, attemptId, at);
        return;
      }
      const about = idOf(attemptId, restored);
      if (!(await on.statements.enqueued(about))) return;
      const statement = voidingStatement(stableUuid('void', about), about, at.toISOString(), address());
      await enqueue(on, organisationId, attemptId, statement, at);
    },

    async endpoint(actor: Actor): Promise<Endpoint> {
      requireDeed(actor, 'record.rule');
      return endpointOf(database, actor.organisationId);
    },

    async saveEndpoint(
      actor: Actor,
      body: z.output<typeof saveEndpointSchema>,
      caller: Caller,
      version: string | null = null,
    ): Promise<Endpoint> {
      requireDeed(actor, 'record.rule');
      const { organisationId, personId } = actor;
      const at = now();
      return database.transaction(async (on) => {
        await on.organisations.takeTurn(organisationId);
        requireEdition(version, endpointEdited(await endpointOf(on, organisationId)), 'the endpoint');
        const before = await on.statements.endpoint(organisationId);
        // A secret belongs to the address it was given for: another address must not receive it.
        const kept = before !== null && before.address === body.address ? before.secret : '';
        const secret = body.secret === undefined ? kept : body.secret === '' ? '' : secrets.seal(body.secret);
        const { address: to, userName, active: on_ } = body;
        await on.statements.saveEndpoint({ organisationId, address: to, userName, secret, active: on_ }, personId, at);
        await on.audit.append({
          organisationId,
          at,
          actorId: personId,
          deed: 'record.endpoint-set',
          subjectKind: 'organisation',
          subjectId: organisationId,
          detail: { address: to, userName, active: on_, secretChanged: body.secret !== undefined },
          address: caller.address,
        });
        return endpointOf(on, organisationId);
      });
    },

    /** Queues the results that were not queued before, and refused ones again. */
    async pushAll(actor: Actor, caller: Caller): Promise<{ queued: number }> {
      requireDeed(actor, 'record.rule');
      const { organisationId, personId } = actor;
      const at = now();
      let queued = await database.statements.retryRefused(organisationId, at);
      const ids = await database.records.attemptIds(organisationId, null);
      for (const id of ids) {
        queued += await database.transaction(async (on) => {
          // What is set aside stays untold.
          const entries = await on.records.correctionsOf(id);
          const last = entries.filter(({ effect }) => effect !== 'note').at(-1);
          if (last?.effect === 'set-aside') return 0;
          return (await completed(on, organisationId, id, at)) ? 1 : 0;
        });
      }
      await database.audit.append({
        organisationId,
        at,
        actorId: personId,
        deed: 'record.statements-pushed',
        subjectKind: 'organisation',
        subjectId: organisationId,
        detail: { queued },
        address: caller.address,
      });
      return { queued };
    },
  };
}
export type Statements = ReturnType<typeof createStatements>;
