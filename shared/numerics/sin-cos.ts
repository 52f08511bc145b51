import { cos, sin } from './elementary.ts';

/** Arguments beyond this go to the one-argument functions: the reduction below is exact to about 2^20 quarter turns. */
const LARGEST = 1e5;
const TWO_OVER_PI = 0.6366197723675814;
/** First 33 bits of π/2, and the rest. */
const HALF_PI_HEAD = 1.57079632673412561417;
const HALF_PI_TAIL = 6.07710050650619224932e-11;
const QUARTER_PI = 0.7853981633974483;
const S1 = -1.66666666666666324348e-1;

/**
 * Writes sine and cosine of several angles into the array that holds them, without allocation.
 *
 * @param table  Angles in 0 … count − 1, rad; sine and cosine of angle i are written to count + 2i and count + 2i + 1.
 * @param count  Number of angles; the table is at least 3·count long.
 * @returns      Nothing.
 * @throws       Nothing; a non-finite angle gives NaN.
 * @sign         none
 * @source       As `sinCosAt`.
 */
export function sinCosInto(table: number[], count: number): void {
  for (let i = 0; i < count; i++) sinCosAt(table, i, count + 2 * i);
}

/**
 * Writes sine and cosine of one angle of an array into the array, in one pass and without allocation.
 *
 * For inner loops: a call that takes or returns a floating-point number may allocate, one that works on an array does
 * not, and sine and cosine share one reduction. Same polynomials and same reduction to ±π/4 as the one-argument functions
 * of elementary.ts (which take over beyond 1e5 rad); additions and multiplications only, so the bits are the same in
 * every JavaScript engine; error below 1 unit in the last place; exactly odd and even.
 *
 * @param table  Holds the angle; rad.
 * @param from   Place of the angle.
 * @param at     Place of the sine; the cosine follows it.
 * @returns      Nothing.
 * @throws       Nothing; a non-finite angle gives NaN.
 * @sign         none
 * @source       FreeBSD msun k_sin.c, k_cos.c, e_rem_pio2.c (Sun Microsystems 1993), as in @stdlib's sin and cos.
 */
export function sinCosAt(table: number[], from: number, at: number): void {
  const angle = table[from];
  const size = angle < 0 ? -angle : angle;
  if (!(size < LARGEST)) {
    table[at] = sin(angle);
    table[at + 1] = cos(angle);
    return;
  }
  let x = size;
  let y = 0;
  let quarter = 0;
  if (size > QUARTER_PI) {
    quarter = Math.round(size * TWO_OVER_PI);
    const rest = size - quarter * HALF_PI_HEAD;
    const tail = quarter * HALF_PI_TAIL;
    x = rest - tail;
    y = rest - x - tail;
  }
  const z = x * x;
  const w = z * z;
  const r =
    8.33333333332248946124e-3 +
    z * (-1.98412698298579493134e-4 + z * 2.75573137070700676789e-6) +
    z * w * (-2.50507602534068634195e-8 + z * 1.58969099521155010221e-10);
  const v = z * x;
  const sine = y === 0 ? x + v * (S1 + z * r) : x - (z * (0.5 * y - v * r) - y - v * S1);
  const c =
    z * (4.16666666666666019037e-2 + z * (-1.38888888888741095749e-3 + z * 2.48015872894767294178e-5)) +
    w * w * (-2.75573143513906633035e-7 + z * (2.0875723212981748279e-9 + z * -1.13596475577881948265e-11));
  const half = 0.5 * z;
  const near = 1 - half;
  const cosine = near + (1 - near - half + (z * c - x * y));
  const turned = quarter & 3;
  const s = turned === 0 ? sine : turned === 1 ? cosine : turned === 2 ? -sine : -cosine;
  table[at] = angle < 0 ? -s : s;
  table[at + 1] = turned === 0 ? cosine : turned === 1 ? -sine : turned === 2 ? -cosine : sine;
}
