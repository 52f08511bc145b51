import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import type { ChunkReceipt } from '#shared/contracts/attempts.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type { ChunkRecord } from '../../data/repositories/chunks.repository.ts';
import { storedAirframe, storedScenario } from '../attempts/attempt-data.ts';
import {
  checkedChunk,
  refusedChunk,
  type ChunkEnd,
  type ChunkFacts,
  type ChunkUpload,
} from '../attempts/store-chunk.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { ClassAttempts } from './class-attempts.ts';
import type { ClassLogStore } from './class-log-store.ts';
import { ClassProblem } from './class-problem.ts';
import { createTurns } from './turns.ts';

/** Chunks that arrive within this time are stored in one transaction. */
const GATHER_MS = 15;
const MOST_AT_ONCE = 100;
const REMEMBERED = 5000;

interface Recording {
  attempt: { id: string; chunkKey: string; startedAt: Date };
  organisationId: string;
  classId: string;
  memberId: string;
  run: number;
  demonstration: boolean;
  facts: Omit<ChunkFacts, 'classBranches'>;
  /** Last chunk that is stored, or waits to be in the batch before. */
  last: ChunkEnd | null;
}

interface Waiting {
  chunk: ChunkRecord;
  resolve: (receipt: ChunkReceipt) => void;
  reject: (error: unknown) => void;
}

/**
 * Takes in the chunks of a class: three hundred a second at the most, so those of a moment share a transaction.
 * A chunk is acknowledged when it is stored. What this process remembers of a recording is only a guess that saves
 * questions: the database refuses a number twice, and then the recording is read afresh.
 */
