import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { balance } from './balance.ts';
import { inverseIteration } from './eigenvector.ts';
import { requireFinite } from './errors.ts';

/** A complex vector as its real and imaginary parts. */
export interface ComplexVector {
  re: Float64Array;
  im: Float64Array;
}

export interface EigenDecomposition {
  /** Real parts of the eigenvalues; length n. */
  re: Float64Array;
  /** Imaginary parts; a complex pair stands together, the positive one first. */
  im: Float64Array;
  /** One vector per eigenvalue: unit length, its largest component real and positive. */
  vectors: ComplexVector[];
}

/** Elements below this fraction of the norm are taken as zero: smaller ones underflow inside the QR iteration. */
const NEGLIGIBLE = 1e-150;

/**
 * Eigenvalues and normalised eigenvectors of a real matrix: A v = λ v.
 *
 * Balanced by powers of two, scaled to unit norm, then QR (ml-matrix). A defective matrix gives its repeated eigenvalue
 * with parallel vectors: test their rank before using them as a base.
 *
 * @param a  Matrix; n×n row-major; not changed.
 * @param n  Size.
 * @returns  Eigenvalues in 1/(unit of time of A), vectors in the units of the states.
 * @throws {NumericsError} bad-dimension, non-finite-input.
 * @sign     none
 * @source   G. Golub, C. Van Loan, Matrix Computations, 4th ed., sections 7.5 and 7.6.
 */
export function eigenDecomposition(a: ArrayLike<number>, n: number): EigenDecomposition {
  requireFinite(a, n * n, 'matrix');
  const { balanced, scale } = balance(a, n);
  let norm = 0;
  for (let i = 0; i < n * n; i++) norm = Math.max(norm, Math.abs(balanced[i]));
  const re = new Float64Array(n);
  const im = new Float64Array(n);
  const vectors: ComplexVector[] = [];
  if (norm === 0) {
    for (let j = 0; j < n; j++) {
      const unit = { re: new Float64Array(n), im: new Float64Array(n) };
      unit.re[j] = 1;
      vectors.push(unit);
    }
    return { re, im, vectors };
  }
  const scaled = new Matrix(n, n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      const value = balanced[i * n + j] / norm;
      scaled.set(i, j, Math.abs(value) < NEGLIGIBLE ? 0 : value);
    }
  }
  const result = new EigenvalueDecomposition(scaled);
  const columns = result.eigenvectorMatrix;
  for (let j = 0; j < n; j++) {
    re[j] = result.realEigenvalues[j] * norm;
    im[j] = result.imaginaryEigenvalues[j] * norm;
  }
  for (let j = 0; j < n; j++) {
    const vector = { re: new Float64Array(n), im: new Float64Array(n) };
    const realColumn = im[j] < 0 ? j - 1 : j;
    for (let i = 0; i < n; i++) {
      vector.re[i] = columns.get(i, realColumn) * scale[i];
      if (im[j] !== 0) vector.im[i] = columns.get(i, realColumn + 1) * scale[i] * (im[j] > 0 ? 1 : -1);
    }
    vectors.push(
      normalised(isFinite(vector) ? vector : fallback(scaled.to1DArray(), n, re[j] / norm, im[j] / norm, scale)),
    );
  }
  return { re, im, vectors };
}

function isFinite({ re, im }: ComplexVector): boolean {
  return re.every(Number.isFinite) && im.every(Number.isFinite);
}

/** The vector by inverse iteration, where back substitution has divided by nothing. */
function fallback(a: number[], n: number, re: number, im: number, scale: Float64Array): ComplexVector {
  const { re: x, im: y } = inverseIteration(a, n, re, im);
  return { re: x.map((value, i) => value * scale[i]), im: y.map((value, i) => value * scale[i]) };
}

/** The same direction with unit length and its largest component real and positive. */
function normalised(v: ComplexVector): ComplexVector {
  const n = v.re.length;
  let largest = 0;
  let at = 0;
  for (let i = 0; i < n; i++) {
    const size = Math.max(Math.abs(v.re[i]), Math.abs(v.im[i]));
    if (size > largest) largest = size;
  }
  if (largest === 0) return v;
  let sum = 0;
  let peak = 0;
  for (let i = 0; i < n; i++) {
    const a = v.re[i] / largest;
    const b = v.im[i] / largest;
    const square = a * a + b * b;
    sum += square;
    if (square > peak * (1 + 1e-12)) {
      peak = square;
      at = i;
    }
  }
  const length = largest * Math.sqrt(sum);
  const size = largest * Math.sqrt(peak);
  const c = v.re[at] / size;
  const s = -v.im[at] / size;
  const out = { re: new Float64Array(n), im: new Float64Array(n) };
  for (let i = 0; i < n; i++) {
    out.re[i] = (v.re[i] * c - v.im[i] * s) / length;
    out.im[i] = (v.re[i] * s + v.im[i] * c) / length;
  }
  out.im[at] = 0;
  return out;
}
