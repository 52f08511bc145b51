/** One row of traces in a uPlot without axes: limits hatched, reference dashed, the flown line on top with its halo. */
import uPlot from 'uplot';
import { type InkTokens, hatchPattern } from './ink-tokens.ts';
import type { TraceColumn, TraceRow } from './trace-grid.ts';

export interface TracePlot {
  setSize(width: number, height: number): void;
  setX(from: number, to: number): void;
  setY(range: readonly [number, number]): void;
  setData(times: readonly number[], reference: TraceColumn, flown: TraceColumn): void;
  destroy(): void;
}

export interface TracePlotSetup {
  host: HTMLElement;
  row: TraceRow;
  tokens: InkTokens;
  width: number;
  height: number;
  x: readonly [number, number];
  y: readonly [number, number];
  gridStepS: number;
  zeroS: number;
}

/** Grid, zero line and hatched limits, beneath the lines. */
function drawGround(u: uPlot, setup: TracePlotSetup, ratio: number): void {
  const { ctx } = u;
  const { left, top, width, height } = u.bbox;
  const { row, tokens } = setup;
  const yOf = (value: number): number => u.valToPos(value, 'y', true);
  const line = (x0: number, y0: number, x1: number, y1: number, colour: string, weight: number): void => {
    ctx.strokeStyle = colour;
    ctx.lineWidth = weight * ratio;
    ctx.beginPath();
    ctx.moveTo(x0, y0);
    ctx.lineTo(x1, y1);
    ctx.stroke();
  };
  ctx.save();
  ctx.beginPath();
  ctx.rect(left, top, width, height);
  ctx.clip();
  const from = u.scales['x'].min ?? 0;
  const to = u.scales['x'].max ?? 1;
  const first = setup.zeroS + Math.ceil((from - setup.zeroS) / setup.gridStepS) * setup.gridStepS;
  for (let t = first; t <= to; t += setup.gridStepS) {
    const x = u.valToPos(t, 'x', true);
    line(x, top, x, top + height, tokens.hair, 0.75);
  }
  const hatch = hatchPattern(ctx, tokens.ink3, ratio);
  const shade = (y0: number, y1: number): void => {
    if (!hatch || y1 <= y0) return;
    ctx.fillStyle = hatch;
    ctx.fillRect(left, y0, width, y1 - y0);
  };
  if (row.max !== undefined) {
    const y = yOf(row.max);
    shade(top, y);
    line(left, y, left + width, y, tokens.ink, 1.25);
  }
  if (row.min !== undefined) {
    const y = yOf(row.min);
    shade(y, top + height);
    line(left, y, left + width, y, tokens.ink, 1.25);
  }
  const zero = yOf(0);
  if (zero > top && zero < top + height) line(left, zero, left + width, zero, tokens.edge, 0.75);
  ctx.restore();
}

export function createTracePlot(setup: TracePlotSetup): TracePlot {
  const { tokens } = setup;
  let x = setup.x;
  let y = setup.y;
  const ratio = typeof devicePixelRatio === 'number' ? devicePixelRatio : 1;
  const plot = new uPlot(
    {
      width: setup.width,
      height: setup.height,
      padding: [0, 0, 0, 0],
      legend: { show: false },
      cursor: { show: false },
      select: { show: false, left: 0, top: 0, width: 0, height: 0 },
      axes: [{ show: false }, { show: false }],
      scales: {
        x: { time: false, range: () => [x[0], x[1]] },
        y: { range: () => [y[0], y[1]] },
      },
      series: [
        {},
        { stroke: tokens.ref, width: 1.5, dash: [6, 3], points: { show: false }, spanGaps: false },
        { stroke: tokens.paper, width: 5, alpha: 0.9, points: { show: false }, spanGaps: false },
        { stroke: tokens.ink, width: 2.2, points: { show: false }, spanGaps: false },
      ],
      hooks: { drawClear: [(u) => drawGround(u, setup, ratio)] },
    },
    [[], [], [], []],
    setup.host,
  );
  const applyScales = (): void => {
    plot.batch(() => {
      plot.setScale('x', { min: x[0], max: x[1] });
      plot.setScale('y', { min: y[0], max: y[1] });
    });
  };
  return {
    setSize(width, height) {
      plot.setSize({ width, height });
    },
    setX(from, to) {
      x = [from, to];
    },
    setY(range) {
      y = range;
    },
    setData(times, reference, flown) {
      // uPlot takes ownership of nothing: the arrays are read, not kept beyond the draw.
      plot.setData([times as number[], reference, flown, flown], false);
      applyScales();
    },
    destroy() {
      plot.destroy();
    },
  };
}
