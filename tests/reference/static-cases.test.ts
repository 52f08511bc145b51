/**
 * Static figures against another program: the equations of the flight model written a second time (Python, dense trim by
 * numpy, banks tried one by one, speeds by bisection), for airframes that are not shipped as well. Tolerance 0.01 kt or
 * what stands beside the number.
 */
import { describe, expect, it } from 'vitest';
import { climbRates } from '#shared/analysis/climb.ts';
import { criticalEngine } from '#shared/analysis/critical-engine.ts';
import { minimumControlSpeed } from '#shared/analysis/minimum-control-speed.ts';
import { crosswindLimit } from '#shared/analysis/sideslip-crosswind.ts';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import type { Aircraft } from '#shared/model/aircraft.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { DEG, FT, KT } from '#shared/units/constants.ts';
import { SHIPPED } from './shipped-airframes.ts';

type Slug = keyof typeof SHIPPED;
type Change = (airframe: Airframe) => void;

function aircraftOf(slug: Slug, change?: Change, configuration?: string): Aircraft {
  const airframe = structuredClone(SHIPPED[slug]);
  change?.(airframe);
  return prepareAircraft(airframe, { configuration });
}

const turning = (rotations: ('clockwise' | 'counter-clockwise')[]): Change => {
  return ({ engines }) => engines.forEach((engine, i) => (engine.rotation = rotations[i]));
};
const threeEngines: Change = ({ engines }) => {
  engines.splice(1, 0, { ...engines[0], name: 'centre', y_m: 0 });
};

interface Case {
  name: string;
  slug: Slug;
  change?: Change;
  heightM?: number;
  wingsLevel?: boolean;
  lever?: number;
  feathered?: boolean;
  kt: number;
  critical: string;
  binds: string;
  /** Bank, sideslip, aileron, rudder; degrees; 0.03° (0.1° where two limits meet). */
  degrees: readonly [number, number, number, number];
}

const CASES: readonly Case[] = [
  {
    name: 'two clockwise',
    slug: 'light-twin',
    kt: 66.286,
    critical: 'left',
    binds: 'rudder travel',
    degrees: [5, 3.4, 7.71, -25],
  },
  {
    ...{
      name: 'two counter-clockwise',
      slug: 'light-twin',
      change: turning(['counter-clockwise', 'counter-clockwise']),
    },
    ...{ kt: 66.286, critical: 'right', binds: 'rudder travel', degrees: [-5, -3.4, -7.71, 25] },
  },
  {
    ...{
      name: 'handed, tops turning inward: a tie',
      slug: 'light-twin',
      change: turning(['clockwise', 'counter-clockwise']),
    },
    ...{ kt: 60.828, critical: 'left', binds: 'rudder travel', degrees: [5, 5.25, 9.95, -25] },
  },
  {
    ...{ name: 'three engines', slug: 'light-twin', change: threeEngines },
    ...{ kt: 68.435, critical: 'left', binds: 'rudder travel', degrees: [5, 2.77, 6.88, -25] },
  },
  {
    ...{ name: 'a fin that stalls at 7°', slug: 'light-twin', change: ({ fin }) => fin && (fin.stallAngle_deg = 7) },
    ...{ kt: 69.141, critical: 'left', binds: 'fin stall', degrees: [3.35, -0.42, 4.5, -25] },
  },
  {
    ...{ name: 'an aileron of 2.5°', slug: 'light-twin', change: ({ controls }) => (controls.aileronMax_deg = 2.5) },
    ...{ kt: 71.446, critical: 'left', binds: 'rudder travel', degrees: [2.13, -2.93, 2.5, -25] },
  },
  {
    ...{ name: 'a ratio table, wings level', slug: 'light-twin', wingsLevel: true },
    change: ({ controls }) =>
      (controls.rudderRatio = { mode: 'ratio', law: 'table', table: [[60, 1], [80, 0.6], [120, 0.4]] }), // prettier-ignore
    ...{ kt: 104.595, critical: 'left', binds: 'rudder travel', degrees: [0, -3.31, 0.06, -11.93] },
  },
  {
    ...{ name: 'a pedal force of 200 N', slug: 'light-twin', heightM: 3000 },
    change: ({ controls }) => controls.pedalForce && (controls.pedalForce.limit_N = 200),
    ...{ kt: 72.278, critical: 'left', binds: 'pedal force', degrees: [5, 5.45, 6.33, -11.15] },
  },
  {
    ...{ name: 'below sea level', slug: 'light-twin', heightM: -300 },
    ...{ kt: 67.311, critical: 'left', binds: 'rudder travel', degrees: [5, 3.09, 7.42, -25] },
  },
  {
    ...{ name: 'feathered, lever 0.8', slug: 'light-twin', feathered: true, lever: 0.8 },
    ...{ kt: 57.278, critical: 'left', binds: 'rudder travel', degrees: [5, 6.74, 10.77, -25] },
  },
  {
    ...{ name: 'turboprop at 1,500 m, wings level', slug: 'commuter-turboprop', heightM: 1500, wingsLevel: true },
    ...{ kt: 99.433, critical: 'left', binds: 'rudder travel', degrees: [0, -6.9, -0.34, -25] },
  },
  {
    name: 'twin jet',
    slug: 'twin-jet',
    kt: 114.803,
    critical: 'left',
    binds: 'rudder travel',
    degrees: [5, 3.21, 9.35, -28],
  },
];

