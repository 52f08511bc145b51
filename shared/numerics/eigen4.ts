import { eigenvalues4QrInto } from './eigen4-qr.ts';

/*
 * One long function on purpose: V8 passes numbers between functions that it does not inline as heap objects, and the
 * routine must not allocate. The parts are marked.
 */

/** A single-precision number and its bits, for the first guess of a cube root. */
const bits = new Int32Array(1);
const single = new Float32Array(bits.buffer);
/** First guess of m^(−1/3) from the bits of m: off by at most 10.3 % in m·g³ (constant found by search; ours). */
const INVERSE_CUBE_ROOT_BITS = 0x54a1f000;
const LARGEST_SINGLE = 1e30;
const SMALLEST_SINGLE = 1e-30;
/** Newton steps on the quadratic factors; one or two settle ordinary matrices, the rest go to QR. */
const MAX_NEWTON_STEPS = 4;
/** A Newton step below this fraction of the squared norm is the last: what remains is its square, 2.5e-15. */
const STEP_LIMIT = 5e-8;
/** Roots nearer to each other than |p'(λ)| = 1e-5·‖A‖³ are left to QR: there the polynomial loses more than 1e-9. */
const SEPARATION_SQUARED = 1e-10;

/**
 * Writes the four eigenvalues of a real 4×4 matrix into `out` as re, im, re, im, …
 *
 * Characteristic polynomial of A − (tr A/4)·I, factored into two real quadratics through its resolvent cubic and polished
 * by Newton's method. The step from coefficients to roots is accepted only where it is provably harmless: the distance
 * of each root from an eigenvalue is at most about 10·ε·‖A‖⁴/|p'(λ)|, and roots with |p'(λ)| < 1e-5·‖A‖³ (near-multiple
 * roots, bad scaling), unsettled Newton steps and extreme magnitudes go to balanced QR (`eigenvalues4QrInto`) instead.
 * Backward error (smallest singular value of A − λI over ‖A‖) below 1e-9 either way. No allocation.
 *
 * @param out  Eigenvalues; length 8; a complex pair stands together, positive imaginary part first.
 * @param a    Matrix; 16 values row-major; 1/s when it is a system matrix; not changed.
 * @returns    Nothing.
 * @throws {NumericsError} non-finite-input, and no-convergence from QR (not met in 100,000 random matrices).
 * @sign       none
 * @source     L. Ferrari's resolvent in the form of M. Abramowitz, I. Stegun, Handbook of Mathematical Functions, 3.8.3;
 *             the acceptance test is derived here.
 */
