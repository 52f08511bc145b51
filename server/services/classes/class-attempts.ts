import { randomBytes, randomUUID } from 'node:crypto';
import { CATCH_UP_CHUNKS, type AttemptHold, type CaughtUp } from '#shared/contracts/class-socket.ts';
import type { AttemptResult } from '#shared/contracts/attempts.ts';
import { branchesOf, memberOf, runsOf, type ClassRun, type ClassState } from '#shared/scenario/class-state.ts';
import { MODEL_VERSION, type DrawnValues } from '#shared/scenario/run-types.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type { ClassAttemptRecord } from '../../data/repositories/classes.repository.ts';
import type { ScenarioRevisionRecord } from '../../data/repositories/scenarios.repository.ts';
import type { CloseAttempt } from '../attempts/complete-attempt.ts';
import { notFound } from '../problem-error.ts';
import type { ClassLogStore, KnownClass } from './class-log-store.ts';
import { ClassProblem } from './class-problem.ts';
import type { ClassScenarios } from './class-scenarios.ts';

const CHUNK_KEY_BYTES = 8;
/** An attempt of a run that is over is completed with what is stored after so long a silence. */
const LEFT_BEHIND_MS = 20_000;
/** So many of them at a time: each is integrated again. */
const MOST_LEFT_BEHIND = 50;

export interface NewClassAttempt {
  id: string;
  known: KnownClass;
  memberId: string;
  run: number;
  seed: number;
  drawn: DrawnValues;
  revision: ScenarioRevisionRecord;
  startMs: number;
  demonstration: boolean;
}

export interface ClassAttemptsSetup {
  database: Database;
  log: ClassLogStore;
  scenarios: ClassScenarios;
  close: CloseAttempt;
  now: () => Date;
}

