import type { Stream } from '#shared/numerics/random.ts';

/** Random 4×4 matrices; every eighth has a structure that troubles eigenvalue routines. */
export function randomMatrix(stream: Stream, index: number): Float64Array {
  const a = Float64Array.from({ length: 16 }, () => 10 * stream.uniform() - 5);
  if (index % 8 === 3) scaleBadly(stream, a);
  if (index % 8 === 5) {
    // Near-multiple: a small disturbance of a similarity transform of a defective matrix.
    const root = a[0];
    return similar(stream, [root, 1, 0, 0, 0, root, 0, 0, 0, 0, root + 1e-7 * a[1], a[2], 0, 0, 0, -root]);
  }
  if (index % 8 === 7) return similar(stream, [a[0], 0, 0, 0, 0, a[0], 0, 0, 0, 0, a[1], a[2], 0, 0, -a[2], a[1]]);
  return a;
}

/** Lateral system matrices about plausible ones, ±50 %; some defective, some in badly chosen units. */
export function randomLateral(stream: Stream, index: number): Float64Array {
  const vary = (value: number) => value * (0.5 + stream.uniform());
  const a = Float64Array.from([
    vary(-0.15),
    vary(0.01),
    vary(-0.99),
    vary(0.15),
    vary(-4),
    vary(-2),
    vary(0.6),
    0,
    vary(2.5),
    vary(-0.2),
    vary(-0.3),
    0,
    0,
    1,
    vary(0.05),
    0,
  ]);
  if (index % 10 === 4) a[3] = 0; // gravity off: a zero root
  if (index % 10 === 6) {
    // Defective: roll and heading decoupled with equal damping.
    a[4] = 0;
    a[6] = 0;
    a[5] = a[10];
    a[9] = 0;
  }
  if (index % 10 === 8) a[8] = -a[0] * a[10] * 0.999999; // a nearly repeated pair at the Dutch roll's turning point
  if (index % 10 === 9) scaleBadly(stream, a);
  return a;
}

function scaleBadly(stream: Stream, a: Float64Array): void {
  const d = Array.from({ length: 4 }, () => 10 ** (8 * stream.uniform() - 4));
  for (let i = 0; i < 4; i++) for (let j = 0; j < 4; j++) a[i * 4 + j] *= d[i] / d[j];
}

/** T·M·T⁻¹ with T = I + a random rank-one part, whose inverse is known exactly. */
function similar(stream: Stream, m: number[]): Float64Array {
  const u = Array.from({ length: 4 }, () => stream.uniform() - 0.5);
  const v = Array.from({ length: 4 }, () => stream.uniform() - 0.5);
  const dot = u.reduce((sum, value, i) => sum + value * v[i], 0);
  const t = (i: number, j: number) => (i === j ? 1 : 0) + u[i] * v[j];
  const inverse = (i: number, j: number) => (i === j ? 1 : 0) - (u[i] * v[j]) / (1 + dot);
  const out = new Float64Array(16);
  for (let i = 0; i < 4; i++) {
    for (let j = 0; j < 4; j++) {
      for (let k = 0; k < 4; k++) {
        for (let l = 0; l < 4; l++) out[i * 4 + j] += t(i, k) * m[k * 4 + l] * inverse(l, j);
      }
    }
  }
  return out;
}
