import { DEG } from '../units/constants.ts';
import { atan2, exp, ln } from '../numerics/elementary.ts';
import { NumericsError } from '../numerics/errors.ts';
import {
  evaluatePolynomial,
  polynomialRoots,
  significantCoefficients,
  transferPolynomials,
} from '../numerics/polynomial.ts';
import type { Roots } from '../numerics/polynomial.ts';

export interface TransferFunction {
  /** Numerator coefficients, highest power first, leading one not zero. */
  numerator: Float64Array;
  /** Denominator coefficients, highest power first, leading 1. */
  denominator: Float64Array;
  /** Leading coefficient of the numerator: gain·Π(s − zero)/Π(s − pole). */
  gain: number;
  zeros: Roots;
  poles: Roots;
  /** Response to a unit step after all transients; infinite for a pole at zero, which is null here. */
  steadyState: number | null;
}

export interface FrequencyPoint {
  omegaRadS: number;
  /** |H(iω)|. */
  magnitude: number;
  decibel: number;
  /** Unwrapped along increasing frequency; deg. */
  phaseDeg: number;
}

const LN10 = 2.302585092994046;

/**
 * The transfer function from one input to one state.
 *
 * @param a      System matrix; n×n row-major; 1/s.
 * @param b      Input column; length n; (unit of x)/s per unit of input.
 * @param state  Index of the state: 0 β, 1 p, 2 r, 3 φ.
 * @param n      Size.
 * @returns      Polynomials, zeros, poles and gain.
 * @throws {NumericsError} bad-argument when the input does not reach the state, non-finite-input, bad-dimension.
 * @sign         That of the input and the state.
 * @source       Etkin & Reid, Dynamics of Flight, 3rd ed. 1996, section 7.2.
 */
export function transferFunction(
  a: ArrayLike<number>,
  b: ArrayLike<number>,
  state: number,
  n: number,
): TransferFunction {
  const c = new Float64Array(n);
  c[state] = 1;
  const { numerator, denominator } = transferPolynomials(a, b, c, n);
  const significant = significantCoefficients(numerator);
  if (significant.length === 0) throw new NumericsError('bad-argument', 'the input does not reach this state');
  const last = denominator[n];
  return {
    numerator: significant,
    denominator,
    gain: significant[0],
    zeros: polynomialRoots(significant),
    poles: polynomialRoots(denominator),
    steadyState: last === 0 ? null : significant[significant.length - 1] / last,
  };
}

/**
 * Magnitude and phase of a transfer function over logarithmically spaced frequencies.
 *
 * @param h       Transfer function.
 * @param from    Lowest frequency; rad/s; > 0.
 * @param to      Highest frequency; rad/s; > from.
 * @param points  Number of frequencies; at least 2.
 * @returns       Points in increasing frequency; the phase has no jumps of a full turn.
 * @throws {NumericsError} bad-argument for an empty or non-positive band.
 * @sign          Positive phase leads the input.
 * @source        Any text on linear systems.
 */
export function frequencyResponse(h: TransferFunction, from: number, to: number, points: number): FrequencyPoint[] {
  if (!(from > 0) || !(to > from) || !Number.isFinite(to) || !(points >= 2)) {
    throw new NumericsError('bad-argument', `a band from ${from} to ${to} rad/s with ${points} points is empty`);
  }
  const out: FrequencyPoint[] = [];
  const span = ln(to / from);
  let unwrapped = 0;
  for (let i = 0; i < points; i++) {
    const omega = i === points - 1 ? to : from * exp((span * i) / (points - 1));
    const top = evaluatePolynomial(h.numerator, 0, omega);
    const bottom = evaluatePolynomial(h.denominator, 0, omega);
    const square = bottom.re * bottom.re + bottom.im * bottom.im;
    const re = (top.re * bottom.re + top.im * bottom.im) / square;
    const im = (top.im * bottom.re - top.re * bottom.im) / square;
    const magnitude = Math.sqrt(re * re + im * im);
    let phase = atan2(im, re) / DEG;
    if (i > 0) phase += 360 * Math.round((unwrapped - phase) / 360);
    unwrapped = phase;
    out.push({ omegaRadS: omega, magnitude, decibel: (20 * ln(magnitude)) / LN10, phaseDeg: phase });
  }
  return out;
}
