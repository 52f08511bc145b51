import type { Aircraft } from '../model/aircraft.ts';
import {
  buildTable,
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
} from '../model/derivatives.ts';
import { ModelError } from '../model/errors.ts';
import { buildSmallDisturbance } from '../model/small-disturbance.ts';
import type { LateralCondition } from '../model/small-disturbance.ts';

/** Derivatives by the names of the airframe file. */
export const DERIVATIVE_INDEX = {
  CY_beta: SIDE_BETA,
  CY_p: SIDE_P,
  CY_r: SIDE_R,
  CY_da: SIDE_DA,
  CY_dr: SIDE_DR,
  Cl_beta: ROLL_BETA,
  Cl_p: ROLL_P,
  Cl_r: ROLL_R,
  Cl_da: ROLL_DA,
  Cl_dr: ROLL_DR,
  Cn_beta: YAW_BETA,
  Cn_p: YAW_P,
  Cn_r: YAW_R,
  Cn_da: YAW_DA,
  Cn_dr: YAW_DR,
} as const;

export type DerivativeName = keyof typeof DERIVATIVE_INDEX;

/** What a sweep can vary. Derivatives replace the row's value at every CL; the others are SI. */
export type SweepParameter = DerivativeName | 'mass' | 'Ixx' | 'Izz' | 'Ixz' | 'speed' | 'height';

/**
 * Whether the sweep parameter is a derivative of the airframe row.
 *
 * @param name  A sweep parameter.
 * @returns     false for mass, inertias, speed and height.
 * @source      DERIVATIVE_INDEX.
 */
export function isDerivative(name: SweepParameter): name is DerivativeName {
  return Object.hasOwn(DERIVATIVE_INDEX, name);
}

/**
 * The present value of a parameter: of the derivatives at the trim CL, else of the aircraft or the condition.
 *
 * @param aircraft   Prepared aircraft.
 * @param condition  Speed, height, path.
 * @param parameter  Which.
 * @returns          Per rad for derivatives; kg, kg·m², m/s, m.
 * @throws {ModelError} bad-argument, non-finite-input.
 * @sign             none
 * @source           none
 */
export function parameterValue(aircraft: Aircraft, condition: LateralCondition, parameter: SweepParameter): number {
  if (isDerivative(parameter)) {
    const out = new Float64Array(DERIVATIVE_COUNT);
    derivativesAtInto(out, aircraft.derivatives, buildSmallDisturbance(aircraft, condition).CL);
    return out[DERIVATIVE_INDEX[parameter]];
  }
  switch (parameter) {
    case 'mass':
      return aircraft.massKg;
    case 'speed':
      return condition.tasMps;
    case 'height':
      return condition.heightM;
    default:
      return aircraft[parameter];
  }
}

/**
 * Aircraft and condition with one parameter replaced.
 *
 * @param aircraft   Prepared aircraft; not changed.
 * @param condition  Condition; not changed.
 * @param parameter  Which.
 * @param value      New value; per rad for derivatives (at every CL); kg, kg·m², m/s, m.
 * @returns          The changed pair; inertias in body axes are changed in body axes.
 * @throws {ModelError} bad-argument for a mass or inertia that no body has.
 * @sign             none
 * @source           none
 */
export function withParameter(
  aircraft: Aircraft,
  condition: LateralCondition,
  parameter: SweepParameter,
  value: number,
): { aircraft: Aircraft; condition: LateralCondition } {
  if (!Number.isFinite(value)) throw new ModelError('non-finite-input', `${parameter} is ${value}`, parameter);
  if (isDerivative(parameter)) {
    const { CL, values, alphaRad } = aircraft.derivatives;
    const changed = values.slice();
    for (let row = 0; row < CL.length; row++) changed[row * DERIVATIVE_COUNT + DERIVATIVE_INDEX[parameter]] = value;
    return { aircraft: { ...aircraft, derivatives: buildTable(CL, changed, alphaRad) }, condition };
  }
  switch (parameter) {
    case 'speed':
      return { aircraft, condition: { ...condition, tasMps: value } };
    case 'height':
      return { aircraft, condition: { ...condition, heightM: value } };
    case 'mass':
      if (!(value > 0)) throw new ModelError('bad-argument', `a mass of ${value} kg is not positive`, parameter);
      return { aircraft: { ...aircraft, massKg: value }, condition };
    default: {
      const changed = { ...aircraft, [parameter]: value };
      const { Ixx, Izz, Ixz } = changed;
      if (!(Ixx > 0) || !(Izz > 0) || !(Ixx * Izz > Ixz * Ixz)) {
        throw new ModelError(
          'bad-argument',
          `${parameter} = ${value} kg·m² gives inertias that no body has`,
          parameter,
        );
      }
      return { aircraft: changed, condition };
    }
  }
}