/** Attempts that are flown in classes: every run is one in the records, a guest's as the class's own. */
export function createClassAttempts({ database, log, scenarios, close, now }: ClassAttemptsSetup) {
  async function insert(on: Repositories, attempt: NewClassAttempt): Promise<void> {
    const { id, known, memberId, run, seed, drawn, revision, startMs, demonstration } = attempt;
    const { organisationId } = known.record;
    const member = await on.classes.findMember(known.record.id, memberId);
    if (member === null) throw notFound('member');
    const { personId } = member;
    if (personId !== null) await on.people.lock(organisationId, personId);
    await on.attempts.insert({
      id,
      organisationId,
      personId: personId ?? memberId,
      guest: personId === null,
      scenarioId: revision.scenarioId,
      scenarioRevisionId: revision.id,
      number: personId === null ? run : await on.attempts.nextNumber(personId, revision.scenarioId),
      startKey: null,
      seed,
      drawn,
      chunkKey: randomBytes(CHUNK_KEY_BYTES).toString('hex'),
      modelVersion: MODEL_VERSION,
      startedAt: new Date(startMs),
    });
    await on.classes.insertAttempt({ attemptId: id, classId: known.record.id, run, memberId, demonstration });
  }

  async function holdOf(on: Repositories, organisationId: string, attemptId: string): Promise<AttemptHold> {
    const attempt = await on.attempts.find(organisationId, attemptId);
    if (attempt === null) throw notFound('attempt');
    const last = await on.chunks.last(attemptId);
    return {
      attemptId,
      chunkKey: attempt.chunkKey,
      nextIndex: last === null ? 0 : last.index + 1,
      lastHash: last?.hash ?? attempt.chunkKey,
      nextTick: last?.nextTick ?? 0,
    };
  }

  function runNow(state: ClassState, number: number): ClassRun {
    if (state.run === null || state.run.run !== number) throw new ClassProblem('run-over', 'This run is over.');
    return state.run;
  }

  /** The class's attempt, when it belongs to this class. */
  async function ofClass(classId: string, attemptId: string): Promise<ClassAttemptRecord> {
    const record = await database.classes.findAttempt(attemptId);
    if (record === null || record.classId !== classId) throw notFound('attempt');
    return record;
  }

  async function finish(
    record: ClassAttemptRecord,
    organisationId: string,
    chunkCount: number | null,
    actorId: string | null,
  ) {
    const run = runsOf(await database.classes.entries(record.classId))[record.run - 1];
    return close({
      organisationId,
      id: record.attemptId,
      chunkCount,
      branches: branchesOf(run),
      actorId,
      address: null,
    });
  }

  return {
    insert,
    ofClass,

    /** The attempt that a member records into: their own of this run, or the demonstration's while they have its controls. */
    async take(classId: string, memberId: string, runNumber: number): Promise<AttemptHold> {
      const known = await log.read(classId);
      const { organisationId } = known.record;
      const run = runNow(known.state, runNumber);
      if (run.mode === 'demonstration') {
        if (run.controls.at(-1)?.member !== memberId || run.attempt === null)
          throw new ClassProblem('not-your-controls', 'Another flies the demonstration.');
        return holdOf(database, organisationId, run.attempt);
      }
      const before = await database.classes.attemptOf(classId, runNumber, memberId);
      if (before !== null) return holdOf(database, organisationId, before.attemptId);
      if (run.overAt !== null) throw new ClassProblem('run-over', 'This run is over.');
      const revision = await scenarios.revision(organisationId, known.state.playlist[run.index]);
      const { seed, drawn, startMs } = run;
      return database.transaction(async (on) => {
        // Two browsers of one member: the person's or the member's own row decides who is first.
        const member = await on.classes.lockMember(classId, memberId);
        if (member === null) throw notFound('member');
        const meanwhile = await on.classes.attemptOf(classId, runNumber, memberId);
        const id = meanwhile?.attemptId ?? randomUUID();
        if (meanwhile === null)
          await insert(on, {
            id,
            known,
            memberId,
            run: runNumber,
            seed,
            drawn,
            revision,
            startMs,
            demonstration: false,
          });
        return holdOf(on, organisationId, id);
      });
    },

    async chunksFrom(classId: string, attemptId: string, from: number): Promise<Omit<CaughtUp, 'frames'>> {
      await ofClass(classId, attemptId);
      const { record } = await log.known(classId);
      const attempt = await database.attempts.find(record.organisationId, attemptId);
      if (attempt === null) throw notFound('attempt');
      const chunks = await database.chunks.from(attemptId, from, CATCH_UP_CHUNKS + 1);
      return {
        chunkKey: attempt.chunkKey,
        chunks: chunks.slice(0, CATCH_UP_CHUNKS).map(({ index, startTick, tickCount, hash, bytes }) => ({
          index,
          startTick,
          tickCount,
          hash,
          bytes: bytes.toString('base64'),
        })),
        more: chunks.length > CATCH_UP_CHUNKS,
      };
    },

    /** Completes an attempt once its run is over: the server integrates it again, with the class's events. */
    async complete(classId: string, memberId: string, attemptId: string, chunkCount: number): Promise<AttemptResult> {
      const record = await ofClass(classId, attemptId);
      const { state, record: liveClass } = await log.read(classId);
      const flew =
        record.memberId === memberId || (record.demonstration && memberOf(state, memberId)?.role === 'instructor');
      if (!flew && !record.demonstration) throw notFound('attempt');
      if (!flew) throw new ClassProblem('not-your-controls', 'The instructor completes the demonstration.');
      const run = state.run;
      if (run !== null && run.run === record.run && run.overAt === null)
        throw new ClassProblem('run-in-progress', 'The run is still in progress; the class may go back.');
      const member = await database.classes.findMember(classId, memberId);
      return finish(record, liveClass.organisationId, chunkCount, member?.personId ?? null);
    },

    /** Completes what browsers left behind in runs that are over. Returns how many. */
    async completeLeftBehind(): Promise<number> {
      let done = 0;
      for (const record of await database.classes.silentAttempts(new Date(now().getTime() - LEFT_BEHIND_MS))) {
        const { state, record: liveClass } = await log.read(record.classId);
        const over = state.run === null || state.run.run !== record.run || state.run.overAt !== null;
        if (!over || done >= MOST_LEFT_BEHIND) continue;
        await finish(record, liveClass.organisationId, null, null);
        done += 1;
      }
      return done;
    },
  };
}
export type ClassAttempts = ReturnType<typeof createClassAttempts>;
