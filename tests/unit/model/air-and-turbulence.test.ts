import { describe, expect, it } from 'vitest';
import { profileFactor } from '#shared/model/air.ts';
import { createObservation } from '#shared/model/plant.ts';
import type { Observation, Plant, PlantSetup } from '#shared/model/plant-types.ts';
import * as X from '#shared/model/state-layout.ts';
import {
  advanceTurbulence,
  lateralGustMps,
  rollGustSigmaRadS,
  startTurbulence,
  turbulenceScaleInto,
  yawGustRadS,
} from '#shared/model/turbulence.ts';
import { createStream } from '#shared/numerics/random.ts';
import { DEG, FT, KT } from '#shared/units/constants.ts';
import { fly, flying } from './support/plants.ts';

function seen(plant: Plant): Observation {
  const out = createObservation(plant.engineCount);
  plant.observeInto(out);
  return out;
}

const inWind = (air: Partial<PlantSetup['air']>, heightFt = 300): Plant =>
  flying('light-twin', {
    heightFt,
    setup: { air: { windFromRad: 0, windMps: 0, profile: 'none', turbulence: 'none', ...air } },
  });

describe('mean wind', () => {
  it('carries the aeroplane along and leaves its motion through the air alone', () => {
    const calm = inWind({});
    const windy = inWind({ windFromRad: 120 * DEG, windMps: 10 });
    fly(calm, 5);
    fly(windy, 5);
    for (const i of [X.X_BETA, X.X_PHI, X.X_PSI, X.X_V]) expect(windy.x[i]).toBe(calm.x[i]);
    // from 120°: blows to 300°, that is north-west
    expect(windy.x[X.X_NORTH] - calm.x[X.X_NORTH]).toBeCloseTo(50 * Math.cos(300 * DEG), 6);
    expect(windy.x[X.X_EAST] - calm.x[X.X_EAST]).toBeCloseTo(50 * Math.sin(300 * DEG), 6);
  });

  it('a change acts as −dW/dt: a tailwind that grows takes airspeed, the ground speed hardly feels it', () => {
    const calm = inWind({});
    const windy = inWind({});
    windy.changeWind(Math.PI, 10, 2); // from the south: pushes north, the way they fly
    fly(calm, 1);
    fly(windy, 1);
    expect(seen(windy).windNorthMps).toBeCloseTo(5, 9);
    expect(seen(windy).tasMps - seen(calm).tasMps).toBeLessThan(-4.5);
    expect(Math.abs(seen(windy).groundSpeedMps - seen(calm).groundSpeedMps)).toBeLessThan(0.5); // drag and thrust
    windy.changeWind(0, 10, 0.1); // shorter than 1 s is flown as 1 s
    fly(windy, 0.5);
    expect(seen(windy).windNorthMps).toBeCloseTo(-2.5, 6);
  });

  it('follows the power law up to 1,000 ft', () => {
    expect(profileFactor('none', 10)).toBe(1);
    expect(profileFactor('power-law', 1000 * FT)).toBe(1);
    expect(profileFactor('power-law', 5000 * FT)).toBe(1);
    expect(profileFactor('power-law', 1000 * FT * 2 ** -3.5)).toBeCloseTo(Math.SQRT1_2, 12);
    expect(profileFactor('power-law', 0)).toBe(profileFactor('power-law', 10 * FT));
    const plant = inWind({ windFromRad: 0, windMps: 10, profile: 'power-law' }, 500);
    expect(seen(plant).windNorthMps).toBeCloseTo(-10 * 0.5 ** (1 / 7), 9);
  });
});

