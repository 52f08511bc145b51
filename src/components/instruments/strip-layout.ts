/** Geometry of the balance strip, large and small: numbers only, so that it can be tested. */
import { DEG } from '#shared/units/constants.ts';
import type { BalanceNow, BalanceWanted } from './balance-verdict.ts';

/** Half-width of each scale in its own unit. */
export const NOSE_HALF_RAD = 10 * DEG;
export const BALL_HALF_WIDTHS = 2.2;
export const PEDAL_HALF = 0.7;
/** The wings are drawn at this share of their true slope. */
export const WING_SLOPE = 0.42;

export interface StripFrame {
  /** Inner box without the end plates. */
  left: number;
  right: number;
  centre: number;
  /** Pixels from the balanced line to the end of a scale. */
  half: number;
  wingHalf: number;
  wingClamp: number;
}

export const LARGE_HEIGHT = 216;
export const LARGE_ROWS = { nose: 48, ball: 95, pedal: 142, wings: 188, top: 18, bottom: 212, plate: 14 } as const;
export const SMALL_HEIGHT = 40;
export const SMALL_ROWS = { nose: 8, ball: 20, pedal: 31, wings: 36.2, plate: 8 } as const;

/** The large strip: labels left of the box and readouts right of it, both dropped when there is no room. */
export function largeFrame(width: number): StripFrame & { labels: boolean; readouts: boolean; readoutX: number } {
  const labels = width >= 560;
  const readouts = width >= 420;
  const left = labels ? 118 : 22;
  const right = width - (readouts ? 214 : 22);
  const half = (right - left) / 2 - 26;
  return {
    left,
    right,
    centre: (left + right) / 2,
    half,
    wingHalf: half,
    wingClamp: 14,
    labels,
    readouts,
    readoutX: right + 30,
  };
}

export function smallFrame(width: number): StripFrame {
  return {
    left: 9,
    right: width - 9,
    centre: width / 2,
    half: width / 2 - 22,
    wingHalf: width / 2 - 14,
    wingClamp: 2.8,
  };
}

/** −1, 0, +1: past the left end, within, past the right end of its scale. */
export type Clamp = -1 | 0 | 1;

export interface StripPositions {
  noseX: number;
  noseClamp: Clamp;
  ballX: number;
  ballClamp: Clamp;
  pedalX: number;
  pedalClamp: Clamp;
  rudderX: number;
  /** Ends of the travel that the pedals command now, x. */
  travelLeftX: number;
  travelRightX: number;
  /** Where the zero of each scale lies. */
  noseZeroX: number;
  ballZeroX: number;
  pedalZeroX: number;
  /** Drop of the left wing tip (rise of the right), px. */
  wingDrop: number;
  wantedWingDrop: number;
}

const clampOf = (value: number, half: number): Clamp => (value > half ? 1 : value < -half ? -1 : 0);

/** Where everything lies for one sample; each scale is slid so that what is wanted is on the balanced line. */
export function placeStrip(frame: StripFrame, now: BalanceNow, wanted: BalanceWanted): StripPositions {
  const { centre, half } = frame;
  const bound = (value: number, limit: number): number => Math.max(-limit, Math.min(limit, value));
  // The nose is to the left of the flight path when the wind comes from the right (β > 0).
  const nose = ((wanted.betaRad - now.betaRad) / NOSE_HALF_RAD) * half;
  const ball = ((now.ballWidths - wanted.ballWidths) / BALL_HALF_WIDTHS) * half;
  const pedalAt = (value: number): number => ((value - wanted.pedal) / PEDAL_HALF) * half;
  const pedal = pedalAt(now.pedal);
  // Cockpit sign: right rudder is trailing edge right, δr < 0.
  const rudder = pedalAt(now.rudderMaxRad > 0 ? -now.rudderRad / now.rudderMaxRad : 0);
  const travel = now.rudderMaxRad > 0 ? now.rudderAvailableRad / now.rudderMaxRad : 1;
  const drop = (phi: number): number =>
    bound(-WING_SLOPE * frame.wingHalf * Math.tan(bound(phi, 80 * DEG)), frame.wingClamp);
  return {
    noseX: centre + bound(nose, half),
    noseClamp: clampOf(nose, half),
    ballX: centre + bound(ball, half),
    ballClamp: clampOf(ball, half),
    pedalX: centre + bound(pedal, half),
    pedalClamp: clampOf(pedal, half),
    rudderX: centre + bound(rudder, half + 8),
    travelLeftX: centre + pedalAt(-travel),
    travelRightX: centre + pedalAt(travel),
    noseZeroX: centre + (wanted.betaRad / NOSE_HALF_RAD) * half,
    ballZeroX: centre - (wanted.ballWidths / BALL_HALF_WIDTHS) * half,
    pedalZeroX: centre - (wanted.pedal / PEDAL_HALF) * half,
    wingDrop: drop(now.phiRad),
    wantedWingDrop: drop(wanted.phiRad),
  };
}
