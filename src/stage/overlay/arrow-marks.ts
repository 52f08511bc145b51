/** The marks of the arrows: line, head and halo of each, as the look page fixes them. Moments are arcs, forces straight. */
import type { ArrowId } from '../stage-types.ts';

export type StraightId = Exclude<ArrowId, 'N' | 'L'>;
type Context = CanvasRenderingContext2D;

interface LineMark {
  width: number;
  dash: readonly number[];
  round: boolean;
  /** A lighter core, which makes the line double. */
  core: number;
  /** Where the line ends before the tip. */
  gap: number;
}

const LINES: Readonly<Record<StraightId, LineMark>> = {
  R: { width: 4, dash: [], round: false, core: 0, gap: 13 },
  F: { width: 3.2, dash: [9, 4], round: false, core: 0, gap: 2 },
  Y: { width: 3.4, dash: [1.5, 4], round: true, core: 0, gap: 12 },
  LL: { width: 2.4, dash: [], round: false, core: 0, gap: 14 },
  LR: { width: 3, dash: [], round: false, core: 0, gap: 13 },
  T: { width: 4, dash: [], round: false, core: 0, gap: 9 },
  D: { width: 3, dash: [4, 2.5], round: false, core: 0, gap: 8 },
  W: { width: 5.5, dash: [], round: false, core: 2, gap: 15 },
};

/** Outlines of the heads, x and y in a row; they point along +x with the tip at the origin. */
const TRIANGLE = [0, 0, -15, -7, -15, 7];
const CHEVRON = [-13, -8, 0, 0, -13, 8];
const SIDE_TRIANGLE = [-13, -7, 0, 0, -13, 7];
const SIDE_BAR = [1, -8, 1, 8];
const HOLLOW = [-14, -7, 0, 0, -14, 7];
const HALF_BARB = [-15, -9, 0, 0, -15, 0];
const FRONT_CHEVRON = [-10, -7, 0, 0, -10, 7];
const BACK_CHEVRON = [-18, -7, -8, 0, -18, 7];
const SQUARE = [-9, -6, 0, -6, 0, 6, -9, 6];
const DIAMOND = [0, 0, -8, -6, -16, 0, -8, 6];
const BARBED = [12, 0, -6, -9, -1, 0, -6, 9];
const ARC_HOLLOW = [10, 0, -7, -8, -7, 8];
const SLASH_GROUND = [-3, 7, 3, -7];
const SLASH_ONE = [-6, 7, 0, -7];
const SLASH_TWO = [0, 7, 6, -7];

const HEADS: Readonly<Record<StraightId, (ctx: Context, ink: string, ground: string) => void>> = {
  R: (ctx, ink) => shape(ctx, TRIANGLE, ink, null, 0),
  F: (ctx, ink) => open(ctx, CHEVRON, ink, 3),
  Y: (ctx, ink, ground) => {
    shape(ctx, SIDE_TRIANGLE, ground, ink, 2);
    open(ctx, SIDE_BAR, ink, 2.5);
  },
  LL: (ctx, ink, ground) => shape(ctx, HOLLOW, ground, ink, 2),
  LR: (ctx, ink) => shape(ctx, HALF_BARB, ink, null, 0),
  T: (ctx, ink) => {
    open(ctx, FRONT_CHEVRON, ink, 3);
    open(ctx, BACK_CHEVRON, ink, 3);
  },
  D: (ctx, ink) => shape(ctx, SQUARE, ink, null, 0),
  W: (ctx, ink) => shape(ctx, DIAMOND, ink, null, 0),
};

/** The halo is this much wider than the line, and this strong. */
const HALO = 4;
const HALO_ALPHA = 0.8;
/** Arrows shorter than this shrink their head; shorter than the second draw a ring: no force to speak of. */
const FULL_HEAD_PX = 22;
const RING_PX = 2.5;

/** Draws a straight arrow from (x0, y0) to (x1, y1); `broken` marks one that would be longer. */
export function drawStraight(
  ctx: Context,
  id: StraightId,
  x0: number,
  y0: number,
  x1: number,
  y1: number,
  broken: boolean,
  ink: string,
  ground: string,
): void {
  const length = Math.hypot(x1 - x0, y1 - y0);
  if (length < RING_PX) {
    drawRing(ctx, x0, y0, ink, ground);
    return;
  }
  const mark = LINES[id];
  const scale = Math.min(1, Math.max(0.4, length / FULL_HEAD_PX));
  const end = Math.max(0, length - mark.gap * scale);
  ctx.save();
  ctx.translate(x0, y0);
  ctx.rotate(Math.atan2(y1 - y0, x1 - x0));
  ctx.globalAlpha = HALO_ALPHA;
  stroke(ctx, 0, length, mark.width + HALO, ground, [], false);
  ctx.globalAlpha = 1;
  if (end > 0) stroke(ctx, 0, end, mark.width, ink, mark.dash, mark.round);
  if (mark.core > 0 && end > 0) stroke(ctx, 0, end, mark.core, ground, [], false);
  if (broken) drawBreak(ctx, length / 2, ink, ground);
  ctx.translate(length, 0);
  ctx.scale(scale, scale);
  HEADS[id](ctx, ink, ground);
  ctx.restore();
}

