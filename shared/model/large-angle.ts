/**
 * One closure on purpose, longer than the house's files: it runs half a million times a second, and calls or objects
 * inside it cost more than the arithmetic.
 */
import { cos, sin } from '../numerics/elementary.ts';
import type { RightHandSide } from '../numerics/rk4.ts';
import { G0 } from '../units/constants.ts';
import type { AirFlow } from './air.ts';
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
import { CL_LOWEST, COS_LET_GO_BANK, PATH_GAIN } from './pitch-assistant.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';

/** Height from the tick's reference within which density is taken from a series; m. Its error is below 1e-13. */
const SERIES_REACH_M = 20;
const HALF_ROUNDING = 1 / (4 * STALL_ROUNDING_RAD);

export interface FlatRows {
  /** CL of every row of every configuration. */
  CL: Float64Array;
  values: Float64Array;
  slopes: Float64Array;
}

/**
 * Right-hand side of the coupled rigid-body equations with quasi-steady pitch.
 *
 * State of state-layout.ts; time counts from the start of the tick. Derivatives are read at the lift coefficient of the
 * same evaluation; gusts shift β, p, r in derivatives, drag and fin angle only; a changing wind acts as −dW/dt. Density
 * within a tick is a third-order series about the tick's height. Valid while V cosβ > 0 and |θ| < 90°.
 *
 * @param h     Held numbers of the tick (tick-held.ts).
 * @param e     Held numbers of the engines, ENGINE_STRIDE each.
 * @param n     Number of engines.
 * @param rows  Derivative rows of all configurations.
 * @param air   Wind and gusts in time and distance.
 * @param made  Filled when h[H_RECORD] is 1.
 * @returns     f(out, τ, x): writes x' into out; SI, rad.
 * @throws      Nothing; a state that cannot be flown gives non-finite derivatives.
 * @sign        As this folder's README.
 * @source      Flight model, sections 3 to 8; B. Etkin, L. Reid, Dynamics of Flight, 3rd ed., ch. 4.
 */
