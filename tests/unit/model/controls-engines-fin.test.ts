import { describe, expect, it } from 'vitest';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import type { ControlData } from '#shared/model/aircraft.ts';
import { densityAt, SEA_LEVEL_DENSITY } from '#shared/model/atmosphere.ts';
import {
  forceLimitRudderRad,
  pedalForceN,
  pedalRudderLimitRad,
  pedalToRudderRad,
  pilotRudderRad,
  rudderRatioAt,
  stickToAileronRad,
} from '#shared/model/controls.ts';
import { engineForces, steadyThrustN } from '#shared/model/engines.ts';
import { finAngleRad, finEffectiveAngleRad, finStallAngleRad } from '#shared/model/fin.ts';
import { DEG, FT, KT } from '#shared/units/constants.ts';
import { shippedAirframe } from './support/plants.ts';

const jet = prepareAircraft(shippedAirframe('twin-jet'));
const twin = prepareAircraft(shippedAirframe('light-twin'));
const trainer = prepareAircraft(shippedAirframe('single-trainer'));

describe('cockpit to surface', () => {
  it('right stick rolls right, right pedal yaws right', () => {
    expect(stickToAileronRad(1, 0.3)).toBe(0.3);
    expect(pedalToRudderRad(1, 0.4)).toBe(-0.4);
  });
});

describe('rudder ratio', () => {
  const ratio = jet.controls.rudderRatio;
  if (!ratio) throw new Error('the twin jet has a ratio changer');

  it('is full to 160 kt EAS and inversely proportional above', () => {
    expect(rudderRatioAt(ratio, 150 * KT)).toBe(1);
    expect(rudderRatioAt(ratio, 320 * KT)).toBeCloseTo(0.5, 12);
    expect(rudderRatioAt({ ...ratio, law: 'inverse-square' }, 320 * KT)).toBeCloseTo(0.25, 12);
    expect(rudderRatioAt(null, 320 * KT)).toBe(1);
  });

  it('follows a table linearly and holds its ends', () => {
    const table = {
      ...ratio,
      law: 'table' as const,
      tableMps: Float64Array.of(100 * KT, 200 * KT, 300 * KT),
      tableRatio: Float64Array.of(1, 0.6, 0.3),
    };
    expect(rudderRatioAt(table, 50 * KT)).toBe(1);
    expect(rudderRatioAt(table, 150 * KT)).toBeCloseTo(0.8, 12);
    expect(rudderRatioAt(table, 275 * KT)).toBeCloseTo(0.375, 12);
    expect(rudderRatioAt(table, 400 * KT)).toBe(0.3);
  });

  it('scales the pedal in mode "ratio" and clips it in mode "limit"', () => {
    const eas = 320 * KT;
    const free: ControlData = { ...jet.controls, pedalForce: null };
    const clip: ControlData = { ...free, rudderRatio: { ...ratio, mode: 'limit' } };
    const max = jet.controls.rudderMaxRad;
    expect(pilotRudderRad(free, 0.4, eas, 0.5)).toBeCloseTo(-0.2 * max, 12);
    expect(pilotRudderRad(clip, 0.4, eas, 0.5)).toBeCloseTo(-0.4 * max, 12);
    expect(pilotRudderRad(clip, 0.8, eas, 0.5)).toBeCloseTo(-0.5 * max, 12);
    expect(pilotRudderRad(clip, -0.8, eas, 0.5)).toBeCloseTo(0.5 * max, 12);
  });
});

describe('pedal force', () => {
  it('of reversible controls grows with the square of EAS and stops the pedal at its limit', () => {
    // light twin: 22 N per degree at 80 kt, limit 667 N
    expect(pedalForceN(twin.controls, 10 * DEG, 0, 80 * KT)).toBeCloseTo(220, 9);
    expect(pedalForceN(twin.controls, -10 * DEG, 0, 160 * KT)).toBeCloseTo(880, 9);
    const limit = pedalRudderLimitRad(twin.controls, 160 * KT);
    expect(limit / DEG).toBeCloseTo(667 / 22 / 4, 9);
    expect(pedalForceN(twin.controls, limit, 1, 160 * KT)).toBeCloseTo(667, 9);
    expect(forceLimitRudderRad(twin.controls.pedalForce, 160 * KT)).toBeCloseTo(limit, 12);
    expect(pedalRudderLimitRad(twin.controls, 60 * KT)).toBeCloseTo(25 * DEG, 12);
  });

  it('of artificial feel goes with the pedal', () => {
    // twin jet: 16 N per degree of full-ratio rudder, travel 28°, limit 667 N: never reached
    expect(pedalForceN(jet.controls, 1 * DEG, 0.5, 300 * KT)).toBeCloseTo(16 * 14, 9);
    expect(pedalRudderLimitRad(jet.controls, 320 * KT)).toBeCloseTo(14 * DEG, 12);
    const heavy = { ...jet.controls, pedalForce: { ...jet.controls.pedalForce!, limitN: 224 } }; // stops at half pedal
    expect(pilotRudderRad(heavy, 1, 320 * KT, 0.5)).toBeCloseTo(-7 * DEG, 12);
    expect(pedalForceN(heavy, 0, 1, 320 * KT)).toBe(224);
  });
});