describe('discrete gusts', () => {
  it('one minus cosine peaks at its gradient distance and is gone at twice that', () => {
    const plant = inWind({});
    plant.addGust({ axis: 'lateral', shape: 'one-minus-cosine', peak: 8, gradientDistanceM: 60 });
    const seenAt: [number, number][] = [];
    fly(plant, 4, () => seenAt.push([plant.x[X.X_DISTANCE], seen(plant).gustLateralMps]));
    for (const [s, v] of seenAt) {
      expect(v).toBeCloseTo(s < 120 ? 4 * (1 - Math.cos((Math.PI * s) / 60)) : 0, 9);
    }
    expect(Math.max(...seenAt.map(([, v]) => v))).toBeGreaterThan(7.99);
  });

  it('a step acts at once and stays, a ramp reaches its peak in its time and stays', () => {
    const plant = inWind({});
    plant.addGust({ axis: 'yaw-rate', shape: 'step', peak: 2 * DEG });
    plant.addGust({ axis: 'roll-rate', shape: 'ramp', peak: -4 * DEG, overS: 2 });
    expect(seen(plant).gustYawRadS).toBeCloseTo(2 * DEG, 12);
    fly(plant, 1);
    expect(seen(plant).gustRollRadS).toBeCloseTo(-2 * DEG, 12);
    fly(plant, 3);
    expect(seen(plant)).toMatchObject({ gustRollRadS: -4 * DEG, gustYawRadS: 2 * DEG });
  });

  it('air moving to the right comes from the left: the nose swings into it, to the left', () => {
    const plant = inWind({});
    plant.addGust({ axis: 'lateral', shape: 'step', peak: 5 });
    fly(plant, 0.3);
    expect(plant.x[X.X_R]).toBeLessThan(-1 * DEG);
    expect(plant.x[X.X_P]).toBeGreaterThan(1 * DEG); // dihedral: rolls away from the wind
  });

  it('refuses nonsense and too many at once', () => {
    const plant = inWind({});
    const gust = { axis: 'lateral', shape: 'one-minus-cosine', peak: 1 } as const;
    expect(() => plant.addGust({ ...gust, peak: NaN })).toThrow(/peak/);
    expect(() => plant.addGust({ ...gust, gradientDistanceM: 0 })).toThrow(/gradientDistanceM/);
    for (let i = 0; i < 24; i++) plant.addGust(gust);
    expect(() => plant.addGust(gust)).toThrow(expect.objectContaining({ code: 'too-many-gusts' }));
  });
});

