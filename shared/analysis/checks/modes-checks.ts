import { FT, SLUG } from '../../units/constants.ts';
import { NumericsError } from '../../numerics/errors.ts';
import { characteristicPolynomial } from '../../numerics/polynomial.ts';
import { routhDiscriminant } from '../../numerics/routh.ts';
import { classicalApproximations } from '../approximations.ts';
import type { Approximation } from '../approximations.ts';
import { lateralModes } from '../modes.ts';
import type { Mode, ModeKind } from '../modes.ts';
import { phiOverBeta } from '../stability-map.ts';
import { values } from './case-builders.ts';
import type { ValueRow } from './case-builders.ts';
import {
  B747_APPROACH,
  C310_APPROACH,
  DC8_APPROACH,
  ETKIN_747,
  ETKIN_747_MATRIX,
  ETKIN_747_SPEED,
  LEARJET_CRUISE,
  NAVION,
  NAVION_MATRIX,
} from './data-sets.ts';
import type { PublishedSet } from './data-sets.ts';
import { DC8_APPROACH_DIMENSIONAL, DC8_CRUISE_DIMENSIONAL, primedSystem } from './dimensional-sets.ts';
import type { PublishedCase } from './published-case.ts';
import { analyseSet } from './set-airframe.ts';

const SLUG_FT2 = SLUG * FT * FT;

/** The printed matrix with β = v/u0 as its first state. */
const ETKIN_MATRIX = ETKIN_747_MATRIX.map((element, i) => {
  const row = i < 4 ? 1 / ETKIN_747_SPEED : 1;
  return element * row * (i % 4 === 0 ? ETKIN_747_SPEED : 1);
});

/** The mode of a kind; a named error where the matrix has none. */
export function modeOfKind(a: ArrayLike<number>, kind: ModeKind): Mode {
  const found = lateralModes(a).modes.find((mode) => mode.kind === kind);
  if (!found) throw new NumericsError('bad-argument', `there is no ${kind} mode`);
  return found;
}

const systemOf = (set: PublishedSet) => analyseSet(set).system.A;

function phiBeta(a: ArrayLike<number>): number {
  const dutch = modeOfKind(a, 'dutch-roll');
  return phiOverBeta(a, dutch.re, dutch.im);
}

/** Roll, spiral and Dutch roll of one matrix against their published values. */
function fourRoots(
  id: string,
  what: string,
  a: () => ArrayLike<number>,
  roots: { spiral?: number; roll?: number; re?: number; im?: number; omega?: number; zeta?: number },
  tolerance: ValueRow[4],
): ValueRow[] {
  const rows: ValueRow[] = [];
  const add = (name: string, text: string, unit: string, published: number | undefined, compute: () => number) => {
    if (published !== undefined) rows.push([`${id}-${name}`, `${what}: ${text}`, unit, published, tolerance, compute]);
  };
  const dutch = () => modeOfKind(a(), 'dutch-roll');
  add('spiral', 'spiral root', '1/s', roots.spiral, () => modeOfKind(a(), 'spiral').re);
  add('roll', 'roll root', '1/s', roots.roll, () => modeOfKind(a(), 'roll').re);
  add('dutch-re', 'Dutch roll, real part', '1/s', roots.re, () => dutch().re);
  add('dutch-im', 'Dutch roll, imaginary part', '1/s', roots.im, () => dutch().im);
  add('dutch-omega', 'Dutch roll ω', 'rad/s', roots.omega, () => dutch().wn ?? NaN);
  add('dutch-zeta', 'Dutch roll ζ', '', roots.zeta, () => dutch().zeta ?? NaN);
  return rows;
}

function root(estimate: Approximation, which: 'only' | 'quick' | 'slow'): number {
  if (estimate.kind === 'real' && which === 'only') return estimate.re;
  if (estimate.kind === 'real-pair' && which !== 'only') return estimate.roots[which === 'quick' ? 0 : 1];
  throw new NumericsError('bad-argument', 'the approximation is of another kind');
}

function oscillation(estimate: Approximation): { wn: number; zeta: number } {
  if (estimate.kind !== 'oscillation') throw new NumericsError('bad-argument', 'the approximation does not oscillate');
  return estimate;
}

