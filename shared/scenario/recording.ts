/**
 * Recording of one attempt: pilot input of every tick in numbered chunks of one second, each with the running hash of the
 * state and chained to the one before, and its integration again.
 */
import { hashBytesHex } from '../numerics/state-hash.ts';
import {
  channelCount,
  decodeBytes,
  encodeChunk,
  LARGEST_CHUNK_MARKS,
  LARGEST_CHUNK_TICKS,
  readSampleInto,
  type ChunkContent,
  type ClockMark,
  type DecodedChunk,
} from './chunk-codec.ts';
import { createRun } from './run.ts';
import type { ControlSample, Run, RunSnapshot, RunSpec } from './run-types.ts';

export interface RecordedChunk {
  index: number;
  startTick: number;
  tickCount: number;
  bytes: Uint8Array<ArrayBuffer>;
  /** Hash of the bytes, seeded by the hash of the chunk before (by the attempt's key for the first). */
  hash: string;
}

export interface Recorder {
  /** One tick of input: the sample that was held from `tick` to `tick + 1`. */
  add(sample: ControlSample, tick: number): void;
  mark(mark: ClockMark): void;
  /** The chunk that a full second of ticks has completed, else null. `stateHashHex` is that of the present state. */
  takeChunk(stateHashHex: string): RecordedChunk | null;
  /** Closes the present chunk however short it is; null when nothing is pending. Called before a rewind. */
  cut(stateHashHex: string): RecordedChunk | null;
  /** The last chunk; null when nothing is pending. */
  finish(stateHashHex: string): RecordedChunk | null;
}

export function createRecorder(spec: {
  attemptKeyHex: string;
  engineCount: number;
  /** Goes on with a recording of which chunks are stored: number, predecessor's hash and tick of the next. */
  from?: { index: number; hash: string; tick: number };
}): Recorder {
  const { engineCount } = spec;
  const channels = Array.from({ length: channelCount(engineCount) }, () => new Int16Array(LARGEST_CHUNK_TICKS));
  let marks: ClockMark[] = [];
  let count = 0;
  let startTick = 0;
  let nextTick = spec.from?.tick ?? 0;
  let index = spec.from?.index ?? 0;
  let previous = spec.from?.hash ?? spec.attemptKeyHex;

  function cut(stateHash: string): RecordedChunk | null {
    if (count === 0 && marks.length === 0) return null;
    const start = count > 0 ? startTick : nextTick;
    const bytes = encodeChunk({ index, startTick: start, tickCount: count, engineCount, stateHash, channels, marks });
    const hash = hashBytesHex(bytes, previous);
    const chunk: RecordedChunk = { index, startTick: start, tickCount: count, bytes, hash };
    previous = hash;
    index += 1;
    count = 0;
    marks = [];
    return chunk;
  }

  return {
    add(sample, tick) {
      if (count === 0) startTick = tick;
      channels[0][count] = sample.stick;
      channels[1][count] = sample.pedal;
      channels[2][count] = sample.pitch;
      channels[3][count] = sample.rudderTrim;
      for (let e = 0; e < engineCount; e++) {
        channels[4 + e][count] = sample.levers[e];
        channels[4 + engineCount + e][count] = sample.feather[e];
      }
      count += 1;
      nextTick = tick + 1;
    },
    mark(mark) {
      // A clock that is stopped and started without end would fill the recording: the oldest pair of the second goes.
      if (marks.length >= LARGEST_CHUNK_MARKS) marks.splice(0, 2);
      marks.push(mark.value === undefined ? { kind: mark.kind, tick: mark.tick } : { ...mark });
      if (mark.kind === 'rewind') nextTick = mark.value ?? 0;
    },
    takeChunk: (stateHash) => (count >= LARGEST_CHUNK_TICKS ? cut(stateHash) : null),
    cut,
    finish: cut,
  };
}

export type { ClockMark, ChunkContent, DecodedChunk } from './chunk-codec.ts';

/** The content of a chunk, or in words why its bytes are refused. */
export function decodeChunk(bytes: Uint8Array, engineCount: number): DecodedChunk {
  return decodeBytes(bytes, engineCount);
}

/** True when the chunk's hash follows from its bytes and the hash before it. */
export function verifyChain(chunk: Pick<RecordedChunk, 'bytes' | 'hash'>, previousHash: string): boolean {
  return hashBytesHex(chunk.bytes, previousHash) === chunk.hash;
}

export type RecordingErrorCode = 'unreadable' | 'wrong-number' | 'chain-broken' | 'gap' | 'engine-count';

/** A recording that cannot be integrated. `index` is the chunk's number. */
export class RecordingError extends Error {
  override readonly name = 'RecordingError';
  constructor(
    readonly code: RecordingErrorCode,
    readonly index: number,
    message: string,
  ) {
    super(message);
  }
}

