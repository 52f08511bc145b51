/** Smoothed lines of a set width with square ends, with or without depth. */
import type { ScreenSegment } from './clip.ts';
import { blend, type Surface } from './surface.ts';

/** How much nearer a line with a depth offset counts than the facets it borders; share of 1/w. Ours. */
const OFFSET_SHARE = 0.0025;

export interface LineStroke {
  /** Device pixels. */
  width: number;
  colour: number;
  /** 0 … 256. */
  opacity: number;
  depthTest: boolean;
  depthOffset: boolean;
}

/** Draws the part of a segment that lies on the surface; cut it to the picture first. */
export function strokeSegment(surface: Surface, s: ScreenSegment, stroke: LineStroke): void {
  const dx = s.x1 - s.x0;
  const dy = s.y1 - s.y0;
  const length = Math.sqrt(dx * dx + dy * dy);
  if (!(length > 1e-6)) return;
  if (Math.abs(dx) >= Math.abs(dy)) alongX(surface, s, stroke, length);
  else alongY(surface, s, stroke, length);
}

function alongX(surface: Surface, s: ScreenSegment, stroke: LineStroke, length: number): void {
  const { width, height, colour: pixels, depth } = surface;
  const forward = s.x1 >= s.x0;
  const xa = forward ? s.x0 : s.x1;
  const ya = forward ? s.y0 : s.y1;
  const qa = forward ? s.q0 : s.q1;
  const span = Math.abs(s.x1 - s.x0);
  const slope = ((forward ? s.y1 : s.y0) - ya) / span;
  const rise = ((forward ? s.q1 : s.q0) - qa) / span;
  const cosine = span / length;
  const half = stroke.width / 2 + 0.5;
  const most = Math.min(1, stroke.width) * stroke.opacity;
  const reach = half / cosine;
  const gain = stroke.depthOffset ? 1 + OFFSET_SHARE : 1;
  const first = Math.max(0, Math.floor(xa));
  const last = Math.min(width - 1, Math.floor(xa + span));
  for (let x = first; x <= last; x++) {
    const from = x > xa ? x : xa;
    const to = x + 1 < xa + span ? x + 1 : xa + span;
    if (to <= from) continue;
    const middle = x + 0.5 - xa;
    const yc = ya + middle * slope;
    const q = (qa + middle * rise) * gain;
    let y = Math.ceil(yc - reach - 0.5);
    let yEnd = Math.floor(yc + reach - 0.5);
    if (y < 0) y = 0;
    if (yEnd >= height) yEnd = height - 1;
    for (; y <= yEnd; y++) {
      const i = y * width + x;
      if (stroke.depthTest && q < depth[i]) continue;
      let share = (half - Math.abs(y + 0.5 - yc) * cosine) * stroke.opacity;
      if (share > most) share = most;
      share = (share * (to - from) + 0.5) | 0;
      if (share > 0) pixels[i] = blend(pixels[i], stroke.colour, share);
    }
  }
}

function alongY(surface: Surface, s: ScreenSegment, stroke: LineStroke, length: number): void {
  const { width, height, colour: pixels, depth } = surface;
  const forward = s.y1 >= s.y0;
  const xa = forward ? s.x0 : s.x1;
  const ya = forward ? s.y0 : s.y1;
  const qa = forward ? s.q0 : s.q1;
  const span = Math.abs(s.y1 - s.y0);
  const slope = ((forward ? s.x1 : s.x0) - xa) / span;
  const rise = ((forward ? s.q1 : s.q0) - qa) / span;
  const cosine = span / length;
  const half = stroke.width / 2 + 0.5;
  const most = Math.min(1, stroke.width) * stroke.opacity;
  const reach = half / cosine;
  const gain = stroke.depthOffset ? 1 + OFFSET_SHARE : 1;
  const first = Math.max(0, Math.floor(ya));
  const last = Math.min(height - 1, Math.floor(ya + span));
  for (let y = first; y <= last; y++) {
    const from = y > ya ? y : ya;
    const to = y + 1 < ya + span ? y + 1 : ya + span;
    if (to <= from) continue;
    const middle = y + 0.5 - ya;
    const xc = xa + middle * slope;
    const q = (qa + middle * rise) * gain;
    let x = Math.ceil(xc - reach - 0.5);
    let xEnd = Math.floor(xc + reach - 0.5);
    if (x < 0) x = 0;
    if (xEnd >= width) xEnd = width - 1;
    for (; x <= xEnd; x++) {
      const i = y * width + x;
      if (stroke.depthTest && q < depth[i]) continue;
      let share = (half - Math.abs(x + 0.5 - xc) * cosine) * stroke.opacity;
      if (share > most) share = most;
      share = (share * (to - from) + 0.5) | 0;
      if (share > 0) pixels[i] = blend(pixels[i], stroke.colour, share);
    }
  }
}