const ETKIN_SOURCE = 'Etkin & Reid, Dynamics of Flight, 3rd ed. 1996, eq. 6.7,1–6.7,2 and section 6.8';
const COMPUTED = { provenance: 'computed', source: 'worked out independently from the printed inputs' } as const;
const ETKIN_ROOTS = { spiral: -0.0072973, roll: -0.56248, re: -0.033011, im: 0.94655 };

function etkinCases(): PublishedCase[] {
  const approximate = () => classicalApproximations(ETKIN_MATRIX);
  const polynomial = () => characteristicPolynomial(ETKIN_747_MATRIX, 4);
  return values({ group: 'Modes: Boeing 747-100, M 0.8, 40,000 ft', source: ETKIN_SOURCE, provenance: 'seen' }, [
    ...fourRoots('etkin-matrix', 'Printed matrix', () => ETKIN_MATRIX, ETKIN_ROOTS, 1e-5),
    ...[1, 0.6358, 0.9388, 0.5114, 0.003682].map(
      (coefficient, i): ValueRow => [
        `etkin-polynomial-s${4 - i}`,
        `Characteristic polynomial, s^${4 - i}`,
        '',
        coefficient,
        1e-4,
        () => polynomial()[i],
      ],
    ),
    ['etkin-routh', 'Routh discriminant', '', 0.04223, 1e-4, () => routhDiscriminant(polynomial())],
    ...fourRoots('etkin-set', 'Non-dimensional set', () => systemOf(ETKIN_747), ETKIN_ROOTS, '0.3 %'),
    ['etkin-roll-alone', 'One-degree roll', '1/s', -0.434, 1e-3, () => root(approximate().rollOneDegree, 'only')],
    ['etkin-two-slow', 'Roll–spiral approximation: spiral', '1/s', -0.00734, 1e-5, () => root(approximate().rollSpiral, 'slow')],
    ['etkin-two-quick', 'Roll–spiral approximation: roll', '1/s', -0.597, 1e-3, () => root(approximate().rollSpiral, 'quick')],
    ['etkin-dutch-two-omega', 'Dutch roll approximation: ω', 'rad/s', 0.92125, 1e-4, () => oscillation(approximate().dutchRoll).wn, COMPUTED],
    ['etkin-dutch-two-zeta', 'Dutch roll approximation: ζ', '', 0.10942, 1e-4, () => oscillation(approximate().dutchRoll).zeta, COMPUTED],
    ['etkin-dutch-omega', 'Dutch roll: ω', 'rad/s', 0.94712, 1e-4, () => modeOfKind(ETKIN_MATRIX, 'dutch-roll').wn ?? NaN, COMPUTED],
    ['etkin-dutch-zeta', 'Dutch roll: ζ', '', 0.03485, 1e-4, () => modeOfKind(ETKIN_MATRIX, 'dutch-roll').zeta ?? NaN, COMPUTED],
    ['etkin-phi-beta', '|φ/β| in the Dutch roll', '', 3.058, 1e-3, () => phiBeta(ETKIN_MATRIX), COMPUTED],
  ]);
}

