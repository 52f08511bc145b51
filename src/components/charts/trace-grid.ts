/** Traces on one time grid: sample k lies at k / GRID_HZ seconds of run time, whatever the frame rate. */
export const GRID_HZ = 30;
export const GRID_TICKS = 4;

/** Values on the grid; null where nothing is known yet. One array per row. */
export type TraceColumn = (number | null)[];

export interface TraceRow {
  id: string;
  name: string;
  /** Printed under the name, in the left margin. */
  unit: string;
  digits: number;
  /** Range shown when nothing exceeds it. */
  low: number;
  high: number;
  /** Hatched beyond. */
  max?: number;
  min?: number;
}

export interface TraceFlag {
  id: string;
  /** Run time; s. */
  timeS: number;
  letter: 'E' | 'G' | 'C' | 'S' | 'N' | 'P';
  text: string;
  kind: 'dead' | 'ink';
}

export const gridLength = (durationS: number): number => Math.round(durationS * GRID_HZ) + 1;
export const gridIndex = (timeS: number): number => Math.max(0, Math.round(timeS * GRID_HZ));
export const emptyColumn = (durationS: number): TraceColumn =>
  new Array<number | null>(gridLength(durationS)).fill(null);

/** A row's range, widened by half as often as needed to hold `value`. */
export function widen(range: readonly [number, number], value: number): readonly [number, number] {
  if (!Number.isFinite(value) || (value >= range[0] && value <= range[1])) return range;
  let [low, high] = range;
  for (let i = 0; i < 24 && (value > high || value < low); i += 1) {
    const grow = (high - low) / 2;
    if (value > high) high += grow;
    else low -= grow;
  }
  return [low, high];
}

/** The range that holds all columns, starting from the row's own. */
export function rangeFor(row: TraceRow, columns: readonly (TraceColumn | undefined)[]): readonly [number, number] {
  let range: readonly [number, number] = [row.low, row.high];
  for (const column of columns) {
    if (!column) continue;
    for (const value of column) if (value !== null) range = widen(range, value);
  }
  return range;
}

/** The value at a run time, the nearest sample of the grid; null when unknown. */
export function valueAt(column: TraceColumn | undefined, timeS: number): number | null {
  if (!column || column.length === 0) return null;
  const k = Math.min(column.length - 1, gridIndex(timeS));
  // Between the last sample and the next the last one holds.
  return column[k] ?? column[Math.max(0, k - 1)] ?? null;
}

/** Positions of flags kept `gap` apart to the right of their stems, in time order. */
export function flagPositions(xs: readonly number[], gap: number): number[] {
  let free = -Infinity;
  return xs.map((x) => {
    const at = Math.max(x, free);
    free = at + gap;
    return at;
  });
}

/** Rows of the table alternative: one a second, and the times of the flags. */
export function tableTimes(durationS: number, flags: readonly TraceFlag[], stepS = 1): number[] {
  const times = new Set<number>();
  for (let t = 0; t <= durationS + 1e-9; t += stepS) times.add(Math.round(t * GRID_HZ) / GRID_HZ);
  for (const flag of flags) if (flag.timeS <= durationS) times.add(Math.round(flag.timeS * GRID_HZ) / GRID_HZ);
  return [...times].sort((a, b) => a - b);
}

/** A value as the margins print it: fixed digits, a true minus, a dash for nothing. */
export function printTrace(value: number | null, digits: number): string {
  if (value === null || !Number.isFinite(value)) return '–';
  const text = value.toFixed(digits);
  return Number(text) === 0 ? (0).toFixed(digits) : text.replace('-', '−');
}