export function createLargeAngle(
  h: Float64Array,
  e: Float64Array,
  n: number,
  rows: FlatRows,
  air: AirFlow,
  made: Float64Array,
): RightHandSide {
  const { CL: rowCL, values, slopes } = rows;
  const wind = new Float64Array(4);
  const gust = new Float64Array(3);

  return (out, tau, x) => {
    const beta = x[X.X_BETA];
    const p = x[X.X_P];
    const r = x[X.X_R];
    const theta = x[X.X_THETA];
    const V = x[X.X_V];
    const height = x[X.X_HEIGHT];
    const da = x[X.X_AILERON];
    const dr = x[X.X_RUDDER];
    const sinBeta = sin(beta);
    const cosBeta = cos(beta);
    const sinPhi = sin(x[X.X_PHI]);
    const cosPhi = cos(x[X.X_PHI]);
    const sinTheta = sin(theta);
    const cosTheta = cos(theta);
    const sinPsi = sin(x[X.X_PSI]);
    const cosPsi = cos(x[X.X_PSI]);
    const u = V * cosBeta;
    const v = V * sinBeta;
    const mass = h[T.H_MASS];
    const climb = u * sinTheta - v * cosTheta * sinPhi;

    // density about the tick's height
    const rise = height - h[T.H_REF_HEIGHT];
    const troposphere = h[T.H_TROPOSPHERE] !== 0;
    const part = troposphere ? (-LAPSE_K_PER_M * rise) / h[T.H_REF_TEMPERATURE] : -rise / SCALE_HEIGHT_M;
    let density: number;
    if (rise < SERIES_REACH_M && rise > -SERIES_REACH_M) {
      density =
        h[T.H_REF_DENSITY] *
        (troposphere
          ? 1 +
            DENSITY_EXPONENT *
              part *
              (1 + 0.5 * (DENSITY_EXPONENT - 1) * part * (1 + ((DENSITY_EXPONENT - 2) / 3) * part))
          : 1 + part * (1 + 0.5 * part * (1 + part / 3)));
    } else density = densityAt(height);
    const q = 0.5 * density * V * V;
    const qS = q * h[T.H_AREA];

    // wind and its change along body axes
    let windNorth = h[T.H_WIND_NORTH];
    let windEast = h[T.H_WIND_EAST];
    let windAx = 0;
    let windAy = 0;
    let windAz = 0;
    if (h[T.H_WIND_VARIES] !== 0) {
      air.windInto(wind, h[T.H_TIME] + tau, height, climb);
      windNorth = wind[0];
      windEast = wind[1];
      const ahead = wind[2] * cosPsi + wind[3] * sinPsi;
      const right = wind[3] * cosPsi - wind[2] * sinPsi;
      windAx = ahead * cosTheta;
      windAy = ahead * sinPhi * sinTheta + right * cosPhi;
      windAz = ahead * cosPhi * sinTheta - right * sinPhi;
    }
    let gustV = h[T.H_GUST_V];
    let gustP = h[T.H_GUST_P];
    let gustR = h[T.H_GUST_R];
    if (h[T.H_GUST_COUNT] !== 0) {
      air.gustInto(gust, h[T.H_TIME] + tau, x[X.X_DISTANCE]);
      gustV += gust[0];
      gustP += gust[1];
      gustR += gust[2];
    }
    const betaAir = beta - gustV / V;
    const pAir = p - gustP;
    const rAir = r - gustR;

    // lift from the pitch assistant
    let CL: number;
    const letGo = cosPhi < COS_LET_GO_BANK;
    if (letGo) CL = (mass * G0) / qS;
    else if (h[T.H_PITCH] === 0) CL = h[T.H_CL_TRIM];
    else {
      const path = h[T.H_PATH] + h[T.H_PATH_RATE] * tau;
      const qWanted = (PATH_GAIN * (path - theta) + r * sinPhi) / cosPhi;
      CL = (mass * (u * qWanted + G0 * cosTheta * cosPhi - p * v)) / qS;
    }
    const limit = h[T.H_CL_LIMIT];
    if (CL > limit) CL = limit;
    else if (CL < CL_LOWEST) CL = CL_LOWEST;
    const lift = qS * CL;

    // side force, rolling and yawing moment coefficients
    const toRate = h[T.H_SPAN] / (2 * V);
    const pHat = pAir * toRate;
    const rHat = rAir * toRate;
    const daHeld = da * h[T.H_AILERON_EFFECT];
    let CY = 0;
    let Croll = 0;
    let Cyaw = 0;
    const shareOld = h[T.H_SHARE_OLD];
    for (let pass = shareOld > 0 ? 0 : 1; pass < 2; pass++) {
      let row = pass === 1 ? h[T.H_ROWS] | 0 : h[T.H_ROWS_OLD] | 0;
      const last = pass === 1 ? h[T.H_ROWS_END] | 0 : h[T.H_ROWS_OLD_END] | 0;
      while (row < last && CL >= rowCL[row + 1]) row++;
      const beyond = CL - rowCL[row];
      const d = beyond > 0 ? beyond : 0;
      const i = row * DERIVATIVE_COUNT;
      const share = pass === 1 ? 1 - shareOld : shareOld;
      CY +=
        share *
        ((values[i] + d * slopes[i]) * betaAir +
          (values[i + 1] + d * slopes[i + 1]) * pHat +
          (values[i + 2] + d * slopes[i + 2]) * rHat +
          (values[i + 3] + d * slopes[i + 3]) * daHeld +
          (values[i + 4] + d * slopes[i + 4]) * dr);
      Croll +=
        share *
        ((values[i + 5] + d * slopes[i + 5]) * betaAir +
          (values[i + 6] + d * slopes[i + 6]) * pHat +
          (values[i + 7] + d * slopes[i + 7]) * rHat +
          (values[i + 8] + d * slopes[i + 8]) * daHeld +
          (values[i + 9] + d * slopes[i + 9]) * dr);
      Cyaw +=
        share *
        ((values[i + 10] + d * slopes[i + 10]) * betaAir +
          (values[i + 11] + d * slopes[i + 11]) * pHat +
          (values[i + 12] + d * slopes[i + 12]) * rHat +
          (values[i + 13] + d * slopes[i + 13]) * daHeld +
          (values[i + 14] + d * slopes[i + 14]) * dr);
    }

    // fin stall
    let finAngle = 0;
    let finCY = 0;
    if (h[T.H_HAS_FIN] !== 0) {
      const tau1 = h[T.H_FIN_TAU];
      finAngle =
        betaAir * h[T.H_FIN_BETA] + (pAir * h[T.H_FIN_HEIGHT] - rAir * h[T.H_FIN_ARM]) / V - tau1 * dr;
      const s = finAngle < 0 ? -finAngle : finAngle;
      let stall = h[T.H_FIN_STALL];
      if (s > stall - STALL_ROUNDING_RAD) {
        if (finAngle * dr < 0) stall += FLAP_DELAY * tau1 * (dr < 0 ? -dr : dr);
        if (s > stall - STALL_ROUNDING_RAD) {
          let g: number;
          if (s <= stall + STALL_ROUNDING_RAD) {
            const into = s - stall + STALL_ROUNDING_RAD;
            g = s - into * into * HALF_ROUNDING;
          } else {
            const share = (s - stall - STALL_ROUNDING_RAD) / STALL_SPREAD_RAD;
            const y = share < 1 ? share : 1;
            g = stall * (1 - h[T.H_FIN_DROP] * y * y * (3 - 2 * y));
          }
          finCY = -h[T.H_FIN_SLOPE] * (finAngle < 0 ? s - g : g - s);
          CY += finCY;
          Croll += (finCY * h[T.H_FIN_HEIGHT]) / h[T.H_SPAN];
          Cyaw -= (finCY * h[T.H_FIN_ARM]) / h[T.H_SPAN];
        }
      }
    }

    // engines
    let forward = 0;
    let engineYaw = 0;
    let engineRoll = 0;
    const sigma = density / SEA_LEVEL_DENSITY;
    let jet = 0;
    let sound = 0;
    if (h[T.H_HAS_JET] !== 0) {
      const power = troposphere ? JET_SIGMA_EXPONENT * DENSITY_EXPONENT : JET_SIGMA_EXPONENT;
      const series = troposphere
        ? 1 + power * part * (1 + 0.5 * (power - 1) * part * (1 + ((power - 2) / 3) * part))
        : 1 + power * part * (1 + 0.5 * power * part * (1 + (power * part) / 3));
      const temperature = troposphere ? h[T.H_REF_TEMPERATURE] - LAPSE_K_PER_M * rise : h[T.H_REF_TEMPERATURE];
      sound = Math.sqrt(HEAT_RATIO * GAS_CONSTANT * temperature);
      const mach = V / sound;
      jet = h[T.H_REF_JET] * series * (1 + JET_MACH_1 * mach + JET_MACH_2 * mach * mach);
    }
    for (let i = 0, at = 0; i < n; i++, at += T.ENGINE_STRIDE) {
      const thrust = x[X.X_THRUST + i];
      const knee2 = e[at + T.E_KNEE2];
      const full = knee2 < 0 ? e[at + T.E_BASE] * jet : (sigma * e[at + T.E_BASE]) / Math.sqrt(V * V + knee2);
      const short = e[at + T.E_FACTOR] * full - thrust;
      out[X.X_THRUST + i] = short * (short < 0 ? e[at + T.E_INV_DOWN] : e[at + T.E_INV_UP]);
      const drag = q * (e[at + T.E_AREA] + e[at + T.E_AREA_RATE] * tau);
      forward += thrust - drag;
      engineYaw += e[at + T.E_Y] * drag - e[at + T.E_YAW_ARM] * thrust;
      engineRoll -= e[at + T.E_ROLL_ARM] * thrust;
    }

    // translation
    const drag = qS * (h[T.H_CD0] + h[T.H_K_INDUCED] * CL * CL + h[T.H_CD_BETA2] * betaAir * betaAir);
    const fx = (forward - drag) / mass - G0 * sinTheta - windAx;
    const fy = (qS * CY) / mass + G0 * cosTheta * sinPhi - windAy;
    const qPitch = (lift / mass - G0 * cosTheta * cosPhi + p * v + windAz) / u;
    out[X.X_V] = cosBeta * fx + sinBeta * fy;
    out[X.X_BETA] = (cosBeta * fy - sinBeta * fx) / V - r;

    // rotation
    const qSb = qS * h[T.H_SPAN];
    const Ixz = h[T.H_IXZ];
    const roll = qSb * Croll + engineRoll - qPitch * r * h[T.H_IZZ_IYY] + Ixz * p * qPitch;
    const yaw = qSb * Cyaw + engineYaw - p * qPitch * h[T.H_IYY_IXX] - Ixz * qPitch * r;
    out[X.X_P] = h[T.H_INV_ROLL] * roll + h[T.H_INV_BOTH] * yaw;
    out[X.X_R] = h[T.H_INV_BOTH] * roll + h[T.H_INV_YAW] * yaw;
    const turn = (qPitch * sinPhi + r * cosPhi) / cosTheta;
    out[X.X_PHI] = p + turn * sinTheta;
    out[X.X_THETA] = qPitch * cosPhi - r * sinPhi;
    out[X.X_PSI] = turn;

    // position
    const ahead = u * cosTheta + v * sinPhi * sinTheta;
    const right = v * cosPhi;
    out[X.X_NORTH] = ahead * cosPsi - right * sinPsi + windNorth;
    out[X.X_EAST] = ahead * sinPsi + right * cosPsi + windEast;
    out[X.X_HEIGHT] = climb;
    out[X.X_DISTANCE] = V;

    // surfaces and yaw damper
    const aileronRate = (h[T.H_AILERON_CMD] - da) * h[T.H_INV_LAG_AILERON];
    const aileronMaxRate = h[T.H_AILERON_RATE];
    out[X.X_AILERON] =
      aileronRate > aileronMaxRate ? aileronMaxRate : aileronRate < -aileronMaxRate ? -aileronMaxRate : aileronRate;
    const washed = r - x[X.X_WASHOUT];
    out[X.X_WASHOUT] = washed * h[T.H_INV_WASHOUT];
    const damperLimit = h[T.H_DAMPER_LIMIT];
    const damperFree = h[T.H_DAMPER_GAIN] * washed;
    const damper = damperFree > damperLimit ? damperLimit : damperFree < -damperLimit ? -damperLimit : damperFree;
    let command = h[T.H_RUDDER_CMD];
    if (h[T.H_RUDDER_FAULT] === 0) {
      const rudderMax = h[T.H_RUDDER_MAX];
      const asked = h[T.H_RUDDER_PILOT] + h[T.H_RUDDER_TRIM] + damper;
      command = asked > rudderMax ? rudderMax : asked < -rudderMax ? -rudderMax : asked;
    }
    const rudderRate = (command - dr) * h[T.H_INV_LAG_RUDDER];
    const rudderMaxRate = h[T.H_RUDDER_RATE];
    out[X.X_RUDDER] =
      rudderRate > rudderMaxRate ? rudderMaxRate : rudderRate < -rudderMaxRate ? -rudderMaxRate : rudderRate;

    if (h[T.H_RECORD] === 0) return;
    made[T.M_CL] = CL;
    made[T.M_QBAR] = q;
    made[T.M_DENSITY] = density;
    made[T.M_LIFT] = lift;
    made[T.M_DRAG] = drag;
    made[T.M_FORWARD] = forward;
    made[T.M_ENGINE_YAW] = engineYaw;
    made[T.M_ENGINE_ROLL] = engineRoll;
    made[T.M_BETA_AIR] = betaAir;
    made[T.M_P_AIR] = pAir;
    made[T.M_R_AIR] = rAir;
    made[T.M_CY] = CY;
    made[T.M_CROLL] = Croll;
    made[T.M_CYAW] = Cyaw;
    made[T.M_FIN_CY] = finCY;
    made[T.M_FIN_ANGLE] = finAngle;
    made[T.M_Q_PITCH] = qPitch;
    made[T.M_WIND_NORTH] = windNorth;
    made[T.M_WIND_EAST] = windEast;
    made[T.M_WIND_AX] = windAx;
    made[T.M_WIND_AY] = windAy;
    made[T.M_WIND_AZ] = windAz;
    made[T.M_GUST_V] = gustV;
    made[T.M_GUST_P] = gustP;
    made[T.M_GUST_R] = gustR;
    made[T.M_DAMPER] = damper;
    made[T.M_SIGMA_JET] = jet;
    made[T.M_SOUND] = sound;
    made[T.M_LET_GO] = letGo ? 1 : 0;
  };
}
