/**
 * How often traces are redrawn. JavaScript time is not the risk, rasterising a canvas is: so the real interval between
 * animation frames is watched, and the redraw rate falls before the frame rate does.
 */
export const RATES_HZ = [30, 15, 10, 5, 2] as const;
const WINDOW = 30;
/** Frames slower than this on median lower the rate; faster than the second raise it. */
const SLOW_MS = 22;
const FAST_MS = 18;
const RAISE_AFTER_WINDOWS = 4;

export interface RedrawPacer {
  readonly rateHz: number;
  /** Called once an animation frame; true when the traces are due. */
  due(nowMs: number): boolean;
}

export function createRedrawPacer(): RedrawPacer {
  let level = 0;
  let lastFrame = Number.NaN;
  let lastDraw = -Infinity;
  let good = 0;
  const gaps: number[] = [];
  const judge = (): void => {
    const median = gaps.slice().sort((a, b) => a - b)[gaps.length >> 1];
    gaps.length = 0;
    if (median > SLOW_MS) {
      level = Math.min(RATES_HZ.length - 1, level + 1);
      good = 0;
    } else if (median < FAST_MS) {
      good += 1;
      if (good >= RAISE_AFTER_WINDOWS && level > 0) {
        level -= 1;
        good = 0;
      }
    }
  };
  return {
    get rateHz() {
      return RATES_HZ[level];
    },
    due(nowMs) {
      if (!Number.isNaN(lastFrame)) {
        const gap = nowMs - lastFrame;
        // A pause of a hidden tab is not a slow frame.
        if (gap < 250) gaps.push(gap);
      }
      lastFrame = nowMs;
      if (gaps.length >= WINDOW) judge();
      // Half a frame of slack keeps 30 Hz at 30 Hz on a 60 Hz screen.
      if (nowMs - lastDraw < 1000 / RATES_HZ[level] - 8) return false;
      lastDraw = nowMs;
      return true;
    },
  };
}
