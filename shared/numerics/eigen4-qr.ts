import { NumericsError } from './errors.ts';

const N = 4;
/** Iterations allowed per eigenvalue; ordinary matrices take two to four. */
const MAX_ITERATIONS = 90;
const MAX_SWEEPS = 60;
const EPSILON = 2.220446049250313e-16;
/** Elements below this fraction of the largest are zero for every purpose here, and would only underflow. */
const NEGLIGIBLE = 1e-150;

const h = new Float64Array(N * N);

/**
 * Writes the four eigenvalues of a real 4×4 matrix into `out` as re, im, re, im, …
 *
 * Scaling and balancing by powers of two, Hessenberg form by elimination, Francis double-shift QR with exceptional
 * shifts; backward stable for the balanced matrix, bounded iterations. The slower, always valid partner of
 * `eigenvalues4Into`.
 *
 * @param out  Eigenvalues; length 8; a complex pair stands together, positive imaginary part first.
 * @param a    Matrix; 16 values row-major, finite; not changed.
 * @returns    Nothing.
 * @throws {NumericsError} no-convergence when 90 iterations do not settle an eigenvalue, non-finite-input.
 * @sign       none
 * @source     R. Martin, G. Peters, J. Wilkinson, "The QR algorithm for real Hessenberg matrices", Numer. Math. 14 (1970).
 */
export function eigenvalues4QrInto(out: Float64Array, a: ArrayLike<number>): void {
  let largest = 0;
  for (let i = 0; i < 16; i++) {
    const size = Math.abs(a[i]);
    if (!(size < Infinity)) throw new NumericsError('non-finite-input', `element ${i} of the matrix is ${a[i]}`);
    if (size > largest) largest = size;
  }
  if (largest === 0) {
    out.fill(0, 0, 8);
    return;
  }
  for (let i = 0; i < 16; i++) {
    const value = a[i] / largest;
    h[i] = Math.abs(value) < NEGLIGIBLE ? 0 : value;
  }
  balanceInPlace();
  reduceToHessenberg();
  iterate(out);
  for (let i = 0; i < 8; i++) out[i] *= largest;
}

function balanceInPlace(): void {
  for (let sweep = 0; sweep < MAX_SWEEPS; sweep++) {
    let settled = true;
    for (let i = 0; i < N; i++) {
      let column = 0;
      let row = 0;
      for (let j = 0; j < N; j++) {
        if (j === i) continue;
        column += Math.abs(h[j * N + i]);
        row += Math.abs(h[i * N + j]);
      }
      if (column === 0 || row === 0) continue;
      let f = 1;
      let c = column;
      while (c < row / 2 && f < 1e75) {
        f *= 2;
        c *= 4;
      }
      while (c >= row * 2 && f > 1e-75) {
        f /= 2;
        c /= 4;
      }
      if (f === 1 || (c + row) / f >= 0.95 * (column + row)) continue;
      settled = false;
      for (let j = 0; j < N; j++) h[i * N + j] /= f;
      for (let j = 0; j < N; j++) h[j * N + i] *= f;
    }
    if (settled) return;
  }
}

/** Similarity by elimination with pivoting (elmhes). */
function reduceToHessenberg(): void {
  for (let m = 1; m < N - 1; m++) {
    let pivot = m;
    for (let i = m + 1; i < N; i++) if (Math.abs(h[i * N + m - 1]) > Math.abs(h[pivot * N + m - 1])) pivot = i;
    const x = h[pivot * N + m - 1];
    if (x === 0) continue;
    if (pivot !== m) {
      for (let j = m - 1; j < N; j++) {
        const held = h[pivot * N + j];
        h[pivot * N + j] = h[m * N + j];
        h[m * N + j] = held;
      }
      for (let i = 0; i < N; i++) {
        const held = h[i * N + pivot];
        h[i * N + pivot] = h[i * N + m];
        h[i * N + m] = held;
      }
    }
    for (let i = m + 1; i < N; i++) {
      const y = h[i * N + m - 1] / x;
      h[i * N + m - 1] = 0;
      if (y === 0) continue;
      for (let j = m; j < N; j++) h[i * N + j] -= y * h[m * N + j];
      for (let k = 0; k < N; k++) h[k * N + m] += y * h[k * N + i];
    }
  }
}

