import { MAX_CHUNK_BYTES, type ChunkReceipt } from '#shared/contracts/attempts.ts';
import type { ChunkRefusal } from '#shared/contracts/problem.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import { decodeChunk, verifyChain } from '#shared/scenario/recording.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type { AttemptRecord } from '../../data/repositories/attempts.repository.ts';
import type { ChunkRecord } from '../../data/repositories/chunks.repository.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import { storedAirframe, storedScenario } from './attempt-data.ts';

/** A flight may lie this far ahead of the server's clock: what network and a coarse clock account for. */
const CLOCK_TOLERANCE_S = 5;
/** Longest flight that is kept, rewinds included: as many times its scenario's duration. */
const LONGEST_FLOWN = 20;
const LONGEST_FLOWN_IN_CLASS = 200;
const REMEMBERED = 5000;

/** What chunks of an attempt are held against. */
export interface ChunkFacts {
  engineCount: number;
  durationTicks: number;
  allow: { slow: boolean; rewind: boolean };
  /** Flown in a class: the class's clock rules, and its branches may begin; how many there are now. */
  classBranches: number | null;
}

export interface ChunkUpload {
  index: number;
  hash: string;
  bytes: Buffer;
}

/** An attempt of a class is recorded and completed over the class's socket, where its clock and events are known. */
export const flownInClass = (): ProblemError =>
  new ProblemError('conflict', 'This attempt belongs to a class and is recorded there.');

/** Where a recording stands. */
export type ChunkEnd = Pick<ChunkRecord, 'index' | 'hash' | 'nextTick' | 'flownTicks'>;

export function refusedChunk(
  index: number,
  reason: ChunkRefusal['reason'],
  detail: string,
  expected: number | null = null,
): ProblemError {
  return new ProblemError('chunk-refused', `Chunk ${index} was refused: ${detail}.`, {
    chunk: { index, reason, expected },
  });
}

/**
 * The chunk as it is stored, when it is what follows `last`.
 *
 * @throws {ProblemError} chunk-refused
 */
export function checkedChunk(
  attempt: Pick<AttemptRecord, 'id' | 'chunkKey' | 'startedAt'>,
  facts: ChunkFacts,
  last: ChunkEnd | null,
  upload: ChunkUpload,
  at: Date,
): ChunkRecord {
  const { index, hash, bytes } = upload;
  const refuse = (reason: ChunkRefusal['reason'], detail: string): ProblemError => refusedChunk(index, reason, detail);
  if (!verifyChain({ bytes: new Uint8Array(bytes), hash }, last?.hash ?? attempt.chunkKey)) {
    throw refuse('chain-broken', 'its hash does not follow from its content and the chunk before it');
  }
  const decoded = decodeChunk(bytes, facts.engineCount);
  if (!decoded.ok) throw refuse('unreadable', decoded.reason);
  const { content } = decoded;
  if (content.index !== index) throw refuse('wrong-number', `it calls itself ${content.index}`);
  const startTick = last?.nextTick ?? 0;
  if (content.tickCount > 0 && content.startTick !== startTick) {
    throw refuse('chain-broken', `it starts at tick ${content.startTick}, the recording stands at ${startTick}`);
  }
  if (content.tickCount > 0 && content.startTick >= facts.durationTicks) {
    throw refuse('after-last', `the scenario ends at tick ${facts.durationTicks}`);
  }
  const flownTicks = (last?.flownTicks ?? 0) + content.tickCount;
  const longest = facts.classBranches === null ? LONGEST_FLOWN : LONGEST_FLOWN_IN_CLASS;
  if (flownTicks > longest * facts.durationTicks)
    throw refuse('too-long', 'more was flown than is kept of one attempt');
  const elapsedS = (at.getTime() - attempt.startedAt.getTime()) / 1000;
  if (flownTicks / TICK_RATE_HZ > elapsedS + CLOCK_TOLERANCE_S) {
    throw refuse(
      'ahead-of-clock',
      `${(flownTicks / TICK_RATE_HZ).toFixed(1)} s were flown in ${Math.max(0, elapsedS).toFixed(1)} s`,
    );
  }
  let nextTick = content.tickCount > 0 ? content.startTick + content.tickCount : startTick;
  for (const mark of content.marks) {
    if (mark.kind === 'rate' && !facts.allow.slow && mark.value !== 1)
      throw refuse('not-allowed', 'the scenario is flown without slow motion');
    if (mark.kind === 'branch' && (facts.classBranches === null || (mark.value ?? 0) >= facts.classBranches))
      throw refuse('not-allowed', 'no class has this branch');
    if (mark.kind !== 'rewind') continue;
    if (!facts.allow.rewind) throw refuse('not-allowed', 'the scenario is flown without rewinding');
    if ((mark.value ?? 0) > nextTick) throw refuse('unreadable', 'it rewinds to a tick that was not flown');
    nextTick = mark.value ?? 0;
  }
  const { tickCount } = content;
  return {
    attemptId: attempt.id,
    index,
    startTick: content.startTick,
    tickCount,
    nextTick,
    flownTicks,
    hash,
    bytes,
    receivedAt: at,
  };
}

