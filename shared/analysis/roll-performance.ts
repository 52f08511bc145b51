import { NumericsError, requireFinite } from '../numerics/errors.ts';
import { createRk4 } from '../numerics/rk4.ts';
import { matrixExponential } from '../numerics/matrix-exponential.ts';
import { rollOscillationMinima, timeToBankLimits } from './criteria-tables.ts';
import type { AircraftClass, FlightCategory, SpeedRange } from './criteria-tables.ts';
import { levelOf } from './criteria-8785c.ts';
import type { CriterionResult } from './criteria-8785c.ts';
import type { Actuator } from './responses.ts';
import { DEG } from '../units/constants.ts';

const STEP_S = 1 / 240;
/** The search for a bank angle ends here; no limit of table IX is longer than 6 s. */
const LONGEST_S = 20;
const SAMPLE_S = 0.01;
/** Roll-rate extrema are looked for this long after the step. */
const OSCILLATION_S = 40;

/**
 * Time from an abrupt full roll command to a bank angle, pedals fixed, through the aileron's lag, rate and travel.
 *
 * Linear lateral model, RK4 at 240 Hz, the crossing interpolated; null when the angle is not reached in 20 s or the roll
 * goes the wrong way.
 *
 * @param a         System matrix; n×n row-major; 1/s; φ is state 3.
 * @param column    Aileron column; at least 4 values; per rad.
 * @param n         4, or 5 with the yaw damper's washout.
 * @param aileron   Lag, rate and travel; no lag means at once.
 * @param angleRad  Bank angle; rad; > 0.
 * @returns         Seconds, or null.
 * @throws {NumericsError} bad-argument for an angle that is not positive.
 * @sign            Right aileron (δa > 0), bank to the right.
 * @source          MIL-F-8785C 3.3.4 (seen): time measured from the start of the control input.
 */
export function timeToBankS(
  a: ArrayLike<number>,
  column: ArrayLike<number>,
  n: 4 | 5,
  aileron: Actuator,
  angleRad: number,
): number | null {
  if (!(angleRad > 0)) throw new NumericsError('bad-argument', `a bank of ${angleRad} rad is not positive`);
  const rk4 = createRk4(n + 1);
  const x = new Float64Array(n + 1);
  const instant = !(aileron.lagS > 0);
  if (instant) x[n] = aileron.maxRad;
  const rhs = (out: Float64Array, _t: number, s: Float64Array) => {
    for (let i = 0; i < n; i++) {
      let sum = i < 4 ? column[i] * s[n] : 0;
      for (let j = 0; j < n; j++) sum += a[i * n + j] * s[j];
      out[i] = sum;
    }
    out[n] = instant ? 0 : Math.min(aileron.rateRadS, (aileron.maxRad - s[n]) / aileron.lagS);
  };
  const count = Math.round(LONGEST_S / STEP_S);
  let before = 0;
  for (let i = 0; i < count; i++) {
    rk4.stepInto(x, rhs, 0, x, STEP_S);
    if (!Number.isFinite(x[3])) return null;
    if (x[3] >= angleRad) return (i + (angleRad - before) / (x[3] - before)) * STEP_S;
    before = x[3];
  }
  return null;
}

export interface RollRateExtrema {
  /** First roll-rate peak after a unit step; null when the rate only rises. */
  peak: { timeS: number; rate: number } | null;
  /** First minimum after it; null when the rate does not turn again. */
  minimum: { timeS: number; rate: number } | null;
  /** Second peak; null when the rate does not turn again. */
  second: { timeS: number; rate: number } | null;
}

/**
 * The first extrema of roll rate after a unit aileron step.
 *
 * Exact transition over 0.01 s, extrema by the parabola through three samples; looked for over 40 s.
 *
 * @param a       System matrix; n×n row-major; 1/s; p is state 1.
 * @param column  Aileron column; at least 4 values; per rad.
 * @param n       4, or 5 with the yaw damper's washout.
 * @returns       Peak, minimum, second peak; rates in rad/s per rad of aileron.
 * @throws {NumericsError} non-finite-input, bad-dimension, bad-argument for a matrix beyond all bounds.
 * @sign          Right aileron, roll to the right.
 * @source        MIL-F-8785C 3.3.2.2 (seen) for what is looked for.
 */
export function rollRateExtrema(a: ArrayLike<number>, column: ArrayLike<number>, n: 4 | 5 = 4): RollRateExtrema {
  requireFinite(a, n * n, 'system matrix');
  const size = n + 1;
  const augmented = new Float64Array(size * size);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) augmented[i * size + j] = a[i * n + j] * SAMPLE_S;
    augmented[i * size + n] = i < 4 ? column[i] * SAMPLE_S : 0;
  }
  const step = matrixExponential(augmented, size);
  const sign = column[1] < 0 ? -1 : 1;
  const found: { timeS: number; rate: number }[] = [];
  let x = new Float64Array(size);
  x[n] = 1;
  let p0 = 0;
  let p1 = 0;
  for (let k = 1; k * SAMPLE_S <= OSCILLATION_S && found.length < 3; k++) {
    const next = new Float64Array(size);
    for (let i = 0; i < size; i++) for (let j = 0; j < size; j++) next[i] += step[i * size + j] * x[j];
    x = next;
    const p2 = sign * x[1];
    if (!Number.isFinite(p2)) break;
    const wantsPeak = found.length % 2 === 0;
    if (k >= 2 && (wantsPeak ? p1 >= p0 && p1 > p2 : p1 <= p0 && p1 < p2)) {
      const curve = p0 - 2 * p1 + p2;
      const at = curve === 0 ? 0 : (0.5 * (p0 - p2)) / curve;
      found.push({ timeS: (k - 1 + at) * SAMPLE_S, rate: sign * (p1 - 0.25 * (p0 - p2) * at) });
    }
    p0 = p1;
    p1 = p2;
  }
  return { peak: found[0] ?? null, minimum: found[1] ?? null, second: found[2] ?? null };
}

