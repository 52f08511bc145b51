import { NumericsError } from '../../numerics/errors.ts';
import { characteristicPolynomial } from '../../numerics/polynomial.ts';
import { routhDiscriminant } from '../../numerics/routh.ts';
import { classicalApproximations } from '../approximations.ts';
import type { Approximation } from '../approximations.ts';
import { values } from './case-builders.ts';
import type { ValueRow } from './case-builders.ts';
import { ETKIN_747 } from './data-sets.ts';
import { COMPUTED, dutchPhiOverBeta, ETKIN_MATRIX, fourRoots, modeOfKind, systemOf } from './modes-helpers.ts';
import type { PublishedCase } from './published-case.ts';
import { ETKIN_747_MATRIX } from './textbook-matrices.ts';

const SOURCE = 'Etkin & Reid, Dynamics of Flight, 3rd ed. 1996, eq. 6.7,1–6.7,2 and section 6.8';
const ROOTS = { spiral: -0.0072973, roll: -0.56248, re: -0.033011, im: 0.94655 };
const POLYNOMIAL = [1, 0.6358, 0.9388, 0.5114, 0.003682];

function root(estimate: Approximation, which: 'only' | 'quick' | 'slow'): number {
  if (estimate.kind === 'real' && which === 'only') return estimate.re;
  if (estimate.kind === 'real-pair' && which !== 'only') return estimate.roots[which === 'quick' ? 0 : 1];
  throw new NumericsError('bad-argument', 'the approximation is of another kind');
}

function oscillation(estimate: Approximation): { wn: number; zeta: number } {
  if (estimate.kind !== 'oscillation') throw new NumericsError('bad-argument', 'the approximation does not oscillate');
  return estimate;
}

/** The Boeing 747 of the textbook: matrix, polynomial, set and approximations. */
export function etkinCases(): PublishedCase[] {
  const approximate = () => classicalApproximations(ETKIN_MATRIX);
  const dutchTwo = () => oscillation(approximate().dutchRoll);
  const dutch = () => modeOfKind(ETKIN_MATRIX, 'dutch-roll');
  const polynomial = () => characteristicPolynomial(ETKIN_747_MATRIX, 4);
  const coefficients = POLYNOMIAL.map((coefficient, i): ValueRow => [
    `etkin-polynomial-s${4 - i}`,
    `Characteristic polynomial, coefficient of s^${4 - i}`,
    '',
    coefficient,
    1e-4,
    () => polynomial()[i],
  ]);
  return values({ group: 'Modes: Boeing 747-100, M 0.8, 40,000 ft', source: SOURCE, provenance: 'seen' }, [
    ...fourRoots('etkin-matrix', 'Printed matrix', () => ETKIN_MATRIX, ROOTS, 1e-5),
    ...coefficients,
    ['etkin-routh', 'Routh discriminant', '', 0.04223, 1e-4, () => routhDiscriminant(polynomial())],
    ...fourRoots('etkin-set', 'Non-dimensional set', () => systemOf(ETKIN_747), ROOTS, '0.3 %'),
    ['etkin-roll', 'One-degree roll', '1/s', -0.434, 1e-3, () => root(approximate().rollOneDegree, 'only')],
    ['etkin-slow', 'Roll–spiral pair: spiral', '1/s', -0.00734, 1e-3, () => root(approximate().rollSpiral, 'slow')],
    ['etkin-quick', 'Roll–spiral pair: roll', '1/s', -0.597, 1e-3, () => root(approximate().rollSpiral, 'quick')],
    ['etkin-two-omega', 'Two-degree Dutch roll: ω', 'rad/s', 0.92125, 1e-4, () => dutchTwo().wn, COMPUTED],
    ['etkin-two-zeta', 'Two-degree Dutch roll: ζ', '', 0.10942, 1e-4, () => dutchTwo().zeta, COMPUTED],
    ['etkin-omega', 'Dutch roll: ω', 'rad/s', 0.94712, 1e-4, () => dutch().wn ?? NaN, COMPUTED],
    ['etkin-zeta', 'Dutch roll: ζ', '', 0.03485, 1e-4, () => dutch().zeta ?? NaN, COMPUTED],
    ['etkin-phi-beta', '|φ/β| in the Dutch roll', '', 3.058, 1e-3, () => dutchPhiOverBeta(ETKIN_MATRIX), COMPUTED],
  ]);
}
