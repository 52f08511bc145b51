import { exp, PI, pow } from '../numerics/elementary.ts';
import { FT, KT } from '../units/constants.ts';
import type { TurbulenceLevel } from './plant-types.ts';

/** Wind at 20 ft, and rms above 2,000 ft, of each level; m/s (the second ours). */
export const TURBULENCE_LEVELS: Readonly<Record<TurbulenceLevel, { w20Mps: number; highMps: number }>> = {
  none: { w20Mps: 0, highMps: 0 },
  light: { w20Mps: 15 * KT, highMps: 3 * FT },
  moderate: { w20Mps: 30 * KT, highMps: 6 * FT },
  severe: { w20Mps: 45 * KT, highMps: 12 * FT },
};
const LOWEST_FT = 10;
const LOW_TOP_FT = 1000;
const HIGH_FLOOR_FT = 2000;
const HIGH_LENGTH_FT = 1750;
const SQRT3 = Math.sqrt(3);
/** Weights of the two filter states in v. */
const C1 = SQRT3;
const C2 = 1 - SQRT3;
/** Two filter poles closer than this share are moved apart by it, or their difference would cancel. */
const POLE_GAP = 1e-4;

export interface TurbulenceScale {
  /** Scale lengths of the lateral and vertical components; m. */
  lateralLengthM: number;
  verticalLengthM: number;
  /** Their rms; m/s. */
  lateralSigmaMps: number;
  verticalSigmaMps: number;
}

/**
 * Writes scale lengths and rms of turbulence at a height over the ground into `out`.
 *
 * Low-altitude model from 10 to 1,000 ft; 1,750 ft and the given rms above 2,000 ft; linear between.
 *
 * @param out      Scale lengths, m, and rms, m/s.
 * @param w20Mps   Mean wind at 20 ft; m/s.
 * @param highMps  rms above 2,000 ft; m/s.
 * @param heightM  Height above the ground; m.
 * @returns        Nothing.
 * @throws         Nothing.
 * @sign           none
 * @source         MIL-F-8785C 3.7.3.4; above 1,000 ft ours.
 */
export function turbulenceScaleInto(out: TurbulenceScale, w20Mps: number, highMps: number, heightM: number): void {
  const heightFt = Math.max(heightM / FT, LOWEST_FT);
  const low = Math.min(heightFt, LOW_TOP_FT);
  const base = 0.177 + 0.000823 * low;
  const sigmaW = 0.1 * w20Mps;
  out.lateralLengthM = (low / pow(base, 1.2)) * FT;
  out.verticalLengthM = low * FT;
  out.lateralSigmaMps = sigmaW / pow(base, 0.4);
  out.verticalSigmaMps = sigmaW;
  if (heightFt <= LOW_TOP_FT) return;
  const share = Math.min((heightFt - LOW_TOP_FT) / (HIGH_FLOOR_FT - LOW_TOP_FT), 1);
  out.lateralLengthM += share * (HIGH_LENGTH_FT * FT - out.lateralLengthM);
  out.verticalLengthM += share * (HIGH_LENGTH_FT * FT - out.verticalLengthM);
  out.lateralSigmaMps += share * (highMps - out.lateralSigmaMps);
  out.verticalSigmaMps += share * (highMps - out.verticalSigmaMps);
}

/**
 * rms of the roll gust; rad/s.
 *
 * @param sigmaWMps   rms of the vertical component; m/s.
 * @param lengthWM    Its scale length; m.
 * @param spanM       Wing span; m.
 * @returns           Standard deviation of the output of Hp driven by white noise; rad/s.
 * @throws            Nothing.
 * @sign              none
 * @source            MIL-F-8785C 3.7.5 (Hp), integrated in closed form.
 */
export function rollGustSigmaRadS(sigmaWMps: number, lengthWM: number, spanM: number): number {
  const variance =
    ((0.1 * PI * PI) / spanM) * pow(PI / (4 * spanM), 1 / 3) * pow(lengthWM, -2 / 3) * sigmaWMps * sigmaWMps;
  return Math.sqrt(variance);
}

/** Random numbers with mean 0 and variance 1. */
export interface Normals {
  normal(): number;
}

/**
 * Starts the filter states at their stationary distribution.
 *
 * @param s       States [x1, x2, x3, xp] from `at`; unit variance of x1 and xp.
 * @param at      Place of x1.
 * @param noise   Random numbers.
 * @param tasMps  True airspeed; m/s.
 * @param lengthM Scale length of the lateral component; m.
 * @param spanM   Wing span; m.
 * @returns       Nothing.
 * @throws        Nothing.
 * @sign          none
 * @source        Covariance of the filters, derived in `advanceTurbulence`.
 */
export function startTurbulence(
  s: number[],
  at: number,
  noise: Normals,
  tasMps: number,
  lengthM: number,
  spanM: number,
): void {
  const a = tasMps / lengthM;
  const b = apart(a, (PI * tasMps) / (3 * spanM));
  const p13 = (b * (C1 + 0.5 * C2)) / (a + b);
  const p23 = (a * p13 + 0.5 * b) / (a + b);
  const p33 = C1 * p13 + C2 * p23;
  drawInto(s, at, noise, 1, 0.5, p13, 0.5, p23, p33, 0, 0, 0);
  s[at + 3] = noise.normal();
}

