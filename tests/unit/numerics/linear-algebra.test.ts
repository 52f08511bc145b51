import { describe, expect, it } from 'vitest';
import { eigenDecomposition } from '#shared/numerics/eigen.ts';
import { NumericsError } from '#shared/numerics/errors.ts';
import { solveLqr } from '#shared/numerics/lqr.ts';
import { multiply } from '#shared/numerics/matrix.ts';
import { characteristicPolynomial, polynomialRoots, transferPolynomials } from '#shared/numerics/polynomial.ts';
import { createStream } from '#shared/numerics/random.ts';
import { routhDiscriminant, unstableRootCount } from '#shared/numerics/routh.ts';
import { solve3Into, solveLinear } from '#shared/numerics/solve-linear.ts';
import { randomLateral } from './matrix-samples.ts';

function code(f: () => unknown): string {
  try {
    f();
  } catch (error) {
    if (error instanceof NumericsError) return error.code;
    throw error;
  }
  return 'none';
}

describe('linear equations', () => {
  it('are solved to rounding (200 random systems, seed 1)', () => {
    const stream = createStream(1, 'systems');
    for (let k = 0; k < 200; k++) {
      const n = 1 + (k % 7);
      const a = Float64Array.from({ length: n * n }, () => stream.normal());
      const x = Float64Array.from({ length: 2 * n }, () => stream.normal());
      const solved = solveLinear(a, multiply(a, x, n, n, 2), n, 2);
      x.forEach((value, i) => expect(Math.abs(solved[i] - value)).toBeLessThan(1e-8));
    }
  });

  it('are refused by name when dependent', () => {
    expect(code(() => solveLinear([1, 2, 2, 4], [1, 2], 2))).toBe('singular-matrix');
    expect(code(() => solveLinear([0, 0, 1, 1], [1, 2], 2))).toBe('singular-matrix');
    expect(code(() => solveLinear([1, 2, 3], [1, 2], 2))).toBe('bad-dimension');
  });

  it('of three unknowns need no allocation and say when they are dependent', () => {
    const out = new Float64Array(3);
    // x = 1, y = −2, z = 3 in equations of very different size.
    const rows = Float64Array.from([0, 2e6, 1e6, -1e6, 1e-6, 1e-6, 0, -1e-6, 1, 0, 1, 4]);
    expect(solve3Into(out, rows)).toBe(true);
    [1, -2, 3].forEach((value, i) => expect(out[i]).toBeCloseTo(value, 12));
    expect(solve3Into(out, Float64Array.from([1, 2, 3, 4, 2, 4, 6, 8, 0, 0, 1, 1]))).toBe(false);
    expect(solve3Into(out, new Float64Array(12))).toBe(false);
  });
});

describe('eigenvectors', () => {
  it('satisfy A v = λ v, have unit length and a real largest component (500 matrices, seed 2)', () => {
    const stream = createStream(2, 'eigenvectors');
    for (let k = 0; k < 500; k++) {
      const a = randomLateral(stream, k);
      const norm = Math.hypot(...a);
      const { re, im, vectors } = eigenDecomposition(a, 4);
      for (let j = 0; j < 4; j++) {
        const v = vectors[j];
        let length = 0;
        for (let i = 0; i < 4; i++) {
          let x = -(re[j] * v.re[i] - im[j] * v.im[i]);
          let y = -(re[j] * v.im[i] + im[j] * v.re[i]);
          for (let l = 0; l < 4; l++) {
            x += a[i * 4 + l] * v.re[l];
            y += a[i * 4 + l] * v.im[l];
          }
          expect(Math.hypot(x, y) / norm).toBeLessThan(1e-12);
          length += v.re[i] ** 2 + v.im[i] ** 2;
        }
        expect(length).toBeCloseTo(1, 12);
      }
    }
  });

  it('come for matrices on which QR iterations have been known to stop', () => {
    const cases = [
      [0, 0, 0, 0, 0, 0, 0, 0, 0, 1, 0, 0, 0, 1, 0, 1, 1, 0, 0, 1, 1, 0, 1, 0, 1],
      [0, 0, 0, 0, 1, 1, 0, 0, 0, 0, 0, 1, 0, 0, 0, 0, 0, 1, 0, 0, 0, 0, 0, 1, 0],
    ];
    for (const a of cases) expect(eigenDecomposition(a, 5).re.every(Number.isFinite)).toBe(true);
    const tiny = [1e-310, 0, 0, 1, 0, 1e-312, 1e-300, 0, 0, 0, 1e-311, 0, 0, 0, 0, 1e-309];
    expect(eigenDecomposition(tiny, 4).re.every(Number.isFinite)).toBe(true);
    expect(Array.from(eigenDecomposition(new Float64Array(9), 3).re)).toEqual([0, 0, 0]);
    expect(code(() => eigenDecomposition([1, Number.NaN, 0, 1], 2))).toBe('non-finite-input');
  });
});

