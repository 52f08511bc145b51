import { describe, expect, it } from 'vitest';
import { controlSpeedParagraphs, designGustMps } from '#shared/analysis/certification.ts';
import {
  dorsalFinStallDeg,
  estimateDihedralEffect,
  estimateFin,
  estimateRudder,
  finLiftSlope,
  flapEffectiveness,
} from '#shared/analysis/geometry-estimates.ts';
import {
  estimateBody,
  estimateWingPosition,
  estimateWingRollDamping,
  spheroidApparentMass,
} from '#shared/analysis/body-and-wing-estimates.ts';
import { DEG, FT } from '#shared/units/constants.ts';

const FIN = {
  wingAreaM2: 17,
  wingSpanM: 11.3,
  aspectRatio: 7.5,
  wingSweepRad: 0,
  finAreaM2: 2.1,
  finSpanM: 1.8,
  fuselageRadiusM: 0.3,
  fuselageDepthM: 1.4,
  wingBelowCentreM: 0.3,
  armM: 4.7,
  heightM: 0.75,
  liftSlopePerRad: 2.9,
  alphaRad: 0,
};

describe('fin estimate', () => {
  it('has the signs of a fin behind and above, and grows with its area', () => {
    const small = estimateFin(FIN);
    const large = estimateFin({ ...FIN, finAreaM2: 3 });
    expect(small.CY_beta).toBeLessThan(0);
    expect(small.Cn_beta).toBeGreaterThan(0);
    expect(small.Cl_beta).toBeLessThan(0);
    expect(small.Cn_r).toBeLessThan(0);
    expect(small.CY_r).toBeGreaterThan(0);
    expect(large.Cn_beta).toBeGreaterThan(small.Cn_beta);
  });

  it('loses height over the axis with angle of attack', () => {
    expect(estimateFin({ ...FIN, alphaRad: 10 * DEG }).Cl_beta).toBeGreaterThan(estimateFin(FIN).Cl_beta);
  });

  it('names a size that cannot be', () => {
    expect(() => estimateFin({ ...FIN, finAreaM2: 0 })).toThrow(/finAreaM2/u);
    expect(() => estimateFin({ ...FIN, fuselageDepthM: -1 })).toThrow(/fuselageDepthM/u);
  });
});

describe('rudder and flap', () => {
  it('yaws left and rolls right for trailing edge left', () => {
    const { CY_dr, Cn_dr, Cl_dr } = estimateRudder(FIN, 0.35, 0.9);
    expect(CY_dr).toBeGreaterThan(0);
    expect(Cn_dr).toBeLessThan(0);
    expect(Cl_dr).toBeGreaterThan(0);
  });

  it('is nothing without a flap and everything with a full one', () => {
    expect(flapEffectiveness(0)).toBeCloseTo(0, 12);
    expect(flapEffectiveness(1)).toBeCloseTo(1, 12);
    expect(() => flapEffectiveness(1.2)).toThrow(/outside 0 … 1/u);
  });

  it('has the thin-aerofoil lift slope for a very long fin', () => {
    expect(finLiftSlope(1e6, 0)).toBeCloseTo(2 * Math.PI, 3);
    expect(finLiftSlope(1.5, 0)).toBeLessThan(2.4);
  });
});

describe('dihedral and sweep', () => {
  it('give −aΓ/4 and −CL·tan Λ/2 on a rectangular wing (strip theory)', () => {
    const { dihedral, sweep, total } = estimateDihedralEffect(5 * DEG, 30 * DEG, 1, 5, 0.6);
    expect(dihedral).toBeCloseTo((-5 * 5 * DEG) / 4, 12);
    expect(sweep).toBeCloseTo((-0.6 * Math.tan(30 * DEG)) / 2, 12);
    expect(total).toBeCloseTo(dihedral + sweep, 12);
  });
});

describe('dorsal fin', () => {
  it('raises the stall angle in proportion up to a tenth of the fin', () => {
    expect(dorsalFinStallDeg(15, 0)).toBe(15);
    expect(dorsalFinStallDeg(15, 0.05)).toBeCloseTo(21.25, 12);
    expect(dorsalFinStallDeg(15, 0.2)).toBe(27.5);
  });
});

