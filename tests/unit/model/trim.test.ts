import { describe, expect, it } from 'vitest';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import { engineForces } from '#shared/model/engines.ts';
import { ModelError } from '#shared/model/errors.ts';
import { trimStraight } from '#shared/model/trim.ts';
import type { TrimClosure } from '#shared/model/trim.ts';
import { buildSmallDisturbance } from '#shared/model/small-disturbance.ts';
import { DEG, FT, KT, LBF, SLUG } from '#shared/units/constants.ts';
import { AIRFRAMES, shippedAirframe } from './support/plants.ts';

/** Cessna 310 approach: Roskam, Airplane Flight Dynamics, Part I, App. B, as in the project's reference data. */
function c310(): ReturnType<typeof prepareAircraft> {
  const ft2 = FT * FT;
  const row = {
    CL: 1.155,
    CY_beta: -0.577,
    CY_p: -0.2897,
    CY_r: 0.355,
    CY_dr: 0.23,
    Cl_beta: -0.0965,
    Cl_p: -0.566,
    Cl_r: 0.2433,
    Cl_da: 0.172,
    Cl_dr: 0.0192,
    Cn_beta: 0.1683,
    Cn_p: -0.1021,
    Cn_r: -0.1947,
    Cn_da: -0.0676,
    Cn_dr: -0.1152,
  };
  const parsed = parseAirframe({
    format: 'sidewash.airframe/1',
    name: 'c310-approach',
    class: 'I',
    geometry: { wingArea_m2: 175 * ft2, wingSpan_m: 36.9 * FT, meanChord_m: 4.79 * FT },
    mass: { mass_kg: (4600 * LBF) / 9.80665, Ixx_kgm2: 8884 * SLUG * ft2, Izz_kgm2: 11_001 * SLUG * ft2 },
    configurations: [{ name: 'approach', CLmax: 2, derivatives: [row] }],
    controls: { aileronMax_deg: 20, rudderMax_deg: 25, aileronRate_deg_s: 90, rudderRate_deg_s: 90, lag_s: 0.1 },
  });
  if (!parsed.ok) throw new Error('refused');
  return prepareAircraft(parsed.airframe);
}

describe('published regression case', () => {
  // Project reference table, "Minimum control speed and sideslip" (computed): 82 kt, right engine dead, 1,100 lbf × 5.77 ft
  const aircraft = c310();
  const condition = {
    tasMps: 82 * KT,
    heightM: 0,
    densityKgM3: 0.0023769 * (SLUG / (FT * FT * FT)),
    engineYawNm: 1100 * LBF * 5.77 * FT, // dead right engine: nose right
  };

  it.each([
    [0, 17.7085, 4.9762, 44.4252],
    [-3, 6.1074, 0.0357, 30.3758],
    [-5, -1.611, -3.2512, 21.0286],
  ])('bank %f°', (bank, beta, aileron, rudder) => {
    const trim = trimStraight(aircraft, condition, { kind: 'bank', phiRad: bank * DEG });
    // CL there is fixed at 1.155 with mg·sinφ/(qS); here the weight itself: equal within the rounding of the set
    expect(trim.betaRad / DEG).toBeCloseTo(beta, 1);
    expect(trim.aileronRad / DEG).toBeCloseTo(aileron, 1);
    expect(trim.rudderRad / DEG).toBeCloseTo(rudder, 1);
  });

  it('wing-down slip in a 20 kt crosswind', () => {
    const beta = 14.117 * DEG;
    const trim = trimStraight(aircraft, { ...condition, engineYawNm: 0 }, { kind: 'sideslip', betaRad: beta });
    expect(trim.aileronRad / DEG).toBeCloseTo(6.012, 2);
    expect(trim.rudderRad / DEG).toBeCloseTo(17.096, 2);
    expect(trim.phiRad / DEG).toBeCloseTo(3.651, 1);
  });
});

