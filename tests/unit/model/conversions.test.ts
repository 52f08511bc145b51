import { describe, expect, it } from 'vitest';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import {
  derivativesBodyToStability,
  derivativesStabilityToBody,
  dimensionalFrom,
  inOwnConventions,
  nonDimensionalFrom,
  OWN_CONVENTIONS,
  primedFromUnprimed,
  unprimedFromPrimed,
  US_TO_SI,
} from '#shared/model/conversions.ts';
import type { LateralDerivatives } from '#shared/model/conversions.ts';
import { importLateralSet } from '#shared/model/import-set.ts';
import type { ForeignSet, ImportedSet } from '#shared/model/import-set.ts';
import { inertiasBodyToStability } from '#shared/model/inertia.ts';
import { buildSmallDisturbance } from '#shared/model/small-disturbance.ts';
import { DEG } from '#shared/units/constants.ts';

/** Douglas DC-8, condition 1: Schmidt, Introduction to Aircraft Flight Dynamics, App. B.4 (NASA CR-96008), ft, slug, s. */
const DC8 = { S: 2600, b: 142.3, W: 190_000, V: 243, q: 70.4, Ixx: 3.09e6, Izz: 5.58e6, Ixz: 28_000 };
const dc8Coefficients: LateralDerivatives = {
  CY_beta: -0.8727,
  CY_p: 0,
  CY_r: 0,
  CY_da: 0,
  CY_dr: 0.1865,
  Cl_beta: -0.1582,
  Cl_p: -0.385,
  Cl_r: 0.248,
  Cl_da: 0.086,
  Cl_dr: 0.0219,
  Cn_beta: 0.1633,
  Cn_p: -0.087,
  Cn_r: -0.196,
  Cn_da: 0.0106,
  Cn_dr: -0.0834,
};
const dc8Dimensional: Partial<LateralDerivatives> = {
  CY_beta: -27.05,
  CY_dr: 5.782,
  Cl_beta: -1.334,
  Cl_p: -0.949,
  Cl_r: 0.611,
  Cl_da: 0.725,
  Cl_dr: 0.185,
  Cn_beta: 0.762,
  Cn_p: -0.119,
  Cn_r: -0.268,
  Cn_da: 0.05,
  Cn_dr: -0.389,
};
const dc8Primed: Partial<LateralDerivatives> = {
  Cl_beta: -1.327,
  Cl_p: -0.95,
  Cl_r: 0.609,
  Cl_da: 0.726,
  Cl_dr: 0.181,
  Cn_beta: 0.756,
  Cn_p: -0.124,
  Cn_r: -0.264,
  Cn_da: 0.053,
  Cn_dr: -0.388,
};
const density = (2 * DC8.q) / (DC8.V * DC8.V);
const dc8Condition = {
  massKg: DC8.W / 32.174, // slug: one consistent unit system
  wingAreaM2: DC8.S,
  spanM: DC8.b,
  tasMps: DC8.V,
  densityKgM3: density,
  inertias: { Ixx: DC8.Ixx, Izz: DC8.Izz, Ixz: DC8.Ixz },
};

/** Within 0.5 % or the last printed digit (the tolerance of the project's reference table). */
function agrees(got: LateralDerivatives, printed: Partial<LateralDerivatives>): void {
  for (const [name, value] of Object.entries(printed)) {
    const mine = got[name as keyof LateralDerivatives]; // the printed names are members of the record
    const digits = String(value).split('.')[1]?.length ?? 0;
    const tolerance = Math.max(0.005 * Math.abs(value), 10 ** -digits);
    expect(Math.abs(mine - value), `${name}: ${mine} against ${value}`).toBeLessThanOrEqual(tolerance);
  }
}

