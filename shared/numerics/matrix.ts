/**
 * Small dense matrices: row-major Float64Array with the sizes passed beside them.
 * Inner helpers: they trust their sizes, callers of numerics check theirs.
 */

/** The n×n unit matrix. */
export function identity(n: number): Float64Array {
  const out = new Float64Array(n * n);
  for (let i = 0; i < n; i++) out[i * n + i] = 1;
  return out;
}

/** out = A·B with A rows×inner and B inner×columns; `out` must be neither A nor B. */
export function multiplyInto(
  out: Float64Array,
  a: ArrayLike<number>,
  b: ArrayLike<number>,
  rows: number,
  inner: number,
  columns: number,
): void {
  for (let i = 0; i < rows; i++) {
    for (let j = 0; j < columns; j++) {
      let sum = 0;
      for (let k = 0; k < inner; k++) sum += a[i * inner + k] * b[k * columns + j];
      out[i * columns + j] = sum;
    }
  }
}

/** A·B as a fresh matrix; A rows×inner, B inner×columns. */
export function multiply(
  a: ArrayLike<number>,
  b: ArrayLike<number>,
  rows: number,
  inner: number,
  columns: number,
): Float64Array {
  const out = new Float64Array(rows * columns);
  multiplyInto(out, a, b, rows, inner, columns);
  return out;
}

/** Aᵀ as a fresh columns×rows matrix. */
export function transpose(a: ArrayLike<number>, rows: number, columns: number): Float64Array {
  const out = new Float64Array(rows * columns);
  for (let i = 0; i < rows; i++) for (let j = 0; j < columns; j++) out[j * rows + i] = a[i * columns + j];
  return out;
}

/** A + s·B as a fresh array of the same length. */
export function addScaled(a: ArrayLike<number>, s: number, b: ArrayLike<number>): Float64Array {
  const out = new Float64Array(a.length);
  for (let i = 0; i < out.length; i++) out[i] = a[i] + s * b[i];
  return out;
}

/** Square root of the sum of squares of all elements, free of overflow. */
export function frobeniusNorm(a: ArrayLike<number>): number {
  let largest = 0;
  for (let i = 0; i < a.length; i++) largest = Math.max(largest, Math.abs(a[i]));
  if (largest === 0 || !Number.isFinite(largest)) return largest;
  let sum = 0;
  for (let i = 0; i < a.length; i++) {
    const scaled = a[i] / largest;
    sum += scaled * scaled;
  }
  return largest * Math.sqrt(sum);
}

/** Largest absolute row sum of an n×n matrix. */
export function infinityNorm(a: ArrayLike<number>, n: number): number {
  let largest = 0;
  for (let i = 0; i < n; i++) {
    let sum = 0;
    for (let j = 0; j < n; j++) sum += Math.abs(a[i * n + j]);
    largest = Math.max(largest, sum);
  }
  return largest;
}
