import { describe, expect, it } from 'vitest';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import * as X from '#shared/model/state-layout.ts';
import { createReferencePilot, flyRun, handsOff } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { ScenarioDocument } from '#shared/scenario/scenario-schema.ts';
import { DEG } from '#shared/units/constants.ts';
import { airframeOf, fly, runOf, specOf } from './support/build-scenario.ts';

/** States that change sign in the mirror. */
const ODD = new Set([X.X_BETA, X.X_P, X.X_R, X.X_PHI, X.X_PSI, X.X_EAST, X.X_AILERON, X.X_RUDDER, X.X_WASHOUT]);
type Side = 'left' | 'right';

/** The light twin with its engines in the same order on the other side, turning the other way. */
function mirrored(airframe: Airframe): Airframe {
  const out = structuredClone(airframe);
  for (const engine of out.engines) {
    engine.y_m = -engine.y_m;
    engine.rotation = engine.rotation === 'clockwise' ? 'counter-clockwise' : 'clockwise';
  }
  return out;
}

function busy(sign: 1 | -1): Partial<ScenarioDocument> {
  const side = (name: Side): Side => (sign === 1 ? name : name === 'left' ? 'right' : 'left');
  return {
    duration_s: 15,
    runway: { threshold_m: 9000 },
    air: { windFrom_deg: sign * 60, wind_kt: 10, profile: 'power-law' },
    events: [
      { id: 'cut', lane: 'engines', kind: 'engine-failure', engine: 'left', at: { time_s: 1 } },
      {
        id: 'gust',
        lane: 'air',
        kind: 'gust',
        axis: 'lateral',
        from: side('right'),
        peak_kt: 12,
        shape: 'one-minus-cosine',
        gradientDistance_m: 60,
        at: { after: 'cut', delay_s: 3 },
      },
      {
        id: 'roll',
        lane: 'air',
        kind: 'gust',
        axis: 'roll-rate',
        peak_deg_s: sign * 4,
        shape: 'ramp',
        over_s: 1,
        at: { time_s: 6 },
      },
      {
        id: 'shift',
        lane: 'air',
        kind: 'wind-change',
        windFrom_deg: sign * 10,
        wind_kt: 15,
        over_s: 2,
        at: { time_s: 7 },
      },
      {
        id: 'push',
        lane: 'controls',
        kind: 'input',
        axis: 'pedal',
        shape: 'pulse',
        amplitude: sign * 0.3,
        duration_s: 2,
        at: { time_s: 3 },
      },
      { id: 'trim', lane: 'controls', kind: 'rudder-trim', deg: sign * -3, at: { time_s: 8 } },
    ],
    criteria: [
      { id: 'dead', title: 'Dead side', measure: 'bank-dead-side', from: 'cut', limit: { max: 20, unit: 'deg' } },
      { id: 'first', title: 'First pedal', measure: 'first-correct-pedal', from: 'cut', limit: { max: 3, unit: 's' } },
      { id: 'offset', title: 'Offset', measure: 'track-offset', limit: { max: 60, unit: 'm' } },
      { id: 'ball', title: 'Ball', measure: 'ball', limit: { max: 1, unit: 'widths' } },
    ],
  };
}

describe('the mirrored scenario on the mirrored airframe', () => {
  const light = airframeOf('light-twin');
  it.each(['hands-off', 'reference'] as const)('gives the mirrored run exactly: %s', (pilot) => {
    const flown = ([1, -1] as const).map((sign) => {
      const run = createRun(specOf(busy(sign), sign === 1 ? light : mirrored(light)));
      return flyRun(run, pilot === 'reference' ? createReferencePilot(run, 1) : handsOff());
    });
    const [one, other] = flown;
    expect(one.deadSide).toBe(1);
    expect(other.deadSide).toBe(-1);
    expect(one.tick).toBe(other.tick);
    const apart = [...one.plant.x].flatMap((value, i) =>
      value === (ODD.has(i) ? -other.plant.x[i] : other.plant.x[i]) ? [] : [`state ${i}`],
    );
    expect(apart).toEqual([]);
    expect(other.results().map(({ value, atS, verdict }) => ({ value, atS, verdict }))).toEqual(
      one.results().map(({ value, atS, verdict }) => ({ value, atS, verdict })),
    );
    expect(Math.abs(one.plant.x[X.X_PHI])).toBeGreaterThan(0.5 * DEG);
  });
});

describe('in the small-disturbance model', () => {
  it('the answers to two inputs add up to the answer to both', () => {
    // Linear by construction: agreement to rounding, 1e-12 of each state's own size (computed).
    const answer = (...events: NonNullable<ScenarioDocument['events']>): Float64Array => {
      const run = fly(runOf({ fidelity: 'small-disturbance', events, duration_s: 8 }));
      const still = fly(runOf({ fidelity: 'small-disturbance', duration_s: 8 }));
      return run.plant.x.slice(0, 6).map((value, i) => value - still.plant.x[i]);
    };
    const pedal = {
      id: 'p',
      lane: 'controls',
      kind: 'input',
      axis: 'pedal',
      shape: 'step',
      amplitude: 0.05,
      at: { time_s: 1 },
    } as const;
    const gust = {
      id: 'g',
      lane: 'air',
      kind: 'gust',
      axis: 'lateral',
      from: 'left',
      peak_kt: 3,
      shape: 'step',
      at: { time_s: 3 },
    } as const;
    const one = answer(pedal);
    const other = answer(gust);
    const both = answer(pedal, gust);
    both.forEach((value, i) =>
      expect(Math.abs(value - one[i] - other[i])).toBeLessThanOrEqual(
        1e-12 * (1 + Math.abs(one[i]) + Math.abs(other[i])),
      ),
    );
    expect(Math.abs(one[X.X_PSI])).toBeGreaterThan(1e-3);
  });
});
