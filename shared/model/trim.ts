import { asin, cos, sin } from '../numerics/elementary.ts';
import { solve3Into } from '../numerics/solve-linear.ts';
import { DEG, G0 } from '../units/constants.ts';
import type { Aircraft } from './aircraft.ts';
import { densityAt } from './atmosphere.ts';
import {
  DERIVATIVE_COUNT,
  derivativesAtInto,
  ROLL_BETA,
  ROLL_DA,
  ROLL_DR,
  SIDE_BETA,
  SIDE_DA,
  SIDE_DR,
  YAW_BETA,
  YAW_DA,
  YAW_DR,
} from './derivatives.ts';
import { ModelError, requireFiniteNumber } from './errors.ts';
import { finAngleRad, finStallAngleRad } from './fin.ts';

/** What closes the three equations of straight flight for their four unknowns. */
export type TrimClosure =
  | { kind: 'ball-centred' }
  | { kind: 'zero-sideslip' }
  | { kind: 'bank'; phiRad: number }
  | { kind: 'sideslip'; betaRad: number };

export interface TrimCondition {
  tasMps: number;
  heightM: number;
  /** Path pitch; rad; default 0. */
  thetaRad?: number;
  /** Air density instead of the standard atmosphere's; kg/m³. */
  densityKgM3?: number;
  /** Yawing and rolling moment of the engines; N·m; default 0. */
  engineYawNm?: number;
  engineRollNm?: number;
  /** Share of aileron effectiveness left; default 1. */
  aileronEffect?: number;
}

export interface TrimSolution {
  betaRad: number;
  phiRad: number;
  aileronRad: number;
  rudderRad: number;
  CL: number;
  qbarPa: number;
  /** Aerodynamic side force; N. */
  sideForceN: number;
  /** Fin angle and the angle where it counts as stalled; rad; 0 and Infinity without fin data. */
  finAngleRad: number;
  finStallAngleRad: number;
}

/** Why a straight trim does not exist. */
export type TrimFailure = 'singular-trim' | 'no-bank-holds';

/** Rounds of the bank iteration when sideslip is given; it contracts to 1e-12 rad in under ten on ordinary data. */
const MAX_ROUNDS = 40;
const BANK_TOLERANCE_RAD = 1e-12;
/** Banks beyond this are no straight flight. */
const LARGEST_BANK_RAD = 85 * DEG;
const SINGULAR = 1e-12;

/**
 * A trim record to be filled by `TrimSolver.solveInto`; all zero.
 *
 * @returns  A fresh record; rad, N.
 * @throws  Nothing.
 * @sign  none
 * @source  This file.
 */
export function createTrimSolution(): TrimSolution {
  return {
    betaRad: 0,
    phiRad: 0,
    aileronRad: 0,
    rudderRad: 0,
    CL: 0,
    qbarPa: 0,
    sideForceN: 0,
    finAngleRad: 0,
    finStallAngleRad: 0,
  };
}

export interface TrimSolver {
  /** Fills `out`; returns null, or why there is no solution (then `out` holds nothing useful). Allocates nothing. */
  solveInto(out: TrimSolution, aircraft: Aircraft, condition: TrimCondition, closure: TrimClosure): TrimFailure | null;
}

/**
 * A solver of straight flight that allocates nothing per solution.
 *
 * Three lateral equations (side force with weight, rolling and yawing moment with engine moments) in β, φ, δa, δr; the
 * closure gives the fourth. Linear derivatives at CL = m·g·cosθ·cosφ/(qS); no fin stall. With the sideslip given, bank is
 * found by iteration, because CL depends on it.
 *
 * @returns   The solver with its own work arrays.
 * @throws    Nothing; `solveInto` trusts finite inputs.
 * @sign      β > 0 wind from the right, φ > 0 right wing low, δa > 0 rolls right, δr > 0 yaws left.
 * @source    Flight model, trim.
 */
