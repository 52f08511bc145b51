import { casInAir } from './airspeeds.ts';
import { GAS_CONSTANT, HEAT_RATIO, temperatureK } from './atmosphere.ts';
import * as P from './pitch-assistant.ts';
import type { Core } from './plant-core.ts';
import * as D from './plant-memory.ts';
import { TICK_S } from './plant-types.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';

/** Codes of the pitch modes in the memory. */
export const PITCH_CODES = {
  'hold-lift': 0,
  'hold-path': 1,
  'hold-speed': 2,
  decelerate: 3,
  glidepath: 4,
  manual: 5,
} as const;

/**
 * Holds the path wanted over the present tick, and the rate at which it moves within it.
 *
 * @param core  The plant's shared parts with the atmosphere of the tick held; `h` is written.
 * @returns     Nothing.
 * @throws      Nothing.
 * @sign        climb positive
 * @source      Flight model, pitch assistant.
 */
export function holdPitch({ h, d, x, inputs, setup }: Core): void {
  const mode = d[D.D_PITCH_MODE];
  h[T.H_PITCH] = mode === PITCH_CODES['hold-lift'] ? 0 : 1;
  h[T.H_INTEGRAL_NEXT] = d[D.D_SPEED_INTEGRAL];
  let path = d[D.D_PATH];
  let rate = 0;
  if (mode === PITCH_CODES['hold-speed'] || mode === PITCH_CODES.decelerate) {
    const temperature = temperatureK(x[X.X_HEIGHT]);
    const pressure = h[T.H_DENSITY] * GAS_CONSTANT * temperature;
    const sound = Math.sqrt(HEAT_RATIO * GAS_CONSTANT * temperature);
    const excess = casInAir(x[X.X_V], pressure, sound) - d[D.D_SPEED_TARGET];
    const integral = d[D.D_SPEED_INTEGRAL];
    const wanted = P.speedHoldPathRad(excess, integral);
    if (!P.speedHoldClamped(excess, integral)) h[T.H_INTEGRAL_NEXT] = integral + excess * TICK_S;
    rate = D.heldWithin(P.SPEED_PATH_RATE_RADS, (wanted - path) / TICK_S);
  } else if (mode === PITCH_CODES.glidepath && setup.runway) {
    const { runway } = setup;
    path = P.glidepathPathRad(
      runway.glidepathRad,
      runway.thresholdM - P.alongRunwayM(x[X.X_NORTH], x[X.X_EAST], runway.headingRad),
      x[X.X_HEIGHT] - runway.elevationM,
      runway.gearHeightM,
    );
  } else if (mode === PITCH_CODES.manual) {
    const next = path + P.MANUAL_RATE_RADS * D.heldWithin(1, inputs.pitch) * TICK_S;
    const top = Math.max(P.MANUAL_LIMIT_RAD, path);
    const bottom = Math.min(-P.MANUAL_LIMIT_RAD, path);
    rate = ((next > top ? top : next < bottom ? bottom : next) - path) / TICK_S;
  }
  h[T.H_PATH] = path;
  h[T.H_PATH_RATE] = rate;
}
