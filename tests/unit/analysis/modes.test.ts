import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { lateralModes } from '#shared/analysis/modes.ts';
import { modeShapes } from '#shared/analysis/mode-shapes.ts';
import { participation } from '#shared/analysis/mode-participation.ts';
import { stabilityMap } from '#shared/analysis/stability-map.ts';
import { createStream } from '#shared/numerics/random.ts';
import { randomLateral } from '../numerics/matrix-samples.ts';

/** A conventional lateral matrix: [β, p, r, φ], quick roll, slow spiral, damped Dutch roll. */
function lateral(changes: Partial<Record<number, number>> = {}): Float64Array {
  const a = Float64Array.from([-0.15, 0, -0.99, 0.15, -4, -2, 0.4, 0, 2.5, -0.2, -0.3, 0, 0, 1, 0, 0]);
  for (const [index, value] of Object.entries(changes)) a[Number(index)] = value ?? 0;
  return a;
}

const kinds = (a: Float64Array) => lateralModes(a).modes.map((mode) => mode.kind);

describe('naming of lateral modes', () => {
  it('finds Dutch roll, roll and spiral of an ordinary aeroplane', () => {
    const { modes, remarks } = lateralModes(lateral());
    expect(modes.map((mode) => mode.kind)).toEqual(['dutch-roll', 'roll', 'spiral']);
    expect(remarks).toEqual([]);
    const [dutch, roll, spiral] = modes;
    expect(dutch.wn).toBeCloseTo(Math.hypot(dutch.re, dutch.im), 12);
    expect(dutch.zeta).toBeCloseTo(-dutch.re / Math.hypot(dutch.re, dutch.im), 12);
    expect(dutch.periodS).toBeCloseTo((2 * Math.PI) / dutch.im, 12);
    expect(dutch.tauS).toBeUndefined();
    expect(roll.tauS).toBeCloseTo(-1 / roll.re, 12);
    expect(roll.halveS).toBeCloseTo(-Math.LN2 / roll.re, 12);
    expect(Math.abs(spiral.re)).toBeLessThan(Math.abs(roll.re));
  });

  it('names a coupled roll–spiral (little roll damping, strong dihedral effect)', () => {
    const { modes, remarks } = lateralModes(lateral({ 5: -0.05, 9: 0.05, 4: -3, 10: -0.9 }));
    expect(modes.map((mode) => mode.kind)).toEqual(['dutch-roll', 'roll-spiral']);
    expect(remarks).toContain('oscillatory-roll-spiral');
    expect(modes[1].im).toBeGreaterThan(0);
  });

  it('names two real roots in place of the Dutch roll (no weathercock stability, no dihedral effect)', () => {
    const { modes, remarks } = lateralModes(lateral({ 8: -1, 4: 0 }));
    expect(modes.map((mode) => mode.kind)).toEqual(['real-pair', 'real-pair', 'roll', 'spiral']);
    expect(remarks).toContain('no-dutch-roll-oscillation');
    expect(remarks).toContain('divergent-real-pair');
    for (const mode of modes) expect(mode.wn).toBeUndefined();
  });

  it('names an unstable spiral and gives its time to double and a negative time constant', () => {
    const { modes, remarks } = lateralModes(lateral({ 4: -0.5 }));
    const spiral = modes.find((mode) => mode.kind === 'spiral');
    expect(remarks).toContain('unstable-spiral');
    expect(spiral?.doubleS).toBeCloseTo(Math.LN2 / (spiral?.re ?? 0), 9);
    expect(spiral?.halveS).toBeUndefined();
    expect(spiral?.tauS).toBeLessThan(0);
  });

  it('names an unstable Dutch roll', () => {
    expect(lateralModes(lateral({ 0: 0.5, 10: 0.2 })).remarks).toContain('unstable-dutch-roll');
  });

  it('calls the root of an aeroplane without gravity neutral and gives no time for it', () => {
    const { modes, remarks } = lateralModes(lateral({ 3: 0 }));
    expect(remarks).toContain('neutral-root');
    const spiral = modes.find((mode) => mode.kind === 'spiral');
    expect(spiral?.halveS ?? spiral?.doubleS ?? spiral?.tauS).toBeUndefined();
  });

  it('names repeated roots instead of failing on them', () => {
    // Uncoupled: roll −1, spiral 0 from φ, and a double root −1 in β, r.
    const a = Float64Array.from([-1, 0, 1, 0, 0, -1, 0, 0, 0, 0, -1, 0, 0, 1, 0, 0]);
    const { modes, remarks } = lateralModes(a);
    expect(remarks).toContain('repeated-roots');
    expect(modes).toHaveLength(4);
    for (const mode of modes) expect(Number.isFinite(mode.re)).toBe(true);
    expect(lateralModes(new Float64Array(16)).modes).toHaveLength(4);
  });

  it('adds a washout mode with the yaw damper state', () => {
    const a = lateral();
    const five = new Float64Array(25);
    for (let i = 0; i < 4; i++) for (let j = 0; j < 4; j++) five[i * 5 + j] = a[i * 4 + j];
    five[4 * 5 + 2] = 0.3;
    five[24] = -0.3;
    const { modes } = lateralModes(five, 5);
    expect(modes.map((mode) => mode.kind)).toEqual(['dutch-roll', 'roll', 'spiral', 'washout']);
    expect(modes[3].re).toBeCloseTo(-0.3, 9);
    expect(modes[0].re).toBeCloseTo(lateralModes(a).modes[0].re, 9);
  });

  it('gives every finite matrix four roots with names (fast-check, seed 17)', () => {
    const element = fc.double({ min: -20, max: 20, noNaN: true });
    fc.assert(
      fc.property(fc.array(element, { minLength: 16, maxLength: 16 }), (values) => {
        const { modes } = lateralModes(values);
        const count = modes.reduce((sum, mode) => sum + (mode.im > 0 ? 2 : 1), 0);
        expect(count).toBe(4);
        for (const mode of modes) {
          for (const value of Object.values(mode)) if (typeof value === 'number') expect(value).not.toBeNaN();
        }
      }),
      { seed: 17, numRuns: 500 },
    );
  });
});

