/** Geometry of a thumbnail trace. */
export interface SparkPath {
  path: string;
  end: readonly [number, number] | null;
  /** y of the limits; px. */
  upper: number;
  lower: number;
  eventX: number | null;
}

/** Share of the half-height at which the limit stands; beyond it is hatched. */
const LIMIT_SHARE = 0.52;

/** Positive values go up. Values past the frame are clamped to it. Non-finite samples are left out. */
export function sparkPath(
  times: readonly number[],
  values: readonly number[],
  limit: number,
  width: number,
  height: number,
  eventAt: number | null,
): SparkPath {
  const half = height / 2;
  const perUnit = (half * LIMIT_SHARE) / (limit > 0 ? limit : 1);
  const first = times[0] ?? 0;
  const span = Math.max(1e-9, (times[times.length - 1] ?? 1) - first);
  const x = (t: number): number => round(((t - first) / span) * width);
  const y = (value: number): number => round(Math.min(height - 1, Math.max(1, half - value * perUnit)));
  let path = '';
  let end: readonly [number, number] | null = null;
  times.forEach((t, index) => {
    const value = values[index];
    if (value === undefined || !Number.isFinite(value)) return;
    end = [x(t), y(value)];
    path += `${path === '' ? 'M' : 'L'}${end[0]} ${end[1]}`;
  });
  const inside = eventAt !== null && eventAt >= first && eventAt <= first + span;
  return {
    path,
    end,
    upper: round(half - half * LIMIT_SHARE),
    lower: round(half + half * LIMIT_SHARE),
    eventX: inside ? x(eventAt) : null,
  };
}

function round(value: number): number {
  return Math.round(value * 100) / 100;
}
