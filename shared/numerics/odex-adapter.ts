import { NumericsError, requireFinite } from './errors.ts';
import type { RightHandSide } from './rk4.ts';
import { Outcome, Solver } from './vendor/odex.js';

export interface AdaptiveOptions {
  /** Relative and absolute error per step; default 1e-9, at least 1e-13. */
  tolerance?: number;
  /** Absolute error per step where it differs from `tolerance`; units of x. */
  absoluteTolerance?: number;
  /** Times at which the right-hand side jumps; the integration restarts there. Order and duplicates do not matter. */
  discontinuities?: ArrayLike<number>;
  /** Times at which the state is wanted (dense output), in the direction of integration and inside [t0, t1]. */
  sampleTimes?: ArrayLike<number>;
  /** Largest number of evaluations over the whole span; default 2,000,000. */
  maxEvaluations?: number;
}

export interface AdaptiveResult {
  /** State at t1. */
  x: Float64Array;
  steps: number;
  rejected: number;
  evaluations: number;
  converged: true;
  /** States at the sample times, when they were asked for. */
  points?: { t: number; x: Float64Array }[];
}

const DEFAULT_TOLERANCE = 1e-9;
const SMALLEST_TOLERANCE = 1e-13;
const DEFAULT_MAX_EVALUATIONS = 2_000_000;
const MAX_STEPS_PER_SEGMENT = 200_000;
/** How far inside a segment its ends are evaluated, as a fraction of its length, so that a jump belongs to one side. */
const INSIDE = 1e-12;

/**
 * State after adaptive integration of x' = f(t, x) from t0 to t1, with the states at wanted times beside.
 *
 * Extrapolation of the explicit midpoint rule with order and step control (GBS, dense output); restarted at each
 * discontinuity, whose two sides are evaluated each on its own side. The error is controlled per step, so slow integrals
 * gather more than the tolerance over a long span. Not bit-identical between JavaScript engines: a reference, not a
 * stepper for recordings.
 *
 * @param rhs   Right-hand side; writes (unit of x)/s into its first argument.
 * @param x0    State at t0; length n; not changed.
 * @param t0    Start; s.
 * @param t1    End; s; may lie before t0.
 * @param opts  Tolerances, discontinuities, sample times, limit of work.
 * @returns     State at t1, counts, and the sampled states.
 * @throws {NumericsError} tolerance-not-held when the error control gives up or the work limit is met,
 *              non-finite-derivative when the right-hand side is not finite, non-finite-input, bad-argument.
 * @sign        none
 * @source      E. Hairer, S. Nørsett, G. Wanner, Solving Ordinary Differential Equations I, 2nd ed., II.9 (ODEX).
 */
export function integrateAdaptive(
  rhs: RightHandSide,
  x0: ArrayLike<number>,
  t0: number,
  t1: number,
  opts: AdaptiveOptions = {},
): AdaptiveResult {
  const n = x0.length;
  requireFinite(x0, n, 'x0');
  requireFinite([t0, t1], 2, 'time span');
  const tolerance = opts.tolerance ?? DEFAULT_TOLERANCE;
  const absolute = opts.absoluteTolerance ?? tolerance;
  if (!(tolerance >= SMALLEST_TOLERANCE) || !(absolute > 0)) {
    throw new NumericsError('bad-argument', `a tolerance of ${tolerance} is below ${SMALLEST_TOLERANCE}`);
  }
  const maxEvaluations = opts.maxEvaluations ?? DEFAULT_MAX_EVALUATIONS;
  const direction = t1 >= t0 ? 1 : -1;
  const edges = segmentEdges(t0, t1, direction, opts.discontinuities ?? []);
  const wanted = opts.sampleTimes;
  const points: { t: number; x: Float64Array }[] = [];

  const work = new Float64Array(n);
  const out = new Float64Array(n);
  let state = Float64Array.from(x0);
  let evaluations = 0;
  let steps = 0;
  let rejected = 0;
  let nextSample = 0;

  if (wanted) {
    while (nextSample < wanted.length && (wanted[nextSample] - t0) * direction <= 0) {
      points.push({ t: wanted[nextSample++], x: state.slice() });
    }
  }

  for (let segment = 0; segment + 1 < edges.length; segment++) {
    const from = edges[segment];
    const to = edges[segment + 1];
    const margin = INSIDE * Math.abs(to - from);
    const low = Math.min(from, to) + margin;
    const high = Math.max(from, to) - margin;

    const derivative = (t: number, y: number[]): number[] => {
      if (++evaluations > maxEvaluations) {
        throw new NumericsError('tolerance-not-held', `${maxEvaluations} evaluations did not reach t = ${t1} s`);
      }
      for (let i = 0; i < n; i++) work[i] = y[i];
      rhs(out, Math.min(Math.max(t, low), high), work);
      const dy = new Array<number>(n);
      for (let i = 0; i < n; i++) {
        if (!Number.isFinite(out[i])) {
          throw new NumericsError('non-finite-derivative', `the derivative of state ${i} is ${out[i]} at t = ${t} s`);
        }
        dy[i] = out[i];
      }
      return dy;
    };

    const solver = new Solver(n);
    solver.relativeTolerance = tolerance;
    solver.absoluteTolerance = absolute;
    solver.maxSteps = MAX_STEPS_PER_SEGMENT;
    solver.denseOutput = wanted !== undefined;
    const result = solver.solve(derivative, from, Array.from(state), to, (_nr, _tOld, t, y, dense) => {
      if (wanted && dense) {
        while (nextSample < wanted.length && (wanted[nextSample] - t) * direction <= 0) {
          const at = wanted[nextSample++];
          const sample = new Float64Array(n);
          for (let i = 0; i < n; i++) sample[i] = at === t ? y[i] : dense(i, at);
          points.push({ t: at, x: sample });
        }
      }
      return undefined;
    });
    if (result.outcome !== Outcome.Converged || result.y.some((value) => !Number.isFinite(value))) {
      throw new NumericsError(
        'tolerance-not-held',
        `the tolerance ${tolerance} could not be held between t = ${from} s and ${to} s (${result.nStep} steps)`,
      );
    }
    state = Float64Array.from(result.y);
    steps += result.nAccept;
    rejected += result.nReject;
  }
  if (wanted) {
    while (nextSample < wanted.length) points.push({ t: wanted[nextSample++], x: state.slice() });
  }
  const done = { x: state, steps, rejected, evaluations, converged: true as const };
  return wanted ? { ...done, points } : done;
}

/** Start, the discontinuities strictly inside, and the end, in the direction of integration. */
function segmentEdges(t0: number, t1: number, direction: number, jumps: ArrayLike<number>): number[] {
  if (t0 === t1) return [t0];
  const inside = Array.from(jumps)
    .filter((t) => (t - t0) * direction > 0 && (t1 - t) * direction > 0)
    .sort((a, b) => (a - b) * direction);
  const edges = [t0];
  for (const t of [...inside, t1]) {
    if (t !== edges[edges.length - 1]) edges.push(t);
  }
  return edges;
}