/** Draws an arc through points (x, y in a row) with the head at the last one. */
export function drawArc(
  ctx: Context,
  id: 'N' | 'L',
  points: Float32Array,
  count: number,
  ink: string,
  ground: string,
): void {
  if (count < 2) return;
  const last = 2 * (count - 1);
  const back = Math.max(0, last - 4);
  let length = 0;
  for (let i = 2; i <= last; i += 2) length += Math.hypot(points[i] - points[i - 2], points[i + 1] - points[i - 1]);
  if (length < RING_PX) {
    drawRing(ctx, points[0], points[1], ink, ground);
    return;
  }
  const scale = Math.min(1, Math.max(0.4, length / FULL_HEAD_PX));
  ctx.save();
  ctx.lineJoin = 'round';
  ctx.globalAlpha = 0.85;
  arcPath(ctx, points, count, ground, 9);
  ctx.globalAlpha = 1;
  if (id === 'N') {
    arcPath(ctx, points, count, ink, 4.5);
  } else {
    arcPath(ctx, points, count, ink, 6);
    arcPath(ctx, points, count, ground, 2);
  }
  ctx.translate(points[last], points[last + 1]);
  ctx.rotate(Math.atan2(points[last + 1] - points[back + 1], points[last] - points[back]));
  ctx.scale(scale, scale);
  if (id === 'N') shape(ctx, BARBED, ink, null, 0);
  else shape(ctx, ARC_HOLLOW, ground, ink, 2.5);
  ctx.restore();
}

/** Nothing to speak of: a ring where the arrow would start. */
function drawRing(ctx: Context, x: number, y: number, ink: string, ground: string): void {
  ctx.beginPath();
  ctx.arc(x, y, 3, 0, 2 * Math.PI);
  ctx.fillStyle = ground;
  ctx.fill();
  ctx.lineWidth = 2;
  ctx.strokeStyle = ink;
  ctx.stroke();
}

function arcPath(ctx: Context, points: Float32Array, count: number, colour: string, width: number): void {
  ctx.beginPath();
  ctx.moveTo(points[0], points[1]);
  for (let i = 1; i < count; i++) ctx.lineTo(points[2 * i], points[2 * i + 1]);
  ctx.lineWidth = width;
  ctx.strokeStyle = colour;
  ctx.stroke();
}

const NO_DASH: number[] = [];

function stroke(
  ctx: Context,
  from: number,
  to: number,
  width: number,
  colour: string,
  dash: readonly number[],
  round: boolean,
): void {
  ctx.beginPath();
  ctx.moveTo(from, 0);
  ctx.lineTo(to, 0);
  ctx.lineWidth = width;
  ctx.strokeStyle = colour;
  ctx.lineCap = round ? 'round' : 'butt';
  if (dash.length > 0) ctx.setLineDash(dash as number[]); // setLineDash only reads
  ctx.stroke();
  if (dash.length > 0) ctx.setLineDash(NO_DASH);
  ctx.lineCap = 'butt';
}

/** Two slashes through the line. */
function drawBreak(ctx: Context, at: number, ink: string, ground: string): void {
  ctx.translate(at, 0);
  open(ctx, SLASH_GROUND, ground, 7);
  open(ctx, SLASH_ONE, ink, 2);
  open(ctx, SLASH_TWO, ink, 2);
  ctx.translate(-at, 0);
}

function trace(ctx: Context, points: readonly number[]): void {
  ctx.beginPath();
  ctx.moveTo(points[0], points[1]);
  for (let i = 2; i < points.length; i += 2) ctx.lineTo(points[i], points[i + 1]);
}

function open(ctx: Context, points: readonly number[], ink: string, width: number): void {
  trace(ctx, points);
  ctx.lineWidth = width;
  ctx.strokeStyle = ink;
  ctx.stroke();
}

function shape(ctx: Context, points: readonly number[], fill: string, edge: string | null, width: number): void {
  trace(ctx, points);
  ctx.closePath();
  ctx.fillStyle = fill;
  ctx.fill();
  if (edge !== null) {
    ctx.lineWidth = width;
    ctx.strokeStyle = edge;
    ctx.stroke();
  }
}
