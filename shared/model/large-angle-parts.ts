/** Parts of `largeAngleRates` that need a loop or are rare; numbers pass in Float64Arrays, for the reason given there. */
import {
  DENSITY_EXPONENT,
  densityAt,
  GAS_CONSTANT,
  HEAT_RATIO,
  LAPSE_K_PER_M,
  SCALE_HEIGHT_M,
  SEA_LEVEL_DENSITY,
} from './atmosphere.ts';
import { DERIVATIVE_COUNT } from './derivatives.ts';
import { JET_MACH_1, JET_MACH_2, JET_SIGMA_EXPONENT } from './engines.ts';
import { FLAP_DELAY, STALL_ROUNDING_RAD, STALL_SPREAD_RAD } from './fin.ts';
import type { Work } from './large-angle-work.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';

const LAPSE = LAPSE_K_PER_M;
const JET_POWER = JET_SIGMA_EXPONENT * DENSITY_EXPONENT;
const PER_SCALE_HEIGHT = 1 / SCALE_HEIGHT_M;
const PER_DENSITY_0 = 1 / SEA_LEVEL_DENSITY;
const GAMMA_R = HEAT_RATIO * GAS_CONSTANT;
const MACH_1 = JET_MACH_1;
const MACH_2 = JET_MACH_2;
const ROUNDING = STALL_ROUNDING_RAD;
const PER_ROUNDING = 1 / (4 * STALL_ROUNDING_RAD);
const PER_SPREAD = 1 / STALL_SPREAD_RAD;
const DELAY = FLAP_DELAY;
const ROW = DERIVATIVE_COUNT;
const { X_AILERON, X_DISTANCE, X_HEIGHT, X_RUDDER, X_THRUST, X_V } = X;
const { ENGINE_STRIDE, E_AREA, E_AREA_RATE, E_BASE, E_FACTOR, E_INV_DOWN, E_INV_UP, E_KNEE2, E_ROLL_ARM, E_Y } = T;
const { E_YAW_ARM, H_AILERON_EFFECT, H_FIN_ARM, H_FIN_DROP, H_FIN_HEIGHT, H_FIN_SLOPE, H_FIN_STALL, H_FIN_TAU } = T;
const { H_REF_HEIGHT, H_REF_JET, H_REF_TEMPERATURE, H_ROWS_OLD, H_ROWS_OLD_END, H_SHARE_OLD, H_SPAN, H_TIME } = T;
const { H_TROPOSPHERE, M_BETA_AIR, M_CL, M_CROLL, M_CY, M_CYAW, M_DENSITY, M_ENGINE_ROLL, M_ENGINE_YAW } = T;
const { M_FIN_ANGLE, M_FIN_CY, M_FORWARD, M_GUST_P, M_GUST_R, M_GUST_V, M_P_AIR, M_QBAR, M_REGIME, M_R_AIR } = T;
const { M_SIGMA_JET, M_SOUND, M_WIND_AX, M_WIND_AY, M_WIND_AZ, M_WIND_EAST, M_WIND_NORTH } = T;

/**
 * The last row from `first` to `last` that does not lie above the lift coefficient made; `first` when all do.
 *
 * @param rowCL  Lift coefficients of the rows; ascending within a configuration.
 * @param made   Holds the lift coefficient.
 * @param first  First row of the configuration.
 * @param last   Its last row.
 * @returns      Index of the row.
 * @throws       Nothing.
 * @sign         none
 * @source       Flight model, airframe data.
 */
export function rowAt(rowCL: number[], made: number[], first: number, last: number): number {
  let at = first;
  while (at < last && made[M_CL] >= rowCL[at + 1]) at++;
  return at;
}

/**
 * Density at the height of a state far from the anchor of the tick.
 *
 * @param made  Takes the density; kg/m³.
 * @param x     State.
 * @returns     Nothing.
 * @throws      Nothing.
 * @sign        none
 * @source      ISO 2533:1975.
 */
export function exactDensityInto(made: number[], x: number[]): void {
  made[M_DENSITY] = densityAt(x[X_HEIGHT]);
}

