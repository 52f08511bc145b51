/** The stretch of a scale that an edge shows. It never slides: it cuts by whole steps when the value nears its end. */
export interface TapeWindow {
  readonly low: number;
  readonly high: number;
}

/**
 * The window to show for `value`, keeping `previous` as long as the value lies inside its margins.
 *
 * @param span   Width of the window; a whole number of steps.
 * @param step   The window moves by multiples of this.
 * @param floor  Lowest end allowed.
 */
export function windowFor(
  previous: TapeWindow | null,
  value: number,
  span: number,
  step: number,
  floor = -Infinity,
): TapeWindow {
  if (!Number.isFinite(value)) return previous ?? { low: 0, high: span };
  const margin = Math.min(step, span / 6);
  if (previous && previous.high - previous.low === span) {
    const lowEnd = previous.low <= floor ? previous.low : previous.low + margin;
    if (value >= lowEnd && value <= previous.high - margin) return previous;
  }
  const low = Math.max(floor, Math.round((value - span / 2) / step) * step);
  return { low, high: low + span };
}

/** Window for two values that must both be seen, such as nose and flight path; the first wins when they part too far. */
export function windowForPair(
  previous: TapeWindow | null,
  first: number,
  second: number,
  span: number,
  step: number,
): TapeWindow {
  const margin = span / 8;
  const inside = (w: TapeWindow, v: number): boolean => v >= w.low + margin && v <= w.high - margin;
  const apart = Math.abs(first - second) > span - 2 * margin;
  if (previous && inside(previous, first) && (apart || inside(previous, second))) return previous;
  const middle = apart ? first : (first + second) / 2;
  const low = Math.round((middle - span / 2) / step) * step;
  return { low, high: low + span };
}

/** Where a value lies in a window, 0 … 1 from low to high, not clamped. */
export const fractionIn = (window: TapeWindow, value: number): number =>
  (value - window.low) / (window.high - window.low);