/** Eigenvalues of the Hessenberg matrix in `h` (hqr). */
function iterate(out: Float64Array): void {
  let norm = 0;
  for (let i = 0; i < N; i++) for (let j = Math.max(i - 1, 0); j < N; j++) norm += Math.abs(h[i * N + j]);
  let high = N - 1;
  let shifted = 0;
  let iterations = 0;
  while (high >= 0) {
    let low = high;
    for (; low > 0; low--) {
      const s = Math.abs(h[(low - 1) * N + low - 1]) + Math.abs(h[low * N + low]);
      if (Math.abs(h[low * N + low - 1]) <= EPSILON * (s === 0 ? norm : s)) {
        h[low * N + low - 1] = 0;
        break;
      }
    }
    let x = h[high * N + high];
    if (low === high) {
      out[2 * high] = x + shifted;
      out[2 * high + 1] = 0;
      high--;
      iterations = 0;
      continue;
    }
    let y = h[(high - 1) * N + high - 1];
    let w = h[high * N + high - 1] * h[(high - 1) * N + high];
    if (low === high - 1) {
      writePair(out, high, x + shifted, y + shifted, w);
      high -= 2;
      iterations = 0;
      continue;
    }
    if (iterations >= MAX_ITERATIONS) {
      throw new NumericsError('no-convergence', `${MAX_ITERATIONS} QR iterations did not settle an eigenvalue`);
    }
    if (iterations % 10 === 9) {
      shifted += x;
      for (let i = 0; i <= high; i++) h[i * N + i] -= x;
      const s = Math.abs(h[high * N + high - 1]) + Math.abs(h[(high - 1) * N + high - 2]);
      x = 0.75 * s;
      y = x;
      w = -0.4375 * s * s;
    }
    iterations++;
    sweepOnce(low, high, x, y, w);
  }
}

/** Both roots of the trailing 2×2 block with diagonal y, x and off-diagonal product w. */
function writePair(out: Float64Array, high: number, x: number, y: number, w: number): void {
  const p = 0.5 * (y - x);
  const q = p * p + w;
  const z = Math.sqrt(Math.abs(q));
  const at = 2 * (high - 1);
  if (q >= 0) {
    const far = p + (p >= 0 ? z : -z);
    out[at] = x + far;
    out[at + 2] = far === 0 ? x : x - w / far;
    out[at + 1] = 0;
    out[at + 3] = 0;
  } else {
    out[at] = x + p;
    out[at + 2] = x + p;
    out[at + 1] = z;
    out[at + 3] = -z;
  }
}

/** One Francis double-shift sweep over rows low … high. */
function sweepOnce(low: number, high: number, x: number, y: number, w: number): void {
  let p = 0;
  let q = 0;
  let r = 0;
  let m = high - 2;
  for (; m >= low; m--) {
    const z = h[m * N + m];
    const rr = x - z;
    const ss = y - z;
    p = (rr * ss - w) / h[(m + 1) * N + m] + h[m * N + m + 1];
    q = h[(m + 1) * N + m + 1] - z - rr - ss;
    r = h[(m + 2) * N + m + 1];
    const size = Math.abs(p) + Math.abs(q) + Math.abs(r);
    p /= size;
    q /= size;
    r /= size;
    if (m === low) break;
    const u = Math.abs(h[m * N + m - 1]) * (Math.abs(q) + Math.abs(r));
    const v = Math.abs(p) * (Math.abs(h[(m - 1) * N + m - 1]) + Math.abs(z) + Math.abs(h[(m + 1) * N + m + 1]));
    if (u <= EPSILON * v) break;
  }
  for (let i = m + 2; i <= high; i++) {
    h[i * N + i - 2] = 0;
    if (i !== m + 2) h[i * N + i - 3] = 0;
  }
  for (let k = m; k < high; k++) {
    const three = k !== high - 1;
    let size = 1;
    if (k !== m) {
      p = h[k * N + k - 1];
      q = h[(k + 1) * N + k - 1];
      r = three ? h[(k + 2) * N + k - 1] : 0;
      size = Math.abs(p) + Math.abs(q) + Math.abs(r);
      if (size === 0) continue;
      p /= size;
      q /= size;
      r /= size;
    }
    const length = Math.sqrt(p * p + q * q + r * r);
    const s = p < 0 ? -length : length;
    if (s === 0) continue;
    if (k !== m) h[k * N + k - 1] = -s * size;
    else if (low !== m) h[k * N + k - 1] = -h[k * N + k - 1];
    p += s;
    const fx = p / s;
    const fy = q / s;
    const fz = r / s;
    q /= p;
    r /= p;
    for (let j = k; j <= high; j++) {
      let sum = h[k * N + j] + q * h[(k + 1) * N + j];
      if (three) {
        sum += r * h[(k + 2) * N + j];
        h[(k + 2) * N + j] -= sum * fz;
      }
      h[(k + 1) * N + j] -= sum * fy;
      h[k * N + j] -= sum * fx;
    }
    const last = Math.min(high, k + 3);
    for (let i = low; i <= last; i++) {
      let sum = fx * h[i * N + k] + fy * h[i * N + k + 1];
      if (three) {
        sum += fz * h[i * N + k + 2];
        h[i * N + k + 2] -= sum * r;
      }
      h[i * N + k + 1] -= sum * q;
      h[i * N + k] -= sum;
    }
  }
}
