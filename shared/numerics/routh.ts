import { NumericsError, requireFinite } from './errors.ts';

/**
 * Routh's discriminant D(BC − AD) − B²E of the quartic A, B, C, D, E: positive while an oscillation is damped.
 *
 * With all coefficients positive, a quartic has all its roots in the left half plane exactly when this is positive; it
 * is zero where a complex pair crosses the imaginary axis, as E is zero where a real root does.
 *
 * @param c  Five coefficients, highest power first.
 * @returns  The discriminant; unit of B·C·D.
 * @throws {NumericsError} bad-dimension, non-finite-input.
 * @sign     Positive is stable.
 * @source   E. Routh, Dynamics of a System of Rigid Bodies, Advanced Part; Etkin & Reid, Dynamics of Flight, 3rd ed., 6.1.
 */
export function routhDiscriminant(c: ArrayLike<number>): number {
  requireFinite(c, 5, 'quartic');
  return c[3] * (c[1] * c[2] - c[0] * c[3]) - c[1] * c[1] * c[4];
}

/**
 * How many roots of a real polynomial lie in the right half plane, from Routh's array.
 *
 * @param coefficients  Highest power first, leading one not zero.
 * @returns             The number of sign changes of the first column, or null when a zero in it leaves the array undecided.
 * @throws {NumericsError} bad-argument for a zero leading coefficient, non-finite-input.
 * @sign                none
 * @source              As `routhDiscriminant`.
 */
export function unstableRootCount(coefficients: ArrayLike<number>): number | null {
  requireFinite(coefficients, coefficients.length, 'coefficients');
  if (!(Math.abs(coefficients[0]) > 0)) throw new NumericsError('bad-argument', 'the leading coefficient is zero');
  const n = coefficients.length;
  let above: number[] = [];
  let row: number[] = [];
  for (let i = 0; i < n; i += 2) above.push(coefficients[i]);
  for (let i = 1; i < n; i += 2) row.push(coefficients[i]);
  let changes = 0;
  let last = above[0];
  for (let k = 1; k < n; k++) {
    const lead = row[0] ?? 0;
    if (lead === 0) return null;
    if (lead > 0 !== last > 0) changes++;
    last = lead;
    const next: number[] = [];
    for (let j = 0; j + 1 < above.length; j++) {
      next.push((lead * above[j + 1] - above[0] * (row[j + 1] ?? 0)) / lead);
    }
    above = row;
    row = next;
  }
  return changes;
}
