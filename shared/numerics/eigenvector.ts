import type { ComplexVector } from './eigen.ts';

/** Pivots below this are raised to it: the matrix of inverse iteration is singular on purpose. */
const LEAST_PIVOT = 1e-16;
const STEPS = 3;

/**
 * An eigenvector for a known eigenvalue by inverse iteration, unit length.
 *
 * Elimination with pivoting of the real form [[A − re·I, im·I], [−im·I, A − re·I]]; always gives a finite vector, whose
 * remainder is small when the eigenvalue is good. For the rare matrices on which back substitution breaks down.
 *
 * @param a   Matrix of about unit norm; n×n row-major; finite.
 * @param n   Size.
 * @param re  Real part of the eigenvalue.
 * @param im  Imaginary part.
 * @returns   The vector; a fresh one.
 * @throws    Nothing.
 * @sign      none
 * @source    J. Wilkinson, The Algebraic Eigenvalue Problem, chapter 9.
 */
export function inverseIteration(a: ArrayLike<number>, n: number, re: number, im: number): ComplexVector {
  const size = 2 * n;
  const m = new Float64Array(size * size);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      const real = a[i * n + j] - (i === j ? re : 0);
      m[i * size + j] = real;
      m[(n + i) * size + n + j] = real;
    }
    m[i * size + n + i] = im;
    m[(n + i) * size + i] = -im;
  }
  const order = eliminate(m, size);
  let x = Float64Array.from({ length: size }, (_, i) => 1 / (1 + i));
  for (let step = 0; step < STEPS; step++) x = scaled(substitute(m, order, x, size));
  return { re: x.slice(0, n), im: x.slice(n) };
}

/** LU in place; returns the row exchanged at each step. */
function eliminate(m: Float64Array, size: number): Int32Array {
  const order = new Int32Array(size);
  for (let k = 0; k < size; k++) {
    let pivot = k;
    for (let i = k + 1; i < size; i++) if (Math.abs(m[i * size + k]) > Math.abs(m[pivot * size + k])) pivot = i;
    order[k] = pivot;
    for (let j = 0; j < size && pivot !== k; j++) {
      const held = m[k * size + j];
      m[k * size + j] = m[pivot * size + j];
      m[pivot * size + j] = held;
    }
    if (Math.abs(m[k * size + k]) < LEAST_PIVOT) m[k * size + k] = LEAST_PIVOT;
    for (let i = k + 1; i < size; i++) {
      const factor = m[i * size + k] / m[k * size + k];
      m[i * size + k] = factor;
      for (let j = k + 1; j < size; j++) m[i * size + j] -= factor * m[k * size + j];
    }
  }
  return order;
}

function substitute(lu: Float64Array, order: Int32Array, b: Float64Array, size: number): Float64Array<ArrayBuffer> {
  const x = Float64Array.from(b);
  for (let k = 0; k < size; k++) {
    const held = x[k];
    x[k] = x[order[k]];
    x[order[k]] = held;
    for (let i = k + 1; i < size; i++) x[i] -= lu[i * size + k] * x[k];
  }
  for (let i = size - 1; i >= 0; i--) {
    for (let j = i + 1; j < size; j++) x[i] -= lu[i * size + j] * x[j];
    x[i] /= lu[i * size + i];
  }
  return x;
}

function scaled(x: Float64Array<ArrayBuffer>): Float64Array<ArrayBuffer> {
  let largest = 0;
  for (const value of x) largest = Math.max(largest, Math.abs(value));
  let square = 0;
  for (const value of x) square += (value / largest) * (value / largest);
  const length = largest * Math.sqrt(square);
  return x.map((value) => value / length);
}
