import { pow } from '../numerics/elementary.ts';
import type { Aircraft, EngineData } from './aircraft.ts';
import { densityAt, SEA_LEVEL_DENSITY, soundMps } from './atmosphere.ts';
import { ModelError, requireFiniteNumber } from './errors.ts';

/** Exponent of the density ratio in jet thrust, and its Mach polynomial. */
export const JET_SIGMA_EXPONENT = 0.8;
export const JET_MACH_1 = -0.9;
export const JET_MACH_2 = 0.5;

/**
 * Steady thrust of a healthy engine; N.
 *
 * Propeller: lever·P/√(V² + (P/Ts)²) with P = power·efficiency·σ and Ts = static thrust·σ, that is, static thrust at rest
 * and power over speed when fast. Jet: lever·static·σ^0.8·(1 − 0.9 M + 0.5 M²); meant for M below 0.9.
 *
 * @param engine      Engine data.
 * @param lever       Lever position; 0 … 1.
 * @param tasMps      True airspeed; m/s.
 * @param sigma       Density over sea-level density.
 * @param mach        Mach number; used by jets only.
 * @returns           Thrust; N.
 * @throws            Nothing.
 * @sign              forward positive
 * @source            Flight model, engines.
 */
export function steadyThrustN(engine: EngineData, lever: number, tasMps: number, sigma: number, mach: number): number {
  if (engine.kind === 'jet') {
    const ram = 1 + JET_MACH_1 * mach + JET_MACH_2 * mach * mach;
    return lever * engine.staticThrustN * pow(sigma, JET_SIGMA_EXPONENT) * ram;
  }
  const knee = engine.powerW / engine.staticThrustN;
  return (lever * sigma * engine.powerW) / Math.sqrt(tasMps * tasMps + knee * knee);
}

/**
 * Arm of the yawing moment per newton of thrust (N_T = −arm·T): thrust line and swirl; m.
 *
 * @param engine  Engine data.
 * @returns  y + s·bladeOffset + s·swirlArm; m.
 * @throws  Nothing.
 * @sign  positive yaws left
 * @source  Flight model, engines.
 */
export function yawArmM(engine: EngineData): number {
  return engine.yEffectiveM + engine.spin * engine.swirlArmM;
}

/**
 * Arm of the rolling moment per newton of thrust (L_T = −arm·T): slipstream lift and torque; m.
 *
 * @param engine  Engine data.
 * @returns  slipstreamLift·y + s·torqueArm; m.
 * @throws  Nothing.
 * @sign  positive rolls left
 * @source  Flight model, engines.
 */
export function rollArmM(engine: EngineData): number {
  return engine.slipstreamLift * engine.yM + engine.spin * engine.torqueArmM;
}

export type EngineState = 'running' | 'windmilling' | 'feathered';

export interface EngineForces {
  /** ΣT − ΣD; N. */
  forwardN: number;
  /** N_T; N·m; nose right positive. */
  yawNm: number;
  /** L_T; N·m; right wing down positive. */
  rollNm: number;
}

/**
 * Writes the steady forces and moments of all engines into `out`.
 *
 * A windmilling or feathered engine gives no thrust and q times its drag area; a jet cannot feather (it windmills).
 *
 * @param out         Forward force, yawing and rolling moment.
 * @param engines     Engine data; length n.
 * @param levers      Lever positions 0 … 1; length n.
 * @param states      State of each engine; length n.
 * @param tasMps      True airspeed; m/s.
 * @param densityKgM3 Air density; kg/m³.
 * @param soundSpeed  Speed of sound; m/s.
 * @returns           Nothing.
 * @throws            Nothing.
 * @sign              yaw nose right, roll right wing down
 * @source            Flight model, engines.
 */
export function engineForcesInto(
  out: EngineForces,
  engines: readonly EngineData[],
  levers: ArrayLike<number>,
  states: readonly EngineState[],
  tasMps: number,
  densityKgM3: number,
  soundSpeed: number,
): void {
  const sigma = densityKgM3 / SEA_LEVEL_DENSITY;
  const q = 0.5 * densityKgM3 * tasMps * tasMps;
  const mach = tasMps / soundSpeed;
  let forward = 0;
  let yaw = 0;
  let roll = 0;
  for (let i = 0; i < engines.length; i++) {
    const engine = engines[i];
    if (states[i] === 'running') {
      const thrust = steadyThrustN(engine, levers[i], tasMps, sigma, mach);
      forward += thrust;
      yaw -= yawArmM(engine) * thrust;
      roll -= rollArmM(engine) * thrust;
    } else {
      const feathered = states[i] === 'feathered' && engine.kind === 'propeller';
      const drag = q * (feathered ? engine.featheredAreaM2 : engine.windmillAreaM2);
      forward -= drag;
      yaw += engine.yM * drag;
    }
  }
  out.forwardN = forward;
  out.yawNm = yaw;
  out.rollNm = roll;
}

/**
 * The steady forces and moments of all engines at a speed and height.
 *
 * @param aircraft  Prepared aircraft with n engines.
 * @param levers    Lever positions 0 … 1; length n.
 * @param states    State of each engine; length n.
 * @param tasMps    True airspeed; m/s.
 * @param heightM   Height above sea level; m.
 * @returns         Forward force, yawing and rolling moment; N, N·m.
 * @throws {ModelError} wrong-engine-count, non-finite-input.
 * @sign            yaw nose right, roll right wing down
 * @source          Flight model, engines.
 */
export function engineForces(
  aircraft: Aircraft,
  levers: ArrayLike<number>,
  states: readonly EngineState[],
  tasMps: number,
  heightM: number,
): EngineForces {
  const n = aircraft.engines.length;
  if (levers.length !== n || states.length !== n) {
    throw new ModelError(
      'wrong-engine-count',
      `${levers.length} levers and ${states.length} states for ${n} engines`,
      'levers',
    );
  }
  for (let i = 0; i < n; i++) requireFiniteNumber(levers[i], `lever ${i + 1}`);
  requireFiniteNumber(tasMps, 'speed');
  requireFiniteNumber(heightM, 'height');
  const out = { forwardN: 0, yawNm: 0, rollNm: 0 };
  engineForcesInto(out, aircraft.engines, levers, states, tasMps, densityAt(heightM), soundMps(heightM));
  return out;
}