export function createClassChunks(setup: {
  database: Database;
  log: ClassLogStore;
  attempts: ClassAttempts;
  now: () => Date;
}) {
  const { database, log, attempts, now } = setup;
  const recordings = new Map<string, Recording>();
  const inTurn = createTurns();
  const waiting: Waiting[] = [];
  let timer: NodeJS.Timeout | null = null;
  let writing: Promise<void> = Promise.resolve();

  async function read(classId: string, attemptId: string): Promise<Recording> {
    const record = await attempts.ofClass(classId, attemptId);
    const known = await log.known(classId);
    const { organisationId } = known.record;
    const detail = await database.attempts.findDetail(organisationId, attemptId);
    if (detail === null) throw notFound('attempt');
    if (detail.status === 'complete')
      throw new ProblemError('attempt-closed', 'This attempt is complete; no more is recorded.');
    const scenario = storedScenario(detail.scenario.document);
    const recording: Recording = {
      attempt: { id: attemptId, chunkKey: detail.chunkKey, startedAt: detail.startedAt },
      organisationId,
      classId,
      memberId: record.memberId,
      run: record.run,
      demonstration: record.demonstration,
      facts: {
        engineCount: storedAirframe(detail.scenario.airframe.document).engines.length,
        durationTicks: Math.round(scenario.duration_s * TICK_RATE_HZ),
        allow: { slow: true, rewind: true },
      },
      last: await database.chunks.last(attemptId),
    };
    if (recordings.size >= REMEMBERED) recordings.clear();
    recordings.set(attemptId, recording);
    return recording;
  }

  /** Whoever flew the demonstration last, and before: the end of a recording may arrive after the controls were handed on. */
  async function requireHand(recording: Recording, memberId: string): Promise<number> {
    const { state } = await log.known(recording.classId);
    const { run } = state;
    if (run === null || run.run !== recording.run) {
      if (!recording.demonstration && recording.memberId === memberId) return Number.MAX_SAFE_INTEGER;
      throw new ClassProblem('run-over', 'This run is over.');
    }
    const mine = recording.demonstration
      ? run.controls.slice(-2).some(({ member }) => member === memberId)
      : recording.memberId === memberId;
    if (!mine) throw new ClassProblem('not-your-controls', 'This attempt is another’s.');
    return run.branches.length;
  }

  async function write(batch: Waiting[]): Promise<void> {
    try {
      await database.transaction(async (on) => {
        const complete = await on.attempts.lockAll([...new Set(batch.map(({ chunk }) => chunk.attemptId))].sort());
        if (complete.length > 0) throw new ProblemError('attempt-closed', 'An attempt of this batch is complete.');
        await on.chunks.insertAll(batch.map(({ chunk }) => chunk));
        await on.attempts.markChunksReceived([...new Set(batch.map(({ chunk }) => chunk.attemptId))], now());
      });
      for (const { chunk, resolve } of batch) resolve({ acknowledged: chunk.index, stored: chunk.index + 1 });
    } catch (error) {
      if (batch.length === 1) {
        recordings.delete(batch[0].chunk.attemptId);
        batch[0].reject(error);
        return;
      }
      // One of them spoils it: each for itself.
      for (const one of batch) await write([one]);
    }
  }

  function flush(): void {
    timer = null;
    writing = writing.then(async () => {
      while (waiting.length > 0) await write(waiting.splice(0, MOST_AT_ONCE));
    });
  }

  async function alreadyStored(
    on: Repositories,
    id: string,
    upload: ChunkUpload,
    stored: number,
  ): Promise<ChunkReceipt> {
    const { index, hash, bytes } = upload;
    const before = await on.chunks.find(id, index);
    if (before === null || before.hash !== hash || !before.bytes.equals(bytes))
      throw refusedChunk(index, 'different-content', 'another chunk is stored under this number');
    return { acknowledged: index, stored };
  }

  /** Checks a chunk against what comes before it and lets it wait for the next transaction. */
  async function admit(
    classId: string,
    memberId: string,
    id: string,
    upload: ChunkUpload,
  ): Promise<{ receipt: Promise<ChunkReceipt> }> {
    let recording = recordings.get(id);
    if (recording === undefined || recording.classId !== classId) recording = await read(classId, id);
    const classBranches = await requireHand(recording, memberId);
    const expected = recording.last === null ? 0 : recording.last.index + 1;
    if (upload.index !== expected) {
      // Another process may have stored more, or what waits here may not have been stored.
      await settle();
      recording = await read(classId, id);
      const really = recording.last === null ? 0 : recording.last.index + 1;
      if (upload.index < really) return { receipt: alreadyStored(database, id, upload, really) };
      if (upload.index > really)
        throw refusedChunk(upload.index, 'predecessor-missing', `chunk ${really} comes first`, really);
    }
    const chunk = checkedChunk(recording.attempt, { ...recording.facts, classBranches }, recording.last, upload, now());
    recording.last = chunk;
    const receipt = new Promise<ChunkReceipt>((resolve, reject) => {
      waiting.push({ chunk, resolve, reject });
      timer ??= setTimeout(flush, GATHER_MS);
    });
    receipt.catch(() => recordings.delete(id));
    return { receipt };
  }

  async function store(classId: string, memberId: string, id: string, upload: ChunkUpload): Promise<ChunkReceipt> {
    const enter = () => inTurn(id, () => admit(classId, memberId, id, upload));
    try {
      return await (
        await enter()
      ).receipt;
    } catch (error) {
      if (error instanceof ProblemError || error instanceof ClassProblem) throw error;
      // The database refused it: read afresh and try once more.
      return (await enter()).receipt;
    }
  }

  async function settle(): Promise<void> {
    if (timer !== null) clearTimeout(timer);
    flush();
    await writing;
  }

  return {
    store,
    /** Engines of the aeroplane of an attempt that was recorded into here; null when it is not known. */
    recordingOf(
      attemptId: string,
    ): { memberId: string; engineCount: number; demonstration: boolean; run: number } | null {
      const known = recordings.get(attemptId);
      return known === undefined ? null : { ...known, engineCount: known.facts.engineCount };
    },
    prepare: async (classId: string, attemptId: string): Promise<void> => {
      if (!recordings.has(attemptId)) await read(classId, attemptId);
    },
    /** Resolves when everything that waits is stored. */
    settle,
  };
}
export type ClassChunks = ReturnType<typeof createClassChunks>;
