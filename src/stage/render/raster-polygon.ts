/**
 * Convex polygons without depth, smoothed at the edges: four sub-lines a row, exact cover along x.
 * For what lies on the ground, drawn from the far layer to the near one.
 */
import { blend, type Surface } from './surface.ts';

const SUB = 4;

export class PolygonRaster {
  private left = new Float32Array(0);
  private right = new Float32Array(0);

  /** Makes room for a height in device pixels. */
  resize(height: number): void {
    if (this.left.length < height * SUB) {
      this.left = new Float32Array(height * SUB);
      this.right = new Float32Array(height * SUB);
    }
  }

  /** Fills the polygon with points x, y in a row. `opacity` is 0 … 256. */
  fill(surface: Surface, points: Float64Array, count: number, colour: number, opacity: number): void {
    const lines = surface.height * SUB;
    let low = Number.POSITIVE_INFINITY;
    let high = Number.NEGATIVE_INFINITY;
    for (let i = 0; i < count; i++) {
      const y = points[2 * i + 1];
      if (y < low) low = y;
      if (y > high) high = y;
    }
    const first = Math.max(0, Math.ceil(low * SUB - 0.5));
    const last = Math.min(lines, Math.ceil(high * SUB - 0.5));
    if (!(first < last)) return;
    this.left.fill(Number.POSITIVE_INFINITY, first, last);
    this.right.fill(Number.NEGATIVE_INFINITY, first, last);
    for (let i = 0, j = count - 1; i < count; j = i++) {
      this.walk(points[2 * j], points[2 * j + 1], points[2 * i], points[2 * i + 1], lines);
    }
    for (let y = Math.floor(first / SUB); y * SUB < last; y++) this.row(surface, y, first, last, colour, opacity);
  }

  /** Marks where an edge crosses the sub-lines. */
  private walk(x0: number, y0: number, x1: number, y1: number, lines: number): void {
    if (y0 === y1) return;
    if (y0 > y1) {
      let swap = x0;
      x0 = x1;
      x1 = swap;
      swap = y0;
      y0 = y1;
      y1 = swap;
    }
    const from = Math.max(0, Math.ceil(y0 * SUB - 0.5));
    const to = Math.min(lines, Math.ceil(y1 * SUB - 0.5));
    const slope = (x1 - x0) / (y1 - y0);
    const { left, right } = this;
    for (let line = from; line < to; line++) {
      const x = x0 + ((line + 0.5) / SUB - y0) * slope;
      if (x < left[line]) left[line] = x;
      if (x > right[line]) right[line] = x;
    }
  }

  private row(surface: Surface, y: number, first: number, last: number, colour: number, opacity: number): void {
    const { left, right } = this;
    const { width } = surface;
    const from = Math.max(first, y * SUB);
    const to = Math.min(last, (y + 1) * SUB);
    let outerLeft = Number.POSITIVE_INFINITY;
    let outerRight = Number.NEGATIVE_INFINITY;
    let innerLeft = Number.NEGATIVE_INFINITY;
    let innerRight = Number.POSITIVE_INFINITY;
    for (let line = from; line < to; line++) {
      if (left[line] < outerLeft) outerLeft = left[line];
      if (left[line] > innerLeft) innerLeft = left[line];
      if (right[line] > outerRight) outerRight = right[line];
      if (right[line] < innerRight) innerRight = right[line];
    }
    if (!(outerLeft < outerRight)) return;
    const start = Math.max(0, Math.floor(outerLeft));
    const end = Math.min(width, Math.ceil(outerRight));
    if (start >= end) return;
    // whole pixels need all four sub-lines
    let solidFrom = end;
    let solidTo = end;
    if (to - from === SUB) {
      solidFrom = Math.min(end, Math.max(start, Math.ceil(innerLeft)));
      solidTo = Math.max(solidFrom, Math.min(end, Math.floor(innerRight)));
    }
    this.partial(surface, y * width, start, solidFrom, from, to, colour, opacity);
    if (solidTo > solidFrom) solid(surface.colour, y * width + solidFrom, y * width + solidTo, colour, opacity);
    this.partial(surface, y * width, solidTo, end, from, to, colour, opacity);
  }

  private partial(
    surface: Surface,
    row: number,
    start: number,
    end: number,
    from: number,
    to: number,
    colour: number,
    opacity: number,
  ): void {
    const { left, right } = this;
    for (let x = start; x < end; x++) {
      let cover = 0;
      for (let line = from; line < to; line++) {
        const a = left[line] > x ? left[line] : x;
        const b = right[line] < x + 1 ? right[line] : x + 1;
        if (b > a) cover += b - a;
      }
      const share = Math.round((cover / SUB) * opacity);
      if (share > 0) surface.colour[row + x] = blend(surface.colour[row + x], colour, share);
    }
  }
}

/** A run of whole pixels; what lies beneath repeats, so the last blend is kept. */
function solid(pixels: Uint32Array, from: number, to: number, colour: number, opacity: number): void {
  if (opacity >= 256) {
    pixels.fill(colour, from, to);
    return;
  }
  let under = pixels[from];
  let result = blend(under, colour, opacity);
  for (let i = from; i < to; i++) {
    if (pixels[i] !== under) {
      under = pixels[i];
      result = blend(under, colour, opacity);
    }
    pixels[i] = result;
  }
}
