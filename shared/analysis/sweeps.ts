import type { Aircraft } from '../model/aircraft.ts';
import { ModelError } from '../model/errors.ts';
import { buildSmallDisturbance } from '../model/small-disturbance.ts';
import type { LateralCondition } from '../model/small-disturbance.ts';
import { eigenDecomposition } from '../numerics/eigen.ts';
import { eigenvalues4Into } from '../numerics/eigen4.ts';
import { NumericsError } from '../numerics/errors.ts';
import { withYawDamper } from './lateral-system.ts';
import { isDerivative, withParameter } from './parameters.ts';
import type { SweepParameter } from './parameters.ts';
import type { BilinearSystem } from './stability-map.ts';

export interface RootLocus {
  parameter: SweepParameter;
  values: Float64Array;
  /** One branch per root, followed through the sweep; length of `values` each; 1/s. */
  branches: { re: Float64Array; im: Float64Array }[];
}

/**
 * The roots of the lateral motion along one parameter, each followed as a branch.
 *
 * At each step the roots are joined to the branches so that the sum of squared distances is least; where two branches
 * meet (a pair leaves the real axis) either continuation is as good.
 *
 * @param aircraft   Prepared aircraft.
 * @param condition  Speed, height, path.
 * @param parameter  What is varied.
 * @param values     Its values, in order; SI, derivatives per rad.
 * @param yawDamper  Whether the damper's washout is a fifth state; default off.
 * @returns          Four branches (five with the damper).
 * @throws {ModelError} bad-argument, non-finite-input; {NumericsError} no-convergence, bad-argument for no values.
 * @sign             none
 * @source           W. Evans' root locus; the joining rule is ours.
 */
export function rootLocus(
  aircraft: Aircraft,
  condition: LateralCondition,
  parameter: SweepParameter,
  values: ArrayLike<number>,
  yawDamper = false,
): RootLocus {
  if (values.length === 0) throw new NumericsError('bad-argument', 'a sweep needs at least one value');
  if (yawDamper && !aircraft.yawDamper) {
    throw new ModelError('bad-argument', 'the airframe has no yaw damper', 'yawDamper');
  }
  const n = yawDamper ? 5 : 4;
  const branches = Array.from({ length: n }, () => ({
    re: new Float64Array(values.length),
    im: new Float64Array(values.length),
  }));
  const orders = permutations(n);
  let last: Float64Array | null = null;
  for (let k = 0; k < values.length; k++) {
    const changed = withParameter(aircraft, condition, parameter, values[k]);
    const { A, B } = buildSmallDisturbance(changed.aircraft, changed.condition);
    const damper = yawDamper ? changed.aircraft.yawDamper : null;
    const roots = rootsOf(damper ? withYawDamper(A, B.rudder, damper) : A, n);
    last = last === null ? roots : nearest(last, roots, orders);
    for (let j = 0; j < n; j++) {
      branches[j].re[k] = last[2 * j];
      branches[j].im[k] = last[2 * j + 1];
    }
  }
  return { parameter, values: Float64Array.from(values), branches };
}

function rootsOf(a: Float64Array, n: 4 | 5): Float64Array {
  const out = new Float64Array(2 * n);
  if (n === 4) eigenvalues4Into(out, a);
  else {
    const { re, im } = eigenDecomposition(a, n);
    for (let j = 0; j < n; j++) {
      out[2 * j] = re[j];
      out[2 * j + 1] = im[j];
    }
  }
  return out;
}

/** The roots in the order that lies nearest to the last ones. */
function nearest(last: Float64Array, roots: Float64Array, orders: readonly (readonly number[])[]): Float64Array {
  let best = Infinity;
  let chosen = orders[0];
  for (const order of orders) {
    let sum = 0;
    for (let j = 0; j < order.length && sum < best; j++) {
      const dx = roots[2 * order[j]] - last[2 * j];
      const dy = roots[2 * order[j] + 1] - last[2 * j + 1];
      sum += dx * dx + dy * dy;
    }
    if (sum < best) {
      best = sum;
      chosen = order;
    }
  }
  const out = new Float64Array(roots.length);
  chosen.forEach((from, to) => {
    out[2 * to] = roots[2 * from];
    out[2 * to + 1] = roots[2 * from + 1];
  });
  return out;
}

function permutations(n: number): number[][] {
  if (n === 1) return [[0]];
  return permutations(n - 1).flatMap((shorter) =>
    Array.from({ length: n }, (_, at) => [...shorter.slice(0, at), n - 1, ...shorter.slice(at)]),
  );
}

/**
 * The system matrix as a linear function of two derivatives, for `stabilityMap`.
 *
 * Exact: every element of the matrix is linear in every derivative.
 *
 * @param aircraft   Prepared aircraft.
 * @param condition  Speed, height, path.
 * @param x          First derivative.
 * @param y          Second derivative, not the first.
 * @returns          base + x·alongX + y·alongY.
 * @throws {ModelError} bad-argument when a parameter is no derivative or both are the same.
 * @sign             none
 * @source           Derived here.
 */
export function bilinearSystem(
  aircraft: Aircraft,
  condition: LateralCondition,
  x: SweepParameter,
  y: SweepParameter,
): BilinearSystem {
  if (!isDerivative(x) || !isDerivative(y) || x === y) {
    throw new ModelError('bad-argument', `a stability map needs two different derivatives, not ${x} and ${y}`);
  }
  const at = (xValue: number, yValue: number) => {
    const first = withParameter(aircraft, condition, x, xValue);
    return buildSmallDisturbance(withParameter(first.aircraft, condition, y, yValue).aircraft, condition).A;
  };
  const base = at(0, 0);
  const minusBase = (a: Float64Array) => a.map((value, i) => value - base[i]);
  return { base, alongX: minusBase(at(1, 0)), alongY: minusBase(at(0, 1)) };
}