describe('straight trim', () => {
  const closures: TrimClosure[] = [
    { kind: 'ball-centred' },
    { kind: 'zero-sideslip' },
    { kind: 'bank', phiRad: 4 * DEG },
    { kind: 'sideslip', betaRad: -6 * DEG },
  ];

  it.each(AIRFRAMES)('leaves no moment and no side acceleration: %s', (slug, kt) => {
    const aircraft = prepareAircraft(shippedAirframe(slug));
    const tasMps = 1.1 * kt * KT;
    const dead = aircraft.engines.map((_, i) => (i === 0 ? ('windmilling' as const) : ('running' as const)));
    const levers = aircraft.engines.map(() => 1);
    const { yawNm, rollNm } = engineForces(aircraft, levers, dead, tasMps, 500);
    const condition = { tasMps, heightM: 500, thetaRad: 0.05, engineYawNm: yawNm, engineRollNm: rollNm };
    for (const closure of closures) {
      const trim = trimStraight(aircraft, condition, closure);
      // Independent: at the trim's CL the linear model's columns must balance the engine moments and gravity's side part.
      const linear = buildSmallDisturbance(aircraft, { tasMps, heightM: 500, CL: trim.CL });
      const { A, B } = linear;
      const residual = [0, 1, 2].map(
        (i) =>
          A[4 * i] * trim.betaRad +
          B.aileron[i] * trim.aileronRad +
          B.rudder[i] * trim.rudderRad +
          B.yawMoment[i] * yawNm +
          B.rollMoment[i] * rollNm +
          (i === 0 ? (9.80665 * Math.cos(0.05) * Math.sin(trim.phiRad)) / tasMps : 0),
      );
      residual.forEach((r) => expect(Math.abs(r)).toBeLessThan(1e-9));
      expect(trim.CL).toBeCloseTo(
        (aircraft.massKg * 9.80665 * Math.cos(0.05) * Math.cos(trim.phiRad)) / (trim.qbarPa * aircraft.wingAreaM2),
        9,
      );
    }
  });

  it('banks toward the live engine without sideslip, with less rudder than wings level', () => {
    const aircraft = prepareAircraft(shippedAirframe('light-twin'));
    const tasMps = 80 * KT;
    const { yawNm, rollNm } = engineForces(aircraft, [1, 1], ['windmilling', 'running'], tasMps, 0);
    const condition = { tasMps, heightM: 0, engineYawNm: yawNm, engineRollNm: rollNm };
    const level = trimStraight(aircraft, condition, { kind: 'ball-centred' });
    const banked = trimStraight(aircraft, condition, { kind: 'zero-sideslip' });
    expect(banked.phiRad / DEG).toBeGreaterThan(2);
    expect(banked.phiRad / DEG).toBeLessThan(6);
    expect(Math.abs(banked.rudderRad)).toBeLessThan(Math.abs(level.rudderRad));
    expect(level.betaRad).toBeLessThan(0); // wings level the aeroplane slips toward the dead engine: wind from the left
  });

  it('names what has no solution', () => {
    const dead = structuredClone(shippedAirframe('light-twin'));
    dead.configurations[0].derivatives.forEach((row) => Object.assign(row, { Cl_da: 0, Cn_da: 0 }));
    const condition = { tasMps: 45, heightM: 0, engineYawNm: 1000 };
    const noAileron = prepareAircraft(dead);
    expect(() => trimStraight(noAileron, condition, { kind: 'zero-sideslip' })).toThrow(
      expect.objectContaining({ code: 'singular-trim' }),
    );
    expect(() => trimStraight(noAileron, condition, { kind: 'ball-centred' })).toThrow(ModelError);
    const twin = prepareAircraft(shippedAirframe('light-twin'));
    expect(() => trimStraight(twin, { ...condition, engineYawNm: 1e6 }, { kind: 'zero-sideslip' })).toThrow(
      expect.objectContaining({ code: 'no-bank-holds' }),
    );
    expect(() => trimStraight(twin, { ...condition, tasMps: NaN }, { kind: 'zero-sideslip' })).toThrow(/tasMps/);
    expect(() => trimStraight(twin, { ...condition, tasMps: 0 }, { kind: 'zero-sideslip' })).toThrow(/speed/);
  });
});