export function createTrimSolver(): TrimSolver {
  const d = new Float64Array(DERIVATIVE_COUNT);
  const rows = new Float64Array(12);
  const found = new Float64Array(3);

  return {
    solveInto(out, aircraft, condition, closure) {
      const theta = condition.thetaRad ?? 0;
      const density = condition.densityKgM3 ?? densityAt(condition.heightM);
      const effect = condition.aileronEffect ?? 1;
      const V = condition.tasMps;
      const qbar = 0.5 * density * V * V;
      const qS = qbar * aircraft.wingAreaM2;
      const weight = aircraft.massKg * G0 * cos(theta);
      const roll = (condition.engineRollNm ?? 0) / (qS * aircraft.spanM);
      const yaw = (condition.engineYawNm ?? 0) / (qS * aircraft.spanM);
      out.qbarPa = qbar;

      if (closure.kind === 'ball-centred' || closure.kind === 'bank') {
        const phi = closure.kind === 'bank' ? closure.phiRad : 0;
        const CL = (weight * cos(phi)) / qS;
        derivativesAtInto(d, aircraft.derivatives, CL);
        fillRow(rows, 0, d[SIDE_BETA], d[SIDE_DA] * effect, d[SIDE_DR], -(weight * sin(phi)) / qS);
        fillRow(rows, 4, d[ROLL_BETA], d[ROLL_DA] * effect, d[ROLL_DR], -roll);
        fillRow(rows, 8, d[YAW_BETA], d[YAW_DA] * effect, d[YAW_DR], -yaw);
        if (!solve3Into(found, rows)) return 'singular-trim';
        out.betaRad = found[0];
        out.phiRad = phi;
        out.aileronRad = found[1];
        out.rudderRad = found[2];
        out.CL = CL;
      } else {
        const beta = closure.kind === 'sideslip' ? closure.betaRad : 0;
        let phi = 0;
        let settled = false;
        for (let round = 0; round < MAX_ROUNDS && !settled; round++) {
          const CL = (weight * cos(phi)) / qS;
          derivativesAtInto(d, aircraft.derivatives, CL);
          const a = d[ROLL_DA] * effect;
          const b = d[ROLL_DR];
          const e = d[YAW_DA] * effect;
          const f = d[YAW_DR];
          const det = a * f - b * e;
          if (!(Math.abs(det) > SINGULAR * (Math.abs(a * f) + Math.abs(b * e)))) return 'singular-trim';
          const needRoll = -roll - d[ROLL_BETA] * beta;
          const needYaw = -yaw - d[YAW_BETA] * beta;
          const aileron = (needRoll * f - b * needYaw) / det;
          const rudder = (a * needYaw - needRoll * e) / det;
          const side = d[SIDE_BETA] * beta + d[SIDE_DA] * effect * aileron + d[SIDE_DR] * rudder;
          const sine = -(qS * side) / weight;
          if (!(Math.abs(sine) < 1)) return 'no-bank-holds';
          const next = asin(sine);
          settled = Math.abs(next - phi) <= BANK_TOLERANCE_RAD;
          phi = next;
          out.betaRad = beta;
          out.phiRad = phi;
          out.aileronRad = aileron;
          out.rudderRad = rudder;
          out.CL = CL;
        }
        if (!settled || Math.abs(phi) > LARGEST_BANK_RAD) return 'no-bank-holds';
      }
      out.sideForceN = -weight * sin(out.phiRad);
      const fin = aircraft.fin;
      out.finAngleRad = fin === null ? 0 : finAngleRad(fin, out.betaRad, 0, 0, V, out.rudderRad);
      out.finStallAngleRad = fin === null ? Infinity : finStallAngleRad(fin, out.finAngleRad, out.rudderRad);
      return Number.isFinite(out.betaRad + out.aileronRad + out.rudderRad) ? null : 'singular-trim';
    },
  };
}

function fillRow(rows: Float64Array, at: number, a: number, b: number, c: number, right: number): void {
  rows[at] = a;
  rows[at + 1] = b;
  rows[at + 2] = c;
  rows[at + 3] = right;
}

/**
 * Sideslip, bank and surfaces of straight flight at a speed, height and path.
 *
 * V̇ need not be zero; travel, pedal force and fin stall are not limits here: the caller compares.
 *
 * @param aircraft   Prepared aircraft.
 * @param condition  Speed, height, path, engine moments.
 * @param closure    Ball-centred (φ = 0), zero-sideslip (β = 0), a given bank, or a given sideslip.
 * @returns          The trim; rad, N.
 * @throws {ModelError} singular-trim when the surfaces cannot balance the moments, no-bank-holds when no bank balances
 *                   the side force, bad-argument, non-finite-input.
 * @sign             As `createTrimSolver`.
 * @source           Flight model, trim.
 */
export function trimStraight(aircraft: Aircraft, condition: TrimCondition, closure: TrimClosure): TrimSolution {
  for (const [name, value] of Object.entries(condition)) {
    if (typeof value === 'number') requireFiniteNumber(value, name);
  }
  if (!(condition.tasMps > 0)) throw new ModelError('bad-argument', 'the speed must be above 0', 'tasMps');
  if (closure.kind === 'bank') requireFiniteNumber(closure.phiRad, 'bank');
  if (closure.kind === 'sideslip') requireFiniteNumber(closure.betaRad, 'sideslip');
  const out = createTrimSolution();
  const failure = createTrimSolver().solveInto(out, aircraft, condition, closure);
  if (failure !== null) throw new ModelError(failure, trimFailureText(failure));
  return out;
}

/**
 * One sentence for people about a failed trim.
 *
 * @param failure  Why there is no trim.
 * @returns  The sentence.
 * @throws  Nothing.
 * @sign  none
 * @source  This file.
 */
export function trimFailureText(failure: TrimFailure): string {
  return failure === 'singular-trim'
    ? 'Straight flight has no unique trim here: aileron and rudder do not balance rolling and yawing independently.'
    : 'No bank balances the side force of this condition.';
}