describe('turbulence model', () => {
  const at = (heightFt: number, w20Kt: number, highFtS: number): number[] => {
    const scale = { lateralLengthM: 0, verticalLengthM: 0, lateralSigmaMps: 0, verticalSigmaMps: 0 };
    turbulenceScaleInto(scale, w20Kt * KT, highFtS * FT, heightFt * FT);
    return [
      scale.lateralLengthM / FT,
      scale.lateralSigmaMps / (0.1 * w20Kt * KT),
      scale.verticalLengthM / FT,
      scale.lateralSigmaMps / FT,
    ];
  };

  it('has the low-altitude scales of MIL-F-8785C', () => {
    // project reference table: Lv 505.169 ft, σv/σw 1.715849 at 100 ft (seen); 944.657, 1.236236 at 500 ft (computed)
    expect(at(100, 30, 6)[0]).toBeCloseTo(505.169, 3);
    expect(at(100, 30, 6)[1]).toBeCloseTo(1.715849, 6);
    expect(at(500, 30, 6)[0]).toBeCloseTo(944.657, 3);
    expect(at(500, 30, 6)[1]).toBeCloseTo(1.236236, 6);
    expect(at(5, 30, 6)).toEqual(at(10, 30, 6));
  });

  it('goes linearly to 1,750 ft and the level rms at 2,000 ft', () => {
    expect(at(2000, 30, 6)[0]).toBeCloseTo(1750, 9);
    expect(at(9000, 30, 6)[3]).toBeCloseTo(6, 9);
    expect(at(1500, 30, 6)[0]).toBeCloseTo(0.5 * (at(1000, 30, 6)[0] + 1750), 9);
  });

  it('has the rms of Hp and Hr', () => {
    // project reference table (computed): Hp 3.18829 °/s for Lw 100 ft, σw 3 ft/s, b 36.9 ft
    expect(rollGustSigmaRadS(3 * FT, 100 * FT, 36.9 * FT) / DEG).toBeCloseTo(3.18829, 4);
  });

  // V 200 ft/s, L 505.169 ft, σ 5.148 ft/s, b 36.9 ft: rms of Hr 2.58926 °/s (project reference table, computed)
  const V = 200 * FT;
  const L = 505.169 * FT;
  const sigma = 5.148 * FT;
  const span = 36.9 * FT;

  it('has the stationary variance of each filter at any step length, exactly (covariance propagated, no sampling)', () => {
    // a "random" source that plays unit impulses one after the other gives the noise columns of the step
    const column = (impulse: number, state: number[]): number[] => {
      let draw = 0;
      const s = [...state];
      advanceTurbulence(s, 0, { normal: () => (draw++ === impulse ? 1 : 0) }, V, L, span, 0.02);
      return s;
    };
    const rest = [0, 0, 0, 0];
    const noise = [0, 1, 2, 3].map((i) => column(i, rest));
    const step = [0, 1, 2, 3].map((i) =>
      column(
        -1,
        rest.map((_, j) => (i === j ? 1 : 0)),
      ),
    );
    let P = Array.from({ length: 4 }, () => [0, 0, 0, 0]);
    for (let k = 0; k < 20_000; k++) {
      const FP = [0, 1, 2, 3].map((i) =>
        [0, 1, 2, 3].map((j) => [0, 1, 2, 3].reduce((a, m) => a + step[m][i] * P[m][j], 0)),
      );
      P = [0, 1, 2, 3].map((i) =>
        [0, 1, 2, 3].map(
          (j) =>
            [0, 1, 2, 3].reduce((a, m) => a + FP[i][m] * step[m][j], 0) +
            [0, 1, 2, 3].reduce((a, m) => a + noise[m][i] * noise[m][j], 0),
        ),
      );
    }
    const variance = (w: number[]): number =>
      w.reduce((a, wi, i) => a + wi * w.reduce((b, wj, j) => b + wj * P[i][j], 0), 0);
    const unit = (i: number): number[] => rest.map((_, j) => (i === j ? 1 : 0));
    const v = [0, 1, 2, 3].map((i) => lateralGustMps(unit(i), 0, sigma));
    const r = [0, 1, 2, 3].map((i) => yawGustRadS(unit(i), 0, sigma, span));
    expect(P[0][0]).toBeCloseTo(1, 9);
    expect(P[0][1]).toBeCloseTo(0.5, 9);
    expect(P[1][1]).toBeCloseTo(0.5, 9);
    expect(P[3][3]).toBeCloseTo(1, 9);
    expect(Math.sqrt(variance(v)) / sigma).toBeCloseTo(1, 9);
    expect(Math.sqrt(variance(r)) / DEG).toBeCloseTo(2.58926, 4);
  });

  it('decays as the filters say: autocorrelation of v at a lag against the integral of its spectrum', () => {
    // R(τ) = σ² e^(−a τ)(1 − a τ/2) belongs to Φ_v = σ²(L/π)(1+3(LΩ)²)/(1+(LΩ)²)² (derived)
    const s = [0, 0, 0, 0];
    let draw = 0;
    const n = 200_000;
    const stream = createStream(11, 'autocorrelation'); // fixed seed 11
    startTurbulence(s, 0, stream, V, L, span);
    const values = new Float64Array(n);
    for (let i = 0; i < n; i++) {
      advanceTurbulence(s, 0, stream, V, L, span, 0.25);
      values[i] = lateralGustMps(s, 0, 1);
      draw++;
    }
    expect(draw).toBe(n);
    const correlation = (lag: number): number => {
      let sum = 0;
      for (let i = 0; i + lag < n; i++) sum += values[i] * values[i + lag];
      return sum / (n - lag);
    };
    for (const lag of [0, 2, 6, 12]) {
      const x = (V / L) * 0.25 * lag;
      expect(Math.abs(correlation(lag) - Math.exp(-x) * (1 - x / 2))).toBeLessThan(0.03); // 4 standard errors
    }
  });
});

describe('turbulence in flight', () => {
  it('has about the rms of its level, and none of it at level none', () => {
    const plant = inWind({ turbulence: 'moderate' }, 500);
    let sum = 0;
    let count = 0;
    fly(plant, 60, (tick) => {
      if (tick % 12 !== 0) return;
      sum += seen(plant).gustLateralMps ** 2;
      count++;
    });
    const rms = Math.sqrt(sum / count);
    expect(rms / (3 * KT * 1.236)).toBeGreaterThan(0.6);
    expect(rms / (3 * KT * 1.236)).toBeLessThan(1.5);
    plant.setTurbulence('none', 1);
    fly(plant, 1.5);
    expect(seen(plant).gustLateralMps).toBe(0);
  });

  it('repeats with its seed and differs with another', () => {
    const gusts = [5, 5, 6].map((seed) => {
      const air = { windFromRad: 0, windMps: 0, profile: 'none', turbulence: 'light' } as const;
      const plant = flying('light-twin', { setup: { seed, air } });
      fly(plant, 2);
      return seen(plant).gustLateralMps;
    });
    expect(gusts[1]).toBe(gusts[0]);
    expect(gusts[2]).not.toBe(gusts[0]);
  });
});