/**
 * Advances the turbulence filters by one step, exactly for constant speed and height.
 *
 * v: x1' = −a x1 + w, x2' = −a (x2 − x1) with a = V/L, v = σ/√2 (√3 x1 + (1−√3) x2). r: x3' = b (√3 x1 + (1−√3) x2 − x3)
 * with b = πV/(3·span), r = (v − σ/√2 x3)·π/(3·span), which is Hr. p: first order, πV/(4·span). The three noises of v and r
 * have the covariance P − F P Fᵀ with P the stationary covariance.
 *
 * @param s       States [x1, x2, x3, xp] from `at`; advanced in place.
 * @param at      Place of x1.
 * @param noise   Random numbers; four are drawn.
 * @param tasMps  True airspeed; m/s; above 0.
 * @param lengthM Scale length of the lateral component; m.
 * @param spanM   Wing span; m.
 * @param stepS   Step; s.
 * @returns       Nothing.
 * @throws        Nothing.
 * @sign          none
 * @source        MIL-F-8785C 3.7.5 filters; the project's reference table, turbulence; step derived here.
 */
export function advanceTurbulence(
  s: number[],
  at: number,
  noise: Normals,
  tasMps: number,
  lengthM: number,
  spanM: number,
  stepS: number,
): void {
  const a = tasMps / lengthM;
  const b = apart(a, (PI * tasMps) / (3 * spanM));
  const r = a * stepS;
  const ea = exp(-r);
  const eb = exp(-b * stepS);
  const i1 = (b * (ea - eb)) / (b - a);
  const i2 = (a * b * (stepS * ea - (ea - eb) / (b - a))) / (b - a);
  const f21 = ea * r;
  const f31 = C1 * i1 + C2 * i2;
  const f32 = C2 * i1;
  // stationary covariance
  const p13 = (b * (C1 + 0.5 * C2)) / (a + b);
  const p23 = (a * p13 + 0.5 * b) / (a + b);
  const p33 = C1 * p13 + C2 * p23;
  // rows of F P
  const g11 = ea;
  const g12 = 0.5 * ea;
  const g13 = ea * p13;
  const g21 = f21 + 0.5 * ea;
  const g22 = 0.5 * (f21 + ea);
  const g23 = f21 * p13 + ea * p23;
  const g31 = f31 + 0.5 * f32 + eb * p13;
  const g32 = 0.5 * (f31 + f32) + eb * p23;
  const g33 = f31 * p13 + f32 * p23 + eb * p33;
  // P − F P Fᵀ
  const q11 = 1 - g11 * ea;
  const q12 = 0.5 - g11 * f21 - g12 * ea;
  const q13 = p13 - g11 * f31 - g12 * f32 - g13 * eb;
  const q22 = 0.5 - g21 * f21 - g22 * ea;
  const q23 = p23 - g21 * f31 - g22 * f32 - g23 * eb;
  const q33 = p33 - g31 * f31 - g32 * f32 - g33 * eb;
  const x1 = s[at];
  const x2 = s[at + 1];
  const x3 = s[at + 2];
  drawInto(s, at, noise, q11, q12, q13, q22, q23, q33, ea * x1, f21 * x1 + ea * x2, f31 * x1 + f32 * x2 + eb * x3);
  const ep = exp((-PI * tasMps * stepS) / (4 * spanM));
  s[at + 3] = ep * s[at + 3] + Math.sqrt(1 - ep * ep) * noise.normal();
}

function apart(a: number, b: number): number {
  return Math.abs(b - a) < POLE_GAP * a ? a * (1 + POLE_GAP) : b;
}

/** Three normal numbers with the given covariance (Cholesky) and means, written from `at`. */
function drawInto(
  s: number[],
  at: number,
  noise: Normals,
  q11: number,
  q12: number,
  q13: number,
  q22: number,
  q23: number,
  q33: number,
  m1: number,
  m2: number,
  m3: number,
): void {
  const n1 = noise.normal();
  const n2 = noise.normal();
  const n3 = noise.normal();
  const l11 = Math.sqrt(Math.max(q11, 0));
  const l21 = l11 > 0 ? q12 / l11 : 0;
  const l31 = l11 > 0 ? q13 / l11 : 0;
  const l22 = Math.sqrt(Math.max(q22 - l21 * l21, 0));
  const l32 = l22 > 0 ? (q23 - l31 * l21) / l22 : 0;
  const l33 = Math.sqrt(Math.max(q33 - l31 * l31 - l32 * l32, 0));
  s[at] = m1 + l11 * n1;
  s[at + 1] = m2 + l21 * n1 + l22 * n2;
  s[at + 2] = m3 + l31 * n1 + l32 * n2 + l33 * n3;
}

/**
 * Lateral gust of the filter states; m/s.
 *
 * @param s  Filter states.
 * @param at  Place of x1.
 * @param sigmaMps  rms; m/s.
 * @returns  v_g = σ/√2 (√3 x1 + (1−√3) x2); m/s.
 * @throws  Nothing.
 * @sign  air moving to the right positive
 * @source  MIL-F-8785C 3.7.5 (Hv).
 */
export function lateralGustMps(s: number[], at: number, sigmaMps: number): number {
  return sigmaMps * Math.sqrt(0.5) * (C1 * s[at] + C2 * s[at + 1]);
}

/**
 * Yaw gust of the filter states; rad/s.
 *
 * @param s  Filter states.
 * @param at  Place of x1.
 * @param sigmaMps  rms of the lateral gust; m/s.
 * @param spanM  Wing span; m.
 * @returns  r_g; rad/s.
 * @throws  Nothing.
 * @sign  air turning to the right positive
 * @source  MIL-F-8785C 3.7.5 (Hr).
 */
export function yawGustRadS(s: number[], at: number, sigmaMps: number, spanM: number): number {
  const difference = C1 * s[at] + C2 * s[at + 1] - s[at + 2];
  return (sigmaMps * Math.sqrt(0.5) * difference * PI) / (3 * spanM);
}
