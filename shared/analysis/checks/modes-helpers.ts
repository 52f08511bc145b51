import { NumericsError } from '../../numerics/errors.ts';
import { lateralModes } from '../modes.ts';
import type { Mode, ModeKind } from '../modes.ts';
import { phiOverBeta } from '../stability-map.ts';
import type { ValueRow } from './case-builders.ts';
import type { PublishedSet } from './data-sets.ts';
import { analyseSet } from './set-airframe.ts';
import { ETKIN_747_MATRIX, ETKIN_747_SPEED } from './textbook-matrices.ts';

/** What a case carries whose expected number was worked out independently. */
export const COMPUTED = { provenance: 'computed', source: 'worked out independently from the printed inputs' } as const;

/** The printed matrix of the Boeing 747 with β = v/u0 as its first state. */
export const ETKIN_MATRIX = ETKIN_747_MATRIX.map((element, i) => {
  const row = i < 4 ? 1 / ETKIN_747_SPEED : 1;
  return element * row * (i % 4 === 0 ? ETKIN_747_SPEED : 1);
});

/** The mode of a kind; a named error where the matrix has none. */
export function modeOfKind(a: ArrayLike<number>, kind: ModeKind): Mode {
  const found = lateralModes(a).modes.find((mode) => mode.kind === kind);
  if (!found) throw new NumericsError('bad-argument', `there is no ${kind} mode`);
  return found;
}

/** System matrix of a published set. */
export function systemOf(set: PublishedSet): Float64Array {
  return analyseSet(set).system.A;
}

/** |φ/β| in the Dutch roll of a matrix. */
export function dutchPhiOverBeta(a: ArrayLike<number>): number {
  const dutch = modeOfKind(a, 'dutch-roll');
  return phiOverBeta(a, dutch.re, dutch.im);
}

export interface FourRoots {
  spiral: number;
  roll: number;
  re: number;
  im: number;
}

/** Roll, spiral and Dutch roll of one matrix against their published values. */
export function fourRoots(
  id: string,
  what: string,
  a: () => ArrayLike<number>,
  roots: FourRoots,
  tolerance: ValueRow[4],
  overrides?: ValueRow[6],
): ValueRow[] {
  const row = (name: string, text: string, published: number, compute: () => number): ValueRow => [
    `${id}-${name}`,
    `${what}: ${text}`,
    '1/s',
    published,
    tolerance,
    compute,
    overrides,
  ];
  return [
    row('spiral', 'spiral root', roots.spiral, () => modeOfKind(a(), 'spiral').re),
    row('roll', 'roll root', roots.roll, () => modeOfKind(a(), 'roll').re),
    row('dutch-re', 'Dutch roll, real part', roots.re, () => modeOfKind(a(), 'dutch-roll').re),
    row('dutch-im', 'Dutch roll, imaginary part', roots.im, () => modeOfKind(a(), 'dutch-roll').im),
  ];
}