describe('polynomials', () => {
  it('have the eigenvalues as roots of the characteristic polynomial', () => {
    const a = randomLateral(createStream(3, 'polynomial'), 0);
    const roots = polynomialRoots(characteristicPolynomial(a, 4));
    const { re, im } = eigenDecomposition(a, 4);
    for (let j = 0; j < 4; j++) {
      const nearest = Math.min(...Array.from(re, (r, k) => Math.hypot(r - roots.re[j], im[k] - roots.im[j])));
      expect(nearest).toBeLessThan(1e-10);
    }
  });

  it('give a transfer function of a double integrator with damping', () => {
    // x'' + 3 x' + 2 x = 5 u, output x: 5/(s² + 3 s + 2)
    const { numerator, denominator } = transferPolynomials([0, 1, -2, -3], [0, 5], [1, 0], 2);
    expect(Array.from(numerator)).toEqual([0, 5]);
    expect(Array.from(denominator)).toEqual([1, 3, 2]);
  });

  it('drop rounding in front and refuse the zero polynomial', () => {
    expect(Array.from(polynomialRoots([1e-17, 1, -3]).re)).toEqual([expect.closeTo(3, 12)]);
    expect(polynomialRoots([7]).re.length).toBe(0);
    expect(code(() => polynomialRoots([0, 0]))).toBe('bad-argument');
  });

  it('count their unstable roots by Routh as the eigenvalues do (500 matrices, seed 4)', () => {
    const stream = createStream(4, 'routh');
    for (let k = 0; k < 500; k++) {
      const a = randomLateral(stream, k);
      if (k % 3 === 0) a[0] = Math.abs(a[0]) * 8;
      const coefficients = characteristicPolynomial(a, 4);
      const { re } = eigenDecomposition(a, 4);
      if (Array.from(re).some((r) => Math.abs(r) < 1e-8)) continue;
      expect(unstableRootCount(coefficients)).toBe(Array.from(re).filter((r) => r > 0).length);
      if (coefficients.every((c) => c > 0)) {
        expect(routhDiscriminant(coefficients) > 0).toBe(Array.from(re).every((r) => r < 0));
      }
    }
    expect(unstableRootCount([1, 0, 1])).toBeNull();
  });
});

describe('linear quadratic regulator', () => {
  it('knows the double integrator: K = [1, √3]', () => {
    // Q = I, R = 1; B. Anderson, J. Moore, Optimal Control (from memory), also by hand.
    const { K, residual } = solveLqr([0, 1, 0, 0], [0, 1], [1, 0, 0, 1], [1]);
    expect(K[0]).toBeCloseTo(1, 12);
    expect(K[1]).toBeCloseTo(Math.sqrt(3), 12);
    expect(residual).toBeLessThan(1e-12);
  });

  it('is cheaper than any neighbouring gain from the same start', () => {
    const A = [-0.2, 0, -1, 0.12, -4, -2, 0.6, 0, 2.5, -0.2, -0.3, 0, 0, 1, 0, 0];
    const B = [0, 0.05, 6, 0.4, -0.3, -2, 0, 0];
    const Q = [9, 0, 0, 0, 0, 0, 0, 0, 0, 0, 9, 0, 0, 0, 0, 30];
    const R = [14, 0, 0, 14];
    const { K, X } = solveLqr(A, B, Q, R);
    const x0 = [0.1, -0.2, 0.05, 0.3];
    const cost = (gain: Float64Array) => {
      let total = 0;
      const x = Float64Array.from(x0);
      const h = 0.002;
      for (let step = 0; step < 20_000; step++) {
        const u = multiply(gain, x, 2, 4, 1);
        const rate = new Float64Array(4);
        for (let i = 0; i < 4; i++) {
          for (let j = 0; j < 4; j++) rate[i] += A[i * 4 + j] * x[j];
          for (let j = 0; j < 2; j++) rate[i] -= B[i * 2 + j] * u[j];
          total += h * Q[i * 5] * x[i] * x[i];
        }
        for (let j = 0; j < 2; j++) total += h * R[j * 3] * u[j] * u[j];
        for (let i = 0; i < 4; i++) x[i] += h * rate[i];
      }
      return total;
    };
    const best = cost(K);
    let expected = 0;
    for (let i = 0; i < 4; i++) for (let j = 0; j < 4; j++) expected += x0[i] * X[i * 4 + j] * x0[j];
    expect(Math.abs(best - expected) / expected).toBeLessThan(0.01);
    for (let k = 0; k < K.length; k++) {
      for (const sign of [-1, 1]) {
        const other = Float64Array.from(K);
        other[k] += sign * 0.2;
        expect(cost(other)).toBeGreaterThan(best);
      }
    }
  });

  it('handles integrators in the state and names an uncontrollable pair', () => {
    const { residual } = solveLqr([0, 1, 0, 0, 0, 1, 0, 0, 0], [0, 0, 1], [1, 0, 0, 0, 1, 0, 0, 0, 1], [1]);
    expect(residual).toBeLessThan(1e-10);
    expect(code(() => solveLqr([1, 0, 0, 1], [0, 1], [1, 0, 0, 1], [1]))).toBe('uncontrollable-pair');
    expect(code(() => solveLqr([0, 0, 0, -1], [0, 1], [1, 0, 0, 1], [1]))).toBe('uncontrollable-pair');
  });
});
