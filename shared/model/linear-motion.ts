import { cos, sin } from '../numerics/elementary.ts';
import { createRk4 } from '../numerics/rk4.ts';
import { G0 } from '../units/constants.ts';
import type { AirFlow } from './air.ts';
import { SEA_LEVEL_DENSITY } from './atmosphere.ts';
import * as C from './derivatives.ts';
import type { Motion } from './plant-core.ts';
import { TICK_S } from './plant-types.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';

/**
 * Right-hand side of the small-disturbance motion of a plant: linear, at constant speed, path and height of the start.
 *
 * The same state vector as the large-angle motion. Sideslip and bank are absolute; at the trim of the start the lateral
 * equations vanish. Surfaces, yaw damper and engine spool are the same; thrust and drag are those of the trim speed and
 * density; gusts shift β, p, r in the aerodynamic terms; of a changing wind only the part across acts. Height follows
 * the path, position the heading and sideslip.
 *
 * @param h     Held numbers of the tick (tick-held.ts).
 * @param e     Held numbers of the engines.
 * @param n     Number of engines.
 * @param air   Wind and gusts.
 * @param made  Filled by `recordInto`.
 * @returns     The right-hand side, its recorded form, and one RK4 step over a tick; SI, rad.
 * @throws      Nothing.
 * @sign        As this folder's README.
 * @source      Flight model, small-disturbance.
 */
