/** Linear and logarithmic scales with round ticks, and the path builders that plots share. */

export interface PlotScale {
  readonly min: number;
  readonly max: number;
  readonly ticks: readonly number[];
  /** Value to pixel. */
  at(value: number): number;
  /** Pixel to value. */
  invert(pixel: number): number;
}

/** Round step (1, 2, 2.5 or 5 times a power of ten) that cuts `span` into about `count` parts. */
export function roundStep(span: number, count: number): number {
  const raw = span / Math.max(1, count);
  const power = 10 ** Math.floor(Math.log10(raw));
  const lead = raw / power;
  const step = lead <= 1 ? 1 : lead <= 2 ? 2 : lead <= 2.5 ? 2.5 : lead <= 5 ? 5 : 10;
  return step * power;
}

/** Linear scale from [min, max] to [from, to] pixels with ticks on round numbers inside it. */
export function linearScale(min: number, max: number, from: number, to: number, count = 5): PlotScale {
  const lo = Number.isFinite(min) ? min : 0;
  const hi = Number.isFinite(max) && max > lo ? max : lo + 1;
  const step = roundStep(hi - lo, count);
  const ticks: number[] = [];
  for (let k = Math.ceil(lo / step - 1e-9); k * step <= hi + step * 1e-9; k++) {
    const value = k * step;
    ticks.push(Math.abs(value) < step * 1e-9 ? 0 : Number(value.toPrecision(12)));
  }
  const gain = (to - from) / (hi - lo);
  return {
    min: lo,
    max: hi,
    ticks,
    at: (value) => from + (value - lo) * gain,
    invert: (pixel) => lo + (pixel - from) / gain,
  };
}

/** Logarithmic scale (base 10) with ticks at 1, 2 and 5 of each decade. */
export function logScale(min: number, max: number, from: number, to: number): PlotScale {
  const lo = Math.log10(min);
  const hi = Math.log10(max);
  const ticks: number[] = [];
  for (let decade = Math.floor(lo); decade <= Math.ceil(hi); decade++) {
    for (const lead of [1, 2, 5]) {
      const value = lead * 10 ** decade;
      if (value >= min * 0.999 && value <= max * 1.001) ticks.push(Number(value.toPrecision(6)));
    }
  }
  const gain = (to - from) / (hi - lo);
  return {
    min,
    max,
    ticks,
    at: (value) => from + (Math.log10(value) - lo) * gain,
    invert: (pixel) => 10 ** (lo + (pixel - from) / gain),
  };
}

/** Range of several number lists widened by `pad` of its span; holes (null, NaN) are passed over. */
export function paddedRange(
  lists: readonly (readonly (number | null)[])[],
  pad = 0.06,
  include: readonly number[] = [],
): [number, number] {
  let lo = Infinity;
  let hi = -Infinity;
  const see = (value: number | null): void => {
    if (value === null || !Number.isFinite(value)) return;
    if (value < lo) lo = value;
    if (value > hi) hi = value;
  };
  for (const list of lists) for (const value of list) see(value);
  for (const value of include) see(value);
  if (lo > hi) return [0, 1];
  const span = hi - lo || Math.abs(hi) || 1;
  return [lo - pad * span, hi + pad * span];
}

/** SVG path through points, lifted over holes. */
export function linePath(
  xs: readonly (number | null)[],
  ys: readonly (number | null)[],
  x: PlotScale,
  y: PlotScale,
): string {
  let path = '';
  let open = false;
  for (let i = 0; i < xs.length; i++) {
    const a = xs[i];
    const b = ys[i];
    if (a === null || b === null || a === undefined || b === undefined || !Number.isFinite(a) || !Number.isFinite(b)) {
      open = false;
      continue;
    }
    path += `${open ? 'L' : 'M'}${x.at(a).toFixed(2)} ${y.at(b).toFixed(2)}`;
    open = true;
  }
  return path;
}

/** Closed SVG path between two curves over the same abscissae. */
export function bandPath(
  xs: readonly number[],
  low: readonly number[],
  high: readonly number[],
  x: PlotScale,
  y: PlotScale,
): string {
  if (xs.length === 0) return '';
  const back = [...xs].reverse();
  const upper = linePath(xs, high, x, y);
  const lower = linePath(back, [...low].reverse(), x, y);
  return lower ? `${upper}L${lower.slice(1)}Z` : '';
}

/** Short tick text: at most four significant digits, true minus sign left to the font's hyphen for column width. */
export function tickText(value: number): string {
  if (value === 0) return '0';
  const size = Math.abs(value);
  if (size >= 1e5 || size < 1e-3) return value.toExponential(0).replace('e+', 'e');
  return String(Number(value.toPrecision(4)));
}

/** Area between a curve and a horizontal edge of the plot; one closed part for each unbroken stretch of the curve. */
export function forbiddenPath(
  xs: readonly (number | null)[],
  ys: readonly (number | null)[],
  x: PlotScale,
  y: PlotScale,
  edge: number,
): string {
  let path = '';
  let stretch: [number, number][] = [];
  const close = (): void => {
    const first = stretch[0];
    const last = stretch.at(-1);
    if (first && last && stretch.length > 1)
      path += `M${first[0].toFixed(2)} ${edge}${stretch.map(([a, b]) => `L${a.toFixed(2)} ${b.toFixed(2)}`).join('')}L${last[0].toFixed(2)} ${edge}Z`;
    stretch = [];
  };
  xs.forEach((a, i) => {
    const b = ys[i];
    if (typeof a === 'number' && typeof b === 'number' && Number.isFinite(a) && Number.isFinite(b))
      stretch.push([x.at(a), y.at(b)]);
    else close();
  });
  close();
  return path;
}

/**
 * Range and ticks on multiples of one of the given steps (smallest first), the first that needs at most `most` parts.
 * A flat curve gets a step to either side.
 */
export function snappedTicks(
  lists: readonly (readonly number[])[],
  steps: readonly number[],
  most: number,
): { range: [number, number]; ticks: number[] } {
  let [lo, hi] = paddedRange(lists, 0);
  if (lo === hi) [lo, hi] = [lo - 1e-9, hi + 1e-9];
  const parts = (step: number): number => Math.ceil(hi / step - 1e-9) - Math.floor(lo / step + 1e-9);
  const step = steps.find((one) => parts(one) <= most) ?? roundStep(hi - lo, most - 1);
  const first = Math.floor(lo / step + 1e-9);
  const ticks = Array.from({ length: Math.max(1, parts(step)) + 1 }, (_, k) => (first + k) * step);
  return { range: [ticks[0] ?? lo, ticks.at(-1) ?? hi], ticks };
}
