import { eigenDecomposition } from './eigen.ts';
import { NumericsError, requireFinite } from './errors.ts';

/** Roots of a polynomial as real and imaginary parts, pairs together. */
export interface Roots {
  re: Float64Array;
  im: Float64Array;
}

/** Leading coefficients below this fraction of the largest are rounding, not a degree. */
const NEGLIGIBLE_LEAD = 1e-13;

/**
 * Coefficients of det(sI − A), highest power first, leading 1.
 *
 * Faddeev–LeVerrier; exact in integers, fit for n ≤ 8.
 *
 * @param a  Matrix; n×n row-major; 1/s.
 * @param n  Size.
 * @returns  n + 1 coefficients; coefficient k in 1/s^k.
 * @throws {NumericsError} bad-dimension, non-finite-input.
 * @sign     none
 * @source   F. Gantmacher, The Theory of Matrices, vol. I, chapter IV §5.
 */
export function characteristicPolynomial(a: ArrayLike<number>, n: number): Float64Array {
  return adjugatePolynomials(a, n).denominator;
}

/**
 * Numerator c·adj(sI − A)·b and denominator det(sI − A), highest power first.
 *
 * @param a  Matrix; n×n row-major; 1/s.
 * @param b  Input column; length n.
 * @param c  Output row; length n.
 * @param n  Size.
 * @returns  `numerator` n coefficients (may begin with zeros), `denominator` n + 1 coefficients.
 * @throws {NumericsError} bad-dimension, non-finite-input.
 * @sign     none
 * @source   F. Gantmacher, The Theory of Matrices, vol. I, chapter IV §5.
 */
export function transferPolynomials(
  a: ArrayLike<number>,
  b: ArrayLike<number>,
  c: ArrayLike<number>,
  n: number,
): { numerator: Float64Array; denominator: Float64Array } {
  requireFinite(b, n, 'input column');
  requireFinite(c, n, 'output row');
  const { denominator, terms } = adjugatePolynomials(a, n);
  const numerator = new Float64Array(n);
  for (let k = 0; k < n; k++) {
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < n; j++) numerator[k] += c[i] * terms[k][i * n + j] * b[j];
    }
  }
  return { numerator, denominator };
}

/** adj(sI − A) = Σ terms[k]·s^(n−1−k), with the characteristic polynomial beside. */
function adjugatePolynomials(a: ArrayLike<number>, n: number): { denominator: Float64Array; terms: Float64Array[] } {
  requireFinite(a, n * n, 'matrix');
  const denominator = new Float64Array(n + 1);
  denominator[0] = 1;
  const terms: Float64Array[] = [];
  let m = new Float64Array(n * n);
  for (let i = 0; i < n; i++) m[i * n + i] = 1;
  for (let k = 0; k < n; k++) {
    terms.push(m);
    const next = new Float64Array(n * n);
    let trace = 0;
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < n; j++) {
        let sum = 0;
        for (let l = 0; l < n; l++) sum += a[i * n + l] * m[l * n + j];
        next[i * n + j] = sum;
      }
      trace += next[i * n + i];
    }
    denominator[k + 1] = -trace / (k + 1);
    for (let i = 0; i < n; i++) next[i * n + i] += denominator[k + 1];
    m = next;
  }
  return { denominator, terms };
}

/**
 * Roots of a real polynomial; leading coefficients that are only rounding are dropped first.
 *
 * Eigenvalues of the balanced companion matrix.
 *
 * @param coefficients  Highest power first.
 * @returns             As many roots as the degree that remains; none for a constant.
 * @throws {NumericsError} non-finite-input, bad-argument for the zero polynomial.
 * @sign                none
 * @source              A. Edelman, H. Murakami, "Polynomial roots from companion matrix eigenvalues", Math. Comp. 64 (1995).
 */
export function polynomialRoots(coefficients: ArrayLike<number>): Roots {
  requireFinite(coefficients, coefficients.length, 'coefficients');
  const trimmed = significantCoefficients(coefficients);
  const degree = trimmed.length - 1;
  if (degree < 0) throw new NumericsError('bad-argument', 'the zero polynomial has no roots');
  if (degree === 0) return { re: new Float64Array(0), im: new Float64Array(0) };
  const companion = new Float64Array(degree * degree);
  for (let j = 0; j < degree; j++) companion[j] = -trimmed[j + 1] / trimmed[0];
  for (let i = 1; i < degree; i++) companion[i * degree + i - 1] = 1;
  const { re, im } = eigenDecomposition(companion, degree);
  return { re, im };
}

/**
 * The coefficients from the first that is more than rounding.
 *
 * @param coefficients  Highest power first.
 * @returns             A view of a fresh array; empty when all are rounding.
 * @source              derived here: leading ones below NEGLIGIBLE_LEAD of the largest are dropped.
 */
export function significantCoefficients(coefficients: ArrayLike<number>): Float64Array {
  let largest = 0;
  for (let i = 0; i < coefficients.length; i++) largest = Math.max(largest, Math.abs(coefficients[i]));
  let first = 0;
  while (first < coefficients.length && Math.abs(coefficients[first]) <= NEGLIGIBLE_LEAD * largest) first++;
  return Float64Array.from(coefficients).subarray(first);
}

/**
 * Value of a real polynomial at the complex point re + i·im.
 *
 * @param coefficients  Highest power first.
 * @param re            Real part of the point.
 * @param im            Imaginary part of the point.
 * @returns             Real and imaginary part of the value.
 * @source              Horner's scheme.
 */
export function evaluatePolynomial(
  coefficients: ArrayLike<number>,
  re: number,
  im: number,
): { re: number; im: number } {
  let x = 0;
  let y = 0;
  for (let i = 0; i < coefficients.length; i++) {
    const next = x * re - y * im + coefficients[i];
    y = x * im + y * re;
    x = next;
  }
  return { re: x, im: y };
}