export function createLinearMotion(
  h: Float64Array,
  e: Float64Array,
  n: number,
  air: AirFlow,
  made: Float64Array,
): Motion {
  const wind = new Float64Array(4);
  const gust = new Float64Array(3);
  const L = T.H_LINEAR;

  const run = (out: Float64Array, tau: number, x: Float64Array, record: boolean): void => {
    const beta = x[X.X_BETA];
    const p = x[X.X_P];
    const r = x[X.X_R];
    const phi = x[X.X_PHI];
    const psi = x[X.X_PSI];
    const V = x[X.X_V];
    const da = x[X.X_AILERON] * h[T.H_AILERON_EFFECT];
    const dr = x[X.X_RUDDER];
    const mass = h[T.H_MASS];
    const density = h[T.H_DENSITY];
    const q = 0.5 * density * V * V;
    const qS = q * h[T.H_AREA];

    let windNorth = h[T.H_WIND_NORTH];
    let windEast = h[T.H_WIND_EAST];
    let windAy = 0;
    const climb = V * h[T.H_SIN_PATH];
    if (h[T.H_WIND_VARIES] !== 0) {
      air.windInto(wind, h[T.H_TIME] + tau, x[X.X_HEIGHT], climb);
      windNorth = wind[0];
      windEast = wind[1];
      windAy = wind[3] * cos(psi) - wind[2] * sin(psi);
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
    const toRate = h[T.H_SPAN] / (2 * V);
    const pHat = pAir * toRate;
    const rHat = rAir * toRate;
    const CY =
      h[L + C.SIDE_BETA] * betaAir +
      h[L + C.SIDE_P] * pHat +
      h[L + C.SIDE_R] * rHat +
      h[L + C.SIDE_DA] * da +
      h[L + C.SIDE_DR] * dr;
    const Croll =
      h[L + C.ROLL_BETA] * betaAir +
      h[L + C.ROLL_P] * pHat +
      h[L + C.ROLL_R] * rHat +
      h[L + C.ROLL_DA] * da +
      h[L + C.ROLL_DR] * dr;
    const Cyaw =
      h[L + C.YAW_BETA] * betaAir +
      h[L + C.YAW_P] * pHat +
      h[L + C.YAW_R] * rHat +
      h[L + C.YAW_DA] * da +
      h[L + C.YAW_DR] * dr;

    let forward = 0;
    let engineYaw = 0;
    let engineRoll = 0;
    const sigma = density / SEA_LEVEL_DENSITY;
    for (let i = 0, at = 0; i < n; i++, at += T.ENGINE_STRIDE) {
      const thrust = x[X.X_THRUST + i];
      const knee2 = e[at + T.E_KNEE2];
      const full =
        knee2 < 0 ? e[at + T.E_BASE] * h[T.H_REF_JET] : (sigma * e[at + T.E_BASE]) / Math.sqrt(V * V + knee2);
      const short = e[at + T.E_FACTOR] * full - thrust;
      out[X.X_THRUST + i] = short * (short < 0 ? e[at + T.E_INV_DOWN] : e[at + T.E_INV_UP]);
      const drag = q * (e[at + T.E_AREA] + e[at + T.E_AREA_RATE] * tau);
      forward += thrust - drag;
      engineYaw += e[at + T.E_Y] * drag - e[at + T.E_YAW_ARM] * thrust;
      engineRoll -= e[at + T.E_ROLL_ARM] * thrust;
    }

    const cosPath = h[T.H_COS_PATH];
    const qSb = qS * h[T.H_SPAN];
    const roll = qSb * Croll + engineRoll;
    const yaw = qSb * Cyaw + engineYaw;
    out[X.X_BETA] = ((qS * CY) / mass + G0 * cosPath * phi - windAy) / V - r;
    out[X.X_P] = h[T.H_INV_ROLL] * roll + h[T.H_INV_BOTH] * yaw;
    out[X.X_R] = h[T.H_INV_BOTH] * roll + h[T.H_INV_YAW] * yaw;
    out[X.X_PHI] = p + r * h[T.H_TAN_PATH];
    out[X.X_THETA] = 0;
    out[X.X_PSI] = r / cosPath;
    out[X.X_V] = 0;
    out[X.X_NORTH] = V * cosPath * cos(psi + beta) + windNorth;
    out[X.X_EAST] = V * cosPath * sin(psi + beta) + windEast;
    out[X.X_HEIGHT] = climb;
    out[X.X_DISTANCE] = V;

    const aileronRate = (h[T.H_AILERON_CMD] - x[X.X_AILERON]) * h[T.H_INV_LAG_AILERON];
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

    if (!record) return;
    const CL = h[T.H_CL_TRIM];
    made[T.M_CL] = CL;
    made[T.M_QBAR] = q;
    made[T.M_DENSITY] = density;
    made[T.M_LIFT] = qS * CL;
    made[T.M_DRAG] = qS * (h[T.H_CD0] + h[T.H_K_INDUCED] * CL * CL + h[T.H_CD_BETA2] * betaAir * betaAir);
    made[T.M_FORWARD] = forward;
    made[T.M_ENGINE_YAW] = engineYaw;
    made[T.M_ENGINE_ROLL] = engineRoll;
    made[T.M_BETA_AIR] = betaAir;
    made[T.M_P_AIR] = pAir;
    made[T.M_R_AIR] = rAir;
    made[T.M_CY] = CY;
    made[T.M_CROLL] = Croll;
    made[T.M_CYAW] = Cyaw;
    made[T.M_FIN_CY] = 0;
    made[T.M_FIN_ANGLE] =
      h[T.H_HAS_FIN] !== 0
        ? betaAir * h[T.H_FIN_BETA] + (pAir * h[T.H_FIN_HEIGHT] - rAir * h[T.H_FIN_ARM]) / V - h[T.H_FIN_TAU] * dr
        : 0;
    made[T.M_Q_PITCH] = 0;
    made[T.M_WIND_NORTH] = windNorth;
    made[T.M_WIND_EAST] = windEast;
    made[T.M_WIND_AX] = 0;
    made[T.M_WIND_AY] = windAy;
    made[T.M_WIND_AZ] = 0;
    made[T.M_GUST_V] = gustV;
    made[T.M_GUST_P] = gustP;
    made[T.M_GUST_R] = gustR;
    made[T.M_DAMPER] = damper;
    made[T.M_SIGMA_JET] = h[T.H_REF_JET];
    made[T.M_LET_GO] = 0;
  };

  const rk4 = createRk4(X.stateLength(n));
  const rhs = (out: Float64Array, tau: number, x: Float64Array): void => run(out, tau, x, false);
  return {
    rhs,
    recordInto: (out, tau, x) => run(out, tau, x, true),
    stepInto: (out, x) => rk4.stepInto(out, rhs, 0, x, TICK_S),
  };
}