describe('published set: DC-8, power approach', () => {
  const dimensional = dimensionalFrom(dc8Coefficients, dc8Condition);

  it('non-dimensional → dimensional', () => agrees(dimensional, dc8Dimensional));

  it('dimensional → primed', () => agrees(primedFromUnprimed(dimensional, dc8Condition.inertias), dc8Primed));

  it('and back again', () => {
    const primed = primedFromUnprimed(dimensional, dc8Condition.inertias);
    const back = nonDimensionalFrom(unprimedFromPrimed(primed, dc8Condition.inertias), dc8Condition);
    for (const [name, value] of Object.entries(dc8Coefficients)) {
      expect(back[name as keyof LateralDerivatives]).toBeCloseTo(value, 12); // same record
    }
  });

  it('imported as printed (primed, US units) it flies like the non-dimensional set', () => {
    const base: ForeignSet = {
      units: 'US',
      axes: 'stability',
      inertiaAxes: 'stability',
      form: 'non-dimensional',
      mass: DC8.W,
      wingArea: DC8.S,
      wingSpan: DC8.b,
      speed: DC8.V,
      density,
      Ixx: DC8.Ixx,
      Izz: DC8.Izz,
      Ixz: DC8.Ixz,
      derivatives: dc8Coefficients,
    };
    const plain = importLateralSet(base);
    const primed = importLateralSet({
      ...base,
      form: 'dimensional-primed',
      derivatives: primedFromUnprimed(dimensional, dc8Condition.inertias),
    });
    // W/g with g 32.174 ft/s² against lb: 1 part in 1e6
    expect(primed.row.CY_beta / plain.row.CY_beta).toBeCloseTo(1, 4);
    for (const name of ['Cl_beta', 'Cl_p', 'Cn_r', 'Cn_dr'] as const) {
      expect(primed.row[name]).toBeCloseTo(plain.row[name], 9);
    }
    const { A } = buildSmallDisturbance(asAircraft(plain), {
      tasMps: DC8.V * US_TO_SI.ftPerS,
      heightM: 0,
      densityKgM3: density * US_TO_SI.slugPerFt3,
    });
    expect(A[4]).toBeCloseTo(-1.327, 2);
    expect(Math.abs(A[10] + 0.264)).toBeLessThan(0.0014); // 0.5 % or the last digit
  });
});

function asAircraft({ wingArea_m2, wingSpan_m, mass, row }: ImportedSet): ReturnType<typeof prepareAircraft> {
  const parsed = parseAirframe({
    format: 'sidewash.airframe/1',
    name: 'imported',
    class: 'III',
    geometry: { wingArea_m2, wingSpan_m, meanChord_m: wingArea_m2 / wingSpan_m },
    mass,
    configurations: [{ name: 'only', CLmax: 2, derivatives: [row] }],
    controls: { aileronMax_deg: 20, rudderMax_deg: 25, aileronRate_deg_s: 60, rudderRate_deg_s: 60, lag_s: 0.1 },
  });
  if (!parsed.ok) throw new Error(parsed.issues.map(({ message }) => message).join('; '));
  return prepareAircraft(parsed.airframe);
}

