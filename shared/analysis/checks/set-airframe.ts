import { FT, LBF, SLUG } from '../../units/constants.ts';
import { parseAirframe } from '../../model/airframe-schema.ts';
import type { Airframe } from '../../model/airframe-schema.ts';
import { prepareAircraft } from '../../model/aircraft.ts';
import type { Aircraft } from '../../model/aircraft.ts';
import type { LateralDerivatives } from '../../model/conversions.ts';
import { buildSmallDisturbance } from '../../model/small-disturbance.ts';
import type { LateralCondition, SmallDisturbance } from '../../model/small-disturbance.ts';
import { NumericsError } from '../../numerics/errors.ts';
import type { PublishedSet } from './data-sets.ts';

/** Factors from the units of a set to SI. */
function factors(set: PublishedSet): { length: number; mass: number; force: number } {
  return set.units === 'US' ? { length: FT, mass: SLUG, force: LBF } : { length: 1, mass: 1, force: 1 };
}

/** Lift coefficient of level flight with the set's own numbers. */
function liftCoefficient(set: PublishedSet): number {
  return set.W / (0.5 * set.rho * set.V * set.V * set.S);
}

/** The coefficients of a set under the names of the airframe format. */
export function derivativesOfSet({ derivatives: d }: PublishedSet): LateralDerivatives {
  return {
    CY_beta: d.CYb,
    CY_p: d.CYp,
    CY_r: d.CYr,
    CY_da: 0,
    CY_dr: d.CYdr,
    Cl_beta: d.Clb,
    Cl_p: d.Clp,
    Cl_r: d.Clr,
    Cl_da: d.Clda,
    Cl_dr: d.Cldr,
    Cn_beta: d.Cnb,
    Cn_p: d.Cnp,
    Cn_r: d.Cnr,
    Cn_da: d.Cnda,
    Cn_dr: d.Cndr,
  };
}

/**
 * A published set as a document of the airframe format, in SI.
 *
 * What the set does not give and the lateral modes do not need (CLmax, travels, rates) is filled with ordinary values.
 *
 * @param set  Published set.
 * @returns    The document, still to be parsed.
 * @throws     Nothing.
 * @sign       That of the model's README; the sets already carry it.
 * @source     Each set's own.
 */
export function documentOfSet(set: PublishedSet): Record<string, unknown> {
  const { length, mass } = factors(set);
  const inertia = mass * length * length;
  return {
    format: 'sidewash.airframe/1',
    name: set.aircraft.slice(0, 80),
    class: set.W * (set.units === 'US' ? LBF : 1) > 250_000 ? 'III' : 'I',
    geometry: { wingArea_m2: set.S * length * length, wingSpan_m: set.b * length, meanChord_m: set.c * length },
    mass: {
      mass_kg: (set.W / set.g) * mass,
      Ixx_kgm2: set.Ix * inertia,
      Iyy_kgm2: Math.max(set.Ix, set.Iz) * inertia,
      Izz_kgm2: set.Iz * inertia,
      Ixz_kgm2: set.Ixz * inertia,
      axes: set.inertiaAxes,
    },
    configurations: [
      {
        name: 'published',
        CLmax: Math.max(2, 1.5 * liftCoefficient(set)),
        category: 'C',
        derivatives: [
          {
            CL: liftCoefficient(set),
            alpha_deg: set.alphaDeg,
            ...derivativesOfSet(set),
          },
        ],
      },
    ],
    controls: { aileronMax_deg: 20, rudderMax_deg: 25, aileronRate_deg_s: 60, rudderRate_deg_s: 60, lag_s: 0.05 },
  };
}

/** The parsed airframe of a published set. Throws a named error when the format refuses it, which a test excludes. */
export function airframeOfSet(set: PublishedSet): Airframe {
  const parsed = parseAirframe(documentOfSet(set));
  if (!parsed.ok) throw new NumericsError('bad-argument', `${set.id}: ${parsed.issues[0].message}`);
  return parsed.airframe;
}

export interface SetAnalysis {
  aircraft: Aircraft;
  condition: LateralCondition;
  system: SmallDisturbance;
}

/** The lateral system of a published set, with its own density and gravity, by the path every airframe file takes. */
export function analyseSet(set: PublishedSet): SetAnalysis {
  const { length, mass } = factors(set);
  const aircraft = prepareAircraft(airframeOfSet(set));
  const condition: LateralCondition = {
    tasMps: set.V * length,
    heightM: 0,
    densityKgM3: (set.rho * mass) / (length * length * length),
    gravityMps2: set.g * length,
  };
  return { aircraft, condition, system: buildSmallDisturbance(aircraft, condition) };
}
