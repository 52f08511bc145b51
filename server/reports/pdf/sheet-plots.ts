import type { Sheet } from './sheet.ts';

/** Vector plots on a sheet. Values are in display units; holes (null) lift the pen. */
export interface SheetSeries {
  x: readonly (number | null)[];
  y: readonly (number | null)[];
  line?: 'solid' | 'dashed' | 'dotted' | 'chain';
  weight?: number;
  /** Side that is not available, hatched. */
  forbid?: 'above' | 'below';
}
export interface SheetPoint {
  x: number;
  y: number;
  text?: string;
  /** Side of the mark on which its text stands; default right, above. */
  side?: 'right' | 'left';
  shape?: 'disc' | 'ring' | 'cross';
  /** Of a disc or ring; default 3.2. */
  radius?: number;
}
export interface SheetPlot {
  x: number;
  width: number;
  height: number;
  xRange: readonly [number, number];
  yRange: readonly [number, number];
  xTicks: readonly number[];
  yTicks: readonly number[];
  xText?: (value: number) => string;
  yText?: (value: number) => string;
  xName?: string;
  series: readonly SheetSeries[];
  points?: readonly SheetPoint[];
  /** Texts without a mark, centred; boxed ones stand on white. */
  labels?: readonly { x: number; y: number; text: string; boxed?: boolean }[];
  /** Grey areas in plot units, e.g. level regions. */
  areas?: readonly { points: readonly (readonly [number, number])[]; grey?: string; hatched?: boolean }[];
  levels?: readonly { y: number; text: string }[];
}

const DASH = { solid: null, dashed: [4, 2.5], dotted: [1, 2], chain: [6, 2, 1, 2] } as const;

/** Round ticks (1, 2, 2.5, 5 times a power of ten) inside a range. */
export function roundTicks(range: readonly [number, number], count: number): number[] {
  const span = range[1] - range[0];
  if (!(span > 0) || !Number.isFinite(span)) return [range[0]];
  const raw = span / count;
  const power = 10 ** Math.floor(Math.log10(raw));
  const step = ([1, 2, 2.5, 5, 10].find((s) => s * power >= raw) ?? 10) * power;
  const ticks: number[] = [];
  for (let k = Math.ceil(range[0] / step - 1e-9); k * step <= range[1] + step * 1e-9; k++)
    ticks.push(Number((k * step).toPrecision(12)));
  return ticks;
}

