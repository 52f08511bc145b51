import { randomUUID } from 'node:crypto';
import type { AttemptResult, CompleteAttemptBody } from '#shared/contracts/attempts.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type { AttemptDetailRecord, ResultRecord } from '../../data/repositories/attempts.repository.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import type { WorkerPool } from '../workers/worker-pool.ts';
import { rerunResultSchema, type RerunJob } from './result-of-run.ts';
import { flownInClass } from './store-chunk.ts';

export function attemptResult({
  verdict: _verdict,
  worst: _worst,
  strip: _strip,
  firstPedalS: _firstPedalS,
  ...result
}: ResultRecord): AttemptResult {
  return result;
}

export interface CloseRequest {
  organisationId: string;
  id: string;
  /** How many chunks there must be; null: those that are stored. */
  chunkCount: number | null;
  /** Events in force on each branch, when it was flown in a class. */
  branches?: RerunJob['branches'];
  /** Who asks; null for the server itself. */
  actorId: string | null;
  address: string | null;
}

interface CloseSetup {
  database: Database;
  reruns: WorkerPool;
  now: () => Date;
  /** What follows from a completion, within its transaction. */
  onCompleted: (on: Repositories, detail: AttemptDetailRecord, result: ResultRecord, at: Date) => Promise<void>;
}

/** Integrates a recording again in a worker and stores that as the result. Repeating it is no error. */
export function createCloseAttempt({ database, reruns, now, onCompleted }: CloseSetup) {
  return async (request: CloseRequest): Promise<AttemptResult> => {
    const { organisationId, id, chunkCount, branches, actorId, address } = request;
    const detail = await database.attempts.findDetail(organisationId, id);
    if (detail === null) throw notFound('attempt');
    if (detail.result !== null) return attemptResult(detail.result);
    const chunks = await database.chunks.all(id);
    const wanted = chunkCount ?? chunks.length;
    if (chunks.length < wanted) {
      const missing = Array.from({ length: wanted - chunks.length }, (_, i) => chunks.length + i);
      throw new ProblemError(
        'chunks-missing',
        `${missing.length} chunks have not arrived yet; send them and complete again.`,
        { missing },
      );
    }
    if (chunks.length > wanted) {
      throw new ProblemError(
        'conflict',
        `${chunks.length} chunks are stored, not ${wanted}; complete with that number.`,
      );
    }
    const job: RerunJob = {
      scenario: detail.scenario.document,
      airframe: detail.scenario.airframe.document,
      seed: detail.seed,
      drawn: detail.drawn,
      chunkKey: detail.chunkKey,
      chunks: chunks.map(({ hash, bytes }) => ({ hash, bytes: new Uint8Array(bytes) })),
      branches,
    };
    const computed = rerunResultSchema.parse(await reruns.run(job));
    const at = now();
    const result: ResultRecord = { ...computed, computedAt: at.toISOString() };
    return database.transaction(async (on) => {
      const locked = await on.attempts.lock(organisationId, id);
      if (locked === null) throw notFound('attempt');
      const before = await on.attempts.findResult(id);
      if (before !== null) return attemptResult(before);
      if ((await on.chunks.count(id)) !== chunks.length) {
        throw new ProblemError('conflict', 'A chunk arrived meanwhile; complete again.');
      }
      await on.attempts.insertResult(randomUUID(), id, true, result);
      await on.attempts.markComplete(id, at);
      await on.audit.append({
        organisationId,
        at,
        actorId,
        deed: 'attempt.completed',
        subjectKind: 'attempt',
        subjectId: id,
        detail: {
          passed: result.passed,
          ended: result.ended,
          statesAgree: result.statesAgree,
          modelVersion: result.modelVersion,
        },
        address,
      });
      await onCompleted(on, detail, result, at);
      return attemptResult(result);
    });
  };
}
export type CloseAttempt = ReturnType<typeof createCloseAttempt>;

/** Closes one's own attempt. */
export function createCompleteAttempt(setup: { database: Database; close: CloseAttempt }) {
  const { database, close } = setup;
  return async (actor: Actor, id: string, body: CompleteAttemptBody, caller: Caller): Promise<AttemptResult> => {
    requireDeed(actor, 'attempt.fly');
    const { organisationId, personId } = actor;
    const attempt = await database.attempts.find(organisationId, id);
    if (attempt === null || attempt.personId !== personId) throw notFound('attempt');
    if ((await database.classes.findAttempt(id)) !== null) throw flownInClass();
    const { chunkCount } = body;
    return close({ organisationId, id, chunkCount, actorId: personId, address: caller.address });
  };
}
