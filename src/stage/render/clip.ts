/** Cutting at the near plane in clip space, and lines at the edges of the picture. Scratch arrays are reused. */

/** Homogeneous points x, y, w in a row; z is not needed, depth is 1/w. */
export type HomogeneousPoints = Float64Array;

/**
 * Cuts a convex polygon at w = near.
 * @param out receives the points; room for count + 1.
 * @returns number of points written; 0 when nothing is in front.
 */
export function clipPolygonNear(
  points: HomogeneousPoints,
  count: number,
  near: number,
  out: HomogeneousPoints,
): number {
  let written = 0;
  let previous = count - 1;
  let previousIn = points[3 * previous + 2] >= near;
  for (let i = 0; i < count; i++) {
    const isIn = points[3 * i + 2] >= near;
    if (isIn !== previousIn) {
      const a = 3 * previous;
      const b = 3 * i;
      const t = (near - points[a + 2]) / (points[b + 2] - points[a + 2]);
      out[3 * written] = points[a] + (points[b] - points[a]) * t;
      out[3 * written + 1] = points[a + 1] + (points[b + 1] - points[a + 1]) * t;
      out[3 * written + 2] = near;
      written++;
    }
    if (isIn) {
      out[3 * written] = points[3 * i];
      out[3 * written + 1] = points[3 * i + 1];
      out[3 * written + 2] = points[3 * i + 2];
      written++;
    }
    previous = i;
    previousIn = isIn;
  }
  return written;
}

/** A segment on the screen with 1/w at its ends, cut in place. */
export interface ScreenSegment {
  x0: number;
  y0: number;
  q0: number;
  x1: number;
  y1: number;
  q1: number;
}

/** Cuts a segment to a rectangle grown by `margin`; false when nothing is left. */
export function clipSegment(s: ScreenSegment, width: number, height: number, margin: number): boolean {
  const dx = s.x1 - s.x0;
  const dy = s.y1 - s.y0;
  let from = 0;
  let to = 1;
  for (let side = 0; side < 4; side++) {
    // p is the speed toward the side, q the distance to it
    const p = side === 0 ? -dx : side === 1 ? dx : side === 2 ? -dy : dy;
    const q =
      side === 0
        ? s.x0 + margin
        : side === 1
          ? width + margin - s.x0
          : side === 2
            ? s.y0 + margin
            : height + margin - s.y0;
    if (p === 0) {
      if (q < 0) return false;
      continue;
    }
    const t = q / p;
    if (p < 0) {
      if (t > to) return false;
      if (t > from) from = t;
    } else {
      if (t < from) return false;
      if (t < to) to = t;
    }
  }
  const dq = s.q1 - s.q0;
  if (to < 1) {
    s.x1 = s.x0 + dx * to;
    s.y1 = s.y0 + dy * to;
    s.q1 = s.q0 + dq * to;
  }
  if (from > 0) {
    s.x0 += dx * from;
    s.y0 += dy * from;
    s.q0 += dq * from;
  }
  return true;
}
