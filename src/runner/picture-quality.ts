/**
 * Share of the full resolution at which the stage is drawn, so that a slow machine keeps its frame rate. Falls after a
 * second of slow frames, rises again after ten of fast ones, and never by more than one step.
 */
export const RESOLUTIONS = [1, 0.8, 0.6, 0.45] as const;

const SLOW_MS = 22;
const FAST_MS = 17.6;
/** Frames looked at together: about a second. */
const WINDOW = 50;
const RISE_AFTER_WINDOWS = 12;

export interface PictureQuality {
  readonly resolution: number;
  /** Called once an animation frame; true when the resolution has changed. */
  frame(nowMs: number): boolean;
}

export function createPictureQuality(): PictureQuality {
  let level = 0;
  let last = Number.NaN;
  let fast = 0;
  let gaps: number[] = [];
  return {
    get resolution() {
      return RESOLUTIONS[level];
    },
    frame(nowMs) {
      const gap = nowMs - last;
      last = nowMs;
      // A pause of a hidden page is not a slow frame.
      if (Number.isNaN(gap) || gap > 250) return false;
      gaps.push(gap);
      if (gaps.length < WINDOW) return false;
      const median = gaps.sort((a, b) => a - b)[WINDOW >> 1];
      gaps = [];
      if (median > SLOW_MS) {
        fast = 0;
        if (level === RESOLUTIONS.length - 1) return false;
        level += 1;
        return true;
      }
      fast = median < FAST_MS ? fast + 1 : 0;
      if (level === 0 || fast < RISE_AFTER_WINDOWS) return false;
      fast = 0;
      level -= 1;
      return true;
    },
  };
}