function otherCases(): PublishedCase[] {
  const primed = (set: typeof DC8_APPROACH_DIMENSIONAL) => () => primedSystem(set).A;
  const computed = (group: string) => ({ group: `Modes: ${group}`, ...COMPUTED });
  return [
    ...values({ ...computed('Douglas DC-8'), source: `${COMPUTED.source}: ${DC8_APPROACH.source}` }, [
      ...fourRoots('dc8-approach', 'Approach, primed set', primed(DC8_APPROACH_DIMENSIONAL), { spiral: 0.013119, roll: -1.120881, re: -0.10878, im: 0.98961 }, 2e-4),
      ...fourRoots('dc8-cruise', 'Cruise, primed set', primed(DC8_CRUISE_DIMENSIONAL), { spiral: -0.003994, roll: -1.258007, re: -0.11847, im: 1.49321 }, 2e-4),
      ['dc8-phi-beta', '|φ/β| on the approach', '', 1.072, 1e-3, () => phiBeta(systemOf(DC8_APPROACH))],
    ]),
    ...values(
      { group: 'Modes: NAVION', source: NAVION.source, provenance: 'memory' },
      [
        ...fourRoots('navion-matrix', 'Printed matrix', () => NAVION_MATRIX, { spiral: -0.0089, roll: -8.433, re: -0.486, im: 2.334 }, 1e-3),
        ['navion-phi-beta', '|φ/β| in the Dutch roll', '', 0.822, 1e-3, () => phiBeta(NAVION_MATRIX), COMPUTED],
      ],
    ),
    ...values({ ...computed('NAVION, derivatives'), source: `${COMPUTED.source}: ${NAVION.source}` }, [
      ...fourRoots('navion-set', 'Table B.1', () => systemOf(NAVION), { spiral: -0.008198, roll: -8.434858, re: -0.48702, im: 2.34724 }, '0.2 %'),
    ]),
    ...values({ ...computed('Cessna 310, approach'), source: `${COMPUTED.source}: ${C310_APPROACH.source}` }, [
      ...fourRoots('c310', 'Approach set', () => systemOf(C310_APPROACH), { spiral: 0.041803, roll: -1.429296, re: -0.162, im: 1.58587 }, 1e-4),
    ]),
    ...values(
      {
        group: 'Modes: Boeing 747, power approach',
        source: `${B747_APPROACH.source}; modes: D. A. Caughey, course notes M&AE 5070, Cornell University, ch. 5`,
        provenance: 'memory',
      },
      [
        ...fourRoots('b747-approach', 'Power approach', () => systemOf(B747_APPROACH), { spiral: -0.0464, roll: -1.2308, re: -0.0807, im: 0.7433 }, '1 %'),
        ...fourRoots('b747-approach-computed', 'Power approach', () => systemOf(B747_APPROACH), { spiral: -0.046464, roll: -1.228323, re: -0.08019, im: 0.74197 }, 2e-5).map(asComputed),
      ],
    ),
    ...values(
      { group: 'Modes: Learjet 24, cruise', source: LEARJET_CRUISE.source, provenance: 'memory' },
      [
        ['learjet-omega', 'Dutch roll ω', 'rad/s', 1.687, '0.5 %', () => modeOfKind(systemOf(LEARJET_CRUISE), 'dutch-roll').wn ?? NaN],
        ['learjet-zeta', 'Dutch roll ζ', '', 0.036, '5 %', () => modeOfKind(systemOf(LEARJET_CRUISE), 'dutch-roll').zeta ?? NaN],
        ['learjet-roll', 'Roll time constant', 's', 1.97, '2 %', () => modeOfKind(systemOf(LEARJET_CRUISE), 'roll').tauS ?? NaN],
        ['learjet-spiral', 'Spiral time constant (ill-conditioned)', 's', 990, '20 %', () => modeOfKind(systemOf(LEARJET_CRUISE), 'spiral').tauS ?? NaN],
        ...fourRoots('learjet-computed', 'Inertias rotated from body axes', () => systemOf(LEARJET_CRUISE), { spiral: -0.001188, roll: -0.502338, re: -0.05845, im: 1.68361 }, 2e-5).map(asComputed),
        ['learjet-Ixx', 'Ixx about stability axes', 'slug·ft²', 27_920, 1, () => analyseSet(LEARJET_CRUISE).system.Ixx / SLUG_FT2],
        ['learjet-Izz', 'Izz about stability axes', 'slug·ft²', 47_080, 1, () => analyseSet(LEARJET_CRUISE).system.Izz / SLUG_FT2],
        ['learjet-Ixz', 'Ixz about stability axes', 'slug·ft²', 400, 1, () => analyseSet(LEARJET_CRUISE).system.Ixz / SLUG_FT2],
      ],
    ),
  ];
}

function asComputed([id, quantity, unit, published, tolerance, compute]: ValueRow): ValueRow {
  return [id, quantity, unit, published, tolerance, compute, COMPUTED];
}

/** Published and computed modes of the data sets, with the classical approximations. */
export function modesCases(): PublishedCase[] {
  return [...etkinCases(), ...otherCases()];
}
