/**
 * Backward error of an approximate eigenvalue: an upper bound of the smallest singular value of A − λI over the spectral
 * scale of A (its Frobenius norm), from ‖(A − λI)x‖/‖x‖ with x by two steps of inverse iteration.
 * An eigenvalue with backward error e is an exact eigenvalue of some A + E with ‖E‖ ≤ e·‖A‖.
 */
export function backwardError(a: ArrayLike<number>, n: number, re: number, im: number): number {
  let norm = 0;
  for (let i = 0; i < n * n; i++) norm = Math.max(norm, Math.abs(a[i]));
  if (norm === 0) return Math.hypot(re, im);
  const size = 2 * n;
  // Real embedding [[R, −I], [I, R]] of the scaled complex matrix.
  const m = Array.from({ length: size }, () => new Float64Array(size));
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      const real = a[i * n + j] / norm - (i === j ? re / norm : 0);
      const imag = i === j ? -im / norm : 0;
      m[i][j] = real;
      m[n + i][n + j] = real;
      m[i][n + j] = -imag;
      m[n + i][j] = imag;
    }
  }
  const original = m.map((row) => row.slice());
  const order = eliminate(m);
  let x: Float64Array = Float64Array.from({ length: size }, (_, i) => 1 + 0.3 * Math.sin(3 * i + 1));
  let best = Infinity;
  let frobenius = 0;
  for (let i = 0; i < n * n; i++) frobenius += (a[i] / norm) ** 2;
  for (let step = 0; step < 3; step++) {
    x = solve(m, order, x);
    const length = Math.hypot(...x);
    if (!Number.isFinite(length)) break;
    x = x.map((v) => v / length);
    let square = 0;
    for (let i = 0; i < size; i++) {
      let sum = 0;
      for (let j = 0; j < size; j++) sum += original[i][j] * x[j];
      square += sum * sum;
    }
    best = Math.min(best, Math.sqrt(square / frobenius));
  }
  return best;
}

/** LU in place with partial pivoting; exact zeros on the diagonal become tiny. */
function eliminate(m: Float64Array[]): number[] {
  const n = m.length;
  const order: number[] = [];
  for (let k = 0; k < n; k++) {
    let pivot = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(m[i][k]) > Math.abs(m[pivot][k])) pivot = i;
    order.push(pivot);
    [m[k], m[pivot]] = [m[pivot], m[k]];
    if (Math.abs(m[k][k]) < 1e-18) m[k][k] = 1e-18;
    for (let i = k + 1; i < n; i++) {
      m[i][k] /= m[k][k];
      for (let j = k + 1; j < n; j++) m[i][j] -= m[i][k] * m[k][j];
    }
  }
  return order;
}

function solve(lu: Float64Array[], order: number[], b: Float64Array): Float64Array {
  const n = lu.length;
  const x = b.slice();
  for (let k = 0; k < n; k++) {
    [x[k], x[order[k]]] = [x[order[k]], x[k]];
    for (let i = k + 1; i < n; i++) x[i] -= lu[i][k] * x[k];
  }
  for (let i = n - 1; i >= 0; i--) {
    for (let j = i + 1; j < n; j++) x[i] -= lu[i][j] * x[j];
    x[i] /= lu[i][i];
  }
  return x;
}
