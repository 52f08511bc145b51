/**
 * One function on purpose, longer than the house likes: it is the product's hot loop. It has no loop and no call that
 * takes or returns a number (such a number may be allocated, one in a Float64Array is not); what needs a loop or is rare
 * lies in large-angle-parts.ts. Imported constants are copied into the module, because an import is looked up at every
 * use.
 */
import { sinCosAt } from '../numerics/sin-cos.ts';
import { G0 } from '../units/constants.ts';
import { DENSITY_EXPONENT, LAPSE_K_PER_M, SCALE_HEIGHT_M } from './atmosphere.ts';
import { DERIVATIVE_COUNT } from './derivatives.ts';
import { STALL_ROUNDING_RAD } from './fin.ts';
import {
  addOldConfiguration,
  changingWindInto,
  enginesInto,
  exactDensityInto,
  finStallInto,
  gustsInto,
  jetInto,
  rowAt,
} from './large-angle-parts.ts';
import type { Work } from './large-angle-work.ts';
import { COS_LET_GO_BANK, PATH_GAIN } from './pitch-assistant.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';

/** Height from the anchor within which density is taken from a series (see densityNear); m. */
const SERIES_REACH = 30;
const LAPSE = LAPSE_K_PER_M;
const EXPONENT = DENSITY_EXPONENT;
const HALF_EXPONENT_1 = 0.5 * (DENSITY_EXPONENT - 1);
const THIRD_EXPONENT_2 = (DENSITY_EXPONENT - 2) / 3;
const PER_SCALE_HEIGHT = 1 / SCALE_HEIGHT_M;
const G = G0;
const LET_GO = COS_LET_GO_BANK;
const GAIN = PATH_GAIN;
const ROUNDING = STALL_ROUNDING_RAD;
const ROW = DERIVATIVE_COUNT;
const { X_AILERON, X_BETA, X_DISTANCE, X_EAST, X_HEIGHT, X_NORTH, X_P, X_PHI, X_PSI, X_R, X_RUDDER, X_THETA } = X;
const { X_V, X_WASHOUT } = X;
const { H_AILERON_CMD, H_AILERON_EFFECT, H_AILERON_RATE, H_AREA, H_CD0, H_CD_BETA2, H_CL_LIMIT, H_CL_LOWEST } = T;
const { H_CL_TRIM, H_FIN_ARM, H_FIN_BETA, H_FIN_HEIGHT, H_FIN_STALL, H_FIN_TAU, H_GUST_COUNT, H_GUST_P } = T;
const { H_GUST_R, H_GUST_V, H_HAS_FIN, H_HAS_JET, H_INV_BOTH, H_INV_LAG, H_INV_LAG_RUDDER, H_INV_ROLL } = T;
const { H_INV_WASHOUT, H_INV_YAW, H_IXZ, H_IYY_IXX, H_IZZ_IYY, H_K_INDUCED, H_MASS, H_PATH, H_PATH_RATE } = T;
const { H_PITCH, H_REF_DENSITY, H_REF_HEIGHT, H_REF_TEMPERATURE, H_ROWS, H_ROWS_END, H_RUDDER_CMD } = T;
const { H_RUDDER_RATE, H_SHARE_OLD, H_SPAN, H_TROPOSPHERE, H_WIND_EAST, H_WIND_NORTH, H_WIND_VARIES, M_BETA_AIR } = T;
const { M_CL, M_CROLL, M_CY, M_CYAW, M_DENSITY, M_DRAG, M_ENGINE_ROLL, M_ENGINE_YAW, M_FIN_ANGLE, M_FIN_CY } = T;
const { M_FORWARD, M_GUST_P, M_GUST_R, M_GUST_V, M_LET_GO, M_LIFT, M_P_AIR, M_QBAR, M_Q_PITCH, M_REGIME } = T;
const { M_R_AIR, M_WIND_AX, M_WIND_AY, M_WIND_AZ, M_WIND_EAST, M_WIND_NORTH } = T;

/**
 * Derivative of the state of the large-angle motion at the time of the clock.
 *
 * @param w    Work of the plant; `made` is filled with the quantities on the way.
 * @param out  x'; SI, rad.
 * @param x    State (state-layout.ts).
 * @returns    Nothing.
 * @throws     Nothing; a state that cannot be flown gives non-finite derivatives.
 * @sign       As this folder's README.
 * @source     Flight model, sections 3 to 8; B. Etkin, L. Reid, Dynamics of Flight, 3rd ed., ch. 4.
 */
