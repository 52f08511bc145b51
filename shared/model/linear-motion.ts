import { packedDoubles } from '../numerics/packed-doubles.ts';
import { sinCosInto } from '../numerics/sin-cos.ts';
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
 * @param made  Quantities of the latest evaluation.
 * @param row   Derivatives at the trim lift coefficient, blended while the configuration changes.
 * @returns     The right-hand side, and one RK4 step over a tick (surfaces exact); SI, rad.
 * @throws      Nothing.
 * @sign        As this folder's README.
 * @source      Flight model, small-disturbance.
 */
export function createLinearMotion(
  h: number[],
  e: number[],
  n: number,
  air: AirFlow,
  made: number[],
  row: Float64Array,
): Motion {
  const angles = packedDoubles(6);
  const wind = new Float64Array(4);
  const gust = new Float64Array(3);

  const rhs = (out: Float64Array, tau: number, x: Float64Array): void => {
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

    angles[0] = psi;
    angles[1] = psi + beta;
    sinCosInto(angles, 2);

    let windNorth = h[T.H_WIND_NORTH];
    let windEast = h[T.H_WIND_EAST];
    let windAy = 0;
    const climb = V * h[T.H_SIN_PATH];
    if (h[T.H_WIND_VARIES] !== 0) {
      air.windInto(wind, h[T.H_TIME] + tau, x[X.X_HEIGHT], climb);
      windNorth = wind[0];
      windEast = wind[1];
      windAy = wind[3] * angles[3] - wind[2] * angles[2];
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
      row[C.SIDE_BETA] * betaAir +
      row[C.SIDE_P] * pHat +
      row[C.SIDE_R] * rHat +
      row[C.SIDE_DA] * da +
      row[C.SIDE_DR] * dr;
    const Croll =
      row[C.ROLL_BETA] * betaAir +
      row[C.ROLL_P] * pHat +
      row[C.ROLL_R] * rHat +
      row[C.ROLL_DA] * da +
      row[C.ROLL_DR] * dr;
    const Cyaw =
      row[C.YAW_BETA] * betaAir + row[C.YAW_P] * pHat + row[C.YAW_R] * rHat + row[C.YAW_DA] * da + row[C.YAW_DR] * dr;

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
    out[X.X_NORTH] = V * cosPath * angles[5] + windNorth;
    out[X.X_EAST] = V * cosPath * angles[4] + windEast;
    out[X.X_HEIGHT] = climb;
    out[X.X_DISTANCE] = V;

    const aileronRate = (h[T.H_AILERON_CMD] - x[X.X_AILERON]) * h[T.H_INV_LAG];
    const aileronMaxRate = h[T.H_AILERON_RATE];
    out[X.X_AILERON] =
      aileronRate > aileronMaxRate ? aileronMaxRate : aileronRate < -aileronMaxRate ? -aileronMaxRate : aileronRate;
    out[X.X_WASHOUT] = (r - x[X.X_WASHOUT]) * h[T.H_INV_WASHOUT];
    const rudderRate = (h[T.H_RUDDER_CMD] - dr) * h[T.H_INV_LAG_RUDDER];
    const rudderMaxRate = h[T.H_RUDDER_RATE];
    out[X.X_RUDDER] =
      rudderRate > rudderMaxRate ? rudderMaxRate : rudderRate < -rudderMaxRate ? -rudderMaxRate : rudderRate;

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
    made[T.M_SIGMA_JET] = h[T.H_REF_JET];
    made[T.M_LET_GO] = 0;
  };

  const k1 = new Float64Array(X.stateLength(n));
  const [k2, k3, k4, at] = [k1.slice(), k1.slice(), k1.slice(), k1.slice()];
  const stage = (out: Float64Array, x: Float64Array, reach: number, k: Float64Array, end: boolean): void => {
    for (let i = 0; i < out.length; i++) out[i] = x[i] + reach * k[i];
    out[X.X_AILERON] = h[end ? T.H_AILERON_FULL : T.H_AILERON_HALF];
    out[X.X_RUDDER] = h[end ? T.H_RUDDER_FULL : T.H_RUDDER_HALF];
  };
  return {
    rhs,
    stepInto(out, x) {
      rhs(k1, 0, x);
      stage(at, x, 0.5 * TICK_S, k1, false);
      rhs(k2, 0.5 * TICK_S, at);
      stage(at, x, 0.5 * TICK_S, k2, false);
      rhs(k3, 0.5 * TICK_S, at);
      stage(at, x, TICK_S, k3, true);
      rhs(k4, TICK_S, at);
      for (let i = 0; i < k1.length; i++) k1[i] += 2 * (k2[i] + k3[i]) + k4[i];
      stage(out, x, TICK_S / 6, k1, true);
    },
  };
}
