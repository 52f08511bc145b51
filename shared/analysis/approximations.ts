import { requireFinite } from '../numerics/errors.ts';
import { characteristicPolynomial } from '../numerics/polynomial.ts';

/** A textbook estimate: a real root, a pair, or the reason why it has no value. */
export type Approximation =
  | { kind: 'real'; re: number }
  | { kind: 'oscillation'; wn: number; zeta: number; re: number; im: number }
  | { kind: 'real-pair'; roots: [number, number] }
  | { kind: 'none'; reason: string };

export interface ClassicalApproximations {
  /** Roll alone: λ = L'_p. */
  rollOneDegree: Approximation;
  /** Roll and spiral together with the side force neglected: roots of Cλ² + Dλ + E. */
  rollSpiral: Approximation;
  /** Sideslip and yaw alone. */
  dutchRoll: Approximation;
  /** λ = −(constant term)/(linear term) of the characteristic polynomial. */
  spiralFromPolynomial: Approximation;
}

const NO_LINEAR_TERM = 'the linear coefficient of the characteristic polynomial is zero';

/**
 * The classical approximations to the lateral modes, to stand beside the exact values.
 *
 * One-degree roll; roll–spiral with v̇ and Y_v dropped, so that gφ = V·r (good to a few per cent); two-degree Dutch roll
 * (good in frequency, poor in damping); spiral from the last two coefficients.
 *
 * @param a  System matrix of [β, p, r, φ]; 16 values row-major; 1/s, g/V in element (0, 3).
 * @returns  Four estimates; one that has no value says why.
 * @throws {NumericsError} non-finite-input, bad-dimension.
 * @sign     none
 * @source   Etkin & Reid, Dynamics of Flight, 3rd ed. 1996, section 6.8 (eq. 6.8,6; 6.8,8–6.8,13).
 */
export function classicalApproximations(a: ArrayLike<number>): ClassicalApproximations {
  requireFinite(a, 16, 'system matrix');
  const yBeta = a[0];
  const rOfBeta = a[2];
  const gOverV = a[3];
  const [lBeta, lP, lR] = [a[4], a[5], a[6]];
  const [nBeta, nP, nR] = [a[8], a[9], a[10]];
  // With β̇ = −r·(−a02) and the side force dropped: φ·g/V = −a02·r (a02 = −1 in the book).
  const yaw = -rOfBeta;
  const c = yaw * nBeta;
  const d = yaw * (lBeta * nP - lP * nBeta) - gOverV * lBeta;
  const e = gOverV * (lBeta * nR - lR * nBeta);
  const polynomial = characteristicPolynomial(a, 4);
  const spiral = -polynomial[4] / polynomial[3];
  return {
    rollOneDegree: { kind: 'real', re: lP },
    rollSpiral: quadraticRoots(c, d, e, 'without directional stability sideslip does not follow the bank'),
    dutchRoll: quadraticRoots(
      1,
      -(yBeta + nR),
      yBeta * nR + yaw * nBeta,
      'the sideslip and yaw equations have no oscillation',
    ),
    spiralFromPolynomial: Number.isFinite(spiral)
      ? { kind: 'real', re: spiral }
      : { kind: 'none', reason: NO_LINEAR_TERM },
  };
}

/** Roots of a s² + b s + c; one real root where a is negligible. */
function quadraticRoots(a: number, b: number, c: number, reason: string): Approximation {
  const discriminant = b * b - 4 * a * c;
  if (discriminant < 0) {
    const re = -b / (2 * a);
    const wn = Math.sqrt(c / a);
    const im = Math.sqrt(-discriminant) / (2 * Math.abs(a));
    if (!Number.isFinite(wn) || !(wn > 0) || !Number.isFinite(im)) return { kind: 'none', reason };
    return { kind: 'oscillation', wn, zeta: -re / wn, re, im };
  }
  const half = -0.5 * (b + (b < 0 ? -1 : 1) * Math.sqrt(discriminant));
  const far = half / a;
  const near = half === 0 ? 0 : c / half;
  if (!Number.isFinite(near)) return { kind: 'none', reason };
  if (!Number.isFinite(far)) return { kind: 'real', re: near };
  return { kind: 'real-pair', roots: [Math.min(far, near), Math.max(far, near)] };
}
