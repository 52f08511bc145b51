/** Level regions of the Dutch roll in the upper half of the s-plane, as curves of the real part over the imaginary part. */

export interface DampingMinimum {
  level: 1 | 2 | 3;
  /** Least damping ratio. */
  zeta: number;
  /** Least product of damping and frequency, rad/s; null where the standard asks none. */
  zetaOmega: number | null;
  /** Least undamped frequency, rad/s. */
  omega: number;
}

/** Largest real part (1/s, negative) that still meets a minimum at the imaginary part `im` (1/s). */
export function boundaryRealPart(minimum: DampingMinimum, im: number): number {
  const byRatio = minimum.zeta < 1 ? (minimum.zeta * im) / Math.sqrt(1 - minimum.zeta ** 2) : Infinity;
  const byFrequency = im < minimum.omega ? Math.sqrt(minimum.omega ** 2 - im ** 2) : 0;
  return -Math.max(minimum.zetaOmega ?? 0, byRatio, byFrequency);
}

/** Boundary sampled from the real axis to `top` (1/s), denser below the frequency minimum where it bends. */
export function boundaryCurve(minimum: DampingMinimum, top: number, count = 120): { re: number; im: number }[] {
  const points: { re: number; im: number }[] = [];
  for (let i = 0; i <= count; i++) {
    const part = i / count;
    const im = top * part * part;
    points.push({ re: boundaryRealPart(minimum, im), im });
  }
  return points;
}
