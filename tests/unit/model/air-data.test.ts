import { describe, expect, it } from 'vitest';
import { casFromTas, easFromTas, machFromTas, tasFromCas, tasFromEas } from '#shared/model/airspeeds.ts';
import { densityAt, densityNear, pressurePa, standardAtmosphere, temperatureK } from '#shared/model/atmosphere.ts';
import { FT, KT } from '#shared/units/constants.ts';

describe('standard atmosphere', () => {
  // ISA densities as tabulated (ISO 2533; project reference table): five decimals
  it.each([
    [0, 1.225],
    [10_000, 0.90464],
    [20_000, 0.65269],
    [36_089, 0.36392],
    [40_000, 0.30156],
  ])('has at %i ft the density %f kg/m³', (ft, density) => {
    expect(Math.abs(densityAt(ft * FT) - density)).toBeLessThan(1e-5);
  });

  it('obeys the gas law and is continuous at the tropopause', () => {
    for (const h of [0, 5000, 10_999.999, 11_000, 15_000]) {
      expect(pressurePa(h)).toBeCloseTo(densityAt(h) * 287.05287 * temperatureK(h), 6);
    }
    expect(densityAt(10_999.9999) / densityAt(11_000.0001)).toBeCloseTo(1, 7);
    expect(pressurePa(0)).toBeCloseTo(101_325, 6);
  });

  it('is hydrostatic: dp/dh = −ρg', () => {
    for (const h of [100, 3000, 9000, 13_000]) {
      const slope = (pressurePa(h + 1) - pressurePa(h - 1)) / 2;
      expect(slope / (-densityAt(h) * 9.80665)).toBeCloseTo(1, 6);
    }
  });

  it('is matched by the series about an anchor to 2e-12 within 30 m', () => {
    for (const anchor of [20, 3020, 10_980, 11_020, 14_000]) {
      for (const rise of [-30, -7, 0.5, 30]) {
        const near = densityNear(rise, densityAt(anchor), temperatureK(anchor), anchor < 11_000);
        const exact = densityAt(anchor + rise);
        if (anchor < 11_000 === anchor + rise < 11_000) expect(Math.abs(near / exact - 1)).toBeLessThan(2e-12);
      }
    }
  });

  it('refuses a height that is no number', () => {
    expect(() => standardAtmosphere(NaN)).toThrow(/height/);
  });
});

describe('airspeeds', () => {
  // compressible CAS relation, project reference table (computed): CAS kt, height ft → Mach, TAS kt, EAS kt
  it.each([
    [100, 5000, 0.1656, 107.67, 99.94],
    [250, 10_000, 0.4523, 288.7, 248.1],
    [300, 30_000, 0.7906, 465.94, 285.0],
  ])('%i kt calibrated at %i ft', (casKt, ft, mach, tasKt, easKt) => {
    const h = ft * FT;
    const tas = tasFromCas(casKt * KT, h);
    expect(Math.abs(machFromTas(tas, h) - mach)).toBeLessThan(5.1e-5);
    expect(Math.abs(tas / KT - tasKt)).toBeLessThan(0.0051);
    expect(Math.abs(easFromTas(tas, h) / KT - easKt)).toBeLessThan(0.0051);
  });

  it('come back from their inverse', () => {
    for (const h of [0, 2000, 11_000]) {
      for (const v of [1, 40, 200]) {
        expect(casFromTas(tasFromCas(v, h), h)).toBeCloseTo(v, 9);
        expect(tasFromEas(easFromTas(v, h), h)).toBeCloseTo(v, 12);
      }
    }
    expect(casFromTas(-40, 0)).toBe(-casFromTas(40, 0));
  });
});
