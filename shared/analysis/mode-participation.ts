/** Participation of states in modes: what tells a Dutch roll from a lateral oscillation of bank. */

/**
 * How much state `k` takes part in the mode of eigenvalue re + i·im: |∂λ/∂a_kk|.
 *
 * cof_kk(λI − A)/p'(λ), the derivative of the eigenvalue by the state's own damping; the shares of all states add up to 1
 * before their magnitudes are taken. Infinite for a repeated eigenvalue.
 *
 * @param a   System matrix; n×n row-major; 1/s.
 * @param n   4, or 5 with the washout state.
 * @param re  Real part of an eigenvalue of `a`; 1/s.
 * @param im  Imaginary part; 1/s.
 * @param k   State index: 0 β, 1 p, 2 r, 3 φ, 4 washout.
 * @returns   Share, 0 … 1 and beyond; 1.
 * @throws    Nothing.
 * @sign      none
 * @source    I. Pérez-Arriaga, G. Verghese, F. Schweppe, "Selective modal analysis", IEEE Trans. PAS-101 (1982).
 */
export function participation(a: ArrayLike<number>, n: number, re: number, im: number, k: number): number {
  let sumRe = 0;
  let sumIm = 0;
  let ownRe = 0;
  let ownIm = 0;
  const minor = { re: new Float64Array((n - 1) * (n - 1)), im: new Float64Array((n - 1) * (n - 1)) };
  for (let j = 0; j < n; j++) {
    const [x, y] = principalMinor(minor, a, n, re, im, j);
    sumRe += x;
    sumIm += y;
    if (j === k) {
      ownRe = x;
      ownIm = y;
    }
  }
  const total = Math.sqrt(sumRe * sumRe + sumIm * sumIm);
  const own = Math.sqrt(ownRe * ownRe + ownIm * ownIm);
  return total > 0 ? own / total : Infinity;
}

/** det of λI − A without row and column j, by elimination with pivoting. */
function principalMinor(
  work: { re: Float64Array; im: Float64Array },
  a: ArrayLike<number>,
  n: number,
  re: number,
  im: number,
  j: number,
): [number, number] {
  const size = n - 1;
  const x = work.re;
  const y = work.im;
  for (let r = 0, row = 0; r < n; r++) {
    if (r === j) continue;
    for (let c = 0, column = 0; c < n; c++) {
      if (c === j) continue;
      x[row * size + column] = (r === c ? re : 0) - a[r * n + c];
      y[row * size + column] = r === c ? im : 0;
      column++;
    }
    row++;
  }
  let detRe = 1;
  let detIm = 0;
  for (let k = 0; k < size; k++) {
    let pivot = k;
    let best = -1;
    for (let i = k; i < size; i++) {
      const square = x[i * size + k] * x[i * size + k] + y[i * size + k] * y[i * size + k];
      if (square > best) {
        best = square;
        pivot = i;
      }
    }
    if (!(best > 0)) return [0, 0];
    if (pivot !== k) {
      for (let c = k; c < size; c++) {
        const heldRe = x[k * size + c];
        const heldIm = y[k * size + c];
        x[k * size + c] = x[pivot * size + c];
        y[k * size + c] = y[pivot * size + c];
        x[pivot * size + c] = heldRe;
        y[pivot * size + c] = heldIm;
      }
      detRe = -detRe;
      detIm = -detIm;
    }
    const pr = x[k * size + k];
    const pi = y[k * size + k];
    const next = detRe * pr - detIm * pi;
    detIm = detRe * pi + detIm * pr;
    detRe = next;
    for (let i = k + 1; i < size; i++) {
      const fr = (x[i * size + k] * pr + y[i * size + k] * pi) / best;
      const fi = (y[i * size + k] * pr - x[i * size + k] * pi) / best;
      for (let c = k + 1; c < size; c++) {
        x[i * size + c] -= fr * x[k * size + c] - fi * y[k * size + c];
        y[i * size + c] -= fr * y[k * size + c] + fi * x[k * size + c];
      }
    }
  }
  return [detRe, detIm];
}
