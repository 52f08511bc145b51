/**
 * The speed criterion of "Engine cut in the climb" judges the pilot and not the aeroplane or the drawn second: what one
 * engine cannot hold on this path is worked out here by energy alone, by other code than the model's, and stays clear of it.
 */
import { describe, expect, it } from 'vitest';
import { createReferencePilot, flyRun } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import { airframeOf, jsonOf, shippedScenario } from './support/build-scenario.ts';

const KT = 1852 / 3600;
const SEEDS = [3, ...Array.from({ length: 20 }, (_, index) => 101 + index)];
const scenario = shippedScenario('engine-cut-in-the-climb');
const airframe = airframeOf('light-twin');
const { massKg, wingM2, cd0, k, powerW, staticN, windmillM2, spoolS } = figures();

interface Flown {
  lossKt: number;
  passed: boolean;
  limitKt: number;
  /** Speed and density ratio at the cut. */
  tasMps: number;
  sigma: number;
}

function figures() {
  const twin = jsonOf('scenarios/airframes/light-twin.json') as {
    mass: { mass_kg: number };
    geometry: { wingArea_m2: number };
    configurations: { CD0: number; kInduced: number }[];
    engines: {
      power_W: number;
      efficiency: number;
      staticThrust_N: number;
      windmillDragArea_m2: number;
      spoolDown_s: number;
    }[];
  };
  const [engine] = twin.engines;
  const [takeOff] = twin.configurations;
  return {
    massKg: twin.mass.mass_kg,
    wingM2: twin.geometry.wingArea_m2,
    cd0: takeOff.CD0,
    k: takeOff.kInduced,
    powerW: engine.power_W * engine.efficiency,
    staticN: engine.staticThrust_N,
    windmillM2: engine.windmillDragArea_m2,
    spoolS: engine.spoolDown_s,
  };
}

function flown(seed: number, delayS: number): Flown {
  const run = createRun({ scenario, airframe, seed });
  let tasMps = 0;
  let sigma = 0;
  flyRun(run, createReferencePilot(run, delayS), Infinity, ({ now, fired }) => {
    if (tasMps > 0 || fired.length === 0) return;
    tasMps = now.tasMps;
    // Standard atmosphere of the troposphere.
    sigma = (1 - (0.0065 * now.heightM) / 288.15) ** 4.2559;
  });
  const speed = run.results().find(({ id }) => id === 'speed');
  if (speed?.value === null || speed === undefined) throw new Error('the speed loss was not reached');
  return { lossKt: speed.value, passed: run.passed(), limitKt: speed.limit.max ?? Number.NaN, tasMps, sigma };
}

/** Speed lost in 15 s by flight without sideslip on the 3° path: m·dV/dt = T − D − D_windmill − m·g·sin 3°; kt. */
function leastLossKt(tasMps: number, sigma: number): number {
  const rise = Math.sin((3 * Math.PI) / 180);
  const thrust = (v: number) => (powerW * sigma) / Math.hypot(v, (powerW * sigma) / (staticN * sigma));
  const atCut = thrust(tasMps);
  const step = 0.005;
  let v = tasMps;
  for (let t = 0; t < 15 - 1e-9; t += step) {
    const q = 0.5 * 1.225 * sigma * v * v;
    const lift = massKg * 9.80665 * Math.sqrt(1 - rise * rise);
    const drag = q * wingM2 * cd0 + (k * lift * lift) / (q * wingM2) + q * windmillM2;
    const dead = atCut * Math.exp(-t / spoolS);
    v += (step * (thrust(v) + dead - drag - massKg * 9.80665 * rise)) / massKg;
  }
  return ((tasMps - v) * Math.sqrt(sigma)) / KT;
}

describe('speed loss of the engine cut in the climb', () => {
  it.each(SEEDS)('seed %s: 15 kt is met after 1 s, by the energy that is missing and little more', (seed) => {
    const late = flown(seed, 1);
    expect(late.limitKt).toBe(15);
    expect(late.passed).toBe(true);
    const least = leastLossKt(late.tasMps, late.sigma);
    // No pilot can lose less than the missing energy; the reference pilot of 1 s loses within 0.8 kt of it (computed).
    expect(late.lossKt).toBeGreaterThan(least - 0.1);
    expect(late.lossKt).toBeLessThan(least + 0.8);
    expect(least).toBeGreaterThan(9.9);
    expect(least).toBeLessThan(12.7);
  });

  it('a pilot of 3 s is beyond it on every draw: sideslip and the fall to the dead side cost the rest', () => {
    for (const seed of SEEDS) expect(flown(seed, 3).lossKt, `seed ${seed}`).toBeGreaterThan(15);
  });
});