describe('body and stability axes', () => {
  it('come back from the inverse', () => {
    const body = derivativesStabilityToBody(dc8Coefficients, 7 * DEG);
    const back = derivativesBodyToStability(body, 7 * DEG);
    for (const [name, value] of Object.entries(dc8Coefficients)) {
      expect(back[name as keyof LateralDerivatives]).toBeCloseTo(value, 12); // same record
    }
  });

  it('describe the same motion: moments about one axis system are those of the other', () => {
    // independent: turn the rates into body axes, form the moments there, turn them back
    const alpha = 9 * DEG;
    const body = derivativesStabilityToBody(dc8Coefficients, alpha);
    const [beta, p, r, da, dr] = [0.1, 0.02, -0.03, 0.2, -0.1];
    const pb = p * Math.cos(alpha) - r * Math.sin(alpha);
    const rb = r * Math.cos(alpha) + p * Math.sin(alpha);
    const moment = (d: LateralDerivatives, family: 'CY' | 'Cl' | 'Cn', roll: number, yaw: number): number =>
      d[`${family}_beta`] * beta +
      d[`${family}_p`] * roll +
      d[`${family}_r`] * yaw +
      d[`${family}_da`] * da +
      d[`${family}_dr`] * dr;
    const lb = moment(body, 'Cl', pb, rb);
    const nb = moment(body, 'Cn', pb, rb);
    expect(moment(dc8Coefficients, 'Cl', p, r)).toBeCloseTo(lb * Math.cos(alpha) + nb * Math.sin(alpha), 12);
    expect(moment(dc8Coefficients, 'Cn', p, r)).toBeCloseTo(nb * Math.cos(alpha) - lb * Math.sin(alpha), 12);
    expect(moment(dc8Coefficients, 'CY', p, r)).toBeCloseTo(moment(body, 'CY', pb, rb), 12);
  });

  it('a set given wholly in body axes has the modes of the same set in stability axes', () => {
    const alphaDeg = 8;
    const stability: ForeignSet = {
      units: 'SI',
      axes: 'stability',
      inertiaAxes: 'stability',
      form: 'non-dimensional',
      mass: 80_000,
      wingArea: 240,
      wingSpan: 43,
      speed: 75,
      density: 1.2,
      Ixx: 4.2e6,
      Izz: 7.6e6,
      Ixz: 40_000,
      CL: 1,
      derivatives: dc8Coefficients,
    };
    const inertias = inertiasBodyToStability({ Ixx: 4.2e6, Izz: 7.6e6, Ixz: 40_000 }, -alphaDeg * DEG);
    const inBody = importLateralSet({
      ...stability,
      ...inertias,
      axes: 'body',
      inertiaAxes: 'body',
      alphaDeg,
      derivatives: derivativesStabilityToBody(dc8Coefficients, alphaDeg * DEG),
    });
    const condition = { tasMps: 75, heightM: 0, densityKgM3: 1.2, CL: 1 };
    const one = buildSmallDisturbance(asAircraft(importLateralSet(stability)), condition);
    const other = buildSmallDisturbance(asAircraft(inBody), condition);
    one.A.forEach((value, i) => expect(other.A[i]).toBeCloseTo(value, 9));
    expect(() => importLateralSet({ ...stability, axes: 'body' })).toThrow(/angle of attack/);
    expect(() => importLateralSet({ ...stability, speed: 0 })).toThrow(/speed/);
  });

  it('a dimensional set in stability axes is undone with the rotated inertias', () => {
    const alphaDeg = 6;
    const given = { Ixx: 4.2e6, Izz: 7.6e6, Ixz: 0 };
    const turned = inertiasBodyToStability(given, alphaDeg * DEG);
    const condition = { massKg: 8e4, wingAreaM2: 240, spanM: 43, tasMps: 75, densityKgM3: 1.2, inertias: turned };
    const got = importLateralSet({
      units: 'SI',
      axes: 'stability',
      inertiaAxes: 'body',
      form: 'dimensional',
      mass: 8e4,
      wingArea: 240,
      wingSpan: 43,
      speed: 75,
      density: 1.2,
      ...given,
      alphaDeg,
      derivatives: dimensionalFrom(dc8Coefficients, condition),
    });
    for (const [name, value] of Object.entries(dc8Coefficients)) {
      expect(got.row[name as keyof LateralDerivatives]).toBeCloseTo(value, 12); // same record
    }
    expect(got.mass.axes).toBe('body');
    expect(got.row.alpha_deg).toBe(6);
  });
});

describe('conventions', () => {
  it('turn aileron and rudder signs, degrees and pb/V', () => {
    const given: LateralDerivatives = { ...dc8Coefficients };
    expect(inOwnConventions(given, OWN_CONVENTIONS)).toEqual(given);
    const turned = inOwnConventions(given, { aileron: 'left', rudder: 'right', angles: 'degree', rates: 'b/V' });
    expect(turned.Cl_da).toBeCloseTo(-0.086 / DEG, 9);
    expect(turned.Cn_dr).toBeCloseTo(0.0834 / DEG, 9);
    expect(turned.Cn_beta).toBeCloseTo(0.1633 / DEG, 9);
    expect(turned.Cl_p).toBeCloseTo(-0.77, 12);
    expect(Object.is(turned.CY_da, 0)).toBe(true);
  });

  it('US units are the exact ones', () => {
    expect(US_TO_SI.slugFt2).toBeCloseTo(1.3558179483314, 10); // lbf·ft·s²: NIST SP 811
    expect(US_TO_SI.hp).toBeCloseTo(745.69987158227, 9);
    expect(US_TO_SI.slugPerFt3 * 0.0023769).toBeCloseTo(1.225, 3);
  });
});
