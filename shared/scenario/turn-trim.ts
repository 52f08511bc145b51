import type { Aircraft } from '../model/aircraft.ts';
import { buildSmallDisturbance } from '../model/small-disturbance.ts';
import { sin, tan } from '../numerics/elementary.ts';
import { solveLinear } from '../numerics/solve-linear.ts';

/** What a steady turn without sideslip adds to straight flight; rad, rad/s. */
export interface TurnTrim {
  rollRateRadS: number;
  yawRateRadS: number;
  aileronRad: number;
  rudderRad: number;
}

/**
 * Rates and surfaces that hold a steady turn without sideslip, beside those of straight flight.
 *
 * Solves the side-force, rolling and yawing rows of the small-disturbance model for yaw rate, aileron and rudder, the
 * sideslip and all accelerations zero, the weight's part with the sine of the bank.
 *
 * @param bankRad  Bank held; rad.
 * @throws {NumericsError} singular-matrix when the surfaces cannot balance the rates.
 * @sign           Right positive; surfaces as in the model's README.
 * @source         Steady turn of the linear lateral equations; textbook (from memory).
 */
export function turnTrim(
  aircraft: Aircraft,
  condition: { tasMps: number; heightM: number; thetaRad: number },
  bankRad: number,
): TurnTrim {
  const { A, B } = buildSmallDisturbance(aircraft, {
    tasMps: condition.tasMps,
    heightM: condition.heightM,
    thetaRad: condition.thetaRad,
  });
  // p = −r·tan θ keeps the bank.
  const perYawRate = -tan(condition.thetaRad);
  const rows = new Float64Array(9);
  const right = new Float64Array(3);
  for (let i = 0; i < 3; i++) {
    rows[i * 3] = A[i * 4 + 2] + perYawRate * A[i * 4 + 1];
    rows[i * 3 + 1] = B.aileron[i];
    rows[i * 3 + 2] = B.rudder[i];
    right[i] = -A[i * 4 + 3] * sin(bankRad);
  }
  const [yawRateRadS, aileronRad, rudderRad] = solveLinear(rows, right, 3);
  return { rollRateRadS: perYawRate * yawRateRadS, yawRateRadS, aileronRad, rudderRad };
}
