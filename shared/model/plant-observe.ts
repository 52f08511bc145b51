import { atan2, cos, sin } from '../numerics/elementary.ts';
import { DEG, G0 } from '../units/constants.ts';
import { casInAir } from './airspeeds.ts';
import { GAS_CONSTANT, HEAT_RATIO, SEA_LEVEL_DENSITY, temperatureK } from './atmosphere.ts';
import { pedalForceN, pedalRudderLimitRad, SATURATION_SHARE } from './controls.ts';
import * as C from './derivatives.ts';
import { finStallAngleRad } from './fin.ts';
import { CL_LOWEST } from './pitch-assistant.ts';
import type { Core } from './plant-core.ts';
import * as D from './plant-memory.ts';
import { blendedDerivativesInto, prepareTick } from './plant-tick.ts';
import { TICK_S } from './plant-types.ts';
import type { MomentParts, Observation } from './plant-types.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';

/** Lever of the half-wing lifts as a share of the semi-span (ours). */
export const LIFT_LEVER_SHARE = 0.4;
/** Angle of one ball width. */
export const BALL_WIDTH_RAD = 5 * DEG;
/** Least lift by which the ball divides, as a share of the weight. */
const BALL_LIFT_SHARE = 0.2;
const BETA_LIMIT_RAD = 15 * DEG;
const BANK_LIMIT_RAD = 60 * DEG;

/**
 * A function that fills observations of a core; it owns its work arrays and allocates nothing.
 *
 * Accelerations come from the derivative of the state, forces from the recorded evaluation: that they agree is a test.
 *
 * @param core  The plant's shared parts.
 * @returns     The filling function; SI, rad.
 * @throws      Nothing.
 * @sign        As plant-types.ts.
 * @source      Flight model, forces drawn and validity.
 */
