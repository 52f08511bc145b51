/**
 * Places boxed tags and labels so that none covers another: each starts at its wanted place and moves outward along its
 * own direction until clear; where that leaves the picture, directions turned further and further are tried.
 * A tag is never left out. Pure; buffers are reused.
 */

/** Turns tried in order; rad. */
const TURNS = [0, 0.6, -0.6, 1.2, -1.2, 1.9, -1.9, 2.6, -2.6] as const;
const GAP = 3;
const LONGEST_PUSH = 90;

export class TagLayout {
  /** Centre of the last box placed. */
  x = 0;
  y = 0;
  /** How far it had to move. */
  moved = 0;
  private width = 0;
  private height = 0;
  /** Boxes that are taken: centre x, y, half width, half height. */
  private readonly taken = new Float64Array(4 * 64);
  private count = 0;

  begin(width: number, height: number): void {
    this.width = width;
    this.height = height;
    this.count = 0;
  }

  /** Takes a box as it is (labels, heads). */
  block(x: number, y: number, halfWidth: number, halfHeight: number): void {
    if (4 * this.count >= this.taken.length) return;
    const at = 4 * this.count++;
    this.taken[at] = x;
    this.taken[at + 1] = y;
    this.taken[at + 2] = halfWidth;
    this.taken[at + 3] = halfHeight;
  }

  /** Puts a box near (x, y), moving along the unit direction (dx, dy); the result is in `x`, `y`. */
  place(x: number, y: number, dx: number, dy: number, halfWidth: number, halfHeight: number): void {
    let found = false;
    for (let k = 0; k < TURNS.length && !found; k++) {
      const c = Math.cos(TURNS[k]);
      const s = Math.sin(TURNS[k]);
      const ux = dx * c - dy * s;
      const uy = dx * s + dy * c;
      const t = this.clearAlong(x, y, ux, uy, halfWidth, halfHeight);
      if (t > LONGEST_PUSH || !this.inside(x + ux * t, y + uy * t, halfWidth, halfHeight)) continue;
      this.x = x + ux * t;
      this.y = y + uy * t;
      this.moved = t;
      found = true;
    }
    if (!found) {
      this.x = clamp(x, halfWidth + GAP, this.width - halfWidth - GAP);
      this.y = clamp(y, halfHeight + GAP, this.height - halfHeight - GAP);
      this.slideAlongEdge(halfWidth, halfHeight);
      this.moved = Math.hypot(this.x - x, this.y - y);
    }
    this.block(this.x, this.y, halfWidth, halfHeight);
  }

  /** Least distance along a direction at which the box overlaps nothing; each box in the way gives its own exit. */
  private clearAlong(x: number, y: number, ux: number, uy: number, halfWidth: number, halfHeight: number): number {
    let t = 0;
    for (let round = 0; round <= this.count; round++) {
      const hit = this.overlap(x + ux * t, y + uy * t, halfWidth, halfHeight);
      if (hit < 0) return t;
      const at = 4 * hit;
      const reachX = this.taken[at + 2] + halfWidth + GAP;
      const reachY = this.taken[at + 3] + halfHeight + GAP;
      const exitX = ux === 0 ? Number.POSITIVE_INFINITY : (this.taken[at] + Math.sign(ux) * reachX - x) / ux;
      const exitY = uy === 0 ? Number.POSITIVE_INFINITY : (this.taken[at + 1] + Math.sign(uy) * reachY - y) / uy;
      t = Math.max(t, Math.min(exitX, exitY)) + 1e-6;
      if (t > LONGEST_PUSH) return t;
    }
    return t;
  }

  /** Index of a taken box that overlaps; −1 for none. */
  private overlap(x: number, y: number, halfWidth: number, halfHeight: number): number {
    for (let i = 0; i < this.count; i++) {
      const at = 4 * i;
      if (
        Math.abs(this.taken[at] - x) < this.taken[at + 2] + halfWidth + GAP - 1e-9 &&
        Math.abs(this.taken[at + 1] - y) < this.taken[at + 3] + halfHeight + GAP - 1e-9
      ) {
        return i;
      }
    }
    return -1;
  }

  private inside(x: number, y: number, halfWidth: number, halfHeight: number): boolean {
    return (
      x >= halfWidth + GAP &&
      x <= this.width - halfWidth - GAP &&
      y >= halfHeight + GAP &&
      y <= this.height - halfHeight - GAP
    );
  }

  /** Last resort at the edge of the picture: steps toward the middle until clear, first along the edge, then inward. */
  private slideAlongEdge(halfWidth: number, halfHeight: number): void {
    const x = this.x;
    const y = this.y;
    const towardX = x < this.width / 2 ? 1 : -1;
    const towardY = y < this.height / 2 ? 1 : -1;
    for (let step = 0; step <= 24; step++) {
      const along = step * (halfHeight * 2 + GAP);
      for (let inward = 0; inward < 3; inward++) {
        const tryX = x + towardX * inward * (2 * halfWidth + GAP);
        const tryY = y + towardY * along;
        if (!this.inside(tryX, tryY, halfWidth, halfHeight) || this.overlap(tryX, tryY, halfWidth, halfHeight) >= 0)
          continue;
        this.x = tryX;
        this.y = tryY;
        return;
      }
    }
  }
}

const clamp = (value: number, low: number, high: number): number => Math.min(Math.max(value, low), Math.max(low, high));
