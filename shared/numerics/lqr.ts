import { Matrix, SingularValueDecomposition } from 'ml-matrix';
import { eigenDecomposition } from './eigen.ts';
import { NumericsError, requireFinite } from './errors.ts';
import { addScaled, frobeniusNorm, identity, multiply, transpose } from './matrix.ts';
import { solveLinear } from './solve-linear.ts';

export interface LqrSolution {
  /** Feedback u = −K x; m×n row-major. */
  K: Float64Array;
  /** Cost-to-go matrix; n×n, symmetric. */
  X: Float64Array;
  /** Frobenius norm of the Riccati equation's remainder over that of Q + AᵀX + XA. */
  residual: number;
}

const MAX_SIGN_STEPS = 60;
const MAX_NEWTON_STEPS = 12;
const RESIDUAL_LIMIT = 1e-8;
/** A mode counts as uncontrollable when the smallest singular value of [A − λI, B] is below this fraction of its norm. */
const CONTROLLABLE_LIMIT = 1e-10;

/**
 * The feedback K that minimises ∫(xᵀQx + uᵀRu)dt for x' = Ax + Bu with u = −Kx.
 *
 * Matrix sign function of the Hamiltonian, refined by Newton's method on the Riccati equation (Kleinman), bounded.
 *
 * @param A  n×n row-major; 1/s.
 * @param B  n×m row-major.
 * @param Q  State weights; n×n, symmetric, positive semi-definite.
 * @param R  Control weights; m×m, symmetric, positive definite.
 * @returns  K, the cost matrix X, and the relative residual of the Riccati equation.
 * @throws {NumericsError} uncontrollable-pair when a mode that does not decay by itself cannot be reached by B,
 *           no-stabilising-solution when the residual stays above 1e-8 or the closed loop is not stable, bad-dimension,
 *           non-finite-input.
 * @sign     u = −K x
 * @source   J. Roberts, "Linear model reduction and solution of the algebraic Riccati equation by use of the sign
 *           function", Int. J. Control 32 (1980); D. Kleinman, IEEE Trans. AC-13 (1968).
 */
export function solveLqr(
  A: ArrayLike<number>,
  B: ArrayLike<number>,
  Q: ArrayLike<number>,
  R: ArrayLike<number>,
): LqrSolution {
  const n = Math.round(Math.sqrt(A.length));
  const m = Math.round(Math.sqrt(R.length));
  requireFinite(A, n * n, 'A');
  requireFinite(B, n * m, 'B');
  requireFinite(Q, n * n, 'Q');
  requireFinite(R, m * m, 'R');
  requireControllable(A, B, n, m);

  const bT = transpose(B, n, m);
  const rInvBt = solveLinear(R, bT, m, n);
  const g = multiply(B, rInvBt, n, m, n);
  let x = symmetric(stableSubspace(A, g, Q, n), n);
  let residual = riccatiResidual(A, g, Q, x, n);
  for (let i = 0; i < MAX_NEWTON_STEPS && residual > 1e-13; i++) {
    const closed = addScaled(A, -1, multiply(g, x, n, n, n));
    const constant = addScaled(Q, 1, multiply(multiply(x, g, n, n, n), x, n, n, n));
    const next = symmetric(solveLyapunov(closed, constant, n), n);
    const nextResidual = riccatiResidual(A, g, Q, next, n);
    if (!(nextResidual < residual)) break;
    x = next;
    residual = nextResidual;
  }
  const K = multiply(rInvBt, x, m, n, n);
  const closedLoop = eigenDecomposition(addScaled(A, -1, multiply(B, K, n, m, n)), n);
  if (!(residual <= RESIDUAL_LIMIT) || closedLoop.re.some((re) => re >= 0)) {
    throw new NumericsError(
      'no-stabilising-solution',
      `the Riccati equation has no stabilising solution (residual ${residual.toExponential(1)})`,
    );
  }
  return { K, X: x, residual };
}

