/** How a criterion is drawn against its limit: one bar, the limit at a fixed place, hatched beyond. */
export interface LimitShape {
  max?: number;
  min?: number;
  within?: [number, number];
  unit: string;
}

export interface MarginScale {
  /** Value at the left and right end of the bar. */
  from: number;
  to: number;
  /** Forbidden stretches as fractions of the bar. */
  forbidden: readonly [number, number][];
  /** Limits as fractions. */
  limits: readonly number[];
}

/** Share of the bar at which a maximum lies. */
const LIMIT_AT = 0.76;

export function marginScale(limit: LimitShape): MarginScale {
  if (limit.max !== undefined) {
    const span = limit.max > 0 ? limit.max / LIMIT_AT : 1;
    const at = limit.max > 0 ? LIMIT_AT : 0;
    return { from: 0, to: span, forbidden: [[at, 1]], limits: [at] };
  }
  if (limit.min !== undefined) {
    const at = 1 - LIMIT_AT;
    const size = Math.abs(limit.min) || 1;
    const from = limit.min >= 0 ? 0 : limit.min - size * at;
    const to = limit.min >= 0 ? (limit.min > 0 ? limit.min / at : size) : limit.min + size * LIMIT_AT;
    const place = (limit.min - from) / (to - from);
    return { from, to, forbidden: [[0, place]], limits: [place] };
  }
  const [low, high] = limit.within ?? [0, 1];
  const pad = (high - low) / 3 || 1;
  const from = low - pad;
  const to = high + pad;
  const a = (low - from) / (to - from);
  const b = (high - from) / (to - from);
  return {
    from,
    to,
    forbidden: [
      [0, a],
      [b, 1],
    ],
    limits: [a, b],
  };
}

/** Fraction of the bar, kept inside it. */
export const placeOn = (scale: MarginScale, value: number): number =>
  Math.max(0, Math.min(1, (value - scale.from) / (scale.to - scale.from)));

const UNIT_SIGNS: Record<string, string> = { deg: '°', count: '', widths: '' };

/** "14°", "667 N", "4 s". */
export function withUnit(text: string, unit: string): string {
  const sign = UNIT_SIGNS[unit];
  if (unit === 'deg/s') return `${text}°/s`;
  if (sign !== undefined) return `${text}${sign}`;
  return unit === '' ? text : `${text} ${unit}`;
}

/** Digits that make sense for a unit: tenths, but whole newtons, feet and counts. */
export function digitsFor(unit: string): number {
  return ['N', 'ft', 'count', '%', 'ft/min'].includes(unit) ? 0 : 1;
}

export function limitText(limit: LimitShape): string {
  const plain = (value: number): string => String(Math.round(value * 100) / 100).replace('-', '−');
  if (limit.max !== undefined) return withUnit(plain(limit.max), limit.unit);
  if (limit.min !== undefined) return `at least ${withUnit(plain(limit.min), limit.unit)}`;
  const [low, high] = limit.within ?? [0, 0];
  return withUnit(`${plain(low)} to ${plain(high)}`, limit.unit);
}
