/** Places of the integrated state in `Plant.x`; SI and radians. Engine thrusts follow from X_THRUST. */
export const X_BETA = 0;
export const X_P = 1;
export const X_R = 2;
export const X_PHI = 3;
export const X_THETA = 4;
export const X_PSI = 5;
export const X_V = 6;
export const X_NORTH = 7;
export const X_EAST = 8;
export const X_HEIGHT = 9;
export const X_AILERON = 10;
export const X_RUDDER = 11;
/** Low-passed yaw rate of the yaw damper's washout; rad/s. */
export const X_WASHOUT = 12;
/** Distance flown through the air, ∫V dt; m. */
export const X_DISTANCE = 13;
export const X_THRUST = 14;

const NAMES = [
  'sideslip',
  'roll rate',
  'yaw rate',
  'bank',
  'path pitch',
  'heading',
  'true airspeed',
  'north position',
  'east position',
  'height',
  'aileron',
  'rudder',
  'yaw damper washout',
  'air distance',
];

/**
 * Number of integrated states.
 *
 * @param engineCount  Number of engines.
 * @returns  Length of `Plant.x`.
 * @throws  Nothing.
 * @sign  none
 * @source  This file.
 */
export function stateLength(engineCount: number): number {
  return X_THRUST + engineCount;
}

/**
 * Name for people of the state at an index.
 *
 * @param index  Place in `Plant.x`.
 * @returns  A few words.
 * @throws  Nothing.
 * @sign  none
 * @source  This file.
 */
export function stateName(index: number): string {
  return NAMES[index] ?? `thrust of engine ${index - X_THRUST + 1}`;
}
