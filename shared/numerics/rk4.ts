import { NumericsError } from './errors.ts';

/** Right-hand side x' = f(t, x), written into its first argument. */
export type RightHandSide = (out: Float64Array, t: number, x: Float64Array) => void;

export interface Rk4 {
  /** Writes the state after one step of `h` from `(t, x)` into `out`; `out` may be `x` itself. */
  stepInto(out: Float64Array, f: RightHandSide, t: number, x: Float64Array, h: number): void;
}

/**
 * A fixed-step integrator that allocates nothing per step.
 *
 * Classical fourth-order Runge–Kutta: error of one step O(h^5), over a fixed time O(h^4); explicit, so h must stay
 * below about 2.78 divided by the largest eigenvalue magnitude.
 *
 * @param n  Number of states; whole, at least 1.
 * @returns  The stepper with its own work arrays; use one per system that is stepped at the same time.
 * @throws {NumericsError} bad-dimension when n is not a whole number of at least 1.
 * @sign     none
 * @source   W. Kutta, "Beitrag zur näherungsweisen Integration totaler Differentialgleichungen" (1901).
 */
export function createRk4(n: number): Rk4 {
  if (!Number.isInteger(n) || n < 1) throw new NumericsError('bad-dimension', `a system has ${n} states`);
  const k1 = new Float64Array(n);
  const k2 = new Float64Array(n);
  const k3 = new Float64Array(n);
  const k4 = new Float64Array(n);
  const at = new Float64Array(n);
  return {
    stepInto(out, f, t, x, h) {
      const half = 0.5 * h;
      f(k1, t, x);
      for (let i = 0; i < n; i++) at[i] = x[i] + half * k1[i];
      f(k2, t + half, at);
      for (let i = 0; i < n; i++) at[i] = x[i] + half * k2[i];
      f(k3, t + half, at);
      for (let i = 0; i < n; i++) at[i] = x[i] + h * k3[i];
      f(k4, t + h, at);
      const sixth = h / 6;
      for (let i = 0; i < n; i++) out[i] = x[i] + sixth * (k1[i] + 2 * (k2[i] + k3[i]) + k4[i]);
    },
  };
}
