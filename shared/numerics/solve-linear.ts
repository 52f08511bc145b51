import { NumericsError } from './errors.ts';

/** A pivot smaller than this fraction of the largest element of its column of the scaled matrix counts as zero. */
const PIVOT_LIMIT = 1e-13;

/**
 * Solution X of A X = B for a small dense A.
 *
 * Gaussian elimination with row scaling and partial pivoting.
 *
 * @param a        Matrix; n×n row-major; not changed.
 * @param b        Right-hand sides; n×columns row-major; not changed.
 * @param n        Number of equations.
 * @param columns  Number of right-hand sides; default 1.
 * @returns        X; n×columns row-major, a fresh array.
 * @throws {NumericsError} singular-matrix when a scaled pivot is below 1e-13, bad-dimension for wrong lengths.
 * @sign           none
 * @source         G. Golub, C. Van Loan, Matrix Computations, 4th ed., algorithm 3.4.1.
 */
export function solveLinear(a: ArrayLike<number>, b: ArrayLike<number>, n: number, columns = 1): Float64Array {
  if (a.length !== n * n || b.length !== n * columns) {
    throw new NumericsError('bad-dimension', `${a.length} and ${b.length} values do not fit ${n} equations`);
  }
  const m = Float64Array.from(a);
  const x = Float64Array.from(b);
  for (let i = 0; i < n; i++) {
    let largest = 0;
    for (let j = 0; j < n; j++) largest = Math.max(largest, Math.abs(m[i * n + j]));
    if (!(largest > 0) || !Number.isFinite(largest)) {
      throw new NumericsError('singular-matrix', `row ${i} of the matrix is zero or not finite`);
    }
    for (let j = 0; j < n; j++) m[i * n + j] /= largest;
    for (let j = 0; j < columns; j++) x[i * columns + j] /= largest;
  }
  for (let k = 0; k < n; k++) {
    let pivot = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(m[i * n + k]) > Math.abs(m[pivot * n + k])) pivot = i;
    if (!(Math.abs(m[pivot * n + k]) > PIVOT_LIMIT)) {
      throw new NumericsError('singular-matrix', `the ${n} equations are dependent (pivot ${k})`);
    }
    if (pivot !== k) {
      for (let j = k; j < n; j++) {
        const held = m[k * n + j];
        m[k * n + j] = m[pivot * n + j];
        m[pivot * n + j] = held;
      }
      for (let j = 0; j < columns; j++) {
        const held = x[k * columns + j];
        x[k * columns + j] = x[pivot * columns + j];
        x[pivot * columns + j] = held;
      }
    }
    for (let i = k + 1; i < n; i++) {
      const factor = m[i * n + k] / m[k * n + k];
      if (factor === 0) continue;
      for (let j = k + 1; j < n; j++) m[i * n + j] -= factor * m[k * n + j];
      for (let j = 0; j < columns; j++) x[i * columns + j] -= factor * x[k * columns + j];
    }
  }
  for (let i = n - 1; i >= 0; i--) {
    for (let j = 0; j < columns; j++) {
      let sum = x[i * columns + j];
      for (let k = i + 1; k < n; k++) sum -= m[i * n + k] * x[k * columns + j];
      x[i * columns + j] = sum / m[i * n + i];
    }
  }
  return x;
}

/**
 * Writes the solution of three equations in three unknowns into `out`; false when they are dependent.
 *
 * Elimination with row scaling and partial pivoting, no allocation; `m` is used up.
 *
 * @param out  Solution; length 3.
 * @param m    Three rows of [a, b, c, right-hand side]; length 12; overwritten.
 * @returns    Whether the three equations are independent; `out` holds nothing useful otherwise.
 * @throws     Nothing.
 * @sign       none
 * @source     As `solveLinear`.
 */
export function solve3Into(out: Float64Array, m: Float64Array): boolean {
  for (let i = 0; i < 12; i += 4) {
    const largest = Math.max(Math.abs(m[i]), Math.abs(m[i + 1]), Math.abs(m[i + 2]));
    if (!(largest > 0) || !Number.isFinite(largest)) return false;
    m[i] /= largest;
    m[i + 1] /= largest;
    m[i + 2] /= largest;
    m[i + 3] /= largest;
  }
  for (let k = 0; k < 3; k++) {
    let pivot = k;
    for (let i = k + 1; i < 3; i++) if (Math.abs(m[i * 4 + k]) > Math.abs(m[pivot * 4 + k])) pivot = i;
    if (!(Math.abs(m[pivot * 4 + k]) > PIVOT_LIMIT)) return false;
    for (let j = k; j < 4; j++) {
      const held = m[k * 4 + j];
      m[k * 4 + j] = m[pivot * 4 + j];
      m[pivot * 4 + j] = held;
    }
    for (let i = k + 1; i < 3; i++) {
      const factor = m[i * 4 + k] / m[k * 4 + k];
      for (let j = k + 1; j < 4; j++) m[i * 4 + j] -= factor * m[k * 4 + j];
    }
  }
  out[2] = m[11] / m[10];
  out[1] = (m[7] - m[6] * out[2]) / m[5];
  out[0] = (m[3] - m[2] * out[2] - m[1] * out[1]) / m[0];
  return true;
}
