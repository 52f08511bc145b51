import { NumericsError, requireFinite } from './errors.ts';
import { addScaled, identity, infinityNorm, multiply } from './matrix.ts';
import { solveLinear } from './solve-linear.ts';

/** Padé coefficients of order 6, after scaling to a norm of at most 1/2: truncation below the rounding error. */
const PADE = [1, 1 / 2, 5 / 44, 1 / 66, 1 / 792, 1 / 15840, 1 / 665280];
const LARGEST_NORM = 1e6;

/**
 * exp(A): the exact transition of x' = A x over unit time.
 *
 * Scaling and squaring with a (6, 6) Padé approximant.
 *
 * @param a  Matrix, already multiplied by the time; n×n row-major.
 * @param n  Size.
 * @returns  exp(A); a fresh array.
 * @throws {NumericsError} bad-argument for a norm above 1e6, bad-dimension, non-finite-input.
 * @sign     none
 * @source   C. Moler, C. Van Loan, "Nineteen dubious ways to compute the exponential of a matrix", SIAM Review 45 (2003).
 */
export function matrixExponential(a: ArrayLike<number>, n: number): Float64Array {
  requireFinite(a, n * n, 'matrix');
  const norm = infinityNorm(a, n);
  if (norm > LARGEST_NORM) throw new NumericsError('bad-argument', `a norm of ${norm} is above ${LARGEST_NORM}`);
  let halvings = 0;
  for (let size = norm; size > 0.5; size /= 2) halvings++;
  let factor = 1;
  for (let i = 0; i < halvings; i++) factor /= 2;
  const scaled = Float64Array.from(a, (value) => value * factor);
  let power = identity(n);
  let numerator: Float64Array = new Float64Array(n * n);
  let denominator: Float64Array = new Float64Array(n * n);
  for (let k = 0; k < PADE.length; k++) {
    numerator = addScaled(numerator, PADE[k], power);
    denominator = addScaled(denominator, k % 2 === 0 ? PADE[k] : -PADE[k], power);
    power = multiply(power, scaled, n, n, n);
  }
  let result: Float64Array = solveLinear(denominator, numerator, n, n);
  for (let i = 0; i < halvings; i++) result = multiply(result, result, n, n, n);
  return result;
}