/**
 * Wind on the way, and its rate of change along the body axes.
 *
 * @param w    Work of the plant, with angles; `made` is written.
 * @param out  Derivative of the state; the climb is read.
 * @param x    State.
 * @returns    Nothing.
 * @throws     Nothing.
 * @sign       velocity of the air, north and east
 * @source     Flight model, air.
 */
export function changingWindInto(w: Work, out: number[], x: number[]): void {
  const { made, angles, wind } = w;
  w.air.windInto(wind, w.h[H_TIME] + w.clock[0], x[X_HEIGHT], out[X_HEIGHT]);
  const sinPhi = angles[6];
  const cosPhi = angles[7];
  const sinTheta = angles[8];
  const ahead = wind[2] * angles[11] + wind[3] * angles[10];
  const right = wind[3] * angles[11] - wind[2] * angles[10];
  made[M_WIND_NORTH] = wind[0];
  made[M_WIND_EAST] = wind[1];
  made[M_WIND_AX] = ahead * angles[9];
  made[M_WIND_AY] = ahead * sinPhi * sinTheta + right * cosPhi;
  made[M_WIND_AZ] = ahead * cosPhi * sinTheta - right * sinPhi;
}

/**
 * Adds the gusts that are growing or passing to those held.
 *
 * @param w  Work of the plant; `made` is written.
 * @param x  State.
 * @returns  Nothing.
 * @throws   Nothing.
 * @sign     to the right positive
 * @source   Flight model, air.
 */
export function gustsInto(w: Work, x: number[]): void {
  const { made, gust } = w;
  w.air.gustInto(gust, w.h[H_TIME] + w.clock[0], x[X_DISTANCE]);
  made[M_GUST_V] += gust[0];
  made[M_GUST_P] += gust[1];
  made[M_GUST_R] += gust[2];
}

/**
 * Blends the coefficients with those of the configuration that is being left.
 *
 * @param w  Work of the plant, with the coefficients of the new configuration; `made` is written.
 * @param x  State.
 * @returns  Nothing.
 * @throws   Nothing.
 * @sign     As this folder's README.
 * @source   Scenario contract, event "configuration": linear over 4 s.
 */
export function addOldConfiguration(w: Work, x: number[]): void {
  const { h, made, values, slopes, rowCL } = w;
  const row = rowAt(rowCL, made, h[H_ROWS_OLD] | 0, h[H_ROWS_OLD_END] | 0);
  const beyond = made[M_CL] - rowCL[row];
  const d = beyond > 0 ? beyond : 0;
  const toRate = (0.5 * h[H_SPAN]) / x[X_V];
  const pHat = made[M_P_AIR] * toRate;
  const rHat = made[M_R_AIR] * toRate;
  const da = x[X_AILERON] * h[H_AILERON_EFFECT];
  const dr = x[X_RUDDER];
  const share = h[H_SHARE_OLD];
  made[M_REGIME] += 16 * row;
  for (let family = 0; family < 3; family++) {
    const i = row * ROW + 5 * family;
    const old =
      (values[i] + d * slopes[i]) * made[M_BETA_AIR] +
      (values[i + 1] + d * slopes[i + 1]) * pHat +
      (values[i + 2] + d * slopes[i + 2]) * rHat +
      (values[i + 3] + d * slopes[i + 3]) * da +
      (values[i + 4] + d * slopes[i + 4]) * dr;
    made[M_CY + family] += share * (old - made[M_CY + family]);
  }
}

/**
 * The fin's stall increment, added to the coefficients.
 *
 * @param w  Work of the plant, with fin angle and coefficients; `made` is written.
 * @param x  State.
 * @returns  Nothing.
 * @throws   Nothing.
 * @sign     As fin.ts, whose functions these lines repeat without calls (a test compares them).
 * @source   Flight model, fin stall.
 */
