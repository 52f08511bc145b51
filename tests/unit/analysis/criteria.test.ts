import { describe, expect, it } from 'vitest';
import { dutchDampingLimits, levelOf, modalCriteria } from '#shared/analysis/criteria-8785c.ts';
import type { AircraftClass, FlightCategory } from '#shared/analysis/criteria-tables.ts';
import { modeOf } from '#shared/analysis/modes.ts';
import type { LateralModes, ModeKind } from '#shared/analysis/modes.ts';
import { rollRateExtrema, timeToBankS } from '#shared/analysis/roll-performance.ts';
import { sPlaneBoundaries } from '#shared/analysis/s-plane-regions.ts';

function modes(...roots: [ModeKind, number, number][]): LateralModes {
  return { modes: roots.map(([kind, re, im]) => modeOf(kind, { re, im }, 10)), remarks: [] };
}

function level(found: LateralModes, id: string, klass: AircraftClass, category: FlightCategory, phiBeta = 1) {
  return modalCriteria(found, phiBeta, klass, category).find((result) => result.id === id);
}

/** Dutch roll of given frequency and damping. */
const dutch = (wn: number, zeta: number) => modes(['dutch-roll', -zeta * wn, wn * Math.sqrt(1 - zeta * zeta)]);

describe('MIL-F-8785C table VI (seen)', () => {
  it.each([
    // class, category, ω, ζ, expected level: just inside and just outside of each minimum
    ['I', 'A', 2, 0.191, 1],
    ['I', 'A', 2, 0.189, 2],
    ['I', 'A', 1.01, 0.34, 2], // ζω 0.343 < 0.35
    ['I', 'A', 1.01, 0.35, 1],
    ['II-L', 'B', 1.9, 0.081, 1],
    ['II-L', 'B', 1.7, 0.081, 2], // ζω 0.138 < 0.15
    ['III', 'C', 0.5, 0.201, 1], // ζω just above 0.10
    ['III', 'C', 0.5, 0.199, 2],
    ['II-C', 'C', 2, 0.081, 1],
    ['II-L', 'C', 1.3, 0.081, 1],
    ['III', 'C', 2.6, 0.0201, 2],
    ['III', 'C', 2.4, 0.0201, 3], // ζω 0.048 < 0.05
    ['III', 'C', 2.6, 0.001, 3],
    ['III', 'C', 2.6, -0.001, 4],
  ] as const)('class %s category %s: ω %d ζ %d is level %i', (klass, category, wn, zeta, expected) => {
    expect(level(dutch(wn, zeta), 'dutch-damping', klass, category, 0)?.level).toBe(expected);
  });

  it('asks a frequency of 1.0 or 0.4 rad/s', () => {
    expect(level(dutch(0.99, 0.5), 'dutch-frequency', 'I', 'C')?.level).toBe(2);
    expect(level(dutch(1.01, 0.5), 'dutch-frequency', 'I', 'C')?.level).toBe(1);
    expect(level(dutch(0.41, 0.5), 'dutch-frequency', 'III', 'C')?.level).toBe(1);
    expect(level(dutch(0.39, 0.5), 'dutch-frequency', 'III', 'C')?.level).toBe(4);
  });

  it('raises ζω above ω²|φ/β| = 20 by 0.014, 0.009, 0.005 of the excess', () => {
    const wn = 4;
    const plain = dutchDampingLimits('II-L', 'B', wn, 1.25); // ω²|φ/β| = 20: no rise
    expect(plain).toEqual([0.08, 0.02, 0]);
    const raised = dutchDampingLimits('II-L', 'B', wn, 3.125); // 50: excess 30
    expect(raised[0]).toBeCloseTo((0.15 + 0.014 * 30) / wn, 12);
    expect(raised[1]).toBeCloseTo((0.05 + 0.009 * 30) / wn, 12);
    expect(raised[2]).toBeCloseTo((0.005 * 30) / wn, 12);
  });

  it('never asks more than 0.7 of Class III', () => {
    expect(dutchDampingLimits('III', 'C', 0.05, null)[0]).toBe(0.7);
    expect(dutchDampingLimits('II-L', 'C', 0.05, null)[0]).toBeCloseTo(2, 12);
  });
});

describe('MIL-F-8785C roll mode, spiral and coupling (seen)', () => {
  it.each([
    ['I', 'A', [1, 1.4, 10]],
    ['III', 'A', [1.4, 3, 10]],
    ['I', 'B', [1.4, 3, 10]],
    ['II-C', 'C', [1, 1.4, 10]],
    ['II-L', 'C', [1.4, 3, 10]],
  ] as const)('table VII class %s category %s', (klass, category, limits) => {
    limits.forEach((limit, i) => {
      const at = (tau: number) => level(modes(['roll', -1 / tau, 0]), 'roll-mode', klass, category)?.level;
      expect(at(limit * 0.999)).toBe(i + 1);
      expect(at(limit * 1.001)).toBe(i + 2);
    });
  });

  it('table VIII: time to double 12/8/4 s, 20 s in category B', () => {
    const at = (seconds: number, category: FlightCategory) =>
      level(modes(['spiral', Math.LN2 / seconds, 0]), 'spiral', 'III', category)?.level;
    expect([12.1, 11.9, 7.9, 3.9].map((s) => at(s, 'C'))).toEqual([1, 2, 3, 4]);
    expect([20.1, 19.9].map((s) => at(s, 'B'))).toEqual([1, 2]);
    expect(level(modes(['spiral', -0.01, 0]), 'spiral', 'III', 'C')).toMatchObject({ level: 1, value: null });
  });

  it('3.3.1.4: a coupled roll–spiral needs ζω of 0.5/0.3/0.15 and is not permitted in category A', () => {
    const at = (decay: number, category: FlightCategory) =>
      level(modes(['roll-spiral', -decay, 0.2]), 'coupled-roll-spiral', 'II-L', category)?.level;
    expect([0.51, 0.49, 0.29, 0.14].map((d) => at(d, 'C'))).toEqual([1, 2, 3, 4]);
    expect(at(2, 'A')).toBe(4);
    expect(level(modes(['roll', -1, 0]), 'coupled-roll-spiral', 'II-L', 'B')?.level).toBeNull();
  });

  it('says what it cannot judge instead of a number', () => {
    const found = modes(['real-pair', -1, 0], ['real-pair', -2, 0], ['roll-spiral', -0.2, 0.3]);
    for (const id of ['dutch-damping', 'dutch-frequency', 'roll-mode', 'spiral']) {
      expect(level(found, id, 'I', 'C')).toMatchObject({ level: null, value: null, remark: expect.any(String) });
    }
    expect(level(modes(['real-pair', 1, 0], ['real-pair', -2, 0]), 'dutch-damping', 'I', 'C')?.level).toBe(4);
    expect(level(modes(['roll', 0.2, 0]), 'roll-mode', 'I', 'C')?.level).toBe(4);
  });
});

