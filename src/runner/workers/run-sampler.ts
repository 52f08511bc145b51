/** Samples a run on the trace grid: every channel of the traces, and the pose that a ghost needs. */
import type { Run } from '#shared/scenario/run-types.ts';
import { CHANNELS, type ChannelId } from '../channels.ts';
import { GHOST_MEMBERS, type GhostMember, type ReferenceRun } from './reference-types.ts';

/** Ticks between samples: 30 samples a second. */
export const SAMPLE_TICKS = 4;
const CHANNEL_IDS = Object.keys(CHANNELS) as ChannelId[]; // keys of the table itself

export interface RunSampler {
  /** Keeps the present instant when it lies on the grid. The first call gives the heading that turns are counted from. */
  take(): void;
  /** What was kept. */
  finish(): ReferenceRun;
}

export function createRunSampler(run: Run, lastTick: number): RunSampler {
  const length = Math.floor(lastTick / SAMPLE_TICKS) + 1;
  const columns = Object.fromEntries(
    CHANNEL_IDS.map((id) => [id, new Float32Array(length)]),
  ) as ReferenceRun['columns']; // one entry for each id
  const ghost = Object.fromEntries(GHOST_MEMBERS.map((id) => [id, new Float64Array(length)])) as Record<
    GhostMember,
    Float64Array
  >; // one entry for each member
  const startPsi = run.now.psiRad;
  let samples = 0;
  return {
    take() {
      const at = run.tick / SAMPLE_TICKS;
      if (!Number.isInteger(at) || at >= length) return;
      for (const id of CHANNEL_IDS) columns[id][at] = CHANNELS[id].read(run.now, startPsi);
      for (const member of GHOST_MEMBERS) ghost[member][at] = run.now[member];
      samples = at + 1;
    },
    finish() {
      for (const id of CHANNEL_IDS) columns[id] = columns[id].slice(0, samples);
      return { samples, durationS: run.timeS, ended: run.ended, passed: run.passed(), columns, ghost };
    },
  };
}
