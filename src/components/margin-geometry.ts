/** Where a value and its limit stand on a margin bar. The limit always stands at three quarters of the bar. */
export const LIMIT_AT = 0.75;

export type Limit = {
  max?: number | undefined;
  min?: number | undefined;
  within?: readonly [number, number] | undefined;
};

/**
 * Share of the bar that is filled, 0 … 1, from a margin in the limit's unit. Zero margin ends at the limit; the scale
 * is the limit's own size, so that a value half-way to the limit fills half of the way. Past the limit it runs into the hatch.
 */
export function filledShare(margin: number | null, limit: Limit): number {
  if (margin === null) return 0;
  const reach = limit.within ? Math.abs(limit.within[1] - limit.within[0]) / 2 : Math.abs(limit.max ?? limit.min ?? 0);
  const scale = reach > 0 ? reach : Math.max(1, Math.abs(margin));
  const share = LIMIT_AT * (1 - margin / scale);
  return Math.min(1, Math.max(0, share));
}
