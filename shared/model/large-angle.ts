/**
 * One closure on purpose, longer than the house's files: it is the product's hot loop, and calls, objects or imported
 * constants inside it cost more than the arithmetic. What is held over a tick is read into locals once, before the four
 * stages; imported constants are copied into the factory's scope, because an import is looked up at every use.
 */
import { sinCosInto } from '../numerics/sin-cos.ts';
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
import type { Motion } from './plant-core.ts';
import { TICK_S } from './plant-types.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';

/** Height from the anchor within which density is taken from a series (see densityNear); m. */
const SERIES_REACH_M = 30;
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
 * is a third-order series about the anchor of the tick. Valid while V cosβ > 0 and |θ| < 90°.
 *
 * @param h     Held numbers of the tick (tick-held.ts).
 * @param e     Held numbers of the engines, ENGINE_STRIDE each.
 * @param n     Number of engines.
 * @param rows  Derivative rows of all configurations.
 * @param air   Wind and gusts in time and distance.
 * @param made  Filled by `recordInto`.
 * @returns     The right-hand side, its recorded form, and one RK4 step over a tick; SI, rad.
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
): Motion {
  const { CL: rowCL, values, slopes } = rows;
  const {
    X_AILERON,
    X_BETA,
    X_DISTANCE,
    X_EAST,
    X_HEIGHT,
    X_NORTH,
    X_P,
    X_PHI,
    X_PSI,
    X_R,
    X_RUDDER,
    X_THETA,
    X_THRUST,
    X_V,
    X_WASHOUT,
  } = X;
  const {
    ENGINE_STRIDE,
    E_AREA,
    E_AREA_RATE,
    E_BASE,
    E_FACTOR,
    E_INV_DOWN,
    E_INV_UP,
    E_KNEE2,
    E_ROLL_ARM,
    E_Y,
    E_YAW_ARM,
  } = T;
  const rowLength = DERIVATIVE_COUNT;
  const states = X.stateLength(n);
  const sum = new Float64Array(states);
  const slope = new Float64Array(states);
  const mid = new Float64Array(states);
  const offsets = Float64Array.of(0, 0.5 * TICK_S, 0.5 * TICK_S, TICK_S);
  const reaches = Float64Array.of(0.5 * TICK_S, 0.5 * TICK_S, TICK_S, TICK_S / 6);
  const angles = new Float64Array(12);
  const wind = new Float64Array(4);
  const gust = new Float64Array(3);

  const run = (out: Float64Array, x: Float64Array, stages: number, within: number, record: boolean): void => {
    const mass = h[T.H_MASS];
    const troposphere = h[T.H_TROPOSPHERE] !== 0;
    const CLlimit = h[T.H_CL_LIMIT];
    const shareOld = h[T.H_SHARE_OLD];
    const finTau = h[T.H_FIN_TAU];
    const Ixz = h[T.H_IXZ];
    const aileronMaxRate = h[T.H_AILERON_RATE];
    const rudderMaxRate = h[T.H_RUDDER_RATE];
    const damperLimit = h[T.H_DAMPER_LIMIT];
    const rudderMax = h[T.H_RUDDER_MAX];
    const refHeight = h[T.H_REF_HEIGHT];
    const refTemperature = h[T.H_REF_TEMPERATURE];
    const refDensity = h[T.H_REF_DENSITY];
    const area = h[T.H_AREA];
    const windNorth0 = h[T.H_WIND_NORTH];
    const windEast0 = h[T.H_WIND_EAST];
    const windVaries = h[T.H_WIND_VARIES] !== 0;
    const timeS = h[T.H_TIME];
    const gustV0 = h[T.H_GUST_V];
    const gustP0 = h[T.H_GUST_P];
    const gustR0 = h[T.H_GUST_R];
    const gustCount = h[T.H_GUST_COUNT];
    const pitchLaw = h[T.H_PITCH];
    const CLtrim = h[T.H_CL_TRIM];
    const path0 = h[T.H_PATH];
    const pathRate = h[T.H_PATH_RATE];
    const span = h[T.H_SPAN];
    const aileronEffect = h[T.H_AILERON_EFFECT];
    const rowsFrom = h[T.H_ROWS] | 0;
    const rowsOld = h[T.H_ROWS_OLD] | 0;
    const rowsEnd = h[T.H_ROWS_END] | 0;
    const rowsOldEnd = h[T.H_ROWS_OLD_END] | 0;
    const hasFin = h[T.H_HAS_FIN] !== 0;
    const finBeta = h[T.H_FIN_BETA];
    const finHeight = h[T.H_FIN_HEIGHT];
    const finArm = h[T.H_FIN_ARM];
    const finStall = h[T.H_FIN_STALL];
    const finDrop = h[T.H_FIN_DROP];
    const finSlope = h[T.H_FIN_SLOPE];
    const hasJet = h[T.H_HAS_JET] !== 0;
    const refJet = h[T.H_REF_JET];
    const CD0 = h[T.H_CD0];
    const kInduced = h[T.H_K_INDUCED];
    const CDbeta2 = h[T.H_CD_BETA2];
    const IzzIyy = h[T.H_IZZ_IYY];
    const IyyIxx = h[T.H_IYY_IXX];
    const invRoll = h[T.H_INV_ROLL];
    const invBoth = h[T.H_INV_BOTH];
    const invYaw = h[T.H_INV_YAW];
    const aileronCommand = h[T.H_AILERON_CMD];
    const invLagAileron = h[T.H_INV_LAG_AILERON];
    const invWashout = h[T.H_INV_WASHOUT];
    const damperGain = h[T.H_DAMPER_GAIN];
    const rudderFaultCommand = h[T.H_RUDDER_CMD];
    const rudderFault = h[T.H_RUDDER_FAULT];
    const rudderPilot = h[T.H_RUDDER_PILOT];
    const rudderTrim = h[T.H_RUDDER_TRIM];
    const invLagRudder = h[T.H_INV_LAG_RUDDER];

    for (let stage = 0; stage < stages; stage++) {
      const s = stage === 0 ? x : mid;
      const tau = offsets[stage] + within;
      const k = stages === 1 ? out : slope;
      const beta = s[X_BETA];
      const p = s[X_P];
      const r = s[X_R];
      const theta = s[X_THETA];
      const V = s[X_V];
      const height = s[X_HEIGHT];
      const da = s[X_AILERON];
      const dr = s[X_RUDDER];
      angles[0] = beta;
      angles[1] = s[X_PHI];
      angles[2] = theta;
      angles[3] = s[X_PSI];
      sinCosInto(angles, 4);
      const sinBeta = angles[4];
      const cosBeta = angles[5];
      const sinPhi = angles[6];
      const cosPhi = angles[7];
      const sinTheta = angles[8];
      const cosTheta = angles[9];
      const sinPsi = angles[10];
      const cosPsi = angles[11];
      const u = V * cosBeta;
      const v = V * sinBeta;
      const climb = u * sinTheta - v * cosTheta * sinPhi;

      // density about the anchor
      const rise = height - refHeight;
      const part = troposphere ? (-LAPSE_K_PER_M * rise) / refTemperature : -rise / SCALE_HEIGHT_M;
      let density: number;
      if (rise < SERIES_REACH_M && rise > -SERIES_REACH_M) {
        density =
          refDensity *
          (troposphere
            ? 1 +
              DENSITY_EXPONENT *
                part *
                (1 + 0.5 * (DENSITY_EXPONENT - 1) * part * (1 + ((DENSITY_EXPONENT - 2) / 3) * part))
            : 1 + part * (1 + 0.5 * part * (1 + part / 3)));
      } else density = densityAt(height);
      const q = 0.5 * density * V * V;
      const qS = q * area;

      // wind and its change along body axes
      let windNorth = windNorth0;
      let windEast = windEast0;
      let windAx = 0;
      let windAy = 0;
      let windAz = 0;
      if (windVaries) {
        air.windInto(wind, timeS + tau, height, climb);
        windNorth = wind[0];
        windEast = wind[1];
        const ahead = wind[2] * cosPsi + wind[3] * sinPsi;
        const right = wind[3] * cosPsi - wind[2] * sinPsi;
        windAx = ahead * cosTheta;
        windAy = ahead * sinPhi * sinTheta + right * cosPhi;
        windAz = ahead * cosPhi * sinTheta - right * sinPhi;
      }
      let gustV = gustV0;
      let gustP = gustP0;
      let gustR = gustR0;
      const betaAir = beta - gustV / V;
      const pAir = p - gustP;
      const rAir = r - gustR;

      // lift from the pitch assistant
      let CL: number;
      const letGo = cosPhi < COS_LET_GO_BANK;
      if (letGo) CL = (mass * G0) / qS;
      else if (pitchLaw === 0) CL = CLtrim;
      else {
        const path = path0 + pathRate * tau;
        const qWanted = (PATH_GAIN * (path - theta) + r * sinPhi) / cosPhi;
        CL = (mass * (u * qWanted + G0 * cosTheta * cosPhi - p * v)) / qS;
      }
      if (CL > CLlimit) CL = CLlimit;
      else if (CL < CL_LOWEST) CL = CL_LOWEST;
      const lift = qS * CL;

      // side force, rolling and yawing moment coefficients
      const toRate = span / (2 * V);
      const pHat = pAir * toRate;
      const rHat = rAir * toRate;
      const daHeld = da * aileronEffect;
      let CY = 0;
      let Croll = 0;
      let Cyaw = 0;
      for (let pass = shareOld > 0 ? 0 : 1; pass < 2; pass++) {
        let row = pass === 1 ? rowsFrom : rowsOld;
        const last = pass === 1 ? rowsEnd : rowsOldEnd;
        while (row < last && CL >= rowCL[row + 1]) row++;
        const beyond = CL - rowCL[row];
        const d = beyond > 0 ? beyond : 0;
        const i = row * rowLength;
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
      if (hasFin) {
        finAngle = betaAir * finBeta + (pAir * finHeight - rAir * finArm) / V - finTau * dr;
        const s = finAngle < 0 ? -finAngle : finAngle;
        let stall = finStall;
        if (s > stall - STALL_ROUNDING_RAD) {
          if (finAngle * dr < 0) stall += FLAP_DELAY * finTau * (dr < 0 ? -dr : dr);
          if (s > stall - STALL_ROUNDING_RAD) {
            let g: number;
            if (s <= stall + STALL_ROUNDING_RAD) {
              const into = s - stall + STALL_ROUNDING_RAD;
              g = s - into * into * HALF_ROUNDING;
            } else {
              const share = (s - stall - STALL_ROUNDING_RAD) / STALL_SPREAD_RAD;
              const y = share < 1 ? share : 1;
              g = stall * (1 - finDrop * y * y * (3 - 2 * y));
            }
            finCY = -finSlope * (finAngle < 0 ? s - g : g - s);
            CY += finCY;
            Croll += (finCY * finHeight) / span;
            Cyaw -= (finCY * finArm) / span;
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
      if (hasJet) {
        const power = troposphere ? JET_SIGMA_EXPONENT * DENSITY_EXPONENT : JET_SIGMA_EXPONENT;
        const series = troposphere
          ? 1 + power * part * (1 + 0.5 * (power - 1) * part * (1 + ((power - 2) / 3) * part))
          : 1 + power * part * (1 + 0.5 * power * part * (1 + (power * part) / 3));
        const temperature = troposphere ? refTemperature - LAPSE_K_PER_M * rise : refTemperature;
        sound = Math.sqrt(HEAT_RATIO * GAS_CONSTANT * temperature);
        const mach = V / sound;
        jet = refJet * series * (1 + JET_MACH_1 * mach + JET_MACH_2 * mach * mach);
      }
      for (let i = 0, j = 0; i < n; i++, j += ENGINE_STRIDE) {
        const thrust = s[X_THRUST + i];
        const knee2 = e[j + E_KNEE2];
        const full = knee2 < 0 ? e[j + E_BASE] * jet : (sigma * e[j + E_BASE]) / Math.sqrt(V * V + knee2);
        const short = e[j + E_FACTOR] * full - thrust;
        k[X_THRUST + i] = short * (short < 0 ? e[j + E_INV_DOWN] : e[j + E_INV_UP]);
        const engineDrag = q * (e[j + E_AREA] + e[j + E_AREA_RATE] * tau);
        forward += thrust - engineDrag;
        engineYaw += e[j + E_Y] * engineDrag - e[j + E_YAW_ARM] * thrust;
        engineRoll -= e[j + E_ROLL_ARM] * thrust;
      }

      // translation
      const drag = qS * (CD0 + kInduced * CL * CL + CDbeta2 * betaAir * betaAir);
      const fx = (forward - drag) / mass - G0 * sinTheta - windAx;
      const fy = (qS * CY) / mass + G0 * cosTheta * sinPhi - windAy;
      const qPitch = (lift / mass - G0 * cosTheta * cosPhi + p * v + windAz) / u;
      k[X_V] = cosBeta * fx + sinBeta * fy;
      k[X_BETA] = (cosBeta * fy - sinBeta * fx) / V - r;

      // rotation
      const qSb = qS * span;
      const roll = qSb * Croll + engineRoll - qPitch * r * IzzIyy + Ixz * p * qPitch;
      const yaw = qSb * Cyaw + engineYaw - p * qPitch * IyyIxx - Ixz * qPitch * r;
      k[X_P] = invRoll * roll + invBoth * yaw;
      k[X_R] = invBoth * roll + invYaw * yaw;
      const turn = (qPitch * sinPhi + r * cosPhi) / cosTheta;
      k[X_PHI] = p + turn * sinTheta;
      k[X_THETA] = qPitch * cosPhi - r * sinPhi;
      k[X_PSI] = turn;

      // position
      const ahead = u * cosTheta + v * sinPhi * sinTheta;
      const right = v * cosPhi;
      k[X_NORTH] = ahead * cosPsi - right * sinPsi + windNorth;
      k[X_EAST] = ahead * sinPsi + right * cosPsi + windEast;
      k[X_HEIGHT] = climb;
      k[X_DISTANCE] = V;

      // surfaces and yaw damper
      const aileronRate = (aileronCommand - da) * invLagAileron;
      k[X_AILERON] =
        aileronRate > aileronMaxRate ? aileronMaxRate : aileronRate < -aileronMaxRate ? -aileronMaxRate : aileronRate;
      const washed = r - s[X_WASHOUT];
      k[X_WASHOUT] = washed * invWashout;
      const damperFree = damperGain * washed;
      const damper = damperFree > damperLimit ? damperLimit : damperFree < -damperLimit ? -damperLimit : damperFree;
      let command = rudderFaultCommand;
      if (rudderFault === 0) {
        const asked = rudderPilot + rudderTrim + damper;
        command = asked > rudderMax ? rudderMax : asked < -rudderMax ? -rudderMax : asked;
      }
      const rudderRate = (command - dr) * invLagRudder;
      k[X_RUDDER] =
        rudderRate > rudderMaxRate ? rudderMaxRate : rudderRate < -rudderMaxRate ? -rudderMaxRate : rudderRate;

      if (record) {
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
      }
      if (stages === 1) return;
      if (stage === 0) for (let i = 0; i < states; i++) sum[i] = k[i];
      else if (stage < 3) for (let i = 0; i < states; i++) sum[i] += 2 * k[i];
      const reach = reaches[stage];
      if (stage < 3) for (let i = 0; i < states; i++) mid[i] = x[i] + reach * k[i];
      else for (let i = 0; i < states; i++) out[i] = x[i] + reach * (sum[i] + k[i]);
    }
  };

  return {
    rhs: (out, tau, x) => run(out, x, 1, tau, false),
    recordInto: (out, tau, x) => run(out, x, 1, tau, true),
    stepInto: (out, x) => run(out, x, 4, 0, false),
  };
}
