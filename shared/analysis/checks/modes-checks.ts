import { FT, SLUG } from '../../units/constants.ts';
import { values } from './case-builders.ts';
import { B747_APPROACH, C310_APPROACH, DC8_APPROACH, LEARJET_CRUISE, NAVION } from './data-sets.ts';
import { DC8_APPROACH_DIMENSIONAL, DC8_CRUISE_DIMENSIONAL, primedSystem } from './dimensional-sets.ts';
import { COMPUTED, dutchPhiOverBeta, fourRoots, modeOfKind, systemOf } from './modes-helpers.ts';
import type { PublishedCase } from './published-case.ts';
import { analyseSet } from './set-airframe.ts';
import { NAVION_MATRIX } from './textbook-matrices.ts';

const SLUG_FT2 = SLUG * FT * FT;

function dc8Cases(): PublishedCase[] {
  const approach = { spiral: 0.013119, roll: -1.120881, re: -0.10878, im: 0.98961 };
  const cruise = { spiral: -0.003994, roll: -1.258007, re: -0.11847, im: 1.49321 };
  return values({ group: 'Modes: Douglas DC-8', ...COMPUTED, source: `from ${DC8_APPROACH.source}` }, [
    ...fourRoots('dc8-approach', 'Approach, primed', () => primedSystem(DC8_APPROACH_DIMENSIONAL).A, approach, 1e-4),
    ...fourRoots('dc8-cruise', 'Cruise, primed', () => primedSystem(DC8_CRUISE_DIMENSIONAL).A, cruise, 1e-4),
    // The coefficient set differs from the printed primed one in the last digit of its members.
    ...fourRoots('dc8-approach-set', 'Approach, coefficients', () => systemOf(DC8_APPROACH), approach, '1 %'),
    [
      'dc8-phi-beta',
      '|φ/β| on the approach',
      '',
      1.072,
      1e-3,
      () => dutchPhiOverBeta(primedSystem(DC8_APPROACH_DIMENSIONAL).A),
    ],
  ]);
}

function navionCases(): PublishedCase[] {
  const matrix = { spiral: -0.0089, roll: -8.433, re: -0.486, im: 2.334 };
  const set = { spiral: -0.008198, roll: -8.434858, re: -0.48702, im: 2.34724 };
  return values({ group: 'Modes: NAVION, sea level, 176 ft/s', source: NAVION.source, provenance: 'memory' }, [
    ...fourRoots('navion-matrix', 'Printed matrix', () => NAVION_MATRIX, matrix, 1e-3),
    ...fourRoots('navion-set', 'Table B.1', () => systemOf(NAVION), set, '0.2 %', COMPUTED),
    ['navion-phi-beta', '|φ/β| in the Dutch roll', '', 0.822, 1e-3, () => dutchPhiOverBeta(NAVION_MATRIX), COMPUTED],
  ]);
}

function learjetCases(): PublishedCase[] {
  const roots = { spiral: -0.001188, roll: -0.502338, re: -0.05845, im: 1.68361 };
  const a = () => systemOf(LEARJET_CRUISE);
  const inertia = (axis: 'Ixx' | 'Izz' | 'Ixz') => analyseSet(LEARJET_CRUISE).system[axis] / SLUG_FT2;
  return values({ group: 'Modes: Learjet 24, M 0.7, 40,000 ft', source: LEARJET_CRUISE.source, provenance: 'memory' }, [
    ['learjet-omega', 'Dutch roll ω', 'rad/s', 1.687, '0.5 %', () => modeOfKind(a(), 'dutch-roll').wn ?? NaN],
    ['learjet-zeta', 'Dutch roll ζ', '', 0.036, '5 %', () => modeOfKind(a(), 'dutch-roll').zeta ?? NaN],
    ['learjet-roll', 'Roll time constant', 's', 1.97, '2 %', () => modeOfKind(a(), 'roll').tauS ?? NaN],
    // Ill-conditioned: the difference of two nearly equal products.
    ['learjet-spiral', 'Spiral time constant', 's', 990, '20 %', () => modeOfKind(a(), 'spiral').tauS ?? NaN],
    ...fourRoots('learjet-set', 'Inertias rotated from body axes', a, roots, 2e-5, COMPUTED),
    ['learjet-Ixx', 'Ixx about stability axes', 'slug·ft²', 27_920, 1, () => inertia('Ixx')],
    ['learjet-Izz', 'Izz about stability axes', 'slug·ft²', 47_080, 1, () => inertia('Izz')],
    ['learjet-Ixz', 'Ixz about stability axes', 'slug·ft²', 400, 1, () => inertia('Ixz')],
  ]);
}

/** Published and computed modes of the data sets beside the textbook's Boeing 747. */
export function modesCases(): PublishedCase[] {
  const c310 = { spiral: 0.041803, roll: -1.429296, re: -0.162, im: 1.58587 };
  const published747 = { spiral: -0.0464, roll: -1.2308, re: -0.0807, im: 0.7433 };
  const computed747 = { spiral: -0.046464, roll: -1.228323, re: -0.08019, im: 0.74197 };
  const source747 = `${B747_APPROACH.source}; modes: D. A. Caughey, course notes M&AE 5070, Cornell University, chapter 5`;
  return [
    ...dc8Cases(),
    ...navionCases(),
    ...values({ group: 'Modes: Cessna 310, approach', ...COMPUTED, source: `from ${C310_APPROACH.source}` }, [
      ...fourRoots('c310', 'Approach set', () => systemOf(C310_APPROACH), c310, 2e-5),
    ]),
    ...values({ group: 'Modes: Boeing 747, power approach', source: source747, provenance: 'memory' }, [
      ...fourRoots('b747', 'Published', () => systemOf(B747_APPROACH), published747, '1 %'),
      ...fourRoots('b747-computed', 'Independent', () => systemOf(B747_APPROACH), computed747, 2e-5, COMPUTED),
    ]),
    ...learjetCases(),
  ];
}
