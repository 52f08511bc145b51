import { describe, expect, it } from 'vitest';
import { PUBLISHED_SETS } from '#shared/analysis/checks/data-sets.ts';
import { analyseSet, airframeOfSet } from '#shared/analysis/checks/set-airframe.ts';
import { analyseLateral } from '#shared/analysis/lateral-analysis.ts';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import { characteristicPolynomial } from '#shared/numerics/polynomial.ts';
import { unstableRootCount } from '#shared/numerics/routh.ts';

/** Sets of the reference page, each by the path that every airframe file takes: JSON, format, preparation, matrices. */
describe.each(PUBLISHED_SETS.map((set) => [set.aircraft, set] as const))('%s', (_name, set) => {
  const { system, condition } = analyseSet(set);
  const analysis = analyseLateral(prepareAircraft(airframeOfSet(set)), condition);

  it('has a Dutch roll, a roll mode and a spiral', () => {
    expect(analysis.found.modes.map((mode) => mode.kind)).toEqual(['dutch-roll', 'roll', 'spiral']);
  });

  it('satisfies the sums and the product of its roots (trace, determinant; relative 1e-9)', () => {
    const polynomial = characteristicPolynomial(system.A, 4);
    const [dutch, roll, spiral] = analysis.found.modes;
    const sum = 2 * dutch.re + roll.re + spiral.re;
    const product = (dutch.re ** 2 + dutch.im ** 2) * roll.re * spiral.re;
    expect(sum / -polynomial[1]).toBeCloseTo(1, 9);
    expect(product / polynomial[4]).toBeCloseTo(1, 7);
  });

  it('has as many unstable roots as Routh counts', () => {
    const unstable = analysis.found.modes.reduce((n, mode) => n + (mode.re > 0 ? (mode.im > 0 ? 2 : 1) : 0), 0);
    expect(unstableRootCount(characteristicPolynomial(system.A, 4))).toBe(unstable);
  });

  it('does not depend on the units in which it is given (lengths in metres or feet give the same roots)', () => {
    const scale = 3;
    const scaled = {
      ...set,
      S: set.S * scale ** 2,
      b: set.b * scale,
      c: set.c * scale,
      V: set.V * scale,
      g: set.g * scale,
      W: set.W * scale,
      Ix: set.Ix * scale ** 2,
      Iz: set.Iz * scale ** 2,
      Ixz: set.Ixz * scale ** 2,
      rho: set.rho / scale ** 3,
    };
    const other = analyseSet(scaled).system.A;
    other.forEach((element, i) => expect(element).toBeCloseTo(system.A[i], 9));
  });
});
