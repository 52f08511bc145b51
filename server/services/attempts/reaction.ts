import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import type { Run } from '#shared/scenario/run-types.ts';
import { DEG } from '#shared/units/constants.ts';

const PEDAL_SHARE = 0.1;
const PEDAL_TICKS = 24;
const CALM_RAD_S = DEG;
const SWUNG_RAD_S = 2 * DEG;

/** Tick of the first event outside the notes; null before it. */
export function zeroTick(run: Run): number | null {
  return run.fired.find((event) => event.lane !== 'notes')?.tick ?? null;
}

/** First pedal toward the live side (against the yaw without one) and the first calm second, from the first event on. */
export function createReaction() {
  let pedalAtZero = 0;
  let started = false;
  let held = 0;
  let calm = 0;
  let swung = false;
  let firstPedalS: number | null = null;
  let arrestedS: number | null = null;
  return {
    see(run: Run, zero: number | null): void {
      if (zero === null || run.tick < zero) return;
      const { now } = run;
      if (!started) {
        started = true;
        pedalAtZero = now.pedal;
      }
      const toward = run.deadSide === 0 ? -Math.sign(now.rRadS) : run.deadSide;
      held = (now.pedal - pedalAtZero) * toward >= PEDAL_SHARE ? held + 1 : 0;
      if (firstPedalS === null && held >= PEDAL_TICKS) firstPedalS = (run.tick - PEDAL_TICKS + 1) / TICK_RATE_HZ;
      const rate = Math.abs(now.rRadS);
      swung ||= rate > SWUNG_RAD_S;
      calm = rate < CALM_RAD_S ? calm + 1 : 0;
      if (swung && arrestedS === null && calm >= TICK_RATE_HZ) arrestedS = (run.tick - TICK_RATE_HZ + 1) / TICK_RATE_HZ;
    },
    /** Run times; null when never. */
    result: () => ({ firstPedalS, arrestedS }),
  };
}
