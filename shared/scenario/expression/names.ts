/** The quantities an expression may read, each with its dimension, its meaning and its place among the signals. */
import * as X from '../../model/state-layout.ts';
import { ANGLE, ANGULAR_RATE, LENGTH, NUMBER, SPEED, TIME, WIDTH } from './units.ts';
import type { Dimension } from './units.ts';

/**
 * Places of the signals that are states of the plant (state-layout.ts): they are read where they stand. SI and radians.
 */
export const STATE_SIGNAL = {
  betaRad: X.X_BETA,
  pRadS: X.X_P,
  rRadS: X.X_R,
  phiRad: X.X_PHI,
  thetaRad: X.X_THETA,
  psiRad: X.X_PSI,
  tasMps: X.X_V,
  heightM: X.X_HEIGHT,
  aileronRad: X.X_AILERON,
  rudderRad: X.X_RUDDER,
} as const;

/** Places of the signals that are worked out, each tick, when somebody needs them. SI and radians. */
export const MADE_SIGNAL = {
  timeS: 0,
  pedal: 1,
  stick: 2,
  casMps: 3,
  /** Above the runway elevation (sea level without a runway). */
  heightAboveRunwayM: 4,
  /** In [0, 2π). */
  headingRad: 5,
  /** Unwrapped since the start. */
  turnedRad: 6,
  ballWidths: 7,
  vmcMps: 8,
  stallMps: 9,
} as const;
export const MADE_COUNT = 10;

export type StateSignal = keyof typeof STATE_SIGNAL;
export type MadeSignal = keyof typeof MADE_SIGNAL;
export type SignalName = StateSignal | MadeSignal;

export function isState(name: SignalName): name is StateSignal {
  return name in STATE_SIGNAL;
}

/** What an expression reads at one tick. Flat arrays: triggers run twenty at a time, 120 times a second. */
export interface ExpressionInputs {
  /** The plant's states. */
  readonly x: Float64Array;
  /** What is worked out from them. */
  readonly v: Float64Array;
  /** Seconds since the event fired; NaN when it has not. */
  sinceS(id: string): number;
}

export interface ExpressionName {
  readonly dimension: Dimension;
  readonly signal: SignalName;
  /** For the editor's list. */
  readonly meaning: string;
}

/** Names of an expression. */
export const EXPRESSION_NAMES: Readonly<Record<string, ExpressionName>> = {
  t: { dimension: TIME, signal: 'timeS', meaning: 'run time' },
  ias: { dimension: SPEED, signal: 'casMps', meaning: 'indicated airspeed' },
  tas: { dimension: SPEED, signal: 'tasMps', meaning: 'true airspeed' },
  height: {
    dimension: LENGTH,
    signal: 'heightAboveRunwayM',
    meaning: 'height above the runway, or above sea level without one',
  },
  heading: { dimension: ANGLE, signal: 'headingRad', meaning: 'heading, 0 to 360 deg' },
  turned: {
    dimension: ANGLE,
    signal: 'turnedRad',
    meaning: 'heading change since the start, right positive, not wrapped',
  },
  bank: { dimension: ANGLE, signal: 'phiRad', meaning: 'bank, right positive' },
  sideslip: { dimension: ANGLE, signal: 'betaRad', meaning: 'sideslip, wind from the right positive' },
  yaw_rate: { dimension: ANGULAR_RATE, signal: 'rRadS', meaning: 'yaw rate, right positive' },
  roll_rate: { dimension: ANGULAR_RATE, signal: 'pRadS', meaning: 'roll rate, right positive' },
  pedal: { dimension: NUMBER, signal: 'pedal', meaning: 'pedal, right positive, 1 = full' },
  stick: { dimension: NUMBER, signal: 'stick', meaning: 'stick, right positive, 1 = full' },
  rudder: { dimension: ANGLE, signal: 'rudderRad', meaning: 'rudder deflection, trailing edge left positive' },
  aileron: { dimension: ANGLE, signal: 'aileronRad', meaning: 'aileron deflection, rolling right positive' },
  ball: { dimension: WIDTH, signal: 'ballWidths', meaning: 'slip ball, right positive' },
  vmc: {
    dimension: SPEED,
    signal: 'vmcMps',
    meaning: 'computed minimum control speed (critical engine, bank up to 5 deg, full lever) at the start',
  },
  stall: { dimension: SPEED, signal: 'stallMps', meaning: 'computed 1 g stall speed at the start' },
};

/** Functions an expression may call, beside since(id). */
export const EXPRESSION_FUNCTIONS: readonly string[] = ['abs', 'min', 'max', 'sqrt'];