describe('static minimum control speed (computed by another program)', () => {
  it.each(CASES.map((one) => [one.name, one] as const))('%s', (_name, one) => {
    const aircraft = aircraftOf(one.slug, one.change);
    const request = {
      heightM: one.heightM ?? 0,
      lever: one.lever ?? 1,
      feathered: one.feathered ?? false,
      bank: one.wingsLevel ? { exactlyRad: 0 } : { upToRad: 5 * DEG },
    };
    const critical = criticalEngine(aircraft, request);
    expect(critical.name).toBe(one.critical);
    const result = minimumControlSpeed(aircraft, { ...request, failed: [critical.index] });
    if (!result.found) throw new Error(result.message);
    expect(Math.abs(result.casMps / KT - one.kt)).toBeLessThan(0.01);
    const found = [result.phiRad, result.betaRad, result.aileronRad, result.rudderRad].map((rad) => rad / DEG);
    found.forEach((degrees, i) => expect(Math.abs(degrees - one.degrees[i])).toBeLessThan(0.03));
    // Where two limits meet in the best bank, either may be named.
    if (Math.abs(one.degrees[0]) === 5 || one.wingsLevel) expect(result.limitedBy).toBe(one.binds);
  });

  it('both left engines of the four-engined jet: 178.752 kt', () => {
    const result = minimumControlSpeed(aircraftOf('four-jet'), { heightM: 0, failed: [0, 1] });
    expect(result.found && result.casMps / KT).toBeCloseTo(178.752, 2);
  });

  it('one engine off the centre leaves only its own drag, held at every speed; one in the centre leaves nothing', () => {
    const single = (y_m: number) =>
      minimumControlSpeed(
        aircraftOf('light-twin', (airframe) => (airframe.engines = [{ ...airframe.engines[0], y_m }])),
        { heightM: 0, failed: [0] },
      );
    expect(single(-1.75)).toMatchObject({ found: false, reason: 'held-at-every-speed' });
    expect(single(0)).toMatchObject({ found: false, reason: 'no-engine-moment' });
  });

  it('thrust beyond all rudder is held at no speed', () => {
    const huge = aircraftOf('light-twin', ({ engines }) =>
      engines.forEach((engine) => Object.assign(engine, { staticThrust_N: 225_000, power_W: 33e6 })),
    );
    expect(minimumControlSpeed(huge, { heightM: 0, failed: [0] })).toMatchObject({ reason: 'held-at-no-speed' });
  });
});

describe('steady crosswind by control power (computed by another program, 0.01 kt)', () => {
  it.each([
    ['light-twin', 70, 0, 'take-off', 36.436, 'aileron travel'],
    ['light-twin', 100, 0, 'approach', 38.311, 'pedal force'],
    ['light-twin', 70, 2500, 'approach', 34.611, 'aileron travel'],
    ['single-trainer', 60, 0, 'clean', 25.971, 'fin stall'],
    ['commuter-turboprop', 110, 2500, 'approach', 56.603, 'rudder travel'],
    ['twin-jet', 250, 0, 'take-off', 58.793, 'rudder travel'],
    ['twin-jet', 140, 2500, 'take-off', 50.892, 'aileron travel'],
    ['four-jet', 150, 0, 'take-off', 53.324, 'rudder travel'],
  ] as const)('%s, %s kt true, %s m, %s: %s kt by %s', (slug, kt, heightM, configuration, crosswind, binds) => {
    const limit = crosswindLimit(aircraftOf(slug, undefined, configuration), kt * KT, heightM);
    expect(Math.abs(limit.controlPower.crosswindMps / KT - crosswind)).toBeLessThan(0.01);
    expect(limit.limitedBy).toBe(binds);
  });
});

describe('steady climb: all engines, one windmilling, one feathered (computed by another program, 0.1 ft/min)', () => {
  it.each([
    ['light-twin', 90, 0, [1643.19, 242.63, 403.01]],
    ['light-twin', 100, 2000, [1199.96, -46.77, 133.99]],
    ['commuter-turboprop', 115, 0, [2536.75, 497.3, 778.09]],
    ['twin-jet', 160, 0, [4246.74, 1277.98, 1277.98]],
    ['four-jet', 170, 1500, [3189.17, 1944.69, 1944.69]],
  ] as const)('%s, %s kt true, %s m: %s ft/min', (slug, kt, heightM, feetPerMinute) => {
    const { allEngines, windmilling, feathered } = climbRates(aircraftOf(slug), kt * KT, heightM, 0);
    [allEngines, windmilling, feathered].forEach((point, i) => {
      expect(Math.abs(((point?.rateMps ?? NaN) * 60) / FT - feetPerMinute[i])).toBeLessThan(0.1);
    });
  });
});
