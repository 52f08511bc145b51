import { prepareAircraft } from '../../model/aircraft.ts';
import { dimensionalFrom, primedFromUnprimed } from '../../model/conversions.ts';
import type { LateralDerivatives } from '../../model/conversions.ts';
import { parseAirframe } from '../../model/airframe-schema.ts';
import { importLateralSet } from '../../model/import-set.ts';
import { buildSmallDisturbance } from '../../model/small-disturbance.ts';
import { NumericsError } from '../../numerics/errors.ts';
import { FT, SLUG } from '../../units/constants.ts';
import { values } from './case-builders.ts';
import type { ValueRow } from './case-builders.ts';
import { DC8_APPROACH } from './data-sets.ts';
import { DC8_APPROACH_DIMENSIONAL, DC8_CRUISE_DIMENSIONAL } from './dimensional-sets.ts';
import type { DimensionalName, DimensionalSet } from './dimensional-sets.ts';
import { COMPUTED, fourRoots } from './modes-helpers.ts';
import type { PublishedCase } from './published-case.ts';
import { analyseSet, derivativesOfSet, documentOfSet } from './set-airframe.ts';

/** The printed names and the members that carry them. */
const MEMBERS: Readonly<Record<DimensionalName, keyof LateralDerivatives>> = {
  Yb: 'CY_beta',
  Ydr: 'CY_dr',
  Lb: 'Cl_beta',
  Lp: 'Cl_p',
  Lr: 'Cl_r',
  Lda: 'Cl_da',
  Ldr: 'Cl_dr',
  Nb: 'Cn_beta',
  Np: 'Cn_p',
  Nr: 'Cn_r',
  Nda: 'Cn_da',
  Ndr: 'Cn_dr',
};

/** Dimensional derivatives of a published coefficient set; SI: only the side force differs from ft and slug. */
function dimensional({ set }: DimensionalSet): { plain: LateralDerivatives; primed: LateralDerivatives } {
  const { aircraft, system } = analyseSet(set);
  const plain = dimensionalFrom(derivativesOfSet(set), { ...aircraft, ...system, inertias: system });
  return { plain, primed: primedFromUnprimed(plain, system) };
}

/** Half a per cent, or one unit of the last printed digit. */
function printedTolerance(name: string, value: number): number {
  return Math.max(0.005 * Math.abs(value), name.startsWith('Y') ? 0.01 : 0.001);
}

function rowsOf(id: string, what: string, printed: DimensionalSet): ValueRow[] {
  const rows = (form: 'plain' | 'primed', mark: string): ValueRow[] =>
    Object.entries(printed[form]).map(([name, value]) => {
      const key = name as DimensionalName; // the entries of a record have its keys
      const toFeet = key.startsWith('Y') ? 1 / FT : 1;
      const compute = () => dimensional(printed)[form][MEMBERS[key]] * toFeet;
      return [`${id}-${name}-${form}`, `${what}: ${name}${mark}`, '', value, printedTolerance(name, value), compute];
    });
  return [...rows('plain', ''), ...rows('primed', '′')];
}

/** System matrix of the printed primed set after its import as a foreign set in US units. */
function importedSystem({ set, plain, primed }: DimensionalSet): Float64Array {
  const given = Object.fromEntries(Object.values(MEMBERS).map((member) => [member, 0]));
  for (const [name, value] of Object.entries({ ...plain, ...primed })) given[MEMBERS[name as DimensionalName]] = value; // keys as above
  const imported = importLateralSet({
    units: 'US',
    axes: 'stability',
    inertiaAxes: 'stability',
    form: 'dimensional-primed',
    mass: set.W,
    wingArea: set.S,
    wingSpan: set.b,
    speed: set.V,
    density: set.rho,
    Ixx: set.Ix,
    Izz: set.Iz,
    Ixz: set.Ixz,
    derivatives: { ...derivativesOfSet(set), ...given },
  });
  const [configuration] = [documentOfSet(set)].map((document) => document.configurations).flat();
  const parsed = parseAirframe({
    ...documentOfSet(set),
    mass: imported.mass,
    configurations: [{ ...Object(configuration), derivatives: [imported.row] }],
  });
  if (!parsed.ok) throw new NumericsError('bad-argument', parsed.issues[0].message);
  const condition = {
    tasMps: set.V * FT,
    heightM: 0,
    densityKgM3: (set.rho * SLUG) / (FT * FT * FT),
    gravityMps2: set.g * FT,
  };
  return buildSmallDisturbance(prepareAircraft(parsed.airframe), condition).A;
}

/** Dimensional and primed derivatives both ways: from coefficients, and back through the import. */
export function dimensionalCases(): PublishedCase[] {
  const seen = { source: DC8_APPROACH.source, provenance: 'seen' } as const;
  const approach = { spiral: 0.013119, roll: -1.120881, re: -0.10878, im: 0.98961 };
  const cruise = { spiral: -0.003994, roll: -1.258007, re: -0.11847, im: 1.49321 };
  return [
    ...values({ group: 'Dimensional derivatives: DC-8', ...seen }, [
      ...rowsOf('dc8-1', 'Approach', DC8_APPROACH_DIMENSIONAL),
      ...rowsOf('dc8-3', 'Cruise', DC8_CRUISE_DIMENSIONAL),
    ]),
    ...values({ group: 'Import of a dimensional, primed set in US units: DC-8', ...COMPUTED }, [
      ...fourRoots('dc8-import-1', 'Approach', () => importedSystem(DC8_APPROACH_DIMENSIONAL), approach, 1e-4),
      ...fourRoots('dc8-import-3', 'Cruise', () => importedSystem(DC8_CRUISE_DIMENSIONAL), cruise, 1e-4),
    ]),
  ];
}
