/**
 * What the pilot did about it, tick by tick: first correct and wrong pedal, yaw arrested, peak bank, rudder at its limit.
 * The same definitions as the measures of the scenario page, so that a flag and a criterion never disagree.
 */
import type { Observation } from '#shared/model/plant-types.ts';
import { TICK_S } from '#shared/model/plant-types.ts';
import { DEG } from '#shared/units/constants.ts';

export const PEDAL_STEP = 0.1;
export const PEDAL_HOLD_S = 0.2;
export const YAW_BEGUN_RAD_S = 2 * DEG;
export const YAW_STOPPED_RAD_S = 1 * DEG;
export const YAW_STOPPED_FOR_S = 1;

export interface ReactionMarks {
  /** Tick of the first failure or disturbance that counts; null before it. */
  eventTick: number | null;
  firstCorrectPedalTick: number | null;
  /** Side of the correct pedal, right positive. */
  correctSide: -1 | 0 | 1;
  firstWrongPedalTick: number | null;
  yawArrestedTick: number | null;
  peakBankTick: number | null;
  peakBankRad: number;
  saturatedTick: number | null;
}

type Seen = Pick<Observation, 'tick' | 'pedal' | 'rRadS' | 'phiRad' | 'rudderSaturated'>;

export interface ReactionTracker {
  readonly marks: ReactionMarks;
  /** Starts counting from an event; `now` is the first observation after it. The first call counts. */
  begin(now: Seen, eventTick: number): void;
  see(now: Seen, deadSide: -1 | 0 | 1): void;
}

export function createReactionTracker(): ReactionTracker {
  const marks: ReactionMarks = {
    eventTick: null,
    firstCorrectPedalTick: null,
    correctSide: 0,
    firstWrongPedalTick: null,
    yawArrestedTick: null,
    peakBankTick: null,
    peakBankRad: 0,
    saturatedTick: null,
  };
  let pedalAtEvent = 0;
  let correctSince: number | null = null;
  let wrongSince: number | null = null;
  let yawBegan = false;
  let calmSince: number | null = null;
  const holdTicks = Math.round(PEDAL_HOLD_S / TICK_S);
  const calmTicks = Math.round(YAW_STOPPED_FOR_S / TICK_S);

  return {
    marks,
    begin(now, eventTick) {
      if (marks.eventTick !== null) return;
      marks.eventTick = eventTick;
      marks.peakBankTick = now.tick;
      marks.peakBankRad = now.phiRad;
      pedalAtEvent = now.pedal;
    },
    see(now, deadSide) {
      if (marks.eventTick === null) return;
      // Toward the live side; with no engine failed, against the yaw.
      const side = deadSide !== 0 ? deadSide : now.rRadS > 0 ? -1 : now.rRadS < 0 ? 1 : 0;
      const push = (now.pedal - pedalAtEvent) * side;
      // What an observation shows was held over the tick that led to it.
      const held = now.tick - 1;
      correctSince = push >= PEDAL_STEP ? (correctSince ?? held) : null;
      wrongSince = push <= -PEDAL_STEP ? (wrongSince ?? held) : null;
      if (marks.firstCorrectPedalTick === null && correctSince !== null && now.tick - correctSince >= holdTicks) {
        marks.firstCorrectPedalTick = correctSince;
        marks.correctSide = side;
      }
      if (marks.firstWrongPedalTick === null && wrongSince !== null && now.tick - wrongSince >= holdTicks) {
        marks.firstWrongPedalTick = wrongSince;
      }
      const yaw = Math.abs(now.rRadS);
      if (yaw > YAW_BEGUN_RAD_S) yawBegan = true;
      calmSince = yaw < YAW_STOPPED_RAD_S ? (calmSince ?? now.tick) : null;
      if (marks.yawArrestedTick === null && yawBegan && calmSince !== null && now.tick - calmSince >= calmTicks) {
        marks.yawArrestedTick = calmSince;
      }
      if (Math.abs(now.phiRad) > Math.abs(marks.peakBankRad)) {
        marks.peakBankRad = now.phiRad;
        marks.peakBankTick = now.tick;
      }
      if (marks.saturatedTick === null && now.rudderSaturated) marks.saturatedTick = now.tick;
    },
  };
}
