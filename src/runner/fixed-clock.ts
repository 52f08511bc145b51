/**
 * Real time into ticks of 1/120 s, whatever the frame rate. Late frames never change a result: a gap that is too long to
 * be flown blind is not flown at all, and the clock says so.
 */
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';

/** Longest stretch of real time that one frame may fly; the rest of a longer gap is held. */
export const MAX_GAP_MS = 250;
/** A gap beyond this is a sleeping or hidden page: the clock stops until the pilot resumes. */
export const STOP_GAP_MS = 1000;
/** This many holds within HOLD_WINDOW_MS mean that the machine cannot keep up. */
export const HOLDS_TO_STOP = 4;
export const HOLD_WINDOW_MS = 6000;

export interface ClockAdvance {
  /** Whole ticks to fly now. */
  ticks: number;
  /** Real time that passed and is not flown; ms. */
  heldMs: number;
  /** Why the clock stopped itself, if it did. */
  stopped: 'gap' | 'slow' | null;
}

export interface FixedClock {
  readonly running: boolean;
  /** Run seconds per real second. */
  rate: number;
  /** Share of the next tick that has passed, 0 … 1: for drawing between ticks. */
  readonly fraction: number;
  start(nowMs: number): void;
  stop(): void;
  advance(nowMs: number): ClockAdvance;
}

export function createFixedClock(): FixedClock {
  const tickMs = 1000 / TICK_RATE_HZ;
  let running = false;
  let lastMs = 0;
  let backlogMs = 0;
  let rate = 1;
  let holds: number[] = [];
  const stop = (): void => {
    running = false;
    backlogMs = 0;
    holds = [];
  };
  return {
    get running() {
      return running;
    },
    get rate() {
      return rate;
    },
    set rate(value) {
      rate = value;
    },
    get fraction() {
      return Math.min(1, backlogMs / tickMs);
    },
    start(nowMs) {
      running = true;
      lastMs = nowMs;
      backlogMs = 0;
      holds = [];
    },
    stop,
    advance(nowMs) {
      if (!running) return { ticks: 0, heldMs: 0, stopped: null };
      // A clock that is set back counts as no time.
      const gap = Math.max(0, nowMs - lastMs);
      lastMs = nowMs;
      if (gap > STOP_GAP_MS) {
        stop();
        return { ticks: 0, heldMs: gap, stopped: 'gap' };
      }
      const heldMs = Math.max(0, gap - MAX_GAP_MS);
      if (heldMs > 0) {
        holds = [...holds.filter((at) => nowMs - at < HOLD_WINDOW_MS), nowMs];
        if (holds.length >= HOLDS_TO_STOP) {
          stop();
          return { ticks: 0, heldMs: gap, stopped: 'slow' };
        }
        // What is held is held whole: flying a quarter of a second blind helps nobody.
        return { ticks: 0, heldMs: gap, stopped: null };
      }
      backlogMs += gap * rate;
      const ticks = Math.floor(backlogMs / tickMs + 1e-9);
      backlogMs = Math.max(0, backlogMs - ticks * tickMs);
      return { ticks, heldMs: 0, stopped: null };
    },
  };
}
