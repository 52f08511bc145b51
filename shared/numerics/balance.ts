/** Sweeps are repeated at most this often; three to five settle ordinary matrices. */
const MAX_SWEEPS = 100;

/**
 * The similar matrix D⁻¹ A D with rows and columns of like size, D a diagonal of powers of two (no rounding error).
 *
 * @param a  Matrix; n×n row-major; not changed.
 * @param n  Size.
 * @returns  The balanced matrix and D: an eigenvector of A is D times one of the balanced matrix.
 * @throws   Nothing; the number of sweeps is bounded.
 * @sign     none
 * @source   B. Parlett, C. Reinsch, "Balancing a matrix for calculation of eigenvalues and eigenvectors", Numer. Math. 13 (1969).
 */
export function balance(a: ArrayLike<number>, n: number): { balanced: Float64Array; scale: Float64Array } {
  const m = Float64Array.from(a);
  const scale = new Float64Array(n).fill(1);
  for (let sweep = 0; sweep < MAX_SWEEPS; sweep++) {
    let settled = true;
    for (let i = 0; i < n; i++) {
      let column = 0;
      let row = 0;
      for (let j = 0; j < n; j++) {
        if (j === i) continue;
        column += Math.abs(m[j * n + i]);
        row += Math.abs(m[i * n + j]);
      }
      if (column === 0 || row === 0) continue;
      const before = column + row;
      let f = 1;
      let c = column;
      while (c < row / 2 && f < 1e150) {
        f *= 2;
        c *= 4;
      }
      while (c >= row * 2 && f > 1e-150) {
        f /= 2;
        c /= 4;
      }
      if (f === 1 || (c + row) / f >= 0.95 * before) continue;
      const grown = scale[i] * f;
      if (!(grown > 1e-150 && grown < 1e150)) continue;
      settled = false;
      scale[i] = grown;
      for (let j = 0; j < n; j++) m[i * n + j] /= f;
      for (let j = 0; j < n; j++) m[j * n + i] *= f;
    }
    if (settled) break;
  }
  return { balanced: m, scale };
}
