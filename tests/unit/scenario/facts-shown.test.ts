/**
 * What a class must be able to see: facts that any instructor would check (common practice: signs and order, not sizes), each in a
 * shipped scenario, by the very terms that the arrows on the stage are drawn from.
 */
import { describe, expect, it } from 'vitest';
import { createObservation } from '#shared/model/plant.ts';
import type { Observation } from '#shared/model/plant-types.ts';
import { createReferencePilot, flyRun } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { ControlSample } from '#shared/scenario/run-types.ts';
import { airframeOf, shippedScenario } from './support/build-scenario.ts';

const DEG = Math.PI / 180;
const FULL = 32767;

/** Every tick of a shipped scenario; `input` moves the controls, hands off without it. */
function watch(
  slug: string,
  input?: (sample: ControlSample, timeS: number) => void,
  scenario = shippedScenario(slug),
): Observation[] {
  const run = createRun({ scenario, airframe: airframeOf(scenario.airframe.slug), seed: scenario.seed });
  const sample = run.neutralSample();
  const seen: Observation[] = [];
  while (run.ended === null) {
    input?.(sample, run.tick / 120);
    run.step(sample);
    const { yawParts, rollParts, levers, thrustN, windmillDragN, engineState, ...rest } = run.now;
    const blank = createObservation(thrustN.length);
    Object.assign(blank, rest, { yawParts: { ...yawParts }, rollParts: { ...rollParts } });
    blank.thrustN.set(thrustN);
    blank.windmillDragN.set(windmillDragN);
    blank.engineState.set(engineState);
    blank.levers.set(levers);
    seen.push(blank);
  }
  return seen;
}
const first = (seen: readonly Observation[], when: (o: Observation) => boolean): Observation => {
  const found = seen.find(when);
  if (!found) throw new Error('that never happens');
  return found;
};
const after = (seen: readonly Observation[], timeS: number): Observation => first(seen, (o) => o.timeS >= timeS);

describe('a cut of the left engine', () => {
  const seen = watch('left-engine-cut-after-lift-off');
  const cut = first(seen, (o) => o.engineState[0] !== 0);

  it('yaws left by the thrust arrows, then rolls left, and uncorrected ends in a bank to the left', () => {
    const soon = after(seen, cut.timeS + 0.5);
    expect(soon.thrustN[0]).toBeLessThan(0.6 * soon.thrustN[1]);
    expect(soon.yawParts.thrust).toBeLessThan(0);
    const yaws = first(seen, (o) => o.timeS > cut.timeS && o.rRadS < -3 * DEG);
    const rolls = first(seen, (o) => o.timeS > cut.timeS && o.phiRad < -10 * DEG);
    expect(yaws.timeS).toBeLessThan(rolls.timeS);
    expect(seen.at(-1)?.phiRad).toBeLessThan(-30 * DEG);
  });

  it('turning left the right wing is the faster one: the part of the rolling moment by yaw rate rolls left', () => {
    const turning = first(seen, (o) => o.rRadS < -8 * DEG && o.timeS > cut.timeS);
    expect(turning.rollParts.r).toBeLessThan(0);
    // The wings' own arrows also hold the damping of the roll, which soon is the larger; opened, the arrow tells them apart.
    expect(turning.rollParts.p).toBeGreaterThan(0);
  });

  it('the dead propeller drags', () => {
    expect(Math.abs(after(seen, cut.timeS + 3).windmillDragN[0])).toBeGreaterThan(50);
    expect(after(seen, cut.timeS + 3).windmillDragN[1]).toBeCloseTo(0, 6);
  });

  it('pedal toward the live engine stops the yaw, by the rudder arrow', () => {
    const held = watch('left-engine-cut-after-lift-off', (sample, t) => {
      if (t > cut.timeS + 1) sample.pedal = Math.round(0.9 * FULL);
    });
    const pressed = after(held, cut.timeS + 2);
    expect(pressed.yawParts.rudder).toBeGreaterThan(0);
    expect(Math.abs(pressed.forceRudderN)).toBeGreaterThan(100);
    expect(pressed.rRadS).toBeGreaterThan(after(seen, cut.timeS + 2).rRadS + 5 * DEG);
    expect(first(held, (o) => o.timeS > cut.timeS + 1 && o.rRadS > 0).timeS).toBeLessThan(cut.timeS + 3);
  });
});

