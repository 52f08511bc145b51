import { retireGusts } from './air.ts';
import type { Core } from './plant-core.ts';
import * as D from './plant-memory.ts';
import { TICK_S } from './plant-types.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';
import { advanceTurbulence } from './turbulence.ts';

/** Time a change of configuration takes; s. */
export const CONFIGURATION_CHANGE_S = 4;

/**
 * Whether turbulence acts at a run time.
 *
 * @param d  Memory of the plant.
 * @param t  Run time; s.
 * @returns  True while its intensity is not zero.
 * @throws   Nothing.
 * @sign     none
 * @source   Flight model, air.
 */
export function turbulent(d: number[], t: number): boolean {
  if (d[D.D_TURB_TO_W20] !== 0 || d[D.D_TURB_TO_HIGH] !== 0) return true;
  return t < d[D.D_TURB_T1] && (d[D.D_TURB_FROM_W20] !== 0 || d[D.D_TURB_FROM_HIGH] !== 0);
}

/**
 * Writes what the tick just flown leaves in the memory: path, feathering, turbulence filters, gusts, the tick count.
 *
 * @param core  The plant's shared parts, with the state already advanced.
 * @returns     Nothing.
 * @throws      Nothing.
 * @sign        none
 * @source      Flight model, sections 4, 7 and 8.
 */
export function commitTick(core: Core): void {
  const { h, d, e, x, engineCount, turbulence, stream, configurations } = core;
  const t = h[T.H_TIME];
  if (!core.linear) {
    d[D.D_PATH] = h[T.H_PATH] + h[T.H_PATH_RATE] * TICK_S;
    d[D.D_SPEED_INTEGRAL] = h[T.H_INTEGRAL_NEXT];
  }
  if (d[D.D_SPEED_FALL] !== 0) {
    d[D.D_SPEED_TARGET] = Math.max(d[D.D_SPEED_FLOOR], d[D.D_SPEED_TARGET] - d[D.D_SPEED_FALL] * TICK_S);
  }
  for (let i = 0, k = D.D_ENGINES; i < engineCount; i++, k += D.ENGINE_MEMORY) {
    d[k + D.K_FEATHER_AT] = e[i * T.ENGINE_STRIDE + T.E_FEATHER_NEXT];
  }
  if (turbulent(d, t)) {
    const speed = Math.max(x[X.X_V], 1);
    advanceTurbulence(d, D.D_TURB_X1, stream, speed, turbulence.lateralLengthM, configurations[0].spanM, TICK_S);
  }
  const tick = d[D.D_TICK] + 1;
  d[D.D_TICK] = tick;
  if (d[D.D_GUST_COUNT] !== 0) retireGusts(d, tick * TICK_S, x[X.X_DISTANCE]);
  if (d[D.D_CONFIG_NEXT] >= 0 && tick * TICK_S - d[D.D_CONFIG_T0] >= CONFIGURATION_CHANGE_S) {
    startConfiguration(d, d[D.D_CONFIG_NEXT]);
  }
}

/**
 * Begins the change to a configuration now; the one in force is blended out over `CONFIGURATION_CHANGE_S`.
 *
 * @param d      Memory of the plant.
 * @param index  Index of the new configuration.
 * @returns      Nothing.
 * @throws       Nothing.
 * @sign         none
 * @source       Scenario contract, event "configuration".
 */
export function startConfiguration(d: number[], index: number): void {
  d[D.D_CONFIG_OLD] = d[D.D_CONFIG];
  d[D.D_CONFIG] = index;
  d[D.D_CONFIG_T0] = d[D.D_TICK] * TICK_S;
  d[D.D_CONFIG_NEXT] = -1;
}
