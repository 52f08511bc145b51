import { monitorEventLoopDelay } from 'node:perf_hooks';

export interface LoopDelay {
  median: number;
  p99: number;
  longest: number;
}
const RESOLUTION_MS = 20;
const WINDOW_MS = 60_000;
const NS_IN_MS = 1e6;

/** Watches how late this process comes to its work; `read` gives the last whole minute, before that the time so far. */
export function watchLoopDelay() {
  const histogram = monitorEventLoopDelay({ resolution: RESOLUTION_MS });
  histogram.enable();
  let minute: LoopDelay | null = null;
  // The monitor counts its own interval; only what comes on top is delay.
  const late = (ns: number): number => (Number.isFinite(ns) ? Math.max(0, ns / NS_IN_MS - RESOLUTION_MS) : 0);
  const now = (): LoopDelay => ({
    median: late(histogram.percentile(50)),
    p99: late(histogram.percentile(99)),
    longest: late(histogram.max),
  });
  const timer = setInterval(() => {
    minute = now();
    histogram.reset();
  }, WINDOW_MS).unref();
  return {
    read: (): LoopDelay => minute ?? now(),
    close: (): void => {
      clearInterval(timer);
      histogram.disable();
    },
  };
}