/** What both roll criteria need. */
export interface RollSubject {
  /** System matrix; n×n row-major; 1/s. */
  a: ArrayLike<number>;
  n: 4 | 5;
  /** Aileron and rudder columns; at least 4 values; per rad. */
  column: ArrayLike<number>;
  rudder: ArrayLike<number>;
  aileron: Actuator;
}

/** A coordinated roll is mentioned when it is shorter than this share of the time with fixed pedals. */
const WORTH_MENTIONING = 0.98;

/**
 * The same with the pedals cancelling the yaw of aileron and roll rate (Class I to III may, 3.3.4; memory), for the remark.
 * δr = −(N_δa·δa + N_p·p)/N_δr.
 */
function coordinatedTimeS({ a, n, column, rudder, aileron }: RollSubject, angleRad: number): number | null {
  if (!(Math.abs(rudder[2]) > 0)) return null;
  const withAileron = -column[2] / rudder[2];
  const withRoll = -a[2 * n + 1] / rudder[2];
  const system = Float64Array.from(a);
  const input = new Float64Array(4);
  for (let i = 0; i < 4; i++) {
    system[i * n + 1] += rudder[i] * withRoll;
    input[i] = column[i] + rudder[i] * withAileron;
  }
  return timeToBankS(system, input, n, aileron, angleRad);
}

/**
 * MIL-F-8785C 3.3.4 and table IX for one condition.
 *
 * @param subject   System and aileron.
 * @param klass     Class.
 * @param category  Flight phase category.
 * @param range     Speed range of Classes III and IV.
 * @returns         The criterion with the time in s.
 * @throws {NumericsError} bad-dimension.
 * @sign            none
 * @source          MIL-F-8785C 3.3.4, table IX.
 */
export function timeToBankCriterion(
  subject: RollSubject,
  klass: AircraftClass,
  category: FlightCategory,
  range: SpeedRange,
): CriterionResult {
  const { angleDeg, seconds } = timeToBankLimits(klass, category, range);
  const value = timeToBankS(subject.a, subject.column, subject.n, subject.aileron, angleDeg * DEG);
  const coordinated = klass === 'IV' ? null : coordinatedTimeS(subject, angleDeg * DEG);
  const notes = [
    ...(value === null ? [`${angleDeg}° of bank are not reached within ${LONGEST_S} s`] : []),
    ...(coordinated !== null && coordinated < WORTH_MENTIONING * (value ?? Infinity)
      ? [`pedals fixed; ${coordinated.toFixed(2)} s with pedal against the adverse yaw`]
      : []),
  ];
  return {
    id: 'time-to-bank',
    title: `Time to ${angleDeg}° of bank`,
    level: value === null ? 4 : levelOf(value, seconds, 'at most'),
    value,
    unit: 's',
    limit: seconds[0],
    limits: seconds,
    sense: 'at most',
    source: 'MIL-F-8785C 3.3.4, table IX (seen; Classes III and IV in one transcription)',
    ...(notes.length > 0 ? { remark: notes.join('; ') } : {}),
  };
}

/**
 * MIL-F-8785C 3.3.2.2 for one condition.
 *
 * @param subject   System and aileron.
 * @param category  Flight phase category.
 * @returns         The criterion with the ratio of first minimum to first peak.
 * @throws {NumericsError} non-finite-input, bad-dimension, bad-argument.
 * @sign            Negative when the roll rate reverses.
 * @source          MIL-F-8785C 3.3.2.2 (seen).
 */
export function rollOscillationCriterion(subject: RollSubject, category: FlightCategory): CriterionResult {
  const limits = rollOscillationMinima(category);
  const { peak, minimum } = rollRateExtrema(subject.a, subject.column, subject.n);
  const base = {
    id: 'roll-oscillation' as const,
    title: 'First roll-rate minimum over first peak',
    unit: '',
    limit: limits[0],
    limits,
    sense: 'at least' as const,
    source: 'MIL-F-8785C 3.3.2.2 (seen)',
  };
  if (!peak || peak.rate === 0) return { ...base, level: 1, value: 1, remark: 'the roll rate has no peak' };
  if (!minimum) return { ...base, level: 1, value: 1, remark: 'the roll rate does not oscillate' };
  const value = minimum.rate / peak.rate;
  const level = levelOf(value, limits, 'at least');
  if (level <= 2) return { ...base, level, value };
  return { ...base, level: 3, value, remark: 'worse than Level 2; the source gives no Level 3 limit' };
}
