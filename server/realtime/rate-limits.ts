import type { ClientEvents } from '#shared/contracts/socket-events.ts';

interface Limit {
  perSecond: number;
  burst: number;
}

/** How often one socket may send what. A burst covers what gathers while a connection is lost. */
const LIMITS: Readonly<Record<keyof ClientEvents, Limit>> = {
  'clock:ask': { perSecond: 4, burst: 20 },
  'class:enter': { perSecond: 1, burst: 10 },
  'class:leave': { perSecond: 1, burst: 5 },
  'class:entries': { perSecond: 2, burst: 10 },
  'class:control': { perSecond: 10, burst: 40 },
  'board:follow': { perSecond: 1, burst: 10 },
  'run:take': { perSecond: 2, burst: 10 },
  'run:chunk': { perSecond: 10, burst: 400 },
  'run:catch-up': { perSecond: 4, burst: 40 },
  'run:complete': { perSecond: 1, burst: 10 },
  'run:differs': { perSecond: 0.2, burst: 5 },
  'run:stands': { perSecond: 2, burst: 10 },
  'run:inputs': { perSecond: 45, burst: 150 },
  'run:telemetry': { perSecond: 14, burst: 40 },
  'view:move': { perSecond: 30, burst: 60 },
  'member:tell': { perSecond: 2, burst: 20 },
};

/** More refusals than this in a minute end the connection. */
export const MOST_REFUSED = { perSecond: 4, burst: 240 } as const;

/** A bucket that fills with time; empty means too many. */
export class Bucket {
  private level: number;
  private lastMs: number;

  constructor(
    private readonly limit: Limit,
    nowMs: number,
  ) {
    this.level = limit.burst;
    this.lastMs = nowMs;
  }

  take(nowMs: number): boolean {
    const gained = ((nowMs - this.lastMs) / 1000) * this.limit.perSecond;
    this.level = Math.min(this.limit.burst, this.level + Math.max(0, gained));
    this.lastMs = nowMs;
    if (this.level < 1) return false;
    this.level -= 1;
    return true;
  }
}

export type Verdict = 'ok' | 'too-many' | 'unknown';

/** Limits of one socket. */
export function createRateLimits(clockMs: () => number) {
  const buckets = new Map<string, Bucket>();
  return (event: string): Verdict => {
    if (!Object.hasOwn(LIMITS, event)) return 'unknown';
    const limit = LIMITS[event as keyof ClientEvents]; // an own key of it
    let bucket = buckets.get(event);
    if (!bucket) {
      bucket = new Bucket(limit, clockMs());
      buckets.set(event, bucket);
    }
    return bucket.take(clockMs()) ? 'ok' : 'too-many';
  };
}