/** The decoded chunks in order, checked against the chain. Throws `RecordingError`. */
export function openRecording(
  chunks: readonly Pick<RecordedChunk, 'bytes' | 'hash'>[],
  attemptKeyHex: string | null,
  engineCount: number,
): ChunkContent[] {
  let previous = attemptKeyHex;
  return chunks.map((chunk, i) => {
    const decoded = decodeBytes(chunk.bytes, engineCount);
    if (!decoded.ok) throw new RecordingError('unreadable', i, `chunk ${i}: ${decoded.reason}`);
    if (decoded.content.index !== i) {
      throw new RecordingError('wrong-number', i, `chunk ${i} calls itself ${decoded.content.index}`);
    }
    if (previous !== null && !verifyChain(chunk, previous)) {
      throw new RecordingError('chain-broken', i, `chunk ${i} does not follow from the chunk before it`);
    }
    previous = chunk.hash;
    return decoded.content;
  });
}

/** Snapshots kept along the branch that is being flown, so that a rewind needs at most a second of integration. */
const SNAPSHOT_TICKS = 120;

/**
 * Integrates decoded chunks in order, rewinds included, and calls back after each tick.
 * The run may already have ended before the last tick; what follows is then ignored, as it was in flight.
 */
export class RecordingPlayer {
  private readonly lineage: { content: ChunkContent; at: number }[] = [];
  private readonly snapshots: RunSnapshot[] = [];
  private readonly sample: ControlSample;

  constructor(
    readonly run: Run,
    private readonly onTick?: (run: Run) => void,
  ) {
    this.sample = run.neutralSample();
    this.snapshots.push(run.save());
  }

  /** Ticks of the branch now flown, in order: the inputs that lead to the present state. */
  get branch(): readonly { content: ChunkContent; at: number }[] {
    return this.lineage;
  }

  /** Plays one chunk. Returns whether the state hash after it is the one recorded; null when it holds no ticks. */
  play(content: ChunkContent): boolean | null {
    if (content.tickCount > 0) {
      if (content.startTick !== this.lineage.length) {
        throw new RecordingError(
          'gap',
          content.index,
          `chunk ${content.index} starts at tick ${content.startTick}; the recording stands at ${this.lineage.length}`,
        );
      }
      for (let i = 0; i < content.tickCount; i++) {
        this.lineage.push({ content, at: i });
        this.flyTick(content, i, true);
      }
    }
    const agrees = content.tickCount > 0 ? this.run.stateHash() === content.stateHash : null;
    for (const mark of content.marks) {
      if (mark.kind === 'rewind') this.rewind(mark.value ?? 0, content.index);
      else if (mark.kind === 'branch') this.branchOff(mark.value ?? 0, content.index);
    }
    return agrees;
  }

  private flyTick(content: ChunkContent, i: number, keep: boolean): void {
    if (this.run.ended !== null) return;
    readSampleInto(this.sample, content, i);
    this.run.step(this.sample);
    if (keep && this.run.tick % SNAPSHOT_TICKS === 0 && this.run.ended === null) this.snapshots.push(this.run.save());
    this.onTick?.(this.run);
  }

  private branchOff(branch: number, index: number): void {
    const injected = this.run.spec.branches?.[branch];
    if (!injected) throw new RecordingError('gap', index, `chunk ${index} goes on with the unknown branch ${branch}`);
    this.run.reschedule(injected);
  }

  private rewind(tick: number, index: number): void {
    if (tick > this.lineage.length)
      throw new RecordingError('gap', index, `chunk ${index} rewinds to tick ${tick}, which was not flown`);
    while (this.snapshots.length > 1 && this.snapshots[this.snapshots.length - 1].tick > tick) this.snapshots.pop();
    const from = this.snapshots[this.snapshots.length - 1];
    this.run.restore(from);
    this.lineage.length = tick;
    for (let t = from.tick; t < tick; t++) this.flyTick(this.lineage[t].content, this.lineage[t].at, false);
  }
}

export interface Rerun {
  /** Ended, or standing at the last recorded tick. */
  run: Run;
  stateHashesAgree: boolean;
  /** Last tick of the first chunk whose state hash differs; null when all agree. */
  firstDifferenceTick: number | null;
}

/**
 * Integrates a recording again from its inputs: the result that counts.
 *
 * @param spec    Scenario, airframe, seed and drawn values of the attempt; with `attemptKeyHex` the chain is checked too.
 * @param chunks  All chunks in order.
 * @returns       The run and whether every recorded state hash was met.
 * @throws {RecordingError} when a chunk cannot be read, does not follow, or leaves a gap.
 */
export function rerun(
  spec: RunSpec & { attemptKeyHex?: string },
  chunks: readonly Pick<RecordedChunk, 'bytes' | 'hash'>[],
): Rerun {
  const run = createRun(spec);
  const player = new RecordingPlayer(run);
  let firstDifferenceTick: number | null = null;
  for (const content of openRecording(chunks, spec.attemptKeyHex ?? null, run.plant.engineCount)) {
    if (player.play(content) === false) firstDifferenceTick ??= content.startTick + content.tickCount;
  }
  return { run, stateHashesAgree: firstDifferenceTick === null, firstDifferenceTick };
}
