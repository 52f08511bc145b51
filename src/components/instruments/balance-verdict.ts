/**
 * The verdict of the balance strip: our convention, settled here and nowhere else.
 *
 * e = ½·s·(β − β*)/gβ + ½·s·(δp* − δp)/gp with s = +1 when the left side is dead, −1 when the right side is;
 * starred values are those the scenario's technique wants. e > 1: toward the dead side, e < −1: toward the live side.
 * Balanced needs |e| < 1 and both sideslip and pedal within two gates of what is wanted.
 */
import { DEG } from '#shared/units/constants.ts';

/** Gate of the nose: 1.4° of sideslip. */
export const NOSE_GATE_RAD = 1.4 * DEG;
/** Gate of the pedal: 14 % of full travel. */
export const PEDAL_GATE = 0.14;
/** Gate of the ball: half a ball. */
export const BALL_GATE_WIDTHS = 0.5;
/** A verdict changes only after this long outside, or inside, the gate. */
export const SETTLE_S = 0.25;
/** A step in time beyond this is a seek, not flight: the verdict is then taken at once. */
const SEEK_S = 0.5;

export type DeadSide = -1 | 0 | 1;
/** While no side is dead, `dead` means that right pedal is wanted and `live` that left pedal is. */
export type BalanceVerdict = 'balanced' | 'dead' | 'live';

export interface BalanceNow {
  timeS: number;
  betaRad: number;
  ballWidths: number;
  /** −1 … 1, right positive. */
  pedal: number;
  rudderRad: number;
  rudderMaxRad: number;
  rudderAvailableRad: number;
  phiRad: number;
}

export interface BalanceWanted {
  found: boolean;
  betaRad: number;
  ballWidths: number;
  pedal: number;
  phiRad: number;
}

const sideSign = (deadSide: DeadSide): -1 | 1 => (deadSide < 0 ? -1 : 1);

/** The signed balance error e; positive toward the dead side (the left side while both engines run). */
export function balanceError(
  now: Pick<BalanceNow, 'betaRad' | 'pedal'>,
  wanted: Pick<BalanceWanted, 'betaRad' | 'pedal'>,
  deadSide: DeadSide,
): number {
  const nose = (now.betaRad - wanted.betaRad) / NOSE_GATE_RAD;
  const pedal = (wanted.pedal - now.pedal) / PEDAL_GATE;
  return 0.5 * sideSign(deadSide) * (nose + pedal);
}

/** The verdict of one instant, without settling. */
export function instantVerdict(
  now: Pick<BalanceNow, 'betaRad' | 'pedal'>,
  wanted: Pick<BalanceWanted, 'betaRad' | 'pedal'>,
  deadSide: DeadSide,
): BalanceVerdict {
  const e = balanceError(now, wanted, deadSide);
  const near =
    Math.abs(now.betaRad - wanted.betaRad) < 2 * NOSE_GATE_RAD && Math.abs(now.pedal - wanted.pedal) < 2 * PEDAL_GATE;
  if (Math.abs(e) < 1 && near) return 'balanced';
  return e >= 0 ? 'dead' : 'live';
}

export interface VerdictTracker {
  readonly verdict: BalanceVerdict;
  update(now: BalanceNow, wanted: BalanceWanted, deadSide: DeadSide): BalanceVerdict;
  reset(): void;
}

/** Holds the verdict until the instant verdict has differed for SETTLE_S of run time without a break. */
export function createVerdictTracker(): VerdictTracker {
  let verdict: BalanceVerdict = 'balanced';
  let differsSinceS: number | null = null;
  let lastTimeS: number | null = null;
  return {
    get verdict() {
      return verdict;
    },
    update(now, wanted, deadSide) {
      const instant = instantVerdict(now, wanted, deadSide);
      const sought = lastTimeS === null || now.timeS < lastTimeS || now.timeS - lastTimeS > SEEK_S;
      lastTimeS = now.timeS;
      if (sought) {
        verdict = instant;
        differsSinceS = null;
      } else if (instant === verdict) {
        differsSinceS = null;
      } else if (differsSinceS === null) {
        differsSinceS = now.timeS;
      } else if (now.timeS - differsSinceS >= SETTLE_S - 1e-9) {
        verdict = instant;
        differsSinceS = null;
      }
      return verdict;
    },
    reset() {
      verdict = 'balanced';
      differsSinceS = null;
      lastTimeS = null;
    },
  };
}

/** The word beside the strip. */
export function verdictWord(verdict: BalanceVerdict, deadSide: DeadSide): string {
  if (verdict === 'balanced') return 'Balanced';
  if (deadSide === 0) return verdict === 'dead' ? 'Wants right pedal' : 'Wants left pedal';
  return verdict === 'dead' ? 'Toward dead side' : 'Toward live side';
}

/** What to do about it, for the spoken text. */
export function verdictRemedy(verdict: BalanceVerdict, deadSide: DeadSide): string {
  if (verdict === 'balanced') return 'hold it';
  const towardRight = (verdict === 'dead') === sideSign(deadSide) > 0;
  return towardRight ? 'more right pedal' : 'more left pedal';
}