describe('paragraphs', () => {
  it('compare the minimum control speed with 1.13 VSR and 1.2 VS1', () => {
    expect(controlSpeedParagraphs(34, 30).map((p) => p.met)).toEqual([false, true]);
    expect(controlSpeedParagraphs(33.8, 30).map((p) => p.met)).toEqual([true, true]);
    expect(controlSpeedParagraphs(36.1, 30).map((p) => p.met)).toEqual([false, false]);
  });

  it('know gradient distances from 30 to 350 ft only', () => {
    expect(() => designGustMps(0, 20 * FT)).toThrow(/30 to 350 ft/u);
    expect(() => designGustMps(0, 400 * FT)).toThrow(/30 to 350 ft/u);
  });
});

describe('body and wing estimates', () => {
  // Lamb's table of apparent mass of prolate spheroids, as printed in NACA Report 184 (from memory); tolerance its last digit.
  it.each([
    [3.99, 0.082, 0.86],
    [6.01, 0.045, 0.918],
    [9.97, 0.021, 0.96],
  ])('apparent mass of a spheroid of slenderness %s is the tabled one', (slenderness, k1, k2) => {
    const found = spheroidApparentMass(slenderness);
    expect(Math.abs(found.k1 - k1)).toBeLessThan(0.001);
    expect(Math.abs(found.k2 - k2)).toBeLessThan(0.001);
  });

  it.each([1.2, 2, 5, 12])('the three coefficients of a spheroid of slenderness %s make two', (slenderness) => {
    // Lamb: α₀ + β₀ + γ₀ = 2 for any ellipsoid; k = α₀/(2 − α₀), so α₀ = 2k/(1 + k). Exact.
    const { k1, k2 } = spheroidApparentMass(slenderness);
    expect((2 * k1) / (1 + k1) + (4 * k2) / (1 + k2)).toBeCloseTo(2, 10);
  });

  it('a spheroid that is nearly a sphere carries half its mass along', () => {
    const { k1, k2 } = spheroidApparentMass(1.001);
    expect(k1).toBeCloseTo(0.5, 2);
    expect(k2).toBeCloseTo(0.5, 2);
  });

  it('a body destabilises in proportion to its volume and pushes against the sideslip', () => {
    const body = { wingAreaM2: 17, wingSpanM: 11.3, lengthM: 8.5, depthM: 1.4, widthM: 1.2, fullness: 0.5 };
    const found = estimateBody(body);
    expect(found.Cn_beta).toBeLessThan(0);
    expect(found.CY_beta).toBeLessThan(0);
    expect(estimateBody({ ...body, fullness: 0.25 }).Cn_beta).toBeCloseTo(found.Cn_beta / 2, 12);
    expect(() => estimateBody({ ...body, lengthM: 1 })).toThrow(/slenderness/u);
    expect(() => estimateBody({ ...body, fullness: 1.2 })).toThrow(/fullness/u);
  });

  it('roll damping is the integral of the strips, less the induced flow of rolling', () => {
    // Numerically: −(4a/(S b²))·∫ c y² dy over the half span, b = 2, root chord 1; tolerance that of 2,000 midpoints.
    const a = 5.2;
    for (const taper of [0, 0.45, 1]) {
      const steps = 2000;
      let sum = 0;
      let area = 0;
      for (let i = 0; i < steps; i++) {
        const y = (i + 0.5) / steps;
        const chord = 1 - (1 - taper) * y;
        sum += (chord * y * y) / steps;
        area += (2 * chord) / steps;
      }
      const strips = (-4 * a * sum) / (area * 4);
      expect(estimateWingRollDamping(a, taper, 1e9)).toBeCloseTo(strips, 4);
      expect(estimateWingRollDamping(a, taper, 8)).toBeCloseTo((strips * 10) / 12, 4);
    }
    // An elliptic wing damps with a₀A/(A + 4)/8 (Glauert, lifting line); a taper of 0.5 damps 11 % more (computed).
    const elliptic = (-2 * Math.PI * 8) / (8 * (8 + 4));
    expect(estimateWingRollDamping((2 * Math.PI * 8) / (8 + 2), 0.5, 8) / elliptic).toBeCloseTo(1.11, 1);
    expect(() => estimateWingRollDamping(a, 1.1, 8)).toThrow(/taper/u);
    expect(() => estimateWingRollDamping(a, 0.5, 0)).toThrow(/aspectRatio/u);
  });

  it('a low wing takes from the dihedral effect as much as a high one adds', () => {
    const low = estimateWingPosition(7.5, 11.3, 0.4, 1.4, 1.2);
    expect(low).toBeGreaterThan(0);
    expect(estimateWingPosition(7.5, 11.3, -0.4, 1.4, 1.2)).toBe(-low);
  });
});
