import { packedDoubles } from '../numerics/packed-doubles.ts';
import type { AirFlow } from './air.ts';
import { largeAngleRates } from './large-angle-rates.ts';
import type { FlatRows, Work } from './large-angle-work.ts';
import type { Motion } from './plant-core.ts';
import { TICK_S } from './plant-types.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';

/** Short steps in a tick during which CL meets a limit or a row, or the assistant lets go. */
const CAREFUL_STEPS = 8;
const TICK = TICK_S;
const HALF_TICK = 0.5 * TICK_S;
const SIXTH_TICK = TICK_S / 6;
const SHORT = TICK_S / CAREFUL_STEPS;
const HALF_SHORT = 0.5 * SHORT;
const SIXTH_SHORT = SHORT / 6;
// Imported constants are looked up at every use; these are not.
const { X_AILERON, X_RUDDER } = X;
const { H_AILERON_FULL, H_AILERON_HALF, H_RUDDER_FULL, H_RUDDER_HALF, M_REGIME } = T;

/**
 * Equations of the coupled rigid-body motion with quasi-steady pitch, and their fixed step.
 *
 * State of state-layout.ts; time counts from the start of the tick. Derivatives are read at the lift coefficient of the
 * same evaluation; gusts shift β, p, r in derivatives, drag and fin angle only; a changing wind acts as −dW/dt. Valid
 * while V cosβ > 0 and |θ| < 90°. The step takes the surfaces from their exact solution, and a tick in which a corner of
 * the equations lies is flown in eight.
 *
 * @param h     Held numbers of the tick (tick-held.ts).
 * @param e     Held numbers of the engines, ENGINE_STRIDE each.
 * @param n     Number of engines.
 * @param rows  Derivative rows of all configurations.
 * @param air   Wind and gusts in time and distance.
 * @param made  Quantities of the latest evaluation.
 * @returns     The right-hand side, and one RK4 step over a tick; SI, rad.
 * @throws      Nothing; a state that cannot be flown gives non-finite derivatives.
 * @sign        As this folder's README.
 * @source      Flight model, sections 3 to 8; B. Etkin, L. Reid, Dynamics of Flight, 3rd ed., ch. 4.
 */
export function createLargeAngle(
  h: number[],
  e: number[],
  n: number,
  rows: FlatRows,
  air: AirFlow,
  made: number[],
): Motion {
  const states = X.stateLength(n);
  const w: Work = {
    h,
    e,
    n,
    rowCL: rows.CL,
    values: rows.values,
    slopes: rows.slopes,
    air,
    made,
    clock: packedDoubles(1),
    angles: packedDoubles(12),
    wind: new Float64Array(4),
    gust: new Float64Array(3),
    x: packedDoubles(states),
    k: packedDoubles(states),
    k2: packedDoubles(states),
    k3: packedDoubles(states),
    mid: packedDoubles(states),
    even: packedDoubles(states),
    odd: packedDoubles(states),
  };
  return {
    rhs(out, tau, x) {
      w.clock[0] = tau;
      copy(w.x, x);
      largeAngleRates(w, w.k, w.x);
      copy(out, w.k);
    },
    stepInto(out, x) {
      copy(w.x, x);
      if (!step(w)) stepCarefully(w);
      copy(out, w.mid);
      out[X_AILERON] = h[H_AILERON_FULL];
      out[X_RUDDER] = h[H_RUDDER_FULL];
    },
  };
}

/** One tick from `w.x` into `w.mid`: classical Runge–Kutta with exact surfaces. False when a corner lies in it. */
function step(w: Work): boolean {
  const { h, made, x, k, k2, k3, mid } = w;
  w.clock[0] = 0;
  largeAngleRates(w, k, x);
  const regime = made[M_REGIME];
  towards(mid, x, HALF_TICK, k);
  mid[X_AILERON] = h[H_AILERON_HALF];
  mid[X_RUDDER] = h[H_RUDDER_HALF];
  w.clock[0] = HALF_TICK;
  largeAngleRates(w, k2, mid);
  towards(mid, x, HALF_TICK, k2);
  mid[X_AILERON] = h[H_AILERON_HALF];
  mid[X_RUDDER] = h[H_RUDDER_HALF];
  largeAngleRates(w, k3, mid);
  towards(mid, x, TICK, k3);
  mid[X_AILERON] = h[H_AILERON_FULL];
  mid[X_RUDDER] = h[H_RUDDER_FULL];
  w.clock[0] = TICK;
  addTwice(k, k2, k3);
  largeAngleRates(w, k2, mid);
  if (made[M_REGIME] !== regime) return false;
  last(mid, x, SIXTH_TICK, k, k2);
  return true;
}

/** A tick with a corner of the equations in it, from `w.x` into `w.mid`, in short steps. */
function stepCarefully(w: Work): void {
  const { k, k2, k3, mid } = w;
  let from = w.x;
  for (let i = 0; i < CAREFUL_STEPS; i++) {
    const to = i % 2 === 0 ? w.even : w.odd;
    w.clock[0] = i * SHORT;
    largeAngleRates(w, k, from);
    towards(mid, from, HALF_SHORT, k);
    w.clock[0] = (i + 0.5) * SHORT;
    largeAngleRates(w, k2, mid);
    towards(mid, from, HALF_SHORT, k2);
    largeAngleRates(w, k3, mid);
    towards(mid, from, SHORT, k3);
    w.clock[0] = (i + 1) * SHORT;
    addTwice(k, k2, k3);
    largeAngleRates(w, k2, mid);
    last(to, from, SIXTH_SHORT, k, k2);
    from = to;
  }
  copy(mid, from);
}

function copy(to: Float64Array | number[], from: Float64Array | number[]): void {
  for (let i = 0; i < from.length; i++) to[i] = from[i];
}

function towards(to: number[], x: number[], reach: number, k: number[]): void {
  for (let i = 0; i < to.length; i++) to[i] = x[i] + reach * k[i];
}

function addTwice(k: number[], k2: number[], k3: number[]): void {
  for (let i = 0; i < k.length; i++) k[i] += 2 * (k2[i] + k3[i]);
}

function last(to: number[], x: number[], sixth: number, k: number[], k4: number[]): void {
  for (let i = 0; i < to.length; i++) to[i] = x[i] + sixth * (k[i] + k4[i]);
}
