/** The quantities an expression may read, each with its dimension, its meaning and where it comes from. */
import { ANGLE, ANGULAR_RATE, LENGTH, NUMBER, SPEED, TIME, WIDTH } from './units.ts';
import type { Dimension } from './units.ts';

/** What an expression reads at one tick; SI and radians, angles of the cockpit's horizon right positive. */
export interface ExpressionInputs {
  readonly timeS: number;
  readonly casMps: number;
  readonly tasMps: number;
  /** Above the runway elevation (sea level without a runway); m. */
  readonly heightAboveRunwayM: number;
  /** In [0, 2π); rad. */
  readonly headingRad: number;
  /** Unwrapped since the start, right positive; rad. */
  readonly turnedRad: number;
  readonly phiRad: number;
  readonly betaRad: number;
  readonly rRadS: number;
  readonly pRadS: number;
  readonly pedal: number;
  readonly stick: number;
  readonly rudderRad: number;
  readonly aileronRad: number;
  readonly ballWidths: number;
  readonly vmcMps: number;
  readonly stallMps: number;
  /** Seconds since the event fired; NaN when it has not (ticks before the present one count). */
  sinceS(id: string): number;
}

type NumericInput = Exclude<keyof ExpressionInputs, 'sinceS'>;

export interface ExpressionName {
  readonly dimension: Dimension;
  readonly input: NumericInput;
  /** For the editor's list. */
  readonly meaning: string;
  readonly read: (x: ExpressionInputs) => number;
}

/** Names of an expression. The readers are written out so that each is a monomorphic property access. */
export const EXPRESSION_NAMES: Readonly<Record<string, ExpressionName>> = {
  t: { dimension: TIME, input: 'timeS', meaning: 'run time', read: (x) => x.timeS },
  ias: { dimension: SPEED, input: 'casMps', meaning: 'indicated airspeed', read: (x) => x.casMps },
  tas: { dimension: SPEED, input: 'tasMps', meaning: 'true airspeed', read: (x) => x.tasMps },
  height: {
    dimension: LENGTH,
    input: 'heightAboveRunwayM',
    meaning: 'height above the runway, or above sea level without one',
    read: (x) => x.heightAboveRunwayM,
  },
  heading: { dimension: ANGLE, input: 'headingRad', meaning: 'heading, 0 to 360 deg', read: (x) => x.headingRad },
  turned: {
    dimension: ANGLE,
    input: 'turnedRad',
    meaning: 'heading change since the start, right positive, not wrapped',
    read: (x) => x.turnedRad,
  },
  bank: { dimension: ANGLE, input: 'phiRad', meaning: 'bank, right positive', read: (x) => x.phiRad },
  sideslip: {
    dimension: ANGLE,
    input: 'betaRad',
    meaning: 'sideslip, wind from the right positive',
    read: (x) => x.betaRad,
  },
  yaw_rate: { dimension: ANGULAR_RATE, input: 'rRadS', meaning: 'yaw rate, right positive', read: (x) => x.rRadS },
  roll_rate: { dimension: ANGULAR_RATE, input: 'pRadS', meaning: 'roll rate, right positive', read: (x) => x.pRadS },
  pedal: { dimension: NUMBER, input: 'pedal', meaning: 'pedal, right positive, 1 = full', read: (x) => x.pedal },
  stick: { dimension: NUMBER, input: 'stick', meaning: 'stick, right positive, 1 = full', read: (x) => x.stick },
  rudder: {
    dimension: ANGLE,
    input: 'rudderRad',
    meaning: 'rudder deflection, trailing edge left positive',
    read: (x) => x.rudderRad,
  },
  aileron: {
    dimension: ANGLE,
    input: 'aileronRad',
    meaning: 'aileron deflection, rolling right positive',
    read: (x) => x.aileronRad,
  },
  ball: { dimension: WIDTH, input: 'ballWidths', meaning: 'slip ball, right positive', read: (x) => x.ballWidths },
  vmc: {
    dimension: SPEED,
    input: 'vmcMps',
    meaning: 'computed minimum control speed (critical engine, bank up to 5 deg, full lever) at the start',
    read: (x) => x.vmcMps,
  },
  stall: { dimension: SPEED, input: 'stallMps', meaning: 'computed 1 g stall speed at the start', read: (x) => x.stallMps },
};

/** Functions an expression may call, beside since(id). */
export const EXPRESSION_FUNCTIONS: readonly string[] = ['abs', 'min', 'max', 'sqrt'];