describe('controls', () => {
  it('right aileron yaws left at first', () => {
    const seen = watch('adverse-yaw-in-a-roll');
    const rolling = first(seen, (o) => o.pRadS > 5 * DEG);
    expect(rolling.yawParts.aileron + rolling.yawParts.p).toBeLessThan(0);
    expect(rolling.rRadS).toBeLessThan(0);
  });

  it('a rudder above the centre of gravity first rolls away from the yaw', () => {
    const seen = watch('steady-sideslip-and-release');
    const pressed = first(seen, (o) => Math.abs(o.rudderRad) > 3 * DEG);
    expect(Math.sign(pressed.rollParts.rudder)).toBe(-Math.sign(pressed.yawParts.rudder));
  });

  it('a held rudder holds a steady sideslip, and neutral brings the nose back', () => {
    const seen = watch('steady-sideslip-and-release');
    const held = [8, 9, 10].map((t) => after(seen, t).betaRad);
    expect(Math.min(...held.map(Math.abs))).toBeGreaterThan(3 * DEG);
    expect(Math.max(...held) - Math.min(...held)).toBeLessThan(1.5 * DEG);
    expect(Math.abs(seen.at(-1)?.betaRad ?? NaN)).toBeLessThan(0.3 * Math.abs(held[0]));
  });

  it('with a ratio changer full pedal moves the rudder less at high speed', () => {
    const fast = watch('twin-jet-cut-at-high-speed')[0];
    const slow = watch('twin-jet-cut-at-low-speed')[0];
    expect(fast.rudderAvailableRad).toBeLessThan(0.75 * slow.rudderAvailableRad);
    expect(fast.rudderRatio).toBeLessThan(1);
  });

  it('a yaw damper that is lost leaves the swing that it would have met', () => {
    const scenario = shippedScenario('yaw-damper-off');
    const events = scenario.events.map((event) => (event.kind === 'yaw-damper' ? { ...event, on: true } : event));
    const kept = { ...scenario, events };
    const [lost, damped] = [watch('yaw-damper-off'), watch('yaw-damper-off', undefined, kept)];
    const swing = (seen: readonly Observation[]): number =>
      Math.max(...seen.filter((o) => o.timeS > seen.length / 240).map((o) => Math.abs(o.rRadS)));
    expect(lost.every((o) => o.timeS < 5 || o.yawDamperRad === 0)).toBe(true);
    expect(damped.some((o) => Math.abs(o.yawDamperRad) > 0.1 * DEG)).toBe(true);
    expect(swing(damped)).toBeLessThan(0.7 * swing(lost));
  });
});

describe('air and propellers', () => {
  it('full power at low speed yaws left behind a clockwise propeller', () => {
    const seen = watch('full-power-at-low-speed');
    const low = after(seen, 3);
    const full = first(seen, (o) => o.levers[0] > 0.99 && o.timeS > 4.5);
    expect(full.yawParts.thrust).toBeLessThan(low.yawParts.thrust);
    expect(full.yawParts.thrust).toBeLessThan(0);
    expect(first(seen, (o) => o.timeS > 4 && Math.abs(o.rRadS) > 2 * DEG).rRadS).toBeLessThan(0);
  });

  it('a gust beyond the stall angle takes the fin’s force, which a dorsal fin keeps', () => {
    const stalls = watch('fin-stall-by-gust');
    const stalled = first(stalls, (o) => o.finStalled);
    expect(stalled.yawParts.fin).not.toBe(0);
    expect(watch('dorsal-fin-against-the-gust').some((o) => o.finStalled)).toBe(false);
  });

  it('weathercock stability turns the nose into the gust, dihedral lifts the upwind wing', () => {
    const seen = watch('crosswind-gust-on-final');
    const struck = first(seen, (o) => Math.abs(o.gustLateralMps) > 2 && Math.abs(o.yawParts.beta) > 0);
    const side = Math.sign(struck.yawParts.beta);
    expect(Math.sign(struck.rollParts.beta)).toBe(-side);
  });

  it('the crab is taken out before the wheels touch', () => {
    const scenario = shippedScenario('crosswind-landing-with-de-crab');
    const run = createRun({ scenario, airframe: airframeOf(scenario.airframe.slug), seed: scenario.seed });
    const crabs: { timeS: number; deg: number }[] = [];
    flyRun(run, createReferencePilot(run, 0), Infinity, ({ now }) =>
      crabs.push({ timeS: now.timeS, deg: Math.abs(now.psiRad - now.trackRad) / DEG }),
    );
    expect(run.ended).toBe('touchdown');
    const before = Math.max(...crabs.slice(0, -600).map(({ deg }) => deg));
    expect(before).toBeGreaterThan(4);
    expect(crabs.at(-1)?.deg).toBeLessThan(0.6 * before);
  });
});
