import { describe, expect, it } from 'vitest';
import { PUBLISHED_SETS } from '#shared/analysis/checks/data-sets.ts';
import { analyseSet } from '#shared/analysis/checks/set-airframe.ts';
import { eigenDecomposition } from '#shared/numerics/eigen.ts';
import { solveLqr } from '#shared/numerics/lqr.ts';
import { multiply } from '#shared/numerics/matrix.ts';
import { DEG } from '#shared/units/constants.ts';

/** Weights of the reference pilot (flight model §9): 1/10° β, 0 p, 1/(10°/s) r, 1/5° φ, 1/5° e_ψ, 1/(20°·s), 1/15° controls. */
const STATE_WEIGHTS = [1 / 10, 0, 1 / 10, 1 / 5, 1 / 5, 1 / 20].map((w) => (w / DEG) ** 2);
const CONTROL_WEIGHT = (1 / (15 * DEG)) ** 2;

describe('linear quadratic regulator on the published sets with control derivatives', () => {
  it.each(PUBLISHED_SETS.map((set) => [set.aircraft, set] as const))(
    '%s: stable, residual below 1e-8',
    (_name, set) => {
      const { A, B } = analyseSet(set).system;
      const a = new Float64Array(36);
      for (let i = 0; i < 4; i++) for (let j = 0; j < 4; j++) a[i * 6 + j] = A[i * 4 + j];
      a[4 * 6 + 2] = 1; // heading
      a[5 * 6 + 4] = 1; // its integral
      const b = new Float64Array(12);
      for (let i = 0; i < 4; i++) {
        b[i * 2] = B.aileron[i];
        b[i * 2 + 1] = B.rudder[i];
      }
      const q = Float64Array.from({ length: 36 }, (_, i) => (i % 7 === 0 ? STATE_WEIGHTS[i / 7] : 0));
      const { K, residual } = solveLqr(a, b, q, [CONTROL_WEIGHT, 0, 0, CONTROL_WEIGHT]);
      expect(residual).toBeLessThan(1e-8);
      const closed = a.map((value, i) => value - multiply(b, K, 6, 2, 6)[i]);
      expect(Math.max(...eigenDecomposition(closed, 6).re)).toBeLessThan(-0.01);
    },
  );
});