describe('engines', () => {
  it('a propeller gives static thrust at rest and power over speed when fast', () => {
    const [engine] = twin.engines;
    expect(steadyThrustN(engine, 1, 0, 1, 0)).toBeCloseTo(3750, 9);
    expect((steadyThrustN(engine, 1, 1000, 1, 0) * 1000) / (165_000 * 0.8)).toBeCloseTo(1, 2);
    expect(steadyThrustN(engine, 0.5, 40, 0.8, 0)).toBeCloseTo(0.4 * steadyThrustN(engine, 1, 40, 1, 0), 9);
  });

  it('a jet follows σ^0.8 and its Mach polynomial', () => {
    const [engine] = jet.engines;
    const sigma = densityAt(10_000 * FT) / SEA_LEVEL_DENSITY;
    // 117 kN × 0.73849^0.8 × (1 − 0.27 + 0.045), worked by hand
    expect(steadyThrustN(engine, 1, 100, sigma, 0.3) / 1000).toBeCloseTo(117 * 0.78461 * 0.775, 1);
  });

  it('a dead left engine yaws left; the windmilling drag adds to it, feathering takes it off', () => {
    const yaw = (left: 'running' | 'windmilling' | 'feathered'): number =>
      engineForces(twin, [1, 1], [left, 'running'], 45, 0).yawNm;
    expect(yaw('windmilling')).toBeLessThan(yaw('feathered'));
    expect(yaw('feathered')).toBeLessThan(yaw('running'));
    expect(yaw('running')).toBeLessThan(0); // both clockwise: blade offset and swirl yaw left
  });

  it('clockwise propellers: the right engine pulls on the longer arm, so losing the left one is worse', () => {
    const left = engineForces(twin, [1, 1], ['windmilling', 'running'], 45, 0).yawNm;
    const right = engineForces(twin, [1, 1], ['running', 'windmilling'], 45, 0).yawNm;
    expect(-left).toBeGreaterThan(right);
    expect(right).toBeGreaterThan(0);
  });

  it('a clockwise propeller on the centre line yaws left and its torque rolls left', () => {
    const forces = engineForces(trainer, [1], ['running'], 30, 0);
    expect(forces.yawNm).toBeLessThan(0);
    expect(forces.rollNm).toBeLessThan(0);
  });

  it('a jet cannot feather', () => {
    expect(engineForces(jet, [1, 1], ['feathered', 'running'], 70, 0)).toEqual(
      engineForces(jet, [1, 1], ['windmilling', 'running'], 70, 0),
    );
  });

  it('must all have a lever', () => {
    expect(() => engineForces(twin, [1], ['running', 'running'], 45, 0)).toThrow(/1 levers/);
  });
});

describe('fin', () => {
  const fin = twin.fin;
  if (!fin) throw new Error('the light twin has fin data');

  it('is met by sideslip, its own motion and the rudder', () => {
    expect(finAngleRad(fin, 0.1, 0, 0, 40, 0)).toBeCloseTo(0.09, 12);
    expect(finAngleRad(fin, 0, 0.2, 0.1, 40, 0)).toBeCloseTo((0.2 * 0.75 - 0.1 * 4.7) / 40, 12);
    expect(finAngleRad(fin, 0, 0, 0, 40, -0.2)).toBeCloseTo(0.118, 12);
  });

  it('stalls later with a deflection that adds to its angle', () => {
    expect(finStallAngleRad(fin, 0.2, -0.2) / DEG).toBeCloseTo(21 + 0.5 * 0.59 * (0.2 / DEG), 9);
    expect(finStallAngleRad(fin, 0.2, 0.2) / DEG).toBeCloseTo(21, 9);
    expect(finStallAngleRad(fin, -0.2, 0.2)).toBe(finStallAngleRad(fin, 0.2, -0.2));
  });

  it('is exactly linear below stall − 3°, continuous and smooth, and loses its share over 10°', () => {
    const g = (deg: number): number => finEffectiveAngleRad(fin, deg * DEG, 21 * DEG) / DEG;
    expect(finEffectiveAngleRad(fin, 0.31, 21 * DEG)).toBe(0.31);
    expect(g(24)).toBeCloseTo(21, 9);
    expect(g(34)).toBeCloseTo(21 * (1 - 0.4), 9);
    expect(g(60)).toBeCloseTo(21 * (1 - 0.4), 9);
    expect(g(-27)).toBe(-g(27));
    for (let deg = 15; deg < 40; deg += 0.1) {
      expect(Math.abs(g(deg + 0.1) - g(deg))).toBeLessThan(0.15); // no jump; steepest loss 1.26°/°
    }
    for (const edge of [18, 24, 34]) {
      const before = g(edge) - g(edge - 1e-4);
      const after = g(edge + 1e-4) - g(edge);
      expect(Math.abs(after - before) / 1e-4).toBeLessThan(1e-3); // same slope on both sides
    }
  });
});
