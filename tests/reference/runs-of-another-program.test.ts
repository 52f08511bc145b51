/**
 * Whole runs of the large-angle model against another program: the flight model's equations written a second time (Python,
 * dense inertia matrix, RK4 at 480 Hz). Each flies hands off, yaw damper off, the pitch assistant on hold-path; an engine
 * fails at 1 s and the state stands at 5 s, or a gust begins at 1 s and the state stands at 3 s. Tolerance 0.001° and
 * °/s, 0.001 m/s, 0.01 m.
 */
import { describe, expect, it } from 'vitest';
import { flyRun, handsOff } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import { parseScenario } from '#shared/scenario/scenario-schema.ts';
import type { Observation } from '#shared/model/plant-types.ts';
import { DEG } from '#shared/units/constants.ts';
import { SHIPPED } from './shipped-airframes.ts';

type Slug = keyof typeof SHIPPED;

interface Flown {
  slug: Slug;
  configuration: string;
  ias: number;
  heightFt: number;
  path: number;
  levers: number[];
  event: Record<string, unknown>;
  untilS: number;
}

function stateAt({ slug, configuration, ias, heightFt, path, levers, event, untilS }: Flown): Observation {
  const airframe = SHIPPED[slug];
  const parsed = parseScenario({
    format: 'sidewash.scenario/1',
    title: 'Another program',
    airframe: { slug, revision: 1 },
    configuration,
    start: { ias_kt: ias, height_ft: heightFt, path_deg: path, levers },
    automation: { pitch: { mode: 'hold-path', path_deg: path }, ...(airframe.yawDamper ? { yawDamper: false } : {}) },
    duration_s: 10,
    events: [{ id: 'one', at: { time_s: 1 }, ...event }],
    criteria: [],
  });
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.issues));
  const run = createRun({ scenario: parsed.scenario, airframe, seed: 1 });
  return flyRun(run, handsOff(), untilS * 120).now;
}

const degrees = ({ betaRad, pRadS, rRadS, phiRad, thetaRad, psiRad }: Observation): number[] =>
  [betaRad, pRadS, rRadS, phiRad, thetaRad, psiRad].map((rad) => rad / DEG);

const failed = (engine: string) => ({ lane: 'engines', kind: 'engine-failure', engine });

describe('an engine failure, 4 s later: β, p, r, φ, θ, ψ; V; north, east, height', () => {
  it.each([
    [
      {
        slug: 'light-twin',
        configuration: 'take-off',
        ias: 80,
        heightFt: 300,
        path: 0,
        levers: [1, 1],
        event: failed('left'),
      },
      [4.0678, -18.8437, -14.8418, -63.4348, -1.9344, -38.7148],
      41.4748,
      [208.259, -33.018, 98.562],
    ],
    [
      {
        slug: 'commuter-turboprop',
        configuration: 'take-off',
        ias: 115,
        heightFt: 2000,
        path: 2,
        levers: [1, 1],
        event: failed('right'),
      },
      [-5.9386, 17.5097, 8.0956, 65.3544, 1.3821, 27.2998],
      58.3258,
      [302.308, 26.271, 635.531],
    ],
    [
      {
        slug: 'twin-jet',
        configuration: 'take-off',
        ias: 150,
        heightFt: 1500,
        path: 4,
        levers: [1, 1],
        event: failed('left'),
      },
      [10.604, -17.5993, -4.8101, -25.8572, 4.0, -15.9363],
      80.7481,
      [405.355, -7.425, 490.833],
    ],
    [
      {
        slug: 'four-jet',
        configuration: 'take-off',
        ias: 170,
        heightFt: 1500,
        path: 3,
        levers: [1, 1, 1, 1],
        event: failed('right outer'),
      },
      [-9.0814, 9.1199, 4.3125, 12.9533, 3.0, 12.0366],
      93.9936,
      [461.233, 4.613, 483.799],
    ],
  ] as const)('$slug', (flight, angles, tasMps, position) => {
    const now = stateAt({ ...flight, levers: [...flight.levers], untilS: 5 });
    degrees(now).forEach((value, i) => expect(Math.abs(value - angles[i])).toBeLessThan(1e-3));
    expect(Math.abs(now.tasMps - tasMps)).toBeLessThan(1e-3);
    // The path turns with the start heading of 360°: north ahead, east to the right.
    [now.northM, now.eastM, now.heightM].forEach((value, i) =>
      expect(Math.abs(value - position[i])).toBeLessThan(0.01),
    );
  });
});

it('a gust of 25 kt from the right over 80 m, light twin on the approach', () => {
  const now = stateAt({
    ...{ slug: 'light-twin', configuration: 'approach', ias: 95, heightFt: 800, path: -3, levers: [1, 1], untilS: 3 },
    event: {
      lane: 'air',
      kind: 'gust',
      axis: 'lateral',
      shape: 'one-minus-cosine',
      from: 'right',
      peak_kt: 25,
      gradientDistance_m: 80,
    },
  });
  const expected = [-18.9798, 10.5737, 6.7609, -3.3982, -3.0, 17.3261];
  degrees(now).forEach((value, i) => expect(Math.abs(value - expected[i])).toBeLessThan(1e-3));
});
