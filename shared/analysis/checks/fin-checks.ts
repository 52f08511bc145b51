import {
  dorsalFinStallDeg,
  estimateCrossDerivatives,
  finContributions,
  finFuselageFactor,
  finSidewashFactor,
  flapEffectiveness,
} from '../geometry-estimates.ts';
import type { FinDerivatives } from '../geometry-estimates.ts';
import { facts, shown, values } from './case-builders.ts';
import type { ValueRow } from './case-builders.ts';
import { COMPUTED } from './modes-helpers.ts';
import type { PublishedCase } from './published-case.ts';

/** Boeing 747 geometry of the worked case: SI; the factor η(1 + ∂σ/∂β) is given. */
const FIN = { S: 511, b: 59.64, Sv: 74.539, bv: 9.714, lv: 30.323, zv: 8.33, slope: 2.4128, factor: 1.03554 };

function worked(): FinDerivatives {
  return finContributions((-FIN.slope * FIN.factor * FIN.Sv) / FIN.S, FIN.lv, FIN.zv, FIN.b, 0);
}

function workedRows(): ValueRow[] {
  return [
    ['fin-CY-beta', 'Fin: CY_β', '1/rad', -0.3645, 1e-4, () => worked().CY_beta],
    ['fin-Cn-beta', 'Fin: Cn_β', '1/rad', 0.1853, 1e-4, () => worked().Cn_beta],
    ['fin-Cl-beta', 'Fin: Cl_β', '1/rad', -0.0509, 1e-4, () => worked().Cl_beta],
    ['fin-Cn-r', 'Fin: Cn_r', '1/rad', -0.1884, 1e-4, () => worked().Cn_r],
    ['flap-25', 'Flap effectiveness, quarter chord', '', 0.609, 1e-4, () => flapEffectiveness(0.25)],
    ['flap-40', 'Flap effectiveness, 40 % chord', '', 0.7478, 1e-4, () => flapEffectiveness(0.4)],
  ];
}

/** η(1 + ∂σ/∂β) of a geometry chosen so that each term of the formula shows: 0.724 + 0.306 + 0.1 + 0.072. */
const SIDEWASH = {
  wingAreaM2: 100,
  finAreaM2: 20,
  wingSweepRad: 0,
  wingBelowCentreM: 0.5,
  fuselageDepthM: 2,
  aspectRatio: 8,
};

/** Fin and flap estimates by handbook methods. */
export function finCases(): PublishedCase[] {
  const datcom = {
    source: 'USAF Stability and Control DATCOM method, given in several texts',
    provenance: 'seen',
  } as const;
  return [
    ...values(
      { group: 'Fin and flap estimates', ...COMPUTED, source: 'handbook formulae, worked independently' },
      workedRows(),
    ),
    ...values({ group: 'Fin and flap estimates', ...datcom }, [
      ['fin-sidewash', 'η(1 + ∂σ/∂β), term by term', '', 1.202, 1e-9, () => finSidewashFactor(SIDEWASH)],
      ['fin-k-low', 'Fuselage factor k at bv/2r1 = 1.5', '', 0.76, 1e-9, () => finFuselageFactor(3, 1)],
      ['fin-k-middle', 'Fuselage factor k at bv/2r1 = 2.75', '', 0.88, 1e-9, () => finFuselageFactor(5.5, 1)],
      ['fin-k-high', 'Fuselage factor k at bv/2r1 = 4', '', 1, 1e-9, () => finFuselageFactor(8, 1)],
    ]),
    ...facts({ group: 'Fin and flap estimates', source: 'several texts (seen), good to 20–40 %', provenance: 'seen' }, [
      [
        'cross-derivatives',
        'Wing estimates of Cl_r and Cn_p',
        'Cl_r ≈ CL/4 and Cn_p ≈ −CL/8',
        () => {
          const { Cl_r, Cn_p } = estimateCrossDerivatives(0.8);
          return {
            holds: Math.abs(Cl_r - 0.2) < 1e-12 && Math.abs(Cn_p + 0.1) < 1e-12,
            shown: `${shown(Cl_r)}, ${shown(Cn_p)} at CL 0.8`,
          };
        },
      ],
      [
        'dorsal-fin',
        'Stall angle of a fin with a dorsal fin',
        'A dorsal fin raises the stall angle from about 15° to 25–30°',
        () => {
          const raised = dorsalFinStallDeg(15, 0.15);
          return { holds: raised >= 25 && raised <= 30, shown: `15° becomes ${shown(raised)}°` };
        },
        { source: 'rule of thumb', provenance: 'memory' },
      ],
    ]),
  ];
}
