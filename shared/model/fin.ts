import { DEG } from '../units/constants.ts';
import type { FinData } from './aircraft.ts';

/** Half width of the rounding between the linear and the stalled fin; rad. */
export const STALL_ROUNDING_RAD = 3 * DEG;
/** Angle over which the stalled fin loses its share of lift; rad. */
export const STALL_SPREAD_RAD = 10 * DEG;
/** Share of the rudder's own angle by which a deflection that adds to the fin angle delays the stall (ours). */
export const FLAP_DELAY = 0.5;

/**
 * Angle of attack of the fin; rad.
 *
 * @param fin        Fin data.
 * @param betaRad    Sideslip against the air, gusts included; rad.
 * @param pRadS      Roll rate against the air; rad/s.
 * @param rRadS      Yaw rate against the air; rad/s.
 * @param tasMps     True airspeed; m/s.
 * @param rudderRad  Rudder; rad.
 * @returns          β(1 − sidewash) + (p·height − r·arm)/V − τ·δr; rad.
 * @throws           Nothing.
 * @sign             positive with the wind from the right
 * @source           Flight model, fin stall.
 */
export function finAngleRad(
  fin: FinData,
  betaRad: number,
  pRadS: number,
  rRadS: number,
  tasMps: number,
  rudderRad: number,
): number {
  return betaRad * (1 - fin.sidewash) + (pRadS * fin.heightM - rRadS * fin.armM) / tasMps - fin.rudderTau * rudderRad;
}

/**
 * Angle beyond which the fin counts as stalled; rad.
 *
 * @param fin         Fin data.
 * @param angleRad    Fin angle; rad.
 * @param rudderRad   Rudder; rad.
 * @returns           Stall angle, raised by half the rudder's share when the deflection adds to the angle; rad.
 * @throws            Nothing.
 * @sign              none
 * @source            Flight model, fin stall (factor ours).
 */
export function finStallAngleRad(fin: FinData, angleRad: number, rudderRad: number): number {
  const adds = angleRad * rudderRad < 0;
  return adds ? fin.stallAngleRad + FLAP_DELAY * fin.rudderTau * Math.abs(rudderRad) : fin.stallAngleRad;
}

/**
 * Fin angle that would give, linearly, the lift of the fin at an angle that may be stalled; rad.
 *
 * Linear, rounded within 3° of the stall, then a smooth loss of `stallDrop` over 10°.
 *
 * @param fin            Fin data.
 * @param angleRad       Fin angle; rad.
 * @param stallAngleRad  From `finStallAngleRad`; rad.
 * @returns              Effective angle g; rad; equal to the angle exactly below stall − 3°.
 * @throws               Nothing.
 * @sign                 as the fin angle
 * @source               Flight model, fin stall.
 */
export function finEffectiveAngleRad(fin: FinData, angleRad: number, stallAngleRad: number): number {
  const s = Math.abs(angleRad);
  const k = STALL_ROUNDING_RAD;
  if (s <= stallAngleRad - k) return angleRad;
  let g: number;
  if (s <= stallAngleRad + k) {
    const into = s - stallAngleRad + k;
    g = s - (into * into) / (4 * k);
  } else {
    const x = Math.min(1, (s - stallAngleRad - k) / STALL_SPREAD_RAD);
    g = stallAngleRad * (1 - fin.stallDrop * (3 * x * x - 2 * x * x * x));
  }
  return angleRad < 0 ? -g : g;
}
