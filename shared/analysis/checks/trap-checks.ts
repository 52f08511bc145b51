import { inertiasStabilityToBody } from '../../model/inertia.ts';
import { cos, sin } from '../../numerics/elementary.ts';
import { DEG } from '../../units/constants.ts';
import { facts, shown } from './case-builders.ts';
import type { FactRow } from './case-builders.ts';
import { B747_APPROACH, ETKIN_747, NAVION } from './data-sets.ts';
import type { PublishedDerivatives, PublishedSet } from './data-sets.ts';
import { modeOfKind, systemOf } from './modes-helpers.ts';
import type { PublishedCase } from './published-case.ts';

/** Angle of attack of the power approach about which the inertias are turned; deg. */
const ALPHA_DEG = 5.7;
/** What the NAVION table prints for Cl_dr; about ten times too large. */
const PRINTED_CL_DR = 0.107;

function dampingOf(set: PublishedSet): number {
  return modeOfKind(systemOf(set), 'dutch-roll').zeta ?? NaN;
}

/** Angle of attack of a slow flight, at which taking body-axis derivatives for stability-axis ones is fatal; deg. */
const SLOW_ALPHA_DEG = 12;

/** The same derivatives about body axes: moments and rates turned by the angle of attack. */
function aboutBodyAxes(d: PublishedDerivatives, alphaRad: number): PublishedDerivatives {
  const c = cos(alphaRad);
  const s = sin(alphaRad);
  return {
    ...d,
    CYp: d.CYp * c - d.CYr * s,
    CYr: d.CYr * c + d.CYp * s,
    Clb: d.Clb * c - d.Cnb * s,
    Cnb: d.Cnb * c + d.Clb * s,
    Clp: d.Clp * c * c + d.Cnr * s * s - (d.Clr + d.Cnp) * s * c,
    Clr: d.Clr * c * c - d.Cnp * s * s + (d.Clp - d.Cnr) * s * c,
    Cnp: d.Cnp * c * c - d.Clr * s * s + (d.Clp - d.Cnr) * s * c,
    Cnr: d.Cnr * c * c + d.Clp * s * s + (d.Clr + d.Cnp) * s * c,
  };
}

const ROWS: readonly FactRow[] = [
  [
    'trap-derivative-axes',
    'Derivatives in body axes',
    'Body-axis derivatives taken as stability-axis ones can make a stable Dutch roll unstable',
    () => {
      const right = dampingOf(ETKIN_747);
      const derivatives = aboutBodyAxes(ETKIN_747.derivatives, SLOW_ALPHA_DEG * DEG);
      const wrong = dampingOf({ ...ETKIN_747, derivatives });
      return {
        holds: right > 0 && wrong < 0,
        shown: `ζ ${shown(right)} becomes ${shown(wrong)} at ${SLOW_ALPHA_DEG}°`,
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
