import { cos, sin, tan } from '../numerics/elementary.ts';
import { DEG, FT, KT } from '../units/constants.ts';

/** Smallest lift coefficient the assistant asks for (ours). */
export const CL_LOWEST = -0.2;
/** Share of CLmax at which the assistant stops pulling and the stall warning comes (ours). */
export const CL_LIMIT_SHARE = 0.95;
/** Beyond this bank the assistant lets go (ours). */
export const LET_GO_BANK_RAD = 70 * DEG;
export const COS_LET_GO_BANK = cos(LET_GO_BANK_RAD);
/** Gain from path error to path rate; 1/s (ours). */
export const PATH_GAIN = 1;
/** Speed hold: path per speed error and per its integral; rad per m/s, rad per m (ours). */
export const SPEED_GAIN = (0.8 * DEG) / KT;
export const SPEED_INTEGRAL_GAIN = (0.05 * DEG) / KT;
export const SPEED_PATH_LIMIT_RAD = 12 * DEG;
export const SPEED_PATH_RATE_RADS = 3 * DEG;
/** Glidepath: path per height error; rad/m; the wanted path stays within the limit of the speed hold (ours). */
export const GLIDEPATH_GAIN = (0.05 * DEG) / FT;
export const FLARE_HEIGHT_M = 25 * FT;
export const FLARE_PATH_RAD = -0.7 * DEG;
/** Manual: rate of the path target at full stick, and its range (ours). */
export const MANUAL_RATE_RADS = 6 * DEG;
export const MANUAL_LIMIT_RAD = 20 * DEG;

/**
 * Path wanted by the speed hold before its rate limit; rad.
 *
 * @param excessMps  Calibrated airspeed above the target; m/s.
 * @param integralM  Its integral; m.
 * @returns          Path; rad; within ±12°.
 * @throws           Nothing.
 * @sign             climb positive: too fast climbs
 * @source           Flight model, pitch assistant (constants ours).
 */
export function speedHoldPathRad(excessMps: number, integralM: number): number {
  const path = SPEED_GAIN * excessMps + SPEED_INTEGRAL_GAIN * integralM;
  return path > SPEED_PATH_LIMIT_RAD
    ? SPEED_PATH_LIMIT_RAD
    : path < -SPEED_PATH_LIMIT_RAD
      ? -SPEED_PATH_LIMIT_RAD
      : path;
}

/**
 * Whether the speed hold's wanted path is clamped, which stops its integral.
 *
 * @param excessMps  Calibrated airspeed above the target; m/s.
 * @param integralM  Its integral; m.
 * @returns  True when the path before clamping lies beyond ±12°.
 * @throws  Nothing.
 * @sign  none
 * @source  Flight model, pitch assistant.
 */
export function speedHoldClamped(excessMps: number, integralM: number): boolean {
  return Math.abs(SPEED_GAIN * excessMps + SPEED_INTEGRAL_GAIN * integralM) > SPEED_PATH_LIMIT_RAD;
}

/**
 * Path wanted on the glidepath and in the flare; rad.
 *
 * The glidepath meets the runway at its threshold (ours); the height error is that of the centre of gravity, the flare
 * height that of the wheels.
 *
 * @param glidepathRad   Angle of the glidepath, positive down; rad.
 * @param toThresholdM   Distance to the threshold along the runway; m; negative beyond it.
 * @param heightM        Height above the runway; m.
 * @param gearHeightM    Height of the reference point above the wheels; m.
 * @returns              Path; rad.
 * @throws               Nothing.
 * @sign                 climb positive
 * @source               Flight model, pitch assistant (constants ours).
 */
export function glidepathPathRad(
  glidepathRad: number,
  toThresholdM: number,
  heightM: number,
  gearHeightM: number,
): number {
  const wheels = heightM - gearHeightM;
  if (wheels < FLARE_HEIGHT_M) {
    const share = wheels > 0 ? wheels / FLARE_HEIGHT_M : 0;
    return FLARE_PATH_RAD + share * (-glidepathRad - FLARE_PATH_RAD);
  }
  const path = -glidepathRad + GLIDEPATH_GAIN * (toThresholdM * tan(glidepathRad) - heightM);
  return path > SPEED_PATH_LIMIT_RAD
    ? SPEED_PATH_LIMIT_RAD
    : path < -SPEED_PATH_LIMIT_RAD
      ? -SPEED_PATH_LIMIT_RAD
      : path;
}

/**
 * Distance flown along the runway's direction from the start; m.
 *
 * @param northM      North of the start; m.
 * @param eastM       East of the start; m.
 * @param headingRad  Runway heading; rad.
 * @returns           Component along the runway; m.
 * @throws            Nothing.
 * @sign              forward positive
 * @source            Definition.
 */
export function alongRunwayM(northM: number, eastM: number, headingRad: number): number {
  return northM * cos(headingRad) + eastM * sin(headingRad);
}