export function createObserver(core: Core): (out: Observation) => void {
  const { x, d, h, e, made, inputs, engineCount, configurations, inertias, linear, groundM, motion: equations } = core;
  const n = x.length;
  const dx = new Float64Array(n);
  const later = new Float64Array(n);
  const dLater = new Float64Array(n);
  const deriv = new Float64Array(C.DERIVATIVE_COUNT);
  const aircraft = configurations[0];
  const { controls, fin } = aircraft;
  const { Ixz } = inertias;
  const span = aircraft.spanM;

  /** Pitch rate a tick ahead along the present derivative: pitch is algebraic, its rate of change is not a state. */
  const pitchRateAhead = (): number => {
    if (linear) return 0;
    for (let i = 0; i < n; i++) later[i] = x[i] + TICK_S * dx[i];
    equations.rhs(dLater, TICK_S, later);
    return made[T.M_Q_PITCH];
  };

  const motion = (out: Observation): void => {
    const V = x[X.X_V];
    const density = made[T.M_DENSITY];
    const temperature = temperatureK(x[X.X_HEIGHT]);
    const sound = Math.sqrt(HEAT_RATIO * GAS_CONSTANT * temperature);
    out.tick = d[D.D_TICK];
    out.timeS = d[D.D_TICK] * TICK_S;
    out.betaRad = x[X.X_BETA];
    out.pRadS = x[X.X_P];
    out.rRadS = x[X.X_R];
    out.phiRad = x[X.X_PHI];
    out.thetaRad = x[X.X_THETA];
    out.psiRad = x[X.X_PSI];
    out.tasMps = V;
    out.casMps = casInAir(V, density * GAS_CONSTANT * temperature, sound);
    out.easMps = V * Math.sqrt(density / SEA_LEVEL_DENSITY);
    out.mach = V / sound;
    out.northM = x[X.X_NORTH];
    out.eastM = x[X.X_EAST];
    out.heightM = x[X.X_HEIGHT];
    out.heightAboveRunwayM = x[X.X_HEIGHT] - groundM;
    const vn = dx[X.X_NORTH];
    const ve = dx[X.X_EAST];
    out.groundSpeedMps = Math.sqrt(vn * vn + ve * ve);
    out.trackRad = atan2(ve, vn);
    out.verticalSpeedMps = dx[X.X_HEIGHT];
    const CL = made[T.M_CL];
    out.CL = CL;
    out.qbarPa = made[T.M_QBAR];
    out.alphaRad = CL / h[T.H_CL_ALPHA] + h[T.H_ALPHA_ZERO_LIFT];
    out.pitchAttitudeRad = x[X.X_THETA] + out.alphaRad;
    const weight = aircraft.massKg * G0;
    out.forceWeightN = weight;
    out.loadFactor = made[T.M_LIFT] / weight;
    const side = made[T.M_QBAR] * aircraft.wingAreaM2 * made[T.M_CY];
    out.ballWidths = -atan2(side, Math.max(made[T.M_LIFT], BALL_LIFT_SHARE * weight)) / BALL_WIDTH_RAD;
    out.windNorthMps = made[T.M_WIND_NORTH];
    out.windEastMps = made[T.M_WIND_EAST];
    out.gustLateralMps = made[T.M_GUST_V];
    out.gustRollRadS = made[T.M_GUST_P];
    out.gustYawRadS = made[T.M_GUST_R];
  };

  const surfaces = (out: Observation): void => {
    const eas = out.easMps;
    const faulty = d[D.D_RUDDER_FAULT] !== 0;
    const limit = pedalRudderLimitRad(controls, eas, h[T.H_RATIO]);
    const pilot = h[T.H_RUDDER_PILOT];
    out.stick = clampUnit(inputs.stick);
    out.pedal = clampUnit(inputs.pedal);
    out.aileronRad = x[X.X_AILERON];
    out.rudderRad = x[X.X_RUDDER];
    out.rudderAvailableRad = faulty ? 0 : limit;
    out.rudderMaxRad = controls.rudderMaxRad;
    out.aileronMaxRad = controls.aileronMaxRad;
    out.yawDamperRad = h[T.H_DAMPER];
    const share = x[X.X_RUDDER] - h[T.H_RUDDER_TRIM] - h[T.H_DAMPER];
    out.pedalForceN = pedalForceN(controls, share, out.pedal, eas);
    out.pedalForceLimitN = controls.pedalForce?.limitN ?? Infinity;
    out.rudderRatio = h[T.H_RATIO];
    out.rudderSaturated =
      Math.abs(x[X.X_RUDDER]) >= SATURATION_SHARE * controls.rudderMaxRad ||
      (!faulty && Math.abs(pilot) >= SATURATION_SHARE * limit);
  };

  const enginesOf = (out: Observation): void => {
    const sigma = made[T.M_DENSITY] / SEA_LEVEL_DENSITY;
    const V = x[X.X_V];
    for (let i = 0; i < engineCount; i++) {
      const at = i * T.ENGINE_STRIDE;
      const k = D.D_ENGINES + i * D.ENGINE_MEMORY;
      const knee2 = e[at + T.E_KNEE2];
      const full =
        knee2 < 0 ? e[at + T.E_BASE] * made[T.M_SIGMA_JET] : (sigma * e[at + T.E_BASE]) / Math.sqrt(V * V + knee2);
      const failure = d[k + D.K_FAILURE];
      out.levers[i] = e[at + T.E_LEVER];
      out.thrustN[i] = x[X.X_THRUST + i];
      out.thrustAvailableN[i] = e[at + T.E_LEVER] * full;
      out.windmillDragN[i] = made[T.M_QBAR] * e[at + T.E_AREA];
      const feathered = d[k + D.K_FEATHER] !== 0 || d[k + D.K_FEATHER_AT] > 0;
      // a jet that is shut down windmills
      out.engineState[i] = !feathered ? failure : aircraft.engines[i].kind === 'jet' ? 1 : 2;
    }
    out.engineYawNm = made[T.M_ENGINE_YAW];
    out.engineRollNm = made[T.M_ENGINE_ROLL];
  };

  const forces = (out: Observation): void => {
    const V = x[X.X_V];
    const p = x[X.X_P];
    const r = x[X.X_R];
    const dr = x[X.X_RUDDER];
    const da = x[X.X_AILERON] * h[T.H_AILERON_EFFECT];
    const qS = made[T.M_QBAR] * aircraft.wingAreaM2;
    const qSb = qS * span;
    blendedDerivativesInto(deriv, core, made[T.M_CL]);
    const betaAir = made[T.M_BETA_AIR];
    const pHat = (made[T.M_P_AIR] * span) / (2 * V);
    const rHat = (made[T.M_R_AIR] * span) / (2 * V);
    const stallForce = qS * made[T.M_FIN_CY];

    const rudder = qS * deriv[C.SIDE_DR] * dr;
    const finForce = fin ? -qS * h[T.H_FIN_SLOPE] * (made[T.M_FIN_ANGLE] + fin.rudderTau * dr) + stallForce : 0;
    out.forceRudderN = rudder;
    out.forceFinN = finForce;
    out.forceSideN = qS * made[T.M_CY] - rudder - finForce;
    const lever = LIFT_LEVER_SHARE * 0.5 * span;
    const finRoll = fin ? finForce * fin.heightM : 0;
    const difference = (qSb * made[T.M_CROLL] - finRoll - qSb * deriv[C.ROLL_DR] * dr) / (2 * lever);
    out.liftLeverM = lever;
    out.forceLiftLeftN = 0.5 * made[T.M_LIFT] + difference;
    out.forceLiftRightN = 0.5 * made[T.M_LIFT] - difference;
    out.forceDragN = made[T.M_DRAG];

    const q = made[T.M_Q_PITCH];
    const yaw = out.yawParts;
    yaw.beta = qSb * deriv[C.YAW_BETA] * betaAir;
    yaw.p = qSb * deriv[C.YAW_P] * pHat;
    yaw.r = qSb * deriv[C.YAW_R] * rHat;
    yaw.aileron = qSb * deriv[C.YAW_DA] * da;
    yaw.rudder = qSb * deriv[C.YAW_DR] * dr;
    yaw.fin = fin ? -stallForce * fin.armM : 0;
    yaw.thrust = made[T.M_ENGINE_YAW];
    yaw.inertia = Ixz * dx[X.X_P] - p * q * h[T.H_IYY_IXX] - Ixz * q * r;
    const roll = out.rollParts;
    roll.beta = qSb * deriv[C.ROLL_BETA] * betaAir;
    roll.p = qSb * deriv[C.ROLL_P] * pHat;
    roll.r = qSb * deriv[C.ROLL_R] * rHat;
    roll.aileron = qSb * deriv[C.ROLL_DA] * da;
    roll.rudder = qSb * deriv[C.ROLL_DR] * dr;
    roll.fin = fin ? stallForce * fin.heightM : 0;
    roll.thrust = made[T.M_ENGINE_ROLL];
    roll.inertia = Ixz * dx[X.X_R] - q * r * h[T.H_IZZ_IYY] + Ixz * p * q;
    out.yawTotalNm = sumOf(yaw);
    out.rollTotalNm = sumOf(roll);
  };

  const accelerations = (out: Observation): void => {
    const V = x[X.X_V];
    const q = made[T.M_Q_PITCH];
    out.qRadS = q;
    out.pDotRadS2 = dx[X.X_P];
    out.rDotRadS2 = dx[X.X_R];
    if (linear) {
      out.axMps2 = 0;
      out.ayMps2 = V * (dx[X.X_BETA] + x[X.X_R]) + made[T.M_WIND_AY];
      out.azMps2 = 0;
      return;
    }
    const u = V * cos(x[X.X_BETA]);
    const v = V * sin(x[X.X_BETA]);
    const uDot = (dx[X.X_V] * u) / V - v * dx[X.X_BETA];
    const vDot = (dx[X.X_V] * v) / V + u * dx[X.X_BETA];
    out.axMps2 = uDot - x[X.X_R] * v + made[T.M_WIND_AX];
    out.ayMps2 = vDot + x[X.X_R] * u + made[T.M_WIND_AY];
    out.azMps2 = x[X.X_P] * v - q * u + made[T.M_WIND_AZ];
  };

  const validity = (out: Observation): void => {
    const CL = made[T.M_CL];
    out.finAngleRad = made[T.M_FIN_ANGLE];
    out.finStallAngleRad = fin ? finStallAngleRad(fin, made[T.M_FIN_ANGLE], x[X.X_RUDDER]) : Infinity;
    out.finStalled = Math.abs(out.finAngleRad) > out.finStallAngleRad;
    out.stallWarning = CL >= h[T.H_CL_LIMIT];
    out.assistantLetGo = made[T.M_LET_GO] !== 0;
    out.outsideData =
      Math.abs(made[T.M_BETA_AIR]) > BETA_LIMIT_RAD ||
      out.finStalled ||
      out.stallWarning ||
      CL <= CL_LOWEST ||
      Math.abs(x[X.X_PHI]) > BANK_LIMIT_RAD ||
      C.outsideRows(configurations[d[D.D_CONFIG]].derivatives, CL) > C.CL_MARGIN;
  };

  return (out) => {
    prepareTick(core);
    equations.rhs(dx, 0, x);
    motion(out);
    surfaces(out);
    enginesOf(out);
    forces(out);
    accelerations(out);
    validity(out);
    out.qDotRadS2 = (pitchRateAhead() - out.qRadS) / TICK_S;
  };
}

function sumOf(parts: MomentParts): number {
  return parts.beta + parts.p + parts.r + parts.aileron + parts.rudder + parts.fin + parts.thrust + parts.inertia;
}

function clampUnit(value: number): number {
  return value > 1 ? 1 : value < -1 ? -1 : value;
}
