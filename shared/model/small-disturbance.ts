import { cos, tan } from '../numerics/elementary.ts';
import { G0 } from '../units/constants.ts';
import type { Aircraft } from './aircraft.ts';
import { stabilityInertias } from './aircraft.ts';
import { densityAt } from './atmosphere.ts';
import {
  DERIVATIVE_COUNT,
  derivativesAtInto,
  ROLL_BETA,
  ROLL_DA,
  ROLL_DR,
  ROLL_P,
  ROLL_R,
  SIDE_BETA,
  SIDE_DA,
  SIDE_DR,
  SIDE_P,
  SIDE_R,
  YAW_BETA,
  YAW_DA,
  YAW_DR,
  YAW_P,
  YAW_R,
} from './derivatives.ts';
import { ModelError, requireFiniteNumber } from './errors.ts';

/** The condition about which the linear model stands. */
export interface LateralCondition {
  /** True airspeed; m/s; above 0. */
  tasMps: number;
  /** Height above sea level; m. */
  heightM: number;
  /** Trimmed path pitch; rad; default 0. */
  thetaRad?: number;
  /** Air density instead of the standard atmosphere's; kg/m³ (published sets use their own). */
  densityKgM3?: number;
  /** Acceleration of gravity instead of the standard one; m/s². */
  gravityMps2?: number;
  /** Lift coefficient at which rows are read, instead of that of level trim. */
  CL?: number;
}

export interface SmallDisturbance {
  /** x' = A x + Σ B u with x = [β, p, r, φ]; 4×4 row-major; 1/s. */
  A: Float64Array;
  /** Columns of the inputs, length 4 each: per rad of aileron and rudder, per N·m of yawing and rolling moment. */
  B: { aileron: Float64Array; rudder: Float64Array; yawMoment: Float64Array; rollMoment: Float64Array };
  CL: number;
  qbarPa: number;
  densityKgM3: number;
  tasMps: number;
  heightM: number;
  thetaRad: number;
  gravityMps2: number;
  massKg: number;
  /** Inertias about the stability axes of the condition; kg·m². */
  Ixx: number;
  Izz: number;
  Ixz: number;
  /** The fifteen derivatives at the trim CL (layout of derivatives.ts). */
  derivatives: Float64Array;
  /** ψ' = headingGain·r. */
  headingGain: number;
}

/**
 * Linear, time-invariant lateral-directional motion about straight trimmed flight.
 *
 * The product of inertia is removed by the inverse of the 2×2 inertia matrix (primed derivatives); wings level, no
 * sideslip; gusts enter as −(β, p, r columns' aerodynamic part).
 *
 * @param aircraft   Prepared aircraft.
 * @param condition  Speed, height, path; optional own density, gravity and CL.
 * @returns          Matrices and the numbers they were built from; fresh arrays.
 * @throws {ModelError} bad-argument for a speed or density that is not above 0, non-finite-input.
 * @sign             β > 0 wind from the right, p > 0 right wing down, r > 0 nose right, φ > 0 right wing low.
 * @source           Flight model, small-disturbance; B. Etkin, L. Reid, Dynamics of Flight, 3rd ed., section 4.9.
 */
export function buildSmallDisturbance(aircraft: Aircraft, condition: LateralCondition): SmallDisturbance {
  const { tasMps, heightM } = condition;
  const thetaRad = condition.thetaRad ?? 0;
  const gravityMps2 = condition.gravityMps2 ?? G0;
  const densityKgM3 = condition.densityKgM3 ?? densityAt(heightM);
  for (const [value, name] of [
    [tasMps, 'speed'],
    [heightM, 'height'],
    [thetaRad, 'path'],
    [densityKgM3, 'density'],
    [gravityMps2, 'gravity'],
  ] as const) {
    requireFiniteNumber(value, name);
  }
  if (!(tasMps > 0) || !(densityKgM3 > 0)) {
    throw new ModelError(
      'bad-argument',
      `speed ${tasMps} m/s and density ${densityKgM3} kg/m³ must be above 0`,
      'speed',
    );
  }
  const qbarPa = 0.5 * densityKgM3 * tasMps * tasMps;
  const CL = condition.CL ?? (aircraft.massKg * gravityMps2 * cos(thetaRad)) / (qbarPa * aircraft.wingAreaM2);
  requireFiniteNumber(CL, 'CL');
  const { Ixx, Izz, Ixz } = stabilityInertias(aircraft, CL);
  const derivatives = new Float64Array(DERIVATIVE_COUNT);
  derivativesAtInto(derivatives, aircraft.derivatives, CL);
  const built: SmallDisturbance = {
    A: new Float64Array(16),
    B: {
      aileron: new Float64Array(4),
      rudder: new Float64Array(4),
      yawMoment: new Float64Array(4),
      rollMoment: new Float64Array(4),
    },
    CL,
    qbarPa,
    densityKgM3,
    tasMps,
    heightM,
    thetaRad,
    gravityMps2,
    massKg: aircraft.massKg,
    Ixx,
    Izz,
    Ixz,
    derivatives,
    headingGain: 1 / cos(thetaRad),
  };
  fillMatrices(built, aircraft);
  return built;
}

function fillMatrices(m: SmallDisturbance, { wingAreaM2, spanM, massKg }: Aircraft): void {
  const { A, B, derivatives: d, tasMps: V } = m;
  const qS = m.qbarPa * wingAreaM2;
  const toRate = spanM / (2 * V);
  const side = qS / (massKg * V);
  const det = m.Ixx * m.Izz - m.Ixz * m.Ixz;
  const rollFromL = (qS * spanM * m.Izz) / det;
  const both = (qS * spanM * m.Ixz) / det;
  const yawFromN = (qS * spanM * m.Ixx) / det;

  A[0] = side * d[SIDE_BETA];
  A[1] = side * toRate * d[SIDE_P];
  A[2] = side * toRate * d[SIDE_R] - 1;
  A[3] = (m.gravityMps2 * cos(m.thetaRad)) / V;
  A[4] = rollFromL * d[ROLL_BETA] + both * d[YAW_BETA];
  A[5] = toRate * (rollFromL * d[ROLL_P] + both * d[YAW_P]);
  A[6] = toRate * (rollFromL * d[ROLL_R] + both * d[YAW_R]);
  A[8] = both * d[ROLL_BETA] + yawFromN * d[YAW_BETA];
  A[9] = toRate * (both * d[ROLL_P] + yawFromN * d[YAW_P]);
  A[10] = toRate * (both * d[ROLL_R] + yawFromN * d[YAW_R]);
  A[13] = 1;
  A[14] = tan(m.thetaRad);

  B.aileron[0] = side * d[SIDE_DA];
  B.aileron[1] = rollFromL * d[ROLL_DA] + both * d[YAW_DA];
  B.aileron[2] = both * d[ROLL_DA] + yawFromN * d[YAW_DA];
  B.rudder[0] = side * d[SIDE_DR];
  B.rudder[1] = rollFromL * d[ROLL_DR] + both * d[YAW_DR];
  B.rudder[2] = both * d[ROLL_DR] + yawFromN * d[YAW_DR];
  B.yawMoment[1] = m.Ixz / det;
  B.yawMoment[2] = m.Ixx / det;
  B.rollMoment[1] = m.Izz / det;
  B.rollMoment[2] = m.Ixz / det;
}