/** Refuses a pair in which a mode that does not decay by itself is out of reach of the controls (Popov–Belevitch–Hautus). */
function requireControllable(A: ArrayLike<number>, B: ArrayLike<number>, n: number, m: number): void {
  const norm = frobeniusNorm(A) + frobeniusNorm(B);
  const modes = eigenDecomposition(A, n);
  for (let k = 0; k < n; k++) {
    if (modes.re[k] < -1e-9 * norm || modes.im[k] < 0) continue;
    const width = n + m;
    const test = Matrix.zeros(2 * n, 2 * width);
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < width; j++) {
        const real = j < n ? A[i * n + j] - (i === j ? modes.re[k] : 0) : B[i * m + j - n];
        const imag = i === j ? -modes.im[k] : 0;
        test.set(i, j, real);
        test.set(n + i, width + j, real);
        test.set(i, width + j, -imag);
        test.set(n + i, j, imag);
      }
    }
    const singular = new SingularValueDecomposition(test, { autoTranspose: true }).diagonal;
    if (!(Math.min(...singular) > CONTROLLABLE_LIMIT * norm)) {
      throw new NumericsError(
        'uncontrollable-pair',
        `the mode ${modes.re[k].toPrecision(4)} ± ${modes.im[k].toPrecision(4)}i 1/s does not decay and no control reaches it`,
      );
    }
  }
}

/** X from the stable invariant subspace of the Hamiltonian, by its matrix sign. */
function stableSubspace(A: ArrayLike<number>, g: Float64Array, Q: ArrayLike<number>, n: number): Float64Array {
  const size = 2 * n;
  let z = new Float64Array(size * size);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      z[i * size + j] = A[i * n + j];
      z[i * size + n + j] = -g[i * n + j];
      z[(n + i) * size + j] = -Q[i * n + j];
      z[(n + i) * size + n + j] = -A[j * n + i];
    }
  }
  const unit = identity(size);
  let change = Infinity;
  for (let step = 0; step < MAX_SIGN_STEPS; step++) {
    const inverse = invertHamiltonian(z, unit, size);
    const scale = change > 0.1 ? Math.sqrt(frobeniusNorm(inverse) / frobeniusNorm(z)) : 1;
    const next = new Float64Array(size * size);
    for (let i = 0; i < next.length; i++) next[i] = 0.5 * (scale * z[i] + inverse[i] / scale);
    change = frobeniusNorm(addScaled(next, -1, z)) / frobeniusNorm(next);
    z = next;
    if (change < 1e-13) break;
  }
  // Normal equations of [W12; W22 + I] X = −[W11 + I; W21].
  const left = new Float64Array(size * n);
  const right = new Float64Array(size * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      const one = i === j ? 1 : 0;
      left[i * n + j] = z[i * size + n + j];
      left[(n + i) * n + j] = z[(n + i) * size + n + j] + one;
      right[i * n + j] = -(z[i * size + j] + one);
      right[(n + i) * n + j] = -z[(n + i) * size + j];
    }
  }
  const leftT = transpose(left, size, n);
  return solveOrExplain(multiply(leftT, left, n, size, n), multiply(leftT, right, n, size, n), n);
}

function invertHamiltonian(z: Float64Array, unit: Float64Array, size: number): Float64Array {
  try {
    return solveLinear(z, unit, size, size);
  } catch (cause) {
    throw new NumericsError('no-stabilising-solution', 'the Hamiltonian has an eigenvalue on the imaginary axis', {
      cause,
    });
  }
}

function solveOrExplain(a: Float64Array, b: Float64Array, n: number): Float64Array {
  try {
    return solveLinear(a, b, n, n);
  } catch (cause) {
    throw new NumericsError('no-stabilising-solution', 'the stable subspace of the Hamiltonian has no graph', {
      cause,
    });
  }
}

/** X of AᵀX + XA + C = 0, by the n²×n² Kronecker system. */
function solveLyapunov(A: Float64Array, C: Float64Array, n: number): Float64Array {
  const size = n * n;
  const m = new Float64Array(size * size);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      const row = (i * n + j) * size;
      for (let k = 0; k < n; k++) {
        m[row + k * n + j] += A[k * n + i];
        m[row + i * n + k] += A[k * n + j];
      }
    }
  }
  return solveLinear(
    m,
    C.map((c) => -c),
    size,
  );
}

function riccatiResidual(
  A: ArrayLike<number>,
  g: Float64Array,
  Q: ArrayLike<number>,
  x: Float64Array,
  n: number,
): number {
  const xa = multiply(x, A, n, n, n);
  const linear = addScaled(addScaled(xa, 1, transpose(xa, n, n)), 1, Q);
  const quadratic = multiply(multiply(x, g, n, n, n), x, n, n, n);
  const size = Math.max(frobeniusNorm(linear), frobeniusNorm(quadratic), frobeniusNorm(Q));
  return frobeniusNorm(addScaled(linear, -1, quadratic)) / size;
}

function symmetric(x: Float64Array, n: number): Float64Array {
  return addScaled(transpose(x, n, n), 1, x).map((value) => value / 2);
}