/** Draws a plot at the sheet's present y and moves below it only when asked, so that two can stand side by side. */
export function drawPlot(sheet: Sheet, plot: SheetPlot, advance = true): void {
  const d = sheet.doc;
  const left = plot.x + 30;
  const right = plot.x + plot.width - 8;
  const top = sheet.y + 4;
  const bottom = top + plot.height - (plot.xName ? 30 : 20);
  const px = (v: number): number => left + ((v - plot.xRange[0]) / (plot.xRange[1] - plot.xRange[0])) * (right - left);
  const py = (v: number): number =>
    bottom - ((v - plot.yRange[0]) / (plot.yRange[1] - plot.yRange[0])) * (bottom - top);

  d.save()
    .rect(left, top, right - left, bottom - top)
    .clip();
  for (const area of plot.areas ?? []) {
    const trace = (): void => {
      area.points.forEach(([a, b], i) => (i ? d.lineTo(px(a), py(b)) : d.moveTo(px(a), py(b))));
      d.closePath();
    };
    if (area.grey) {
      trace();
      d.fill(area.grey);
    }
    if (area.hatched) {
      d.save();
      trace();
      d.clip();
      sheet.hatch(left, top, right - left, bottom - top);
      d.restore();
    }
  }
  d.lineWidth(0.4);
  for (const t of plot.xTicks) d.moveTo(px(t), top).lineTo(px(t), bottom);
  for (const t of plot.yTicks) d.moveTo(left, py(t)).lineTo(right, py(t));
  d.stroke('#bbb');
  for (const series of plot.series) {
    if (series.forbid) {
      d.save();
      tracePath(d, series, px, py);
      const edge = series.forbid === 'below' ? bottom : top;
      d.lineTo(right, edge).lineTo(left, edge).closePath().clip();
      sheet.hatch(left, top, right - left, bottom - top);
      d.restore();
    }
    const dash = DASH[series.line ?? 'solid'];
    d.lineWidth(series.weight ?? (dash ? 1 : 1.6));
    if (dash) d.dash(dash[0], { space: dash[1] });
    tracePath(d, series, px, py);
    d.stroke('#000').undash();
  }
  for (const level of plot.levels ?? []) {
    d.lineWidth(0.8).dash(6, { space: 2 }).moveTo(left, py(level.y)).lineTo(right, py(level.y)).stroke('#000').undash();
    onWhite(sheet, level.text, left + 6, py(level.y) - 11);
  }
  d.restore();
  d.lineWidth(1)
    .rect(left, top, right - left, bottom - top)
    .stroke('#000');
  for (const t of plot.xTicks) {
    d.lineWidth(0.75)
      .moveTo(px(t), bottom)
      .lineTo(px(t), bottom + 3)
      .stroke('#000');
    sheet.text.line(
      plot.xText?.(t) ?? String(t),
      px(t) - 25,
      bottom + 5,
      { face: 'mono', size: 7, align: 'centre' },
      50,
    );
  }
  for (const t of plot.yTicks) {
    d.lineWidth(0.75)
      .moveTo(left - 3, py(t))
      .lineTo(left, py(t))
      .stroke('#000');
    sheet.text.line(plot.yText?.(t) ?? String(t), plot.x - 6, py(t) - 4, { face: 'mono', size: 7, align: 'right' }, 30);
  }
  if (plot.xName) sheet.text.line(plot.xName, left, bottom + 15, { size: 7.5, align: 'centre' }, right - left);
  for (const point of plot.points ?? []) {
    const x = px(point.x);
    const y = py(point.y);
    if (x < left - 1 || x > right + 1 || y < top - 1 || y > bottom + 1) continue;
    if (point.shape === 'cross')
      d.lineWidth(2)
        .moveTo(x - 4, y - 4)
        .lineTo(x + 4, y + 4)
        .moveTo(x + 4, y - 4)
        .lineTo(x - 4, y + 4)
        .stroke('#000');
    else if (point.shape === 'ring')
      d.lineWidth(1.5)
        .circle(x, y, point.radius ?? 3.2)
        .fillAndStroke('#fff', '#000');
    else d.circle(x, y, point.radius ?? 3.2).fill('#000');
    if (point.text) {
      const width = sheet.text.width(point.text, { face: 'monoBold', size: 7.5 });
      onWhite(sheet, point.text, point.side === 'left' ? x - 7 - width : x + 7, y - 11);
    }
  }
  for (const label of plot.labels ?? []) {
    const width = sheet.text.width(label.text, { face: 'monoBold', size: 7.5 });
    const [x, y] = [px(label.x) - width / 2, py(label.y) - 4.5];
    if (label.boxed)
      d.lineWidth(0.9)
        .rect(x - 3.5, y - 2, width + 7, 12)
        .fillAndStroke('#fff', '#000');
    if (label.boxed) sheet.text.line(label.text, x, y, { face: 'monoBold', size: 7.5 });
    else onWhite(sheet, label.text, x, y);
  }
  if (advance) sheet.y += plot.height + 8;
}

/** A short text that stays readable over lines and hatching. */
function onWhite(sheet: Sheet, text: string, x: number, y: number): void {
  const width = sheet.text.width(text, { face: 'monoBold', size: 7.5 });
  sheet.doc.rect(x - 1.5, y - 0.5, width + 3, 9.5).fill('#fff');
  sheet.text.line(text, x, y, { face: 'monoBold', size: 7.5 });
}

function tracePath(d: Sheet['doc'], series: SheetSeries, px: (v: number) => number, py: (v: number) => number): void {
  let open = false;
  series.x.forEach((a, i) => {
    const b = series.y[i];
    if (a === null || b === null || b === undefined || !Number.isFinite(a) || !Number.isFinite(b)) {
      open = false;
      return;
    }
    if (open) d.lineTo(px(a), py(b));
    else d.moveTo(px(a), py(b));
    open = true;
  });
}
