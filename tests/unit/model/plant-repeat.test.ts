import { describe, expect, it } from 'vitest';
import { createStateHash } from '#shared/numerics/state-hash.ts';
import { integrateAdaptive } from '#shared/numerics/odex-adapter.ts';
import { createObservation, createWanted } from '#shared/model/plant.ts';
import type { Fidelity, Plant, PlantOptions } from '#shared/model/plant-types.ts';
import * as X from '#shared/model/state-layout.ts';
import { DEG } from '#shared/units/constants.ts';
import { AIRFRAMES, fly, flying } from './support/plants.ts';

function lively(fidelity: Fidelity, options: PlantOptions = {}): Plant {
  return flying('twin-jet', {
    options,
    setup: {
      fidelity,
      air: { windFromRad: 1, windMps: 7, profile: 'power-law', turbulence: 'light' },
      automation: { pitch: { mode: 'hold-speed', targetCasMps: 78 }, yawDamper: true, rudderRatio: true },
    },
  });
}

function events(plant: Plant, tick: number): void {
  if (tick === 30) plant.failEngine(1, 'windmilling');
  if (tick === 90) plant.addGust({ axis: 'lateral', shape: 'ramp', peak: 6, overS: 3 });
  if (tick === 150) plant.setLever(0, 0.4, 2);
  if (tick === 200) plant.setConfiguration('clean');
  if (tick === 220) plant.setRudderTrim(0.05, 3);
  if (tick === 240) plant.changeWind(2, 12, 4);
  if (tick === 260) plant.setTurbulence('severe', 3);
  if (tick === 300) plant.setRudderRatio('stuck');
  plant.inputs.pedal = 0.2 * Math.sin(tick / 40);
  plant.inputs.stick = 0.3 * Math.cos(tick / 55);
  plant.inputs.rudderTrim = tick > 280 ? 0.1 : 0;
  plant.inputs.feather[1] = tick > 320 ? 1 : 0;
}

describe.each(['large-angle', 'small-disturbance'] as const)('a run repeats: %s', (fidelity) => {
  it('from the same setup and inputs, bit for bit, hash included', () => {
    const [one, other] = [lively(fidelity), lively(fidelity)].map((plant) => {
      const hash = createStateHash();
      fly(plant, 5, (tick) => {
        events(plant, tick);
        plant.hashInto(hash);
      });
      return { x: plant.x, hex: hash.hex() };
    });
    expect(other).toEqual(one);
  });

  it.each([0, 100, 250, 335])('from a snapshot at tick %i, on the same plant and on a fresh one', (at) => {
    const plant = lively(fidelity);
    let snapshot = plant.save();
    fly(plant, 5, (tick) => {
      if (tick === at) snapshot = plant.save();
      events(plant, tick);
    });
    const wanted = plant.save().data;
    const resume = (again: Plant): void => {
      again.restore(snapshot);
      expect(again.tick).toBe(at);
      for (let tick = at; tick < 600; tick++) {
        events(again, tick);
        again.step();
      }
      expect(again.save().data).toEqual(wanted);
    };
    resume(plant);
    resume(lively(fidelity));
  });

  it('however often it is observed', () => {
    const plain = lively(fidelity);
    const watched = lively(fidelity);
    const now = createObservation(2);
    const wanted = createWanted();
    fly(plain, 4, (tick) => events(plain, tick));
    fly(watched, 4, (tick) => {
      watched.observeInto(now);
      events(watched, tick);
      watched.observeInto(now);
      watched.wantedInto(wanted);
    });
    expect(watched.x).toEqual(plain.x);
  });
});

describe('a state that is not finite', () => {
  it('stops the run, naming tick and state, and stays at the last good tick', () => {
    const plant = flying('light-twin');
    fly(plant, 1);
    const before = plant.x.slice();
    plant.inputs.stick = NaN;
    expect(plant.step()).toBe(false);
    expect(plant.fault).toBe('tick 121: the aileron is not finite');
    expect(plant.tick).toBe(120);
    expect(plant.x).toEqual(before);
    expect(plant.step()).toBe(false);
  });
});

describe('stepper accuracy', () => {
  const MOTION = [X.X_BETA, X.X_P, X.X_R, X.X_PHI, X.X_THETA, X.X_PSI, X.X_V];

  // flight model §10: max|Δx|/max|x| ≤ 1e-5 for the motion states while |φ| < 60°
  it.each(AIRFRAMES)('agrees with the adaptive integrator at 1e-10 to 1e-5: %s', (slug) => {
    const adaptive: PlantOptions = {
      integrate: (out, rhs, x, stepS) => out.set(integrateAdaptive(rhs, x, 0, stepS, { tolerance: 1e-10 }).x),
    };
    const [one, reference] = [{}, adaptive].map((options) => flying(slug, { options }));
    const largest = new Float64Array(16);
    const error = new Float64Array(16);
    for (let tick = 0; tick < 6 * 120; tick++) {
      for (const plant of [one, reference]) {
        if (tick === 60) plant.failEngine(0, 'windmilling');
        if (tick === 150) plant.inputs.pedal = 0.4;
        if (tick === 170) plant.inputs.stick = 0.2;
        if (tick === 420) plant.addGust({ axis: 'lateral', shape: 'one-minus-cosine', peak: 5, gradientDistanceM: 70 });
        plant.step();
      }
      if (Math.abs(one.x[X.X_PHI]) > 60 * DEG) break;
      for (const i of MOTION) {
        largest[i] = Math.max(largest[i], Math.abs(reference.x[i]));
        error[i] = Math.max(error[i], Math.abs(one.x[i] - reference.x[i]));
      }
    }
    for (const i of MOTION) {
      const scale = i === X.X_THETA ? Math.max(largest[i], DEG) : largest[i]; // path 0 is held: nothing to divide by
      expect(error[i] / scale, `state ${i}`).toBeLessThan(1e-5);
    }
  });
});

describe('small-disturbance', () => {
  it('superposes: the answer to two inputs is the sum of the answers', () => {
    const answer = (act: (plant: Plant) => void): Float64Array => {
      const plant = flying('light-twin', { setup: { fidelity: 'small-disturbance' } });
      const rest = plant.x.slice();
      act(plant);
      fly(plant, 5);
      return plant.x.map((value, i) => value - rest[i]).subarray(0, X.X_THETA);
    };
    // small enough for lag without rate limit
    const stick = answer((plant) => (plant.inputs.stick = 0.1));
    const gust = answer((plant) => plant.addGust({ axis: 'lateral', shape: 'step', peak: 2 }));
    const both = answer((plant) => {
      plant.inputs.stick = 0.1;
      plant.addGust({ axis: 'lateral', shape: 'step', peak: 2 });
    });
    both.forEach((value, i) => expect(value).toBeCloseTo(stick[i] + gust[i], 12));
    expect(Math.abs(both[X.X_PHI])).toBeGreaterThan(0.05);
  });

  it('keeps speed and path, and climbs along the path', () => {
    const plant = flying('light-twin', { start: { pathRad: 0.05 }, setup: { fidelity: 'small-disturbance' } });
    const { [X.X_V]: speed, [X.X_HEIGHT]: height } = plant.x;
    plant.failEngine(1, 'windmilling');
    fly(plant, 4);
    expect(plant.x[X.X_V]).toBe(speed);
    expect(plant.x[X.X_THETA]).toBe(0.05);
    expect(plant.x[X.X_HEIGHT] - height).toBeCloseTo(4 * speed * Math.sin(0.05), 9);
  });
});
