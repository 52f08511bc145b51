import { describe, expect, it } from 'vitest';
import { NumericsError } from '#shared/numerics/errors.ts';
import { matrixExponential } from '#shared/numerics/matrix-exponential.ts';
import { multiply } from '#shared/numerics/matrix.ts';
import { integrateAdaptive } from '#shared/numerics/odex-adapter.ts';
import { createRk4 } from '#shared/numerics/rk4.ts';
import type { RightHandSide } from '#shared/numerics/rk4.ts';

/** Etkin & Reid 747 matrix (Dynamics of Flight, 3rd ed., eq. 6.7,1): v, p, r, phi. */
const A = [-0.0558, 0, -774, 32.2, -0.003865, -0.4342, 0.4136, 0, 0.001086, -0.006112, -0.1458, 0, 0, 1, 0, 0];
const linear: RightHandSide = (out, _t, x) => {
  for (let i = 0; i < 4; i++) {
    out[i] = 0;
    for (let j = 0; j < 4; j++) out[i] += A[i * 4 + j] * x[j];
  }
};
const x0 = [10, 0.02, -0.01, 0.1];

/** State at time t by the matrix exponential: exact for this system. */
function exact(t: number): Float64Array {
  return multiply(
    matrixExponential(
      A.map((a) => a * t),
      4,
    ),
    x0,
    4,
    4,
    1,
  );
}

function code(f: () => unknown): string {
  try {
    f();
  } catch (error) {
    if (error instanceof NumericsError) return error.code;
    throw error;
  }
  return 'none';
}

describe('matrix exponential', () => {
  it('has exp(A)·exp(−A) = 1 and exp(2A) = exp(A)²', () => {
    const e = matrixExponential(A, 4);
    const back = matrixExponential(
      A.map((a) => -a),
      4,
    );
    const one = multiply(e, back, 4, 4, 4);
    for (let i = 0; i < 16; i++) expect(one[i]).toBeCloseTo(i % 5 === 0 ? 1 : 0, 9);
    const twice = matrixExponential(
      A.map((a) => 2 * a),
      4,
    );
    const square = multiply(e, e, 4, 4, 4);
    for (let i = 0; i < 16; i++) expect(Math.abs(twice[i] - square[i])).toBeLessThan(1e-9 * (1 + Math.abs(square[i])));
  });

  it('rotates for a skew matrix', () => {
    const e = matrixExponential([0, -1.2, 1.2, 0], 2);
    expect(e[0]).toBeCloseTo(Math.cos(1.2), 14);
    expect(e[2]).toBeCloseTo(Math.sin(1.2), 14);
  });
});

describe('RK4', () => {
  it('has an error that falls by 16 when the step halves', () => {
    const error = (steps: number) => {
      const rk4 = createRk4(4);
      const x = Float64Array.from(x0);
      for (let i = 0; i < steps; i++) rk4.stepInto(x, linear, 0, x, 8 / steps);
      return Math.abs(x[0] - exact(8)[0]);
    };
    const ratio = error(80) / error(160);
    expect(ratio).toBeGreaterThan(14);
    expect(ratio).toBeLessThan(18);
  });

  it('is exact for a cubic in time and refuses an empty system', () => {
    const rk4 = createRk4(1);
    const x = new Float64Array(1);
    rk4.stepInto(
      x,
      (out, t) => {
        out[0] = 4 * t * t * t;
      },
      0,
      x,
      2,
    );
    expect(x[0]).toBeCloseTo(16, 12);
    expect(code(() => createRk4(0))).toBe('bad-dimension');
  });
});

describe('adaptive integration', () => {
  it('agrees with the matrix exponential at the end and at every wanted time, forwards and backwards', () => {
    const sampleTimes = Array.from({ length: 41 }, (_, i) => i / 2);
    const result = integrateAdaptive(linear, x0, 0, 20, { tolerance: 1e-11, sampleTimes });
    expect(result.points?.map((point) => point.t)).toEqual(sampleTimes);
    for (const { t, x } of result.points ?? []) {
      const truth = exact(t);
      for (let i = 0; i < 4; i++)
        expect(Math.abs(x[i] - truth[i])).toBeLessThan(2e-7 * Math.max(1, Math.abs(truth[i])));
    }
    const back = integrateAdaptive(linear, result.x, 20, 0, { tolerance: 1e-11 });
    for (let i = 0; i < 4; i++) expect(back.x[i]).toBeCloseTo(x0[i], 6);
  });

  it('restarts at a jump and keeps both of its sides apart', () => {
    const result = integrateAdaptive(
      (out, t) => {
        out[0] = t < 1 ? 1 : -1;
      },
      [0],
      0,
      3,
      { discontinuities: [1, 1, 7, -2], sampleTimes: [0.5, 1, 2] },
    );
    expect(result.x[0]).toBeCloseTo(-1, 12);
    expect(result.points?.map(({ x }) => x[0])).toEqual([0.5, 1, 0].map((v) => expect.closeTo(v, 12)));
  });

  it('names what it cannot do', () => {
    const blowUp: RightHandSide = (out, _t, x) => {
      out[0] = x[0] * x[0];
    };
    expect(['tolerance-not-held', 'non-finite-derivative']).toContain(code(() => integrateAdaptive(blowUp, [1], 0, 2)));
    const jagged: RightHandSide = (out, t) => {
      out[0] = Math.sin(1e7 * t) > 0 ? 1e6 : -1e6;
    };
    expect(code(() => integrateAdaptive(jagged, [1], 0, 2, { maxEvaluations: 20_000 }))).toBe('tolerance-not-held');
    const nan: RightHandSide = (out) => {
      out[0] = Number.NaN;
    };
    expect(code(() => integrateAdaptive(nan, [1], 0, 1))).toBe('non-finite-derivative');
    expect(code(() => integrateAdaptive(linear, [1, Number.NaN, 0, 0], 0, 1))).toBe('non-finite-input');
    expect(code(() => integrateAdaptive(linear, x0, 0, 1, { tolerance: 1e-20 }))).toBe('bad-argument');
  });

  it('gives the start for an empty span', () => {
    expect(Array.from(integrateAdaptive(linear, x0, 3, 3).x)).toEqual(x0);
  });
});
