/** Another flight of the same scenario, laid over this one with their events at the same instant. */
import type { Replay } from '#shared/scenario/replay.ts';
import { GRID_HZ } from '../../components/charts/trace-grid.ts';
import { CHANNELS, type ChannelId } from '../../runner/channels.ts';
import { GHOST_MEMBERS, type ReferenceRun } from '../../runner/workers/reference-types.ts';
import { SAMPLE_TICKS, createRunSampler } from '../../runner/workers/run-sampler.ts';

/** A recorded flight on the trace grid. Leaves the replay at its end. */
export function sampleReplay(replay: Replay): ReferenceRun {
  replay.seek(0);
  const sampler = createRunSampler(replay.run, replay.durationTicks);
  for (let tick = 0; tick <= replay.durationTicks; tick += SAMPLE_TICKS) {
    replay.seek(tick);
    sampler.take();
  }
  return sampler.finish();
}

function shift<T extends Float32Array | Float64Array>(column: T, by: number, blank: T): T {
  for (let i = 0; i < blank.length; i += 1) {
    const from = i - by;
    blank[i] = from >= 0 && from < column.length ? column[from] : Number.NaN;
  }
  return blank;
}

/**
 * The run moved along the time axis, later when positive, to the nearest sample.
 * What then lies before its start is not a number.
 */
export function shiftRun(run: ReferenceRun, byS: number): ReferenceRun {
  const by = Math.round(byS * GRID_HZ);
  if (by === 0) return run;
  const samples = Math.max(0, run.samples + by);
  const columns = { ...run.columns };
  for (const id of Object.keys(CHANNELS) as ChannelId[]) {
    // keys of the table itself
    columns[id] = shift(run.columns[id], by, new Float32Array(samples));
  }
  const ghost = { ...run.ghost };
  for (const member of GHOST_MEMBERS) ghost[member] = shift(run.ghost[member], by, new Float64Array(samples));
  return { ...run, samples, durationS: Math.max(0, run.durationS + by / GRID_HZ), columns, ghost };
}
