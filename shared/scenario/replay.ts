/**
 * A recorded attempt to move about in: integrated once from its inputs, then any tick from the keyframe before it.
 * After rewinds it shows the branch that counted: the last one.
 */
import type { Observation } from '../model/plant-types.ts';
import { readSampleInto } from './chunk-codec.ts';
import { openRecording, RecordingPlayer, type RecordedChunk } from './recording.ts';
import { createRun } from './run.ts';
import type { FiredEvent, Run, RunSnapshot, RunSpec } from './run-types.ts';

export interface Replay {
  readonly durationTicks: number;
  /** Stands at the tick last sought. The same object each time. */
  readonly run: Run;
  readonly observation: Observation;
  /** Every event of the whole branch, whatever the present tick. */
  readonly fired: readonly FiredEvent[];
  /** Where the flight went back and on from an earlier tick, in the order of the deeds. */
  readonly rewinds: readonly { fromTick: number; toTick: number }[];
  /** Whether every recorded state hash was met while integrating. */
  readonly agrees: boolean;
  readonly firstDifferenceTick: number | null;
  /** Moves to a tick, clamped to the recording. Forward by integration, elsewhere from a keyframe. */
  seek(tick: number): void;
}

/** Ticks between keyframes: half a second of integration at the most, some tens of kilobytes a minute. */
const KEYFRAME_TICKS = 60;

/**
 * @param spec    Scenario, airframe, seed, drawn values; with `attemptKeyHex` the chain of chunks is checked.
 * @param chunks  All chunks in order.
 * @throws {RecordingError} when a chunk cannot be read, does not follow, or leaves a gap.
 */
export function createReplay(
  spec: RunSpec & { attemptKeyHex?: string },
  chunks: readonly Pick<RecordedChunk, 'bytes' | 'hash'>[],
): Replay {
  const run = createRun(spec);
  const contents = openRecording(chunks, spec.attemptKeyHex ?? null, run.plant.engineCount);
  const keyframes: RunSnapshot[] = [run.save()];
  let firstDifferenceTick: number | null = null;
  const player = new RecordingPlayer(run, (now) => {
    while (keyframes.length > 1 && keyframes[keyframes.length - 1].tick >= now.tick) keyframes.pop();
    if (now.tick % KEYFRAME_TICKS === 0) keyframes.push(now.save());
  });
  for (const content of contents) {
    if (player.play(content) === false) firstDifferenceTick ??= content.startTick + content.tickCount;
  }
  const branch = player.branch;
  const last = run.tick;
  const fired = run.fired.map((event) => ({ ...event }));
  const rewinds = contents
    .flatMap((content) => content.marks)
    .flatMap(({ kind, tick, value }) => (kind === 'rewind' ? [{ fromTick: tick, toTick: value ?? 0 }] : []));
  const sample = run.neutralSample();
  // Rewinds may have left keyframes of abandoned branches behind the present end.
  while (keyframes.length > 1 && keyframes[keyframes.length - 1].tick > last) keyframes.pop();

  return {
    durationTicks: last,
    run,
    get observation() {
      return run.now;
    },
    fired,
    rewinds,
    agrees: firstDifferenceTick === null,
    firstDifferenceTick,
    seek(tick) {
      const target = Math.min(last, Math.max(0, Math.round(tick)));
      const ahead = target - run.tick;
      if (ahead < 0 || ahead > KEYFRAME_TICKS)
        run.restore(keyframes[Math.min(keyframes.length - 1, Math.floor(target / KEYFRAME_TICKS))]);
      while (run.tick < target) {
        const { content, at } = branch[run.tick];
        const before = run.tick;
        readSampleInto(sample, content, at);
        run.step(sample);
        if (run.tick === before) return;
      }
    },
  };
}
