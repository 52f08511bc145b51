import type { Aircraft } from '../model/aircraft.ts';
import { buildSmallDisturbance } from '../model/small-disturbance.ts';
import { solveLqr } from '../numerics/lqr.ts';
import { DEG } from '../units/constants.ts';

/** States of the reference pilot's law: β, p, r, φ, heading error, its integral. */
export const PILOT_STATES = 6;

/** What a unit of cost stands for, per state and per control; rad, rad/s, rad·s (squared in the cost; ours). */
export const PILOT_WEIGHTS = {
  betaRad: 10 * DEG,
  yawRateRadS: 10 * DEG,
  phiRad: 5 * DEG,
  headingRad: 5 * DEG,
  headingIntegralRadS: 20 * DEG,
  controlRad: 15 * DEG,
} as const;

/**
 * Gains of the reference pilot at one condition: surfaces = −K·[β, p, r, φ, e_ψ, ∫e_ψ].
 *
 * Continuous-time linear-quadratic regulator of the small-disturbance model, its heading error and the integral of that.
 *
 * @param aircraft   Aircraft in the start configuration and loading.
 * @param condition  True airspeed (m/s), height (m), path (rad) of the start.
 * @returns          K; 2×6 row-major; aileron then rudder; rad per rad, rad per rad/s, rad per rad·s.
 * @throws {NumericsError} uncontrollable-pair, no-stabilising-solution.
 * @sign             Surfaces and states as in the model's README.
 * @source           Flight model, reference pilot; weights ours.
 */
export function pilotGains(
  aircraft: Aircraft,
  condition: { tasMps: number; heightM: number; thetaRad: number },
): Float64Array {
  const system = buildSmallDisturbance(aircraft, condition);
  const n = PILOT_STATES;
  const a = new Float64Array(n * n);
  for (let i = 0; i < 4; i++) for (let j = 0; j < 4; j++) a[i * n + j] = system.A[i * 4 + j];
  a[4 * n + 2] = system.headingGain;
  a[5 * n + 4] = 1;
  const b = new Float64Array(n * 2);
  for (let i = 0; i < 4; i++) {
    b[i * 2] = system.B.aileron[i];
    b[i * 2 + 1] = system.B.rudder[i];
  }
  const inverseSquare = (value: number): number => 1 / (value * value);
  const q = new Float64Array(n * n);
  q[0] = inverseSquare(PILOT_WEIGHTS.betaRad);
  q[2 * n + 2] = inverseSquare(PILOT_WEIGHTS.yawRateRadS);
  q[3 * n + 3] = inverseSquare(PILOT_WEIGHTS.phiRad);
  q[4 * n + 4] = inverseSquare(PILOT_WEIGHTS.headingRad);
  q[5 * n + 5] = inverseSquare(PILOT_WEIGHTS.headingIntegralRadS);
  const r = new Float64Array(4);
  r[0] = inverseSquare(PILOT_WEIGHTS.controlRad);
  r[3] = r[0];
  return solveLqr(a, b, q, r).K;
}