describe('participation', () => {
  it('of all states adds up to one for a system without coupling', () => {
    const a = Float64Array.from([-1, 0, 0, 0, 0, -2, 0, 0, 0, 0, -3, 0, 0, 0, 0, -4]);
    for (let k = 0; k < 4; k++) {
      for (let state = 0; state < 4; state++) {
        expect(participation(a, 4, -1 - k, 0, state)).toBeCloseTo(state === k ? 1 : 0, 12);
      }
    }
  });

  it('is the sensitivity of the eigenvalue to the damping of the state', () => {
    const a = lateral();
    const roll = lateralModes(a).modes[1].re;
    const h = 1e-5;
    const moved = lateralModes(lateral({ 5: a[5] + h })).modes[1].re;
    expect(participation(a, 4, roll, 0, 1)).toBeCloseTo(Math.abs(moved - roll) / h, 4);
  });
});

describe('mode shapes', () => {
  it('lead by the largest state and obey φ̇ = p in every mode (θ = 0)', () => {
    const stream = createStream(6, 'shapes');
    for (let k = 0; k < 50; k++) {
      const a = randomLateral(stream, 10 * k);
      a[14] = 0;
      const found = lateralModes(a);
      if (found.remarks.includes('repeated-roots')) continue;
      for (const shape of modeShapes(a, 4, found, 60, 1)) {
        const [, p, , phi] = shape.phasors;
        expect(Math.max(...shape.phasors.map((phasor) => phasor.magnitude))).toBeCloseTo(1, 9);
        const size = Math.hypot(shape.mode.re, shape.mode.im);
        expect(Math.abs(p.magnitude - size * phi.magnitude)).toBeLessThan(1e-6);
      }
    }
  });

  it('have |φ/v_e| = |φ/β|/(V√σ)', () => {
    const a = lateral();
    const [dutch] = modeShapes(a, 4, lateralModes(a), 80, 0.64);
    expect(dutch.phiOverVeRadPerMps).toBeCloseTo((dutch.phiOverBeta ?? 0) / (80 * 0.8), 12);
  });
});

describe('stability map', () => {
  it('names modes and finds roots as the single solution does (every seventh cell of 60 × 60)', () => {
    const base = lateral({ 4: 0, 8: 0 });
    const along = (index: number) => Float64Array.from({ length: 16 }, (_, i) => (i === index ? 1 : 0));
    const xs = Array.from({ length: 60 }, (_, i) => -8 + (i * 10) / 59);
    const ys = Array.from({ length: 60 }, (_, i) => -1.5 + (i * 4) / 59);
    const map = stabilityMap({ base, alongX: along(4), alongY: along(8) }, xs, ys, 'III', 'C');
    const seen = new Set<number>();
    for (let cell = 0; cell < 3600; cell += 7) {
      const { modes, remarks } = lateralModes(lateral({ 4: xs[cell % 60], 8: ys[Math.floor(cell / 60)] }));
      if (remarks.includes('repeated-roots')) continue;
      const of = (kind: string) => modes.find((mode) => mode.kind === kind);
      seen.add(map.pattern[cell]);
      const dutch = of('dutch-roll');
      if (dutch) expect(map.dutchZeta[cell]).toBeCloseTo(dutch.zeta ?? NaN, 9);
      else expect(map.dutchZeta[cell]).toBeNaN();
      const roll = of('roll') ?? of('roll-spiral');
      expect(map.roll[cell]).toBeCloseTo(roll?.re ?? NaN, 9);
      expect(map.growth[cell]).toBeCloseTo(Math.max(...modes.map((mode) => mode.re)), 9);
    }
    expect(seen.size).toBeGreaterThanOrEqual(2);
  });
});

describe('kinds', () => {
  it('do not change under a small change of one element', () => {
    expect(kinds(lateral({ 4: -4.01 }))).toEqual(kinds(lateral()));
  });
});