export function largeAngleRates(w: Work, out: number[], x: number[]): void {
  const { h, made, angles } = w;
  angles[0] = x[X_BETA];
  angles[1] = x[X_PHI];
  angles[2] = x[X_THETA];
  angles[3] = x[X_PSI];
  sinCosAt(angles, 0, 4);
  sinCosAt(angles, 1, 6);
  sinCosAt(angles, 2, 8);
  sinCosAt(angles, 3, 10);
  const sinBeta = angles[4];
  const cosBeta = angles[5];
  const sinPhi = angles[6];
  const cosPhi = angles[7];
  const sinTheta = angles[8];
  const cosTheta = angles[9];
  const p = x[X_P];
  const r = x[X_R];
  const V = x[X_V];
  const perV = 1 / V;
  const u = V * cosBeta;
  const v = V * sinBeta;
  const climb = u * sinTheta - v * cosTheta * sinPhi;
  out[X_HEIGHT] = climb;
  out[X_DISTANCE] = V;

  // density by a series about the anchor of the tick
  const rise = x[X_HEIGHT] - h[H_REF_HEIGHT];
  if (rise < SERIES_REACH && rise > -SERIES_REACH) {
    if (h[H_TROPOSPHERE] !== 0) {
      const part = (-LAPSE * rise) / h[H_REF_TEMPERATURE];
      const inner = 1 + HALF_EXPONENT_1 * part * (1 + THIRD_EXPONENT_2 * part);
      made[M_DENSITY] = h[H_REF_DENSITY] * (1 + EXPONENT * part * inner);
    } else {
      const part = -rise * PER_SCALE_HEIGHT;
      const inner = 1 + 0.5 * part * (1 + (part / 3) * (1 + 0.25 * part));
      made[M_DENSITY] = h[H_REF_DENSITY] * (1 + part * inner);
    }
  } else exactDensityInto(made, x);
  const q = 0.5 * made[M_DENSITY] * V * V;
  const qS = q * h[H_AREA];
  made[M_QBAR] = q;

  // wind, gusts, and the motion against the air
  made[M_WIND_NORTH] = h[H_WIND_NORTH];
  made[M_WIND_EAST] = h[H_WIND_EAST];
  made[M_GUST_V] = h[H_GUST_V];
  made[M_GUST_P] = h[H_GUST_P];
  made[M_GUST_R] = h[H_GUST_R];
  if (h[H_WIND_VARIES] !== 0) changingWindInto(w, out, x);
  if (h[H_GUST_COUNT] !== 0) gustsInto(w, x);
  const betaAir = x[X_BETA] - made[M_GUST_V] * perV;
  const pAir = p - made[M_GUST_P];
  const rAir = r - made[M_GUST_R];
  made[M_BETA_AIR] = betaAir;
  made[M_P_AIR] = pAir;
  made[M_R_AIR] = rAir;

  // lift from the pitch assistant
  const mass = h[H_MASS];
  let CL: number;
  let regime = 0;
  if (cosPhi < LET_GO) {
    CL = (mass * G) / qS;
    regime = 4;
  } else if (h[H_PITCH] === 0) CL = h[H_CL_TRIM];
  else {
    const path = h[H_PATH] + h[H_PATH_RATE] * w.clock[0];
    const qWanted = (GAIN * (path - x[X_THETA]) + r * sinPhi) / cosPhi;
    CL = (mass * (u * qWanted + G * cosTheta * cosPhi - p * v)) / qS;
  }
  made[M_LET_GO] = regime;
  if (CL > h[H_CL_LIMIT]) {
    CL = h[H_CL_LIMIT];
    regime += 1;
  } else if (CL < h[H_CL_LOWEST]) {
    CL = h[H_CL_LOWEST];
    regime += 2;
  }
  made[M_CL] = CL;
  const lift = qS * CL;
  made[M_LIFT] = lift;

  // side force, rolling and yawing moment coefficients
  const { rowCL, values, slopes } = w;
  const row = rowAt(rowCL, made, h[H_ROWS] | 0, h[H_ROWS_END] | 0);
  const beyond = CL - rowCL[row];
  const d = beyond > 0 ? beyond : 0;
  made[M_REGIME] = regime + 16 * row + (beyond > 0 ? 8 : 0);
  const i = row * ROW;
  const toRate = 0.5 * h[H_SPAN] * perV;
  const pHat = pAir * toRate;
  const rHat = rAir * toRate;
  const da = x[X_AILERON] * h[H_AILERON_EFFECT];
  const dr = x[X_RUDDER];
  made[M_CY] =
    (values[i] + d * slopes[i]) * betaAir +
    (values[i + 1] + d * slopes[i + 1]) * pHat +
    (values[i + 2] + d * slopes[i + 2]) * rHat +
    (values[i + 3] + d * slopes[i + 3]) * da +
    (values[i + 4] + d * slopes[i + 4]) * dr;
  made[M_CROLL] =
    (values[i + 5] + d * slopes[i + 5]) * betaAir +
    (values[i + 6] + d * slopes[i + 6]) * pHat +
    (values[i + 7] + d * slopes[i + 7]) * rHat +
    (values[i + 8] + d * slopes[i + 8]) * da +
    (values[i + 9] + d * slopes[i + 9]) * dr;
  made[M_CYAW] =
    (values[i + 10] + d * slopes[i + 10]) * betaAir +
    (values[i + 11] + d * slopes[i + 11]) * pHat +
    (values[i + 12] + d * slopes[i + 12]) * rHat +
    (values[i + 13] + d * slopes[i + 13]) * da +
    (values[i + 14] + d * slopes[i + 14]) * dr;
  if (h[H_SHARE_OLD] !== 0) addOldConfiguration(w, x);

  // fin
  if (h[H_HAS_FIN] !== 0) {
    const angle = betaAir * h[H_FIN_BETA] + (pAir * h[H_FIN_HEIGHT] - rAir * h[H_FIN_ARM]) * perV - h[H_FIN_TAU] * dr;
    made[M_FIN_ANGLE] = angle;
    made[M_FIN_CY] = 0;
    const linear = h[H_FIN_STALL] - ROUNDING;
    if (angle > linear || angle < -linear) finStallInto(w, x);
  }

  // engines
  if (h[H_HAS_JET] !== 0) jetInto(w, x);
  enginesInto(w, out, x);

  // translation
  const perMass = 1 / mass;
  const drag = qS * (h[H_CD0] + h[H_K_INDUCED] * CL * CL + h[H_CD_BETA2] * betaAir * betaAir);
  made[M_DRAG] = drag;
  const fx = (made[M_FORWARD] - drag) * perMass - G * sinTheta - made[M_WIND_AX];
  const fy = qS * made[M_CY] * perMass + G * cosTheta * sinPhi - made[M_WIND_AY];
  const qPitch = (lift * perMass - G * cosTheta * cosPhi + p * v + made[M_WIND_AZ]) / u;
  made[M_Q_PITCH] = qPitch;
  out[X_V] = cosBeta * fx + sinBeta * fy;
  out[X_BETA] = (cosBeta * fy - sinBeta * fx) * perV - r;

  // rotation
  const qSb = qS * h[H_SPAN];
  const Ixz = h[H_IXZ];
  const roll = qSb * made[M_CROLL] + made[M_ENGINE_ROLL] - qPitch * r * h[H_IZZ_IYY] + Ixz * p * qPitch;
  const yaw = qSb * made[M_CYAW] + made[M_ENGINE_YAW] - p * qPitch * h[H_IYY_IXX] - Ixz * qPitch * r;
  out[X_P] = h[H_INV_ROLL] * roll + h[H_INV_BOTH] * yaw;
  out[X_R] = h[H_INV_BOTH] * roll + h[H_INV_YAW] * yaw;
  const turn = (qPitch * sinPhi + r * cosPhi) / cosTheta;
  out[X_PHI] = p + turn * sinTheta;
  out[X_THETA] = qPitch * cosPhi - r * sinPhi;
  out[X_PSI] = turn;

  // position
  const ahead = u * cosTheta + v * sinPhi * sinTheta;
  const right = v * cosPhi;
  out[X_NORTH] = ahead * angles[11] - right * angles[10] + made[M_WIND_NORTH];
  out[X_EAST] = ahead * angles[10] + right * angles[11] + made[M_WIND_EAST];

  // surfaces with lag and rate, and the yaw damper's washout
  const aileronRate = (h[H_AILERON_CMD] - x[X_AILERON]) * h[H_INV_LAG];
  const aileronMax = h[H_AILERON_RATE];
  out[X_AILERON] = aileronRate > aileronMax ? aileronMax : aileronRate < -aileronMax ? -aileronMax : aileronRate;
  const rudderRate = (h[H_RUDDER_CMD] - dr) * h[H_INV_LAG_RUDDER];
  const rudderMax = h[H_RUDDER_RATE];
  out[X_RUDDER] = rudderRate > rudderMax ? rudderMax : rudderRate < -rudderMax ? -rudderMax : rudderRate;
  out[X_WASHOUT] = (r - x[X_WASHOUT]) * h[H_INV_WASHOUT];
}
