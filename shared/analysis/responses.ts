import { NumericsError } from '../numerics/errors.ts';
import { integrateAdaptive } from '../numerics/odex-adapter.ts';
import type { DamperLaw, LateralInput, LateralSystem } from './lateral-system.ts';
import { inputColumn, withYawDamper } from './lateral-system.ts';
import { requireSignal, signalAt, signalEdges } from './input-shapes.ts';
import type { InputSignal } from './input-shapes.ts';

/** How a control surface follows its command; none means at once. */
export interface Actuator {
  lagS: number;
  rateRadS: number;
  maxRad: number;
}

export interface ResponseRequest {
  input: LateralInput;
  signal: InputSignal;
  endS: number;
  /** Number of equally spaced times, both ends included. */
  points: number;
  /** State at time 0, [β, p, r, φ]; default at rest. */
  initial?: ArrayLike<number>;
  actuator?: Actuator;
  damper?: DamperLaw;
  /** Error per step; default 1e-9. */
  tolerance?: number;
}

export interface TimeResponse {
  timeS: Float64Array;
  betaRad: Float64Array;
  pRadS: Float64Array;
  rRadS: Float64Array;
  phiRad: Float64Array;
  psiRad: Float64Array;
  /** What reaches the aeroplane: the surface after its actuator, or the gust. */
  input: Float64Array;
  steps: number;
  rejected: number;
}

const LARGEST_POINTS = 100_000;

/**
 * Time response of the linear lateral model to one input.
 *
 * Integrated adaptively with restarts where the signal jumps; small disturbances about straight flight.
 *
 * @param system   Lateral system.
 * @param request  Input, signal, span, actuator, yaw damper.
 * @returns        Series of the states and of the input at equally spaced times; heading is ∫r.
 * @throws {NumericsError} bad-argument, tolerance-not-held, non-finite-derivative.
 * @sign           Controls in surface signs: δa > 0 rolls right, δr > 0 is trailing edge left.
 * @source         Etkin & Reid, Dynamics of Flight, 3rd ed. 1996, sections 7.5–7.7.
 */
export function timeResponse(system: LateralSystem, request: ResponseRequest): TimeResponse {
  const { signal, actuator, damper, endS, points } = request;
  requireSignal(signal);
  if (!(endS > 0) || !Number.isFinite(endS) || !(points >= 2) || points > LARGEST_POINTS) {
    throw new NumericsError('bad-argument', `${points} points over ${endS} s are no response`);
  }
  const n = damper ? 5 : 4;
  const a = damper ? withYawDamper(system.A, system.B.rudder, damper) : system.A;
  const column = inputColumn(system, request.input);
  const surface = n + 1;
  const states = n + 1 + (actuator ? 1 : 0);
  const x0 = new Float64Array(states);
  if (request.initial) for (let i = 0; i < 4; i++) x0[i] = request.initial[i];

  const rhs = (out: Float64Array, t: number, x: Float64Array) => {
    const command = signalAt(signal, t);
    let u = command;
    if (actuator) {
      u = x[surface];
      out[surface] = actuatorRate(actuator, command, u);
    }
    for (let i = 0; i < n; i++) {
      let sum = i < 4 ? column[i] * u : 0;
      for (let j = 0; j < n; j++) sum += a[i * n + j] * x[j];
      out[i] = sum;
    }
    out[n] = x[2];
  };
  const sampleTimes = Float64Array.from({ length: points }, (_, i) => (endS * i) / (points - 1));
  const result = integrateAdaptive(rhs, x0, 0, endS, {
    tolerance: request.tolerance ?? 1e-9,
    discontinuities: signalEdges(signal),
    sampleTimes,
  });
  const samples = result.points ?? [];
  const series = (state: number) => Float64Array.from(samples, ({ x }) => x[state]);
  return {
    timeS: sampleTimes,
    betaRad: series(0),
    pRadS: series(1),
    rRadS: series(2),
    phiRad: series(3),
    psiRad: series(n),
    input: actuator ? series(surface) : sampleTimes.map((t) => signalAt(signal, t)),
    steps: result.steps,
    rejected: result.rejected,
  };
}

/** Rate of a surface that follows its command through lag, travel and rate limit; rad/s. */
function actuatorRate(actuator: Actuator, command: number, surface: number): number {
  const wanted = Math.min(Math.max(command, -actuator.maxRad), actuator.maxRad);
  const rate = (wanted - surface) / actuator.lagS;
  return Math.min(Math.max(rate, -actuator.rateRadS), actuator.rateRadS);
}