describe('paragraphs', () => {
  it('25.181(b) asks positive damping (seen), 23.181(b) ζ ≥ 0.052 (memory)', () => {
    const at = (zeta: number, id: string) => level(dutch(1.5, zeta), id, 'III', 'C')?.level;
    expect([0.001, -0.001].map((zeta) => at(zeta, '25.181'))).toEqual(['met', 'not met']);
    expect([0.053, 0.051].map((zeta) => at(zeta, '23.181'))).toEqual(['met', 'not met']);
    const pair = (re: number) => modes(['real-pair', re, 0], ['real-pair', -2, 0]);
    for (const id of ['25.181', '23.181']) {
      // A root at zero is no damping: neither the paragraph nor "convergent" may be said of it.
      expect([-1, 0, 1].map((re) => level(pair(re), id, 'III', 'C')?.level)).toEqual(['met', 'not met', 'not met']);
      expect(level(pair(0), id, 'III', 'C')?.remark).toMatch(/neutral/u);
    }
    // 1/10 in 7 cycles: exp(−2π·7·ζ/√(1−ζ²)) = 0.1
    expect(Math.exp((-2 * Math.PI * 7 * 0.0523) / Math.sqrt(1 - 0.0523 ** 2))).toBeCloseTo(0.1, 3);
  });
});

describe('levels', () => {
  it('never take NaN for good', () => {
    expect(levelOf(Number.NaN, [1, 2, 3], 'at least')).toBe(4);
    expect(levelOf(Number.NaN, [1, 2, 3], 'at most')).toBe(4);
  });
});

describe('s-plane boundaries', () => {
  it('are where the level of an oscillation changes', () => {
    for (const klass of ['I', 'II-L', 'II-C', 'III', 'IV'] as const) {
      for (const category of ['A', 'B', 'C'] as const) {
        for (const { level: wanted, dutchRoll } of sPlaneBoundaries(klass, category, 6, 4)) {
          for (const { re, im } of dutchRoll) {
            if (im === 0) continue;
            const both = (x: number) => {
              const found = modes(['dutch-roll', x, im]);
              const results = ['dutch-damping', 'dutch-frequency'].map(
                (id) => level(found, id, klass, category, 4)?.level,
              );
              return Math.max(...results.map(Number));
            };
            expect(both(re * 1.001 - 1e-6)).toBeLessThanOrEqual(wanted);
            expect(both(re * 0.999 + 1e-6)).toBeGreaterThan(wanted);
          }
        }
      }
    }
  });

  it('refuse an empty plane by name', () => {
    expect(() => sPlaneBoundaries('I', 'A', 0, null)).toThrow(/empty/u);
  });
});

describe('roll performance', () => {
  /** Roll alone: ṗ = −p/τ + L δ. */
  const tau = 0.5;
  const A = Float64Array.from([-1, 0, 0, 0, 0, -1 / tau, 0, 0, 0, 0, -1, 0, 0, 1, 0, 0]);
  const aileron = Float64Array.from([0, 6, 0, 0]);
  const time = (column: Float64Array, actuator: { lagS: number; rateRadS: number; maxRad: number }, bank: number) =>
    timeToBankS(A, column, 4, actuator, bank);

  it('reaches 30° when L τ δ (t − τ(1 − e^(−t/τ))) does, for a surface without lag', () => {
    const delta = 0.3;
    const t = time(aileron, { lagS: 0, rateRadS: 9, maxRad: delta }, Math.PI / 6);
    const bank = (s: number) => 6 * tau * delta * (s - tau * (1 - Math.exp(-s / tau)));
    expect(bank(t ?? 0)).toBeCloseTo(Math.PI / 6, 6);
  });

  it('takes longer with a slow surface and says null when it never gets there', () => {
    const quick = time(aileron, { lagS: 0.05, rateRadS: 9, maxRad: 0.3 }, 0.5);
    const slow = time(aileron, { lagS: 0.05, rateRadS: 0.2, maxRad: 0.3 }, 0.5);
    expect(slow ?? 0).toBeGreaterThan((quick ?? 0) + 0.5);
    expect(time(aileron, { lagS: 0.05, rateRadS: 9, maxRad: 1e-4 }, 0.5)).toBeNull();
    const reversed = aileron.map((v) => -v);
    expect(time(reversed, { lagS: 0.05, rateRadS: 9, maxRad: 0.3 }, 0.5)).toBeNull();
  });

  it('finds no extremum in a pure first-order roll', () => {
    expect(rollRateExtrema(A, aileron).peak).toBeNull();
  });
});
