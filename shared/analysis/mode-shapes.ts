import { eigenDecomposition } from '../numerics/eigen.ts';
import type { ComplexVector } from '../numerics/eigen.ts';
import { atan2 } from '../numerics/elementary.ts';
import type { LateralModes, Mode } from './modes.ts';

export type LateralState = 'beta' | 'p' | 'r' | 'phi' | 'washout';

export interface Phasor {
  state: LateralState;
  /** Length relative to the largest of β, p, r, φ; angles in rad, rates in rad/s. */
  magnitude: number;
  /** Phase relative to the largest, (−π, π]; rad; positive leads. */
  phaseRad: number;
}

export interface ModeShape {
  mode: Mode;
  phasors: Phasor[];
  /** |φ|/|β|; 1; null when the mode has no sideslip. */
  phiOverBeta: number | null;
  /** |φ|/|v_e| with v_e = V·β·√σ, the equivalent side velocity; rad per m/s; null when the mode has no sideslip. */
  phiOverVeRadPerMps: number | null;
}

const STATES: readonly LateralState[] = ['beta', 'p', 'r', 'phi', 'washout'];
const NO_SIDESLIP = 1e-12;

/**
 * Mode shapes as relative phasors of β, p, r and φ, one per mode.
 *
 * @param a        System matrix; n×n row-major; states [β, p, r, φ] and the washout; rad, rad/s, rad/s, rad.
 * @param n        4 or 5.
 * @param found    The modes of the same matrix (`lateralModes`).
 * @param tasMps   True airspeed V; m/s.
 * @param sigma    Density ratio ρ/ρ0; 1.
 * @returns        One shape per mode, in the same order.
 * @throws {NumericsError} non-finite-input, bad-dimension.
 * @sign           A positive phase leads the largest state.
 * @source         Etkin & Reid, Dynamics of Flight, 3rd ed. 1996, 6.7; |φ/v_e| of MIL-F-8785B(ASG).
 */
export function modeShapes(
  a: ArrayLike<number>,
  n: 4 | 5,
  found: LateralModes,
  tasMps: number,
  sigma: number,
): ModeShape[] {
  const { re, im, vectors } = eigenDecomposition(a, n);
  return found.modes.map((mode) => {
    let nearest = 0;
    let best = Infinity;
    for (let j = 0; j < n; j++) {
      const dx = re[j] - mode.re;
      const dy = im[j] - mode.im;
      const distance = dx * dx + dy * dy;
      if (distance < best) {
        best = distance;
        nearest = j;
      }
    }
    return shapeOf(mode, vectors[nearest], n, tasMps, sigma);
  });
}

function shapeOf(mode: Mode, v: ComplexVector, n: number, tasMps: number, sigma: number): ModeShape {
  const size = (i: number) => Math.sqrt(v.re[i] * v.re[i] + v.im[i] * v.im[i]);
  let lead = 0;
  for (let i = 1; i < 4; i++) if (size(i) > size(lead) * (1 + 1e-9)) lead = i;
  const scale = size(lead) || 1;
  const phasors: Phasor[] = [];
  for (let i = 0; i < n; i++) {
    // v_i divided by the leading component.
    const x = v.re[i] * v.re[lead] + v.im[i] * v.im[lead];
    const y = v.im[i] * v.re[lead] - v.re[i] * v.im[lead];
    phasors.push({ state: STATES[i], magnitude: size(i) / scale, phaseRad: size(i) > 0 ? atan2(y, x) : 0 });
  }
  const beta = size(0);
  const phiOverBeta = beta > NO_SIDESLIP ? size(3) / beta : null;
  const equivalent = tasMps * Math.sqrt(sigma);
  return {
    mode,
    phasors,
    phiOverBeta,
    phiOverVeRadPerMps: phiOverBeta === null || !(equivalent > 0) ? null : phiOverBeta / equivalent,
  };
}
