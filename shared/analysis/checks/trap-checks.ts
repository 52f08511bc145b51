import { derivativesBodyToStability, derivativesStabilityToBody } from '../../model/conversions.ts';
import type { LateralDerivatives } from '../../model/conversions.ts';
import { inertiasStabilityToBody } from '../../model/inertia.ts';
import { buildSmallDisturbance } from '../../model/small-disturbance.ts';
import { DEG } from '../../units/constants.ts';
import { withParameter } from '../parameters.ts';
import type { DerivativeName } from '../parameters.ts';
import { facts, shown } from './case-builders.ts';
import type { FactRow } from './case-builders.ts';
import { B747_APPROACH, ETKIN_747, NAVION } from './data-sets.ts';
import type { PublishedSet } from './data-sets.ts';
import { modeOfKind, systemOf } from './modes-helpers.ts';
import type { PublishedCase } from './published-case.ts';
import { analyseSet, derivativesOfSet } from './set-airframe.ts';

/** Angle of attack of the power approach about which the inertias are turned; deg. */
const ALPHA_DEG = 5.7;
/** What the NAVION table prints for Cl_dr; about ten times too large. */
const PRINTED_CL_DR = 0.107;

function dampingOf(set: PublishedSet): number {
  return modeOfKind(systemOf(set), 'dutch-roll').zeta ?? NaN;
}

/** Angle of attack of a slow flight, at which taking body-axis derivatives for stability-axis ones is fatal; deg. */
const SLOW_ALPHA_DEG = 12;

/** Dutch roll damping of a set whose derivatives are replaced as they stand. */
function dampingWith(set: PublishedSet, derivatives: LateralDerivatives): number {
  const { aircraft, condition } = analyseSet(set);
  let changed = aircraft;
  for (const [name, value] of Object.entries(derivatives)) {
    // the members of a derivative row have the names of the sweep's parameters
    changed = withParameter(changed, condition, name as DerivativeName, value).aircraft;
  }
  return modeOfKind(buildSmallDisturbance(changed, condition).A, 'dutch-roll').zeta ?? NaN;
}

const ROWS: readonly FactRow[] = [
  [
    'trap-derivative-axes',
    'Derivatives in body axes',
    'Body-axis derivatives taken as stability-axis ones can make a stable Dutch roll unstable',
    () => {
      const right = dampingOf(ETKIN_747);
      const body = derivativesStabilityToBody(derivativesOfSet(ETKIN_747), SLOW_ALPHA_DEG * DEG);
      const wrong = dampingWith(ETKIN_747, body);
      const converted = dampingWith(ETKIN_747, derivativesBodyToStability(body, SLOW_ALPHA_DEG * DEG));
      const holds = right > 0 && wrong < 0 && Math.abs(converted - right) < 1e-9;
      return {
        holds,
        shown: `ζ ${shown(right)}, at ${SLOW_ALPHA_DEG}° ${shown(wrong)}, converted ${shown(converted)}`,
      };
    },
  ],
  [
    'trap-inertia-axes',
    'Inertias in body axes',
    'Inertias given in body axes must be rotated: left as they are they change the power-approach damping by about a factor of two',
    () => {
      const { Ix, Iz, Ixz } = B747_APPROACH;
      const body = inertiasStabilityToBody({ Ixx: Ix, Izz: Iz, Ixz }, ALPHA_DEG * DEG);
      const given = { ...B747_APPROACH, Ix: body.Ixx, Iz: body.Izz, Ixz: body.Ixz, alphaDeg: ALPHA_DEG };
      const right = dampingOf({ ...given, inertiaAxes: 'body' });
      const wrong = dampingOf({ ...given, inertiaAxes: 'stability' });
      const published = dampingOf(B747_APPROACH);
      const holds = Math.abs(right - published) < 1e-9 && right / wrong > 1.5;
      return { holds, shown: `rotated ζ ${shown(right)}, not rotated ${shown(wrong)}` };
    },
  ],
  [
    'trap-navion-cl-dr',
    'NAVION Cl_dr',
    'Cl_dr = 0.107 as printed is ten times too large: it would put the rudder force above the fin',
    () => {
      const height = (PRINTED_CL_DR / NAVION.derivatives.CYdr) * NAVION.b;
      const corrected = (NAVION.derivatives.Cldr / NAVION.derivatives.CYdr) * NAVION.b;
      const arm = (-NAVION.derivatives.Cndr / NAVION.derivatives.CYdr) * NAVION.b;
      return {
        holds: height > arm && corrected < 0.25 * arm,
        shown: `force ${shown(height)} ft above the axis as printed, ${shown(corrected)} ft corrected, arm ${shown(arm)} ft`,
      };
    },
  ],
];

/** Mistakes that published data invite, each shown to matter. */
export function trapCases(): PublishedCase[] {
  const source = 'reference page: traps worth a test';
  return facts({ group: 'Traps in published data', source, provenance: 'computed' }, ROWS);
}
