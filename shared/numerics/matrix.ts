/**
 * Small dense matrices: row-major Float64Array with the sizes passed beside them.
 * Inner helpers: they trust their sizes, callers of numerics check theirs.
 */

/**
 * The n×n unit matrix.
 *
 * @param n  Rows and columns; > 0.
 * @returns  n×n row-major.
 * @source   definition.
 */
export function identity(n: number): Float64Array {
  const out = new Float64Array(n * n);
  for (let i = 0; i < n; i++) out[i * n + i] = 1;
  return out;
}

/**
 * A·B into `out`, which must be neither A nor B.
 *
 * @param out      rows×columns row-major.
 * @param a        rows×inner row-major.
 * @param b        inner×columns row-major.
 * @param rows     Of A.
 * @param inner    Columns of A, rows of B.
 * @param columns  Of B.
 * @source         definition.
 */
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

/**
 * A·B as a fresh matrix.
 *
 * @param a        rows×inner row-major.
 * @param b        inner×columns row-major.
 * @param rows     Of A.
 * @param inner    Columns of A, rows of B.
 * @param columns  Of B.
 * @returns        rows×columns row-major.
 * @source         definition.
 */
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

/**
 * Aᵀ as a fresh matrix.
 *
 * @param a        rows×columns row-major.
 * @param rows     Of A.
 * @param columns  Of A.
 * @returns        columns×rows row-major.
 * @source         definition.
 */
export function transpose(a: ArrayLike<number>, rows: number, columns: number): Float64Array {
  const out = new Float64Array(rows * columns);
  for (let i = 0; i < rows; i++) for (let j = 0; j < columns; j++) out[j * rows + i] = a[i * columns + j];
  return out;
}

/**
 * A + s·B as a fresh array of the same length.
 *
 * @param a  Any shape.
 * @param s  Factor.
 * @param b  Shape of A.
 * @returns  Shape of A.
 * @source   definition.
 */
export function addScaled(a: ArrayLike<number>, s: number, b: ArrayLike<number>): Float64Array {
  const out = new Float64Array(a.length);
  for (let i = 0; i < out.length; i++) out[i] = a[i] + s * b[i];
  return out;
}

/**
 * Square root of the sum of squares of all elements, free of overflow.
 *
 * @param a  Any shape.
 * @returns  ≥ 0; unit of the elements; infinite when one of them is.
 * @source   definition, scaled by the largest element.
 */
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

/**
 * Largest absolute row sum of a square matrix.
 *
 * @param a  n×n row-major.
 * @param n  Rows and columns.
 * @returns  ≥ 0; unit of the elements.
 * @source   definition.
 */
export function infinityNorm(a: ArrayLike<number>, n: number): number {
  let largest = 0;
  for (let i = 0; i < n; i++) {
    let sum = 0;
    for (let j = 0; j < n; j++) sum += Math.abs(a[i * n + j]);
    largest = Math.max(largest, sum);
  }
  return largest;
}
