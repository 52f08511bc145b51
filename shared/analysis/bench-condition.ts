/** The condition that all figures of the Analysis screen share, and the aircraft prepared for it. */
import { prepareAircraft, stallTasMps, type Aircraft } from '../model/aircraft.ts';
import { casFromTas } from '../model/airspeeds.ts';
import { densityAt } from '../model/atmosphere.ts';
import type { Airframe } from '../model/airframe-schema.ts';
import { buildSmallDisturbance, type SmallDisturbance } from '../model/small-disturbance.ts';
import type { AircraftClass, FlightCategory } from './criteria-tables.ts';
import { KT } from '../units/constants.ts';

export const DERIVATIVE_KEYS = [
  'CY_beta',
  'CY_p',
  'CY_r',
  'CY_da',
  'CY_dr',
  'Cl_beta',
  'Cl_p',
  'Cl_r',
  'Cl_da',
  'Cl_dr',
  'Cn_beta',
  'Cn_p',
  'Cn_r',
  'Cn_da',
  'Cn_dr',
] as const;
export type DerivativeKey = (typeof DERIVATIVE_KEYS)[number];

export interface BenchCondition {
  configuration: string;
  loading: string | null;
  /** True airspeed, m/s. */
  tasMps: number;
  heightM: number;
  /** Overrides; null takes what the data says. */
  klass: AircraftClass | null;
  category: FlightCategory | null;
  yawDamper: boolean;
  /** Added to every row of a derivative, per rad. */
  shifts: Partial<Record<DerivativeKey, number>>;
}

/** One compared revision. The first of a list is the one being looked at; shifts apply to it alone. */
export interface BenchSubject {
  label: string;
  airframe: Airframe;
}

export interface PreparedSubject {
  label: string;
  airframe: Airframe;
  aircraft: Aircraft;
  system: SmallDisturbance;
  klass: AircraftClass;
  category: FlightCategory;
}

/**
 * The airframe with derivatives moved by a constant in every row of every configuration.
 *
 * @param airframe  Parsed airframe; left as it is.
 * @param shifts    Added to each row; per rad.
 * @returns         A moved copy, or the airframe itself where nothing moves.
 * @throws          Nothing.
 * @sign            As the derivatives of the format.
 * @source          Definition.
 */
export function shiftedAirframe(airframe: Airframe, shifts: BenchCondition['shifts']): Airframe {
  const moved = Object.entries(shifts).filter(([, by]) => by !== 0);
  if (moved.length === 0) return airframe;
  return {
    ...airframe,
    configurations: airframe.configurations.map((c) => ({
      ...c,
      derivatives: c.derivatives.map((row) => {
        const next = { ...row };
        for (const key of DERIVATIVE_KEYS) next[key] = row[key] + (shifts[key] ?? 0);
        return next;
      }),
    })),
  };
}

/**
 * One revision prepared for the condition, with its lateral-directional system.
 *
 * @param subject    Revision with its label.
 * @param condition  Condition; a configuration or loading that the data lacks falls back to the first, or to the data's mass.
 * @param moved      Whether the condition's shifts apply.
 * @returns          Aircraft, system, class and category.
 * @throws {ModelError} As `prepareAircraft` and `buildSmallDisturbance`.
 * @sign             As the model.
 * @source           Flight model, airframe data and the two fidelities.
 */
export function prepareSubject(subject: BenchSubject, condition: BenchCondition, moved: boolean): PreparedSubject {
  const airframe = moved ? shiftedAirframe(subject.airframe, condition.shifts) : subject.airframe;
  const configuration = airframe.configurations.some((c) => c.name === condition.configuration)
    ? condition.configuration
    : airframe.configurations[0]?.name;
  const loading = airframe.loadings?.some((l) => l.name === condition.loading) ? condition.loading : null;
  const aircraft = prepareAircraft(airframe, { configuration, loading });
  const system = buildSmallDisturbance(aircraft, { tasMps: condition.tasMps, heightM: condition.heightM });
  return {
    label: subject.label,
    airframe,
    aircraft,
    system,
    klass: condition.klass ?? (aircraft.class === 'II' ? 'II-L' : aircraft.class),
    category: condition.category ?? aircraft.category,
  };
}

/**
 * Calibrated airspeed of the 1 g stall at a height; kt.
 *
 * @param aircraft  Prepared aircraft.
 * @param heightM   Pressure height; m.
 * @returns         Calibrated airspeed; kt.
 * @throws          Nothing.
 * @sign            none
 * @source          Flight model, static solutions.
 */
export function stallKt(aircraft: Aircraft, heightM: number): number {
  return casFromTas(stallTasMps(aircraft, densityAt(heightM)), heightM) / KT;
}
