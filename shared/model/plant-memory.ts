/**
 * Places of everything a plant remembers from tick to tick beside the integrated state (`Core.d`), one flat
 * array of numbers, so that a snapshot is two copies. Times are run times in s, angles rad, surfaces with model signs.
 */
export const D_TICK = 0;
// pitch assistant
export const D_PITCH_MODE = 1;
export const D_PATH = 2;
export const D_SPEED_TARGET = 3;
export const D_SPEED_FALL = 4;
export const D_SPEED_FLOOR = 5;
export const D_SPEED_INTEGRAL = 6;
// rudder trim: base ramps from … to …; the pilot's own trim is added
export const D_TRIM_FROM = 7;
export const D_TRIM_TO = 8;
export const D_TRIM_T0 = 9;
export const D_TRIM_T1 = 10;
// control faults
export const D_RUDDER_FAULT = 11; // 0 none, 1 jam, 2 hardover
export const D_RUDDER_AT = 12;
export const D_AILERON_FAULT = 13;
export const D_AILERON_AT = 14;
export const D_AILERON_EFFECT = 15;
export const D_DAMPER_ON = 16;
export const D_RATIO_STATE = 17; // 0 normal, 1 stuck, 2 switched off
export const D_RATIO_AT = 18;
// configuration: index left, index in force, start of the change (−∞ when none is under way), index waiting or −1
export const D_CONFIG_OLD = 19;
export const D_CONFIG = 20;
export const D_CONFIG_T0 = 21;
export const D_CONFIG_NEXT = 22;
// mean wind: from … to … (velocity of the air, north and east)
export const D_WIND_FROM_N = 23;
export const D_WIND_FROM_E = 24;
export const D_WIND_TO_N = 25;
export const D_WIND_TO_E = 26;
export const D_WIND_T0 = 27;
export const D_WIND_T1 = 28;
// turbulence: intensity ramps, filter states of unit variance, random stream
export const D_TURB_FROM_W20 = 29;
export const D_TURB_FROM_HIGH = 30;
export const D_TURB_TO_W20 = 31;
export const D_TURB_TO_HIGH = 32;
export const D_TURB_T0 = 33;
export const D_TURB_T1 = 34;
export const D_TURB_X1 = 35;
export const D_TURB_X2 = 36;
export const D_TURB_X3 = 37;
export const D_TURB_XP = 38;
export const D_STREAM = 39; // four numbers
// discrete gusts: what has reached its final value, then a list
export const D_GUST_V = 43;
export const D_GUST_P = 44;
export const D_GUST_R = 45;
export const D_GUST_COUNT = 46;
export const D_GUSTS = 47;
export const G_AXIS = 0; // 0 lateral, 1 roll rate, 2 yaw rate
export const G_SHAPE = 1; // 1 ramp, 2 one-minus-cosine
export const G_PEAK = 2;
export const G_LENGTH = 3; // s or m
export const G_BY_DISTANCE = 4;
export const G_START = 5; // s or m
export const GUST_STRIDE = 6;
/** Gusts that may be growing or passing at the same time. */
export const MAX_GUSTS = 24;
// engines
export const D_ENGINES = D_GUSTS + MAX_GUSTS * GUST_STRIDE;
export const K_FAILURE = 0; // 0 none, 1 failed, 3 partial
export const K_SHARE = 1; // thrust left by a partial failure
export const K_FEATHER = 2; // commanded
export const K_FEATHER_AT = 3; // position of the feathering, 0 … 1
export const K_SWITCH = 4; // pilot's switch at the last tick
export const K_LEVER_HELD = 5; // 1 while an event overrides the pilot's lever
export const K_LEVER_FROM = 6;
export const K_LEVER_TO = 7;
export const K_LEVER_T0 = 8;
export const K_LEVER_T1 = 9;
export const K_LEVER_PILOT = 10; // pilot's lever at the last tick
export const ENGINE_MEMORY = 11;

/**
 * Length of a plant's memory.
 *
 * @param engineCount  Number of engines.
 * @returns  Numbers in `Core.d`.
 * @throws  Nothing.
 * @sign  none
 * @source  This file.
 */
export function memoryLength(engineCount: number): number {
  return D_ENGINES + engineCount * ENGINE_MEMORY;
}

/** The part of the memory that changes by itself from tick to tick; hashed with the state. */
export const HASHED: readonly number[] = [
  D_TICK,
  D_PATH,
  D_SPEED_TARGET,
  D_SPEED_INTEGRAL,
  D_TURB_X1,
  D_TURB_X2,
  D_TURB_X3,
  D_TURB_XP,
];

/**
 * Value of a linear ramp at a time, held before its start and after its end.
 *
 * @param from  Value up to t0; any unit.
 * @param to  Value from t1 on; same unit.
 * @param t0  Start; s.
 * @param t1  End; s.
 * @param t  Time; s.
 * @returns  Value; same unit.
 * @throws  Nothing.
 * @sign  none
 * @source  Definition.
 */
export function rampAt(from: number, to: number, t0: number, t1: number, t: number): number {
  if (t >= t1) return to;
  if (t <= t0) return from;
  return from + (to - from) * ((t - t0) / (t1 - t0));
}

/**
 * A value held within a limit to either side; NaN passes.
 *
 * @param limit  Largest magnitude; ≥ 0; any unit.
 * @param value  The value; same unit.
 * @returns      The value or the limit with its sign.
 * @throws       Nothing.
 * @sign         as the value
 * @source       Definition.
 */
export function heldWithin(limit: number, value: number): number {
  return value > limit ? limit : value < -limit ? -limit : value;
}
