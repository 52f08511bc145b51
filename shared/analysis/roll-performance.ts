import { createRk4 } from '../numerics/rk4.ts';
import { matrixExponential } from '../numerics/matrix-exponential.ts';
import { requireFinite } from '../numerics/errors.ts';
import { rollOscillationMinima, timeToBankLimits } from './criteria-tables.ts';
import type { AircraftClass, FlightCategory, SpeedRange } from './criteria-tables.ts';
import { levelOf } from './criteria-8785c.ts';
import type { CriterionResult } from './criteria-8785c.ts';
import type { LateralSystem } from './lateral-system.ts';
import type { Actuator } from './responses.ts';
import { DEG } from '../units/constants.ts';

const STEP_S = 1 / 240;
/** The search for a bank angle ends here; no limit of table IX is longer than 6 s. */
const LONGEST_S = 20;
const SAMPLE_S = 0.01;
/** Roll-rate extrema are looked for this long after the step. */
const OSCILLATION_S = 40;

/**
 * Time from an abrupt full roll command to a bank angle, rudder fixed, through the aileron's lag, rate and travel.
 *
 * Linear lateral model, RK4 at 240 Hz, the crossing interpolated; null when the angle is not reached in 20 s or the roll
 * goes the wrong way.
 *
 * @param system    Lateral system.
 * @param aileron   Lag, rate and travel; an infinite rate and zero lag mean at once.
 * @param angleRad  Bank angle; rad; > 0.
 * @returns         Seconds, or null.
 * @throws          Nothing.
 * @sign            Right aileron (δa > 0), bank to the right.
 * @source          MIL-F-8785C 3.3.4 (seen): time measured from the start of the control input.
 */
export function timeToBankS(system: LateralSystem, aileron: Actuator, angleRad: number): number | null {
  const { A, B } = system;
  const rk4 = createRk4(5);
  const x = new Float64Array(5);
  const instant = !(aileron.lagS > 0);
  if (instant) x[4] = aileron.maxRad;
  const rhs = (out: Float64Array, _t: number, s: Float64Array) => {
    for (let i = 0; i < 4; i++) {
      out[i] = A[i * 4] * s[0] + A[i * 4 + 1] * s[1] + A[i * 4 + 2] * s[2] + A[i * 4 + 3] * s[3] + B.aileron[i] * s[4];
    }
    out[4] = instant ? 0 : Math.min(aileron.rateRadS, (aileron.maxRad - s[4]) / aileron.lagS);
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
 * @param A        System matrix; 4×4 row-major; 1/s.
 * @param aileron  Input column; length 4; per rad.
 * @returns        Peak, minimum, second peak; rates in rad/s per rad of aileron.
 * @throws {NumericsError} non-finite-input, bad-dimension.
 * @sign           Right aileron, roll to the right.
 * @source         MIL-F-8785C 3.3.2.2 (seen) for what is looked for.
 */
export function rollRateExtrema(A: ArrayLike<number>, aileron: ArrayLike<number>): RollRateExtrema {
  requireFinite(A, 16, 'system matrix');
  requireFinite(aileron, 4, 'aileron column');
  const augmented = new Float64Array(25);
  for (let i = 0; i < 4; i++) {
    for (let j = 0; j < 4; j++) augmented[i * 5 + j] = A[i * 4 + j] * SAMPLE_S;
    augmented[i * 5 + 4] = aileron[i] * SAMPLE_S;
  }
  const step = matrixExponential(augmented, 5);
  const sign = aileron[1] < 0 ? -1 : 1;
  const found: { timeS: number; rate: number }[] = [];
  let x = new Float64Array(5);
  x[4] = 1;
  let p0 = 0;
  let p1 = 0;
  for (let k = 1; k * SAMPLE_S <= OSCILLATION_S && found.length < 3; k++) {
    const next = new Float64Array(5);
    for (let i = 0; i < 5; i++) for (let j = 0; j < 5; j++) next[i] += step[i * 5 + j] * x[j];
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

/** MIL-F-8785C 3.3.4 and table IX for one condition. */
export function timeToBankCriterion(
  system: LateralSystem,
  aileron: Actuator,
  klass: AircraftClass,
  category: FlightCategory,
  range: SpeedRange,
): CriterionResult {
  const { angleDeg, seconds } = timeToBankLimits(klass, category, range);
  const value = timeToBankS(system, aileron, angleDeg * DEG);
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
    ...(value === null ? { remark: `${angleDeg}° of bank are not reached within ${LONGEST_S} s` } : {}),
  };
}

/** MIL-F-8785C 3.3.2.2 for one condition. */
export function rollOscillationCriterion(system: LateralSystem, category: FlightCategory): CriterionResult {
  const limits = rollOscillationMinima(category);
  const { peak, minimum } = rollRateExtrema(system.A, system.B.aileron);
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
