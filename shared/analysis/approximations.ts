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
  return {
    rollOneDegree: { kind: 'real', re: lP },
    rollSpiral: quadraticRoots(c, d, e, 'without directional stability sideslip does not follow the bank'),
    dutchRoll: quadraticRoots(
      1,
      -(yBeta + nR),
      yBeta * nR + yaw * nBeta,
      'the sideslip and yaw equations have no oscillation',
    ),
    spiralFromPolynomial:
      polynomial[3] === 0
        ? { kind: 'none', reason: 'the linear coefficient of the characteristic polynomial is zero' }
        : { kind: 'real', re: -polynomial[4] / polynomial[3] },
  };
}

function quadraticRoots(a: number, b: number, c: number, reason: string): Approximation {
  if (a === 0) return b === 0 ? { kind: 'none', reason } : { kind: 'real', re: -c / b };
  const half = b / (2 * a);
  const product = c / a;
  const square = half * half - product;
  if (square < 0) {
    const wn = Math.sqrt(product);
    return { kind: 'oscillation', wn, zeta: half / wn, re: -half, im: Math.sqrt(-square) };
  }
  const far = -half - (half >= 0 ? 1 : -1) * Math.sqrt(square);
  const near = far === 0 ? 0 : product / far;
  return { kind: 'real-pair', roots: [Math.min(far, near), Math.max(far, near)] };
}