/**
 * Takes in one chunk of a recording. A chunk sent twice is stored once; chunks come in order; a chunk that is corrupt,
 * forged, out of place or ahead of the clock is refused with its number, and the good ones stay.
 */
export function createStoreChunk({ database, now }: { database: Database; now: () => Date }) {
  const known = new Map<string, ChunkFacts>();

  async function factsOf(on: Repositories, organisationId: string, id: string): Promise<ChunkFacts> {
    const remembered = known.get(id);
    if (remembered) return remembered;
    const detail = await on.attempts.findDetail(organisationId, id);
    if (detail === null) throw notFound('attempt');
    if ((await on.classes.findAttempt(id)) !== null) throw flownInClass();
    const scenario = storedScenario(detail.scenario.document);
    const facts: ChunkFacts = {
      engineCount: storedAirframe(detail.scenario.airframe.document).engines.length,
      durationTicks: Math.round(scenario.duration_s * TICK_RATE_HZ),
      allow: { slow: scenario.allow.slow, rewind: scenario.allow.rewind },
      classBranches: null,
    };
    if (known.size >= REMEMBERED) known.clear();
    known.set(id, facts);
    return facts;
  }

  return async (actor: Actor, id: string, upload: ChunkUpload): Promise<ChunkReceipt> => {
    requireDeed(actor, 'attempt.fly');
    const { index, hash, bytes } = upload;
    if (bytes.length > MAX_CHUNK_BYTES)
      throw refusedChunk(index, 'too-large', `${bytes.length} bytes are more than ${MAX_CHUNK_BYTES}`);

    return database.transaction(async (on) => {
      const attempt: AttemptRecord | null = await on.attempts.lock(actor.organisationId, id);
      if (attempt === null || attempt.personId !== actor.personId) throw notFound('attempt');
      const last = await on.chunks.last(id);
      const expected = last === null ? 0 : last.index + 1;
      if (index < expected) {
        const stored = await on.chunks.find(id, index);
        if (stored === null || stored.hash !== hash || !stored.bytes.equals(bytes)) {
          throw refusedChunk(index, 'different-content', 'another chunk is stored under this number');
        }
        return { acknowledged: index, stored: expected };
      }
      if (attempt.status === 'complete')
        throw new ProblemError('attempt-closed', 'This attempt is complete; no more is recorded.');
      if (index > expected) throw refusedChunk(index, 'predecessor-missing', `chunk ${expected} comes first`, expected);
      const at = now();
      await on.chunks.insert(checkedChunk(attempt, await factsOf(on, actor.organisationId, id), last, upload, at));
      await on.attempts.markChunkReceived(id, at);
      return { acknowledged: index, stored: index + 1 };
    });
  };
}