export function finStallInto(w: Work, x: number[]): void {
  const { h, made } = w;
  const angle = made[M_FIN_ANGLE];
  const dr = x[X_RUDDER];
  const s = angle < 0 ? -angle : angle;
  let stall = h[H_FIN_STALL];
  if (angle * dr < 0) {
    stall += DELAY * h[H_FIN_TAU] * (dr < 0 ? -dr : dr);
    made[M_REGIME] += 4096; // the stall angle jumps where the deflection begins to add
  }
  if (s <= stall - ROUNDING) return;
  made[M_REGIME] += 8192;
  let g: number;
  if (s <= stall + ROUNDING) {
    const into = s - stall + ROUNDING;
    g = s - into * into * PER_ROUNDING;
  } else {
    const share = (s - stall - ROUNDING) * PER_SPREAD;
    const y = share < 1 ? share : 1;
    g = stall * (1 - h[H_FIN_DROP] * y * y * (3 - 2 * y));
  }
  const lost = -h[H_FIN_SLOPE] * (angle < 0 ? s - g : g - s);
  made[M_FIN_CY] = lost;
  made[M_CY] += lost;
  made[M_CROLL] += (lost * h[H_FIN_HEIGHT]) / h[H_SPAN];
  made[M_CYAW] -= (lost * h[H_FIN_ARM]) / h[H_SPAN];
}

/**
 * Jet thrust over static thrust at full lever: σ^0.8 times the Mach polynomial, by a series about the anchor.
 *
 * @param w  Work of the plant; `made` is written.
 * @param x  State.
 * @returns  Nothing.
 * @throws   Nothing.
 * @sign     none
 * @source   Flight model, engines.
 */
export function jetInto(w: Work, x: number[]): void {
  const { h, made } = w;
  const rise = x[X_HEIGHT] - h[H_REF_HEIGHT];
  if (h[H_TROPOSPHERE] !== 0) {
    const part = (-LAPSE * rise) / h[H_REF_TEMPERATURE];
    made[M_SIGMA_JET] = 1 + JET_POWER * part * (1 + 0.5 * (JET_POWER - 1) * part * (1 + ((JET_POWER - 2) / 3) * part));
    made[M_SOUND] = Math.sqrt(GAMMA_R * (h[H_REF_TEMPERATURE] - LAPSE * rise));
  } else {
    const part = -JET_SIGMA_EXPONENT * rise * PER_SCALE_HEIGHT;
    made[M_SIGMA_JET] = 1 + part * (1 + 0.5 * part * (1 + part / 3));
    made[M_SOUND] = Math.sqrt(GAMMA_R * h[H_REF_TEMPERATURE]);
  }
  const mach = x[X_V] / made[M_SOUND];
  made[M_SIGMA_JET] *= h[H_REF_JET] * (1 + MACH_1 * mach + MACH_2 * mach * mach);
}

/**
 * Spool of every engine, and the forces and moments of all together.
 *
 * @param w    Work of the plant, with density and jet factor; `made` is written.
 * @param out  Derivative of the state; the thrusts are written.
 * @param x    State.
 * @returns    Nothing.
 * @throws     Nothing.
 * @sign       forward, nose right, right wing down positive
 * @source     Flight model, engines.
 */
export function enginesInto(w: Work, out: number[], x: number[]): void {
  const { e, n, made } = w;
  const V = x[X_V];
  const q = made[M_QBAR];
  const sigma = made[M_DENSITY] * PER_DENSITY_0;
  const tau = w.clock[0];
  let forward = 0;
  let yaw = 0;
  let roll = 0;
  for (let i = 0, j = 0; i < n; i++, j += ENGINE_STRIDE) {
    const thrust = x[X_THRUST + i];
    const knee2 = e[j + E_KNEE2];
    const full = knee2 < 0 ? e[j + E_BASE] * made[M_SIGMA_JET] : (sigma * e[j + E_BASE]) / Math.sqrt(V * V + knee2);
    const short = e[j + E_FACTOR] * full - thrust;
    out[X_THRUST + i] = short * (short < 0 ? e[j + E_INV_DOWN] : e[j + E_INV_UP]);
    const drag = q * (e[j + E_AREA] + e[j + E_AREA_RATE] * tau);
    forward += thrust - drag;
    yaw += e[j + E_Y] * drag - e[j + E_YAW_ARM] * thrust;
    roll -= e[j + E_ROLL_ARM] * thrust;
  }
  made[M_FORWARD] = forward;
  made[M_ENGINE_YAW] = yaw;
  made[M_ENGINE_ROLL] = roll;
}
