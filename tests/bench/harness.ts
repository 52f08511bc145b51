/**
 * What a bench row is, and the measuring loops the rows share. One row per claim; each row measures its baseline
 * in the same run, so that the ratio means the same on a slow machine and on a fast one.
 *
 * A row file (tests/bench/rows/NAME.bench.ts) default-exports one row or an array of rows.
 */

/** A further number of the same row: printed below it and kept in the JSON report. */
export interface BenchDetail {
  readonly label: string;
  readonly value: number;
  readonly unit: string;
}

/** What one row measured. */
export interface BenchResult {
  readonly value: number;
  readonly unit: string;
  /** value ÷ baseline (or baseline ÷ value where larger is better: below the goal is always better); null: none. */
  readonly ratio: number | null;
  /** What the ratio is against, measured in the same run; or what the value is compared with. */
  readonly baseline: string;
  /** The claim as it is printed, such as "ratio ≤ 1.5". */
  readonly goal: string;
  readonly met: boolean;
  readonly details?: readonly BenchDetail[];
}

/** Handed to each row: a place to say what is happening, and where cleaning up is registered. */
export interface BenchContext {
  note(text: string): void;
  /** True with `--long`: rows that can measure for half an hour do. */
  readonly long: boolean;
  /** Runs after the row, last registered first, also when the row threw. */
  cleanUp(action: () => unknown): void;
}

/** One claim and how it is measured. */
export interface BenchRow {
  readonly name: string;
  readonly claim: string;
  run(context: BenchContext): Promise<BenchResult> | BenchResult;
}

/** The line of a row in `--json FILE`. */
export interface BenchReportLine {
  name: string;
  value: number;
  unit: string;
  ratio: number | null;
  goal: string;
  baseline: string;
  met: boolean;
  details: readonly BenchDetail[];
}

/** The given row, typed. */
export function defineBench(row: BenchRow): BenchRow {
  return row;
}

/** Middle value; mean of the two middle ones for an even count; NaN for none. */
export function median(values: readonly number[]): number {
  return quantile(values, 0.5);
}

/** Value below which the share q of the values lies, interpolated linearly; NaN for no values. */
export function quantile(values: readonly number[], q: number): number {
  if (values.length === 0) return Number.NaN;
  const sorted = [...values].sort((a, b) => a - b);
  const at = (sorted.length - 1) * q;
  const below = Math.floor(at);
  const above = Math.ceil(at);
  return sorted[below] + (sorted[above] - sorted[below]) * (at - below);
}

export interface PairTiming {
  /** Median milliseconds of one call. */
  readonly subjectMs: number;
  readonly baselineMs: number;
  /** Median over the rounds of subject ÷ baseline, each pair measured back to back. */
  readonly ratio: number;
}

/**
 * Times two functions in alternating rounds, so that a neighbour's load hits both alike.
 * Both run `warmUp` rounds first. Make one call take some tens of milliseconds.
 */
export function timePair(
  subject: () => unknown,
  baseline: () => unknown,
  { rounds = 15, warmUp = 3 }: { rounds?: number; warmUp?: number } = {},
): PairTiming {
  for (let i = 0; i < warmUp; i++) {
    keep(subject());
    keep(baseline());
  }
  const subjectMs: number[] = [];
  const baselineMs: number[] = [];
  for (let i = 0; i < rounds; i++) {
    const subjectFirst = i % 2 === 0;
    if (subjectFirst) subjectMs.push(timeOnce(subject));
    baselineMs.push(timeOnce(baseline));
    if (!subjectFirst) subjectMs.push(timeOnce(subject));
  }
  return {
    subjectMs: median(subjectMs),
    baselineMs: median(baselineMs),
    ratio: median(subjectMs.map((ms, i) => ms / baselineMs[i])),
  };
}

/** Milliseconds that one call took. */
export function timeOnce(action: () => unknown): number {
  const start = performance.now();
  keep(action());
  return performance.now() - start;
}

export interface Allocation {
  readonly bytes: number;
  /** False when a collection ran in between: then `bytes` is only a lower bound. */
  readonly exact: boolean;
}

/**
 * Heap bytes that one call leaves behind or throws away. Needs the flags that `npm run bench` gives Node
 * (--expose-gc, and a young generation so large that nothing is collected during the call).
 */
export function measureAllocation(action: () => unknown): Allocation {
  const collect = (globalThis as { gc?: () => void }).gc; // given by --expose-gc, not in Node's types
  if (collect === undefined) throw new Error('measureAllocation needs node --expose-gc; start it with npm run bench.');
  keep(action());
  collect();
  const idle = heapDelta(() => undefined);
  const used = heapDelta(action);
  return { bytes: Math.max(0, used - idle), exact: used >= 0 };
}

function heapDelta(action: () => unknown): number {
  const before = process.memoryUsage().heapUsed;
  keep(action());
  return process.memoryUsage().heapUsed - before;
}

const kept: unknown[] = [undefined];
/** Keeps a result alive, so that the engine cannot drop the work as unused. */
function keep(value: unknown): void {
  kept[0] = value;
}
