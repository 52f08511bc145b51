import type { SPlaneBoundary } from '#shared/analysis/s-plane-regions.ts';
import type { AnalysisReport } from './analysis-report-data.ts';
import { drawPlot, roundTicks, type SheetPlot, type SheetPoint } from './sheet-plots.ts';
import type { Sheet } from './sheet.ts';

const tick = (value: number): string => String(Number(value.toPrecision(6)));
const MOST_MARKS = 6;

/** Upper half of the s-plane: level regions, the oscillatory roots over speed with dots, the roots of the condition. */
export function drawRoots(
  sheet: Sheet,
  figure: AnalysisReport['sPlane'],
  x: number,
  width: number,
  height: number,
): void {
  const near = [...figure.roots.filter((root) => root.im > 0), ...figure.locus];
  const leftmost = Math.min(-0.4, ...near.map(({ re }) => re * 1.25), ...figure.boundaries.map(cornerOf));
  const rightmost = Math.max(0.15, ...near.map(({ re }) => re * 1.2), -leftmost * 0.3);
  const xRange = [leftmost, rightmost] as const;
  const yRange = [0, figure.top] as const;
  const areas: NonNullable<SheetPlot['areas']>[number][] = figure.boundaries.map((boundary) => ({
    points: [...outline(boundary), [rightmost, figure.top] as const, [rightmost, 0] as const],
    grey: ['#f1f1f1', '#e6e6e6', '#d9d9d9'][boundary.level - 1],
    hatched: boundary.level === 3,
  }));
  const lines = ['solid', 'dashed', 'dotted'] as const;
  const outside = figure.roots.filter((root) => root.im === 0 && root.re < leftmost);
  const marks: SheetPoint[] = everyFew(figure.locus).map(({ speed, re, im }) => ({
    x: re,
    y: im,
    radius: 1.9,
    text: String(Math.round(speed)),
    side: 'left',
  }));
  drawPlot(
    sheet,
    {
      x,
      width,
      height,
      xRange,
      yRange,
      xTicks: roundTicks(xRange, 5),
      yTicks: roundTicks(yRange, 5),
      xText: tick,
      yText: tick,
      areas,
      series: [
        ...figure.boundaries.map((boundary) => ({
          x: outline(boundary).map(([re]) => re),
          y: outline(boundary).map(([, im]) => im),
          line: lines[boundary.level - 1],
          weight: boundary.level === 1 ? 1.4 : 1,
        })),
        { x: figure.locus.map(({ re }) => re), y: figure.locus.map(({ im }) => im), weight: 1 },
        { x: [0, 0], y: [0, figure.top], weight: 0.7 },
      ],
      points: [
        ...marks,
        ...figure.roots
          .filter(({ re }) => re >= leftmost)
          .map(({ re, im }) => ({ x: re, y: im, shape: 'cross' as const })),
      ],
      labels: regionLabels(figure, xRange),
      xName:
        outside.length === 0
          ? 'real part; crosses: this condition'
          : `real part; crosses: this condition; further left: ${outside.map(({ re }) => tick(Number(re.toPrecision(3)))).join(', ')}`,
    },
    false,
  );
}

const outline = (boundary: SPlaneBoundary): (readonly [number, number])[] =>
  boundary.dutchRoll.map(({ re, im }) => [re, im] as const);
const cornerOf = (boundary: SPlaneBoundary): number => (boundary.dutchRoll[0]?.re ?? 0) * 1.1;

/** Numbers of the levels, each inside its region where that is wide enough to hold it. */
function regionLabels(figure: AnalysisReport['sPlane'], [left, right]: readonly [number, number]) {
  const at = (fraction: number): number => fraction * figure.top;
  const crossing = (boundary: SPlaneBoundary | undefined, im: number): number => {
    const points = boundary?.dutchRoll ?? [];
    return (
      points.reduce((best, point) => (Math.abs(point.im - im) < Math.abs(best.im - im) ? point : best), points[0])
        ?.re ?? 0
    );
  };
  const [first, second, third] = figure.boundaries;
  if (first === undefined) return [];
  const im = at(0.62);
  const edge = Math.max(left, crossing(first, im));
  const labels = [{ x: left + (edge - left) * 0.22, y: im, text: '1', boxed: true }];
  const wide = (right - left) * 0.03;
  const between = (from: number, to: number, y: number, text: string): void => {
    if (to - from > wide) labels.push({ x: (from + to) / 2, y, text, boxed: true });
  };
  between(Math.max(left, crossing(first, at(0.3))), crossing(second, at(0.3)), at(0.3), '2');
  between(Math.max(left, crossing(second, at(0.46))), crossing(third, at(0.46)), at(0.46), '3');
  return labels;
}

function everyFew<T>(points: readonly T[]): T[] {
  const step = Math.max(1, Math.ceil(points.length / MOST_MARKS));
  return points.filter((_, i) => i % step === 0);
}

/** Minimum control speed over bank toward the live engine; what cannot be held is hatched. */
export function drawControlSpeed(
  sheet: Sheet,
  figure: AnalysisReport['controlSpeed'],
  x: number,
  width: number,
  height: number,
): void {
  const known = figure.speed.filter((v): v is number => v !== null && Number.isFinite(v));
  if (figure.reason !== null || known.length === 0) {
    const words = figure.reason ?? 'There is none in the range of speeds looked at.';
    sheet.text.wrap(words, width - 20, { size: 8.5 }).forEach((line, i) => {
      sheet.text.line(line, x + 10, sheet.y + 12 + i * 12, { size: 8.5 });
    });
    return;
  }
  const low = Math.min(...known, figure.stall);
  const high = Math.max(...known, figure.stall);
  const room = Math.max(4, (high - low) * 0.15);
  const yRange = [Math.floor((low - room) / 5) * 5, Math.ceil((high + room) / 5) * 5] as const;
  const last = figure.speed.length - 1;
  const speed = (i: number): number => figure.speed[i] ?? Number.NaN;
  const ends: SheetPoint[] = [
    { x: figure.bankDeg[0], y: speed(0), shape: 'ring', text: `${speed(0).toFixed(1)} wings level` },
    {
      x: figure.bankDeg[last],
      y: speed(last),
      text: `${speed(last).toFixed(1)} at ${figure.bankDeg[last]}°`,
      side: 'left',
    },
  ];
  drawPlot(
    sheet,
    {
      x,
      width,
      height,
      xRange: [figure.bankDeg[0], figure.bankDeg[last]],
      yRange,
      xTicks: figure.bankDeg.filter((deg) => Number.isInteger(deg)),
      yTicks: roundTicks(yRange, 6),
      xText: (deg) => `${deg}°`,
      yText: tick,
      series: [{ x: figure.bankDeg, y: figure.speed, forbid: 'below', weight: 1.8 }],
      levels: [{ y: figure.stall, text: `stall ${figure.stall.toFixed(0)}, power off` }],
      points: ends.filter(({ y }) => Number.isFinite(y)),
      xName: 'bank toward the live engine',
    },
    false,
  );
}
