/** The zebra border and the labels beside it. */
import type { TapeWindow } from './tape-window.ts';

export interface FrameInner {
  left: number;
  top: number;
  right: number;
  bottom: number;
  width: number;
  height: number;
}

export interface ZebraCell {
  x: number;
  y: number;
  w: number;
  h: number;
  dark: boolean;
}

const ROWS = 12;
const COLUMNS = 16;
const BAND = 8;

/** Twelve cells a side and sixteen along top and bottom, 8 px wide, with plain corners. */
export function zebraCells({ left, top, right, bottom, width, height }: FrameInner): ZebraCell[] {
  const cells: ZebraCell[] = [];
  for (let i = 0; i < ROWS; i += 1) {
    const cell = { y: top + (i * height) / ROWS, w: BAND, h: height / ROWS, dark: i % 2 === 1 };
    cells.push({ x: left - BAND, ...cell }, { x: right, ...cell });
  }
  for (let i = 0; i < COLUMNS; i += 1) {
    const cell = { x: left + (i * width) / COLUMNS, w: width / COLUMNS, h: BAND, dark: i % 2 === 1 };
    cells.push({ y: top - BAND, ...cell }, { y: bottom, ...cell });
  }
  for (const x of [left - BAND, right]) {
    for (const y of [top - BAND, bottom]) cells.push({ x, y, w: BAND, h: BAND, dark: false });
  }
  return cells;
}

export interface TapeLabel {
  y: number;
  text: string;
}

/** Labels of a vertical edge; the first and last are moved inside the frame. */
export function labelsOn(window: TapeWindow, every: number, yOf: (value: number) => number): TapeLabel[] {
  const labels: TapeLabel[] = [];
  for (let value = window.low; value <= window.high + 1e-9; value += every) {
    const shift = value === window.low ? -2 : Math.abs(value - window.high) < 1e-9 ? 11 : 4;
    labels.push({ y: yOf(value) + shift, text: String(Math.round(value)).replace('-', '−') });
  }
  return labels;
}