export function eigenvalues4Into(out: Float64Array, a: Float64Array): void {
  const d3 = a[15];
  const d0 = a[0];
  const a01 = a[1];
  const a02 = a[2];
  const a03 = a[3];
  const a10 = a[4];
  const d1 = a[5];
  const a12 = a[6];
  const a13 = a[7];
  const a20 = a[8];
  const a21 = a[9];
  const d2 = a[10];
  const a23 = a[11];
  const a30 = a[12];
  const a31 = a[13];
  const a32 = a[14];
  const mean = 0.25 * (d0 + d1 + (d2 + d3));

  // Coefficients of x⁴ + q x² + r x + s with x = λ − mean, and the squared Frobenius norm.
  let q: number;
  let r: number;
  let s: number;
  let norm2: number;
  if (a13 === 0 && a23 === 0 && a30 === 0 && d3 === 0) {
    // The lateral pattern: the last state acts on the first only and has no damping or first-state term of its own.
    const e = a10 * a31 + a20 * a32;
    const k12 = d1 * d2 - a12 * a21;
    const k02 = a10 * d2 - a12 * a20;
    const k01 = a10 * a21 - d1 * a20;
    const c2 = d0 * d1 - a01 * a10 + (d0 * d2 - a02 * a20) + k12;
    const c1 = -(d0 * k12 - a01 * k02 + a02 * k01) - a03 * e;
    const c0 = a03 * (k02 * a31 - k01 * a32);
    const mean2 = mean * mean;
    q = c2 - 6 * mean2;
    r = c1 + 2 * mean * (c2 - 4 * mean2);
    s = c0 + mean * (c1 + mean * (c2 - 3 * mean2));
    norm2 =
      d0 * d0 +
      a01 * a01 +
      (a02 * a02 + a03 * a03) +
      (a10 * a10 + d1 * d1 + (a12 * a12 + a20 * a20)) +
      (a21 * a21 + d2 * d2 + (a31 * a31 + a32 * a32));
  } else {
    const a00 = d0 - mean;
    const a11 = d1 - mean;
    const a22 = d2 - mean;
    const a33 = d3 - mean;
    const m01 = a00 * a11 - a01 * a10;
    const m02 = a00 * a12 - a02 * a10;
    const m03 = a00 * a13 - a03 * a10;
    const m12 = a01 * a12 - a02 * a11;
    const m13 = a01 * a13 - a03 * a11;
    const m23 = a02 * a13 - a03 * a12;
    const n01 = a20 * a31 - a21 * a30;
    const n02 = a20 * a32 - a22 * a30;
    const n03 = a20 * a33 - a23 * a30;
    const n12 = a21 * a32 - a22 * a31;
    const n13 = a21 * a33 - a23 * a31;
    const n23 = a22 * a33 - a23 * a32;
    q = m01 + n23 + (a00 + a11) * (a22 + a33) - (a02 * a20 + a12 * a21) - (a03 * a30 + a13 * a31);
    r = -(
      a20 * m12 -
      a21 * m02 +
      a22 * m01 +
      (a30 * m13 - a31 * m03 + a33 * m01) +
      (a00 * n23 - a02 * n03 + a03 * n02) +
      (a11 * n23 - a12 * n13 + a13 * n12)
    );
    s = m01 * n23 - m02 * n13 + (m03 * n12 + m12 * n03) + (m23 * n01 - m13 * n02);
    norm2 =
      a00 * a00 +
      a01 * a01 +
      (a02 * a02 + a03 * a03) +
      (a10 * a10 + a11 * a11 + (a12 * a12 + a13 * a13)) +
      (a20 * a20 + a21 * a21 + (a22 * a22 + a23 * a23)) +
      (a30 * a30 + a31 * a31 + (a32 * a32 + a33 * a33)) +
      4 * mean * mean;
  }

  // Largest root z of the resolvent z³ + 2q z² + (q² − 4s) z − r², as z = y − 2q/3 with y³ − 3P y − 2H = 0.
  const q2 = q * q;
  const P = q2 * (1 / 9) + s * (4 / 3);
  const H = q * (q2 * (1 / 27) - s * (4 / 3)) + 0.5 * r * r;
  const D = H * H - P * P * P;
  let y: number;
  if (D >= 0) {
    // One real root: Cardano, with the inverse cube root from its bits and seven terms of its series.
    const m = Math.abs(H) + Math.sqrt(D);
    if (!(m > SMALLEST_SINGLE && m < LARGEST_SINGLE)) {
      eigenvalues4QrInto(out, a);
      return;
    }
    single[0] = m;
    const i = bits[0];
    let third = (i >> 2) + (i >> 4);
    third += third >> 4;
    third += third >> 8;
    bits[0] = INVERSE_CUBE_ROOT_BITS - (third + (third >> 16));
    const g = single[0];
    const e = 1 - m * g * (g * g);
    const ee = e * e;
    const series =
      1 +
      e * (1 / 3) +
      ee * (2 / 9 + e * (14 / 81)) +
      ee * ee * (35 / 243 + e * (91 / 729) + ee * (728 / 6561 + e * (1976 / 19683)));
    const c = g * series;
    y = c * (m * c + P);
    if (H < 0) y = -y;
  } else {
    // Three real roots: y = 2√P·cos(⅓ arccos h) = 2√P·f(u), f(u) = cos(⅔ arccos u) by Chebyshev, to 4e-9.
    const w = Math.sqrt(P);
    const u = Math.sqrt(Math.max(0, 0.5 + (0.5 * H) / (P * w)));
    const uu = u * u;
    const low = 0.5000000037331841 + u * 0.5773496613984035 + uu * (-0.11109449276708161 + u * 0.05327935084602507);
    const high =
      -0.03192541212709286 +
      u * 0.019600320895755707 +
      uu * (-0.010237508272868782 + u * 0.0036541195299832907 - uu * 0.0006260453129572044);
    y = 2 * w * (low + uu * uu * high);
  }

  // First factors x² + A x + B and x² − A x + C, then Newton on the three coefficients.
  const z = y - q * (2 / 3);
  let A = Math.sqrt(z);
  const half = 0.5 * (q + z);
  const apart = (0.5 * r) / A;
  let B = half - apart;
  let C = half + apart;
  let R = 0;
  const stepLimit = STEP_LIMIT * norm2;
  let settled = false;
  for (let k = 0; k < MAX_NEWTON_STEPS; k++) {
    const T = C - B;
    const f = q - (B + C - A * A);
    const g1 = r - A * T - A * f;
    const e1 = s - B * C - B * f;
    const j11 = T + 2 * A * A;
    const j21 = 2 * A * B;
    // R is the resultant of the two factors: the product of all differences between their roots.
    R = j11 * T + 2 * A * j21;
    const inverse = 1 / R;
    const dA = (g1 * T + 2 * A * e1) * inverse;
    const dB = (j11 * e1 - j21 * g1) * inverse;
    const dC = f - dB + 2 * A * dA;
    A += dA;
    B += dB;
    C += dC;
    if (Math.abs(dB) + Math.abs(dC) < stepLimit && dA * dA < STEP_LIMIT * stepLimit) {
      settled = true;
      break;
    }
  }

  // Roots, and whether each is far enough from the others to be trusted.
  const hA = 0.5 * A;
  const disc1 = hA * hA - B;
  const disc2 = hA * hA - C;
  const s1 = Math.sqrt(Math.abs(disc1));
  const s2 = Math.sqrt(Math.abs(disc2));
  const limit = SEPARATION_SQUARED * (norm2 * norm2) * norm2;
  const between = 4 * Math.abs(R);
  let trusted = settled && between * s1 * s1 > limit && between * s2 * s2 > limit && limit > 1e-290;
  if (trusted && disc1 >= 0) {
    const x1 = s1 - hA;
    const x2 = -s1 - hA;
    const v1 = (x1 * (x1 - A) + C) * 2 * s1;
    const v2 = (x2 * (x2 - A) + C) * 2 * s1;
    trusted = v1 * v1 > limit && v2 * v2 > limit;
  }
  if (trusted && disc2 >= 0) {
    const x1 = s2 + hA;
    const x2 = hA - s2;
    const v1 = (x1 * (x1 + A) + B) * 2 * s2;
    const v2 = (x2 * (x2 + A) + B) * 2 * s2;
    trusted = v1 * v1 > limit && v2 * v2 > limit;
  }
  if (!trusted) {
    eigenvalues4QrInto(out, a);
    return;
  }
  const first = mean - hA;
  const second = mean + hA;
  if (disc1 >= 0) {
    out[0] = first + s1;
    out[1] = 0;
    out[2] = first - s1;
    out[3] = 0;
  } else {
    out[0] = first;
    out[1] = s1;
    out[2] = first;
    out[3] = -s1;
  }
  if (disc2 >= 0) {
    out[4] = second + s2;
    out[5] = 0;
    out[6] = second - s2;
    out[7] = 0;
  } else {
    out[4] = second;
    out[5] = s2;
    out[6] = second;
    out[7] = -s2;
  }
}
