/** One pass through a replay: traces on the grid, reaction marks, and the balance of every whole second for the film. */
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import type { Observation, WantedValues } from '#shared/model/plant-types.ts';
import type { Replay } from '#shared/scenario/replay.ts';
import { GRID_TICKS, type TraceColumn, emptyColumn } from '../../components/charts/trace-grid.ts';
import { type BalanceNow, type DeadSide, createVerdictTracker } from '../../components/instruments/balance-verdict.ts';
import { CHANNELS, type ChannelId } from '../../runner/channels.ts';
import { type ReactionMarks, createReactionTracker } from '../../runner/reaction-marks.ts';
import { zeroEvent } from '../fly/flight-log.ts';
import type { FilmFrame } from './film.ts';

export interface ReplaySurvey {
  columns: TraceColumn[];
  marks: ReactionMarks;
  /** Run time of the zero of the axis. */
  zeroS: number;
  hasEvent: boolean;
  /** Dead side at the end, for limits and words. */
  deadSide: DeadSide;
  /** The way flown, ten places a second, for the ribbon. */
  track: { ticks: number[]; northM: number[]; eastM: number[]; heightAboveRunwayM: number[] };
  /** One frame a second, counted from the zero, both ways. */
  film: ReadonlyMap<number, FilmFrame>;
}

/** Ticks between places of the track: ten a second. */
const TRACK_TICKS = 12;

export const balanceOf = (now: Observation): BalanceNow => ({
  timeS: now.timeS,
  betaRad: now.betaRad,
  ballWidths: now.ballWidths,
  pedal: now.pedal,
  rudderRad: now.rudderRad,
  rudderMaxRad: now.rudderMaxRad,
  rudderAvailableRad: now.rudderAvailableRad,
  phiRad: now.phiRad,
});

export const blankWanted = (): WantedValues => ({
  found: false,
  betaRad: 0,
  phiRad: 0,
  pedal: 0,
  stick: 0,
  aileronRad: 0,
  rudderRad: 0,
  ballWidths: 0,
});

/** Key of a film frame: whole seconds from the zero. */
export const filmKey = (timeS: number, zeroS: number): number => Math.round(timeS - zeroS);

export function surveyReplay(replay: Replay, channels: readonly ChannelId[]): ReplaySurvey {
  const durationS = replay.durationTicks / TICK_RATE_HZ;
  const columns = channels.map(() => emptyColumn(durationS));
  const tracker = createReactionTracker();
  const verdicts = createVerdictTracker();
  const wanted = blankWanted();
  const film = new Map<number, FilmFrame>();
  const track: ReplaySurvey['track'] = { ticks: [], northM: [], eastM: [], heightAboveRunwayM: [] };
  replay.seek(0);
  const startPsi = replay.run.now.psiRad;
  let zeroTick: number | null = null;
  const pending: FilmFrame[] = [];
  for (let tick = 0; tick <= replay.durationTicks; tick += 1) {
    replay.seek(tick);
    const { run } = replay;
    if (zeroTick === null) {
      const first = zeroEvent(run.fired);
      if (first) {
        zeroTick = first.tick;
        tracker.begin(run.now, first.tick);
      }
    } else tracker.see(run.now, run.deadSide);
    if (tick % TRACK_TICKS === 0) {
      track.ticks.push(tick);
      track.northM.push(run.now.northM);
      track.eastM.push(run.now.eastM);
      track.heightAboveRunwayM.push(run.now.heightAboveRunwayM);
    }
    if (tick % GRID_TICKS !== 0) continue;
    channels.forEach((id, i) => {
      const value = CHANNELS[id].read(run.now, startPsi);
      columns[i][tick / GRID_TICKS] = Number.isFinite(value) ? value : null;
    });
    run.wantedInto(wanted);
    const now = balanceOf(run.now);
    const verdict = verdicts.update(now, wanted, run.deadSide);
    pending.push({ timeS: now.timeS, now, wanted: { ...wanted }, deadSide: run.deadSide, verdict });
  }
  const zeroS = zeroTick === null ? 0 : zeroTick / TICK_RATE_HZ;
  for (const frame of pending) {
    const key = filmKey(frame.timeS, zeroS);
    const known = film.get(key);
    const miss = (f: FilmFrame): number => Math.abs(f.timeS - zeroS - key);
    if (!known || miss(frame) < miss(known)) film.set(key, frame);
  }
  return {
    columns,
    marks: tracker.marks,
    zeroS,
    hasEvent: zeroTick !== null,
    deadSide: replay.run.deadSide,
    track,
    film,
  };
}
