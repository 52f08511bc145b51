/** The lamp of the drawing: over the viewer's left shoulder, as on a draughtsman's table. It turns with the view's azimuth, never with bank. */
import type { Vector3 } from 'three';

/** Toward the lamp: to the left, up, back toward the viewer. Ours. */
const LEFT = 0.5;
const UP = 0.68;
const BACK = 0.54;

/** Unit direction toward the lamp for a view that looks along an azimuth (clockwise from north). */
export function lightInto(out: Vector3, azimuthRad: number): Vector3 {
  const sin = Math.sin(azimuthRad);
  const cos = Math.cos(azimuthRad);
  // forward (sin, 0, −cos), right (cos, 0, sin)
  return out.set(-LEFT * cos - BACK * sin, UP, -LEFT * sin + BACK * cos).normalize();
}
