/** Flat triangles against the depth buffer, by scanline spans; pixel centres decide, so neighbours neither gap nor overlap. */
import { blend, type Surface } from './surface.ts';

/** Texture of a triangle: coverage 0 … 256 looked up from screen coordinates. */
export interface PatternFill {
  tile: Uint16Array;
  side: number;
  /** Hatch tiles have one row. */
  lined: boolean;
  /** Tile samples per device pixel along x and y, and the phase at pixel (0, 0). */
  ux: number;
  uy: number;
  u0: number;
  vx: number;
  vy: number;
  v0: number;
}

/** How the pixels of a triangle are written. */
export interface TriangleFill {
  colour: number;
  /** 0 … 256. */
  opacity: number;
  colourWrite: boolean;
  depthTest: boolean;
  depthWrite: boolean;
  pattern: PatternFill | null;
}

/** Fills a triangle given by screen x, y and 1/w. */
export function fillTriangle(
  surface: Surface,
  ax: number,
  ay: number,
  aq: number,
  bx: number,
  by: number,
  bq: number,
  cx: number,
  cy: number,
  cq: number,
  fill: TriangleFill,
): void {
  const area = (bx - ax) * (cy - ay) - (cx - ax) * (by - ay);
  if (area === 0 || area !== area) return;
  // plane of 1/w over the screen
  const qx = ((bq - aq) * (cy - ay) - (cq - aq) * (by - ay)) / area;
  const qy = ((cq - aq) * (bx - ax) - (bq - aq) * (cx - ax)) / area;
  let swap: number;
  if (by < ay) {
    swap = ax;
    ax = bx;
    bx = swap;
    swap = ay;
    ay = by;
    by = swap;
    aq = bq;
  }
  if (cy < ay) {
    swap = ax;
    ax = cx;
    cx = swap;
    swap = ay;
    ay = cy;
    cy = swap;
    aq = cq;
  }
  if (cy < by) {
    swap = bx;
    bx = cx;
    cx = swap;
    swap = by;
    by = cy;
    cy = swap;
  }
  const { width, height } = surface;
  const top = Math.max(0, Math.ceil(ay - 0.5));
  const bottom = Math.min(height, Math.ceil(cy - 0.5));
  if (top >= bottom) return;
  if (fill.depthWrite) surface.touch(top, bottom);
  const longSlope = (cx - ax) / (cy - ay);
  const upperSlope = by > ay ? (bx - ax) / (by - ay) : 0;
  const lowerSlope = cy > by ? (cx - bx) / (cy - by) : 0;
  const plain = fill.colourWrite && fill.depthTest && fill.depthWrite && fill.opacity >= 256 && fill.pattern === null;
  const { colour, depth } = surface;
  for (let y = top; y < bottom; y++) {
    const centre = y + 0.5;
    const long = ax + (centre - ay) * longSlope;
    const short = centre < by ? ax + (centre - ay) * upperSlope : bx + (centre - by) * lowerSlope;
    let from = Math.ceil((long < short ? long : short) - 0.5);
    let to = Math.ceil((long < short ? short : long) - 0.5);
    if (from < 0) from = 0;
    if (to > width) to = width;
    if (from >= to) continue;
    let q = aq + (from + 0.5 - ax) * qx + (centre - ay) * qy;
    const row = y * width;
    if (plain) {
      const value = fill.colour;
      for (let i = row + from, end = row + to; i < end; i++, q += qx) {
        if (q > depth[i]) {
          depth[i] = q;
          colour[i] = value;
        }
      }
    } else {
      fillSpan(surface, row, y, from, to, q, qx, fill);
    }
  }
}

function fillSpan(
  surface: Surface,
  row: number,
  y: number,
  from: number,
  to: number,
  q: number,
  qx: number,
  fill: TriangleFill,
): void {
  const { colour, depth } = surface;
  const pattern = fill.pattern;
  for (let x = from; x < to; x++, q += qx) {
    const i = row + x;
    if (fill.depthTest && q <= depth[i]) continue;
    if (fill.depthWrite) depth[i] = q;
    if (!fill.colourWrite) continue;
    let share = fill.opacity;
    if (pattern !== null) {
      const u = wrap(pattern.u0 + x * pattern.ux + y * pattern.uy, pattern.side);
      const at = pattern.lined
        ? u
        : wrap(pattern.v0 + x * pattern.vx + y * pattern.vy, pattern.side) * pattern.side + u;
      share = pattern.tile[at];
      if (share === 0) continue;
    }
    colour[i] = share >= 256 ? fill.colour : blend(colour[i], fill.colour, share);
  }
}

/** Whole samples modulo the side, never negative. */
function wrap(value: number, side: number): number {
  const rest = Math.floor(value) % side;
  return rest < 0 ? rest + side : rest;
}
