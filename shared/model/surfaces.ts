import { exp } from '../numerics/elementary.ts';
import { TICK_S } from './plant-types.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';

/**
 * Angle of a surface some time after its command was set and held; rad.
 *
 * Exact solution of δ' = clamp((command − δ)/lag, ±rate): at its rate until the lag would ask for less, then
 * exponentially.
 *
 * @param fromRad     Angle at the start; rad.
 * @param commandRad  Held command; rad.
 * @param rateRadS    Largest rate; rad/s; above 0.
 * @param lagS        Time constant; s; above 0.
 * @param afterS      Time; s; ≥ 0.
 * @returns           Angle; rad.
 * @throws            Nothing.
 * @sign              as the surface
 * @source            Flight model, controls; solved here.
 */
export function surfaceAfter(
  fromRad: number,
  commandRad: number,
  rateRadS: number,
  lagS: number,
  afterS: number,
): number {
  const error = commandRad - fromRad;
  const band = rateRadS * lagS;
  const size = Math.abs(error);
  if (size <= band) return commandRad - error * exp(-afterS / lagS);
  const limited = (size - band) / rateRadS;
  const towards = error < 0 ? -1 : 1;
  if (afterS <= limited) return fromRad + towards * rateRadS * afterS;
  return commandRad - (error / size) * band * exp(-(afterS - limited) / lagS);
}

/**
 * Holds both surfaces at half and at the end of the tick, from their state and the held commands.
 *
 * A fixed step across the corner where a rate limit lets go would cost three digits; the surfaces are known exactly.
 *
 * @param h  Held numbers of the tick; commands, rates and lags are read.
 * @param x  State at the start of the tick.
 * @returns  Nothing.
 * @throws   Nothing.
 * @sign     as the surfaces
 * @source   `surfaceAfter`.
 */
export function holdSurfaces(h: number[], x: Float64Array): void {
  hold(h, x, X.X_AILERON, T.H_AILERON_CMD, T.H_AILERON_RATE, T.H_INV_LAG, T.H_AILERON_HALF, T.H_AILERON_FULL);
  hold(h, x, X.X_RUDDER, T.H_RUDDER_CMD, T.H_RUDDER_RATE, T.H_INV_LAG_RUDDER, T.H_RUDDER_HALF, T.H_RUDDER_FULL);
}

function hold(
  h: number[],
  x: Float64Array,
  state: number,
  command: number,
  rate: number,
  inverseLag: number,
  half: number,
  full: number,
): void {
  const error = h[command] - x[state];
  const size = error < 0 ? -error : error;
  if (size * h[inverseLag] <= h[rate] && h[inverseLag] === h[T.H_INV_LAG]) {
    h[half] = h[command] - error * h[T.H_DECAY_HALF];
    h[full] = h[command] - error * h[T.H_DECAY_FULL];
    return;
  }
  const lag = 1 / h[inverseLag];
  h[half] = surfaceAfter(x[state], h[command], h[rate], lag, 0.5 * TICK_S);
  h[full] = surfaceAfter(x[state], h[command], h[rate], lag, TICK_S);
}
