/** Geometry of the chart of first correct pedals. */
import type { PedalAttempt } from './pedal-series.ts';

export interface PedalChart {
  /** Right edge and bottom of the plot; its left and top are fixed. */
  left: number;
  top: number;
  right: number;
  bottom: number;
  columns: { x: number; from: number; width: number; label: string; limitY: number | null }[];
  /** Points in order; `never` stands at the upper edge. */
  points: { x: number; y: number; met: boolean; never: boolean }[];
  line: string;
  seconds: { y: number; text: string }[];
}

const LEFT = 34;
const TOP = 8;
const AXIS_ROOM = 26;

export function pedalChart(series: readonly PedalAttempt[], width: number, height: number): PedalChart {
  const right = width - 10;
  const bottom = height - AXIS_ROOM;
  const most = Math.max(0, ...series.flatMap((each) => [each.valueS ?? 0, each.limitS ?? 0]));
  const top = Math.max(3, Math.ceil(most * 1.1));
  const step = top > 12 ? 5 : top > 6 ? 2 : 1;
  const y = (seconds: number): number => round(bottom - ((bottom - TOP) * seconds) / top);
  const each = (right - LEFT) / Math.max(1, series.length);
  const points = series.map((attempt, index) => ({
    x: round(LEFT + each * (index + 0.5)),
    y: attempt.valueS === null ? TOP : y(Math.min(attempt.valueS, top)),
    met: attempt.met,
    never: attempt.valueS === null,
  }));
  const seconds = [];
  for (let s = 0; s <= top; s += step) seconds.push({ y: y(s), text: String(s) });
  return {
    left: LEFT,
    top: TOP,
    right,
    bottom,
    columns: series.map((attempt, index) => ({
      x: round(LEFT + each * (index + 0.5)),
      from: round(LEFT + each * index),
      width: round(each),
      label: String(index + 1),
      limitY: attempt.limitS === null ? null : y(Math.min(attempt.limitS, top)),
    })),
    points,
    line: points.map((point, index) => `${index === 0 ? 'M' : 'L'}${point.x} ${point.y}`).join(''),
    seconds,
  };
}

function round(value: number): number {
  return Math.round(value * 100) / 100;
}
