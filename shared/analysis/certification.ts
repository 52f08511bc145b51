import { cos, PI, pow } from '../numerics/elementary.ts';
import { NumericsError } from '../numerics/errors.ts';
import { DEG, FT, KT, LBF } from '../units/constants.ts';

/** Numbers of certification paragraphs that analysis, scenarios and checks refer to; each with its source. */
export const CERTIFICATION = {
  /** Bank in straight flight with the critical engine inoperative; 14 CFR 25.149(b), 23.149 before amendment 64 (seen). */
  controlSpeedBankRad: 5 * DEG,
  /** Rudder force; 14 CFR 25.149(d) (seen), 23.149 (memory). */
  pedalForceN: 150 * LBF,
  /** Heading change after the failure; 14 CFR 25.149(d) (seen), 23.149 (memory). */
  headingChangeRad: 20 * DEG,
  /** VMC at most this multiple of VSR; 14 CFR 25.149(c) (seen). */
  part25StallShare: 1.13,
  /** VMC at most this multiple of VS1; 14 CFR 23.149 before amendment 64 (seen). */
  part23StallShare: 1.2,
  /** Heading change toward the dead engine with wings level; 14 CFR 25.147(a) (seen). */
  levelHeadingChangeRad: 15 * DEG,
  /** … at this multiple of VSR1. */
  levelHeadingStallShare: 1.3,
  /** VMCG: largest deviation from the centreline; 14 CFR 25.149(e) (seen). */
  groundDeviationM: 30 * FT,
  /** 90° crosswind: at least this, or 0.2 VSR0, whichever is greater; 14 CFR 25.237(a) (seen). */
  crosswindLeastMps: 20 * KT,
  crosswindMostMps: 25 * KT,
  /** 14 CFR 25.237(a), 23.233 (seen). */
  crosswindStallShare: 0.2,
  /** Pedal force after an engine failure; MIL-F-8785C 3.3.9.2 (seen). */
  militaryPedalForceN: 180 * LBF,
  /** Roll control after an engine failure; MIL-F-8785C 3.3.9.2 (memory). */
  militaryRollShare: 0.75,
} as const;

/** Steady crosswinds of MIL-F-8785C 3.3.7 for Levels 1 and 2 (memory); m/s. */
export const MILITARY_CROSSWIND_MPS = { I: 20 * KT, other: 30 * KT } as const;

export interface ControlSpeedParagraph {
  paragraph: '25.149(c)' | '23.149';
  /** Largest allowed calibrated speed; m/s. */
  limitMps: number;
  met: boolean;
  source: string;
}

/**
 * Minimum control speed against the stall speed, by both parts.
 *
 * @param casMps       Minimum control speed; calibrated; m/s.
 * @param stallCasMps  1 g stall speed of the configuration; calibrated; m/s.
 * @returns            Limit and whether it is met, for 25.149(c) and 23.149.
 * @throws             Nothing.
 * @sign               none
 * @source             14 CFR 25.149(c) (seen); 23.149 before amendment 64 (seen).
 */
export function controlSpeedParagraphs(casMps: number, stallCasMps: number): ControlSpeedParagraph[] {
  const judge = (paragraph: ControlSpeedParagraph['paragraph'], share: number, source: string) => {
    const limitMps = share * stallCasMps;
    return { paragraph, limitMps, met: casMps <= limitMps, source };
  };
  return [
    judge('25.149(c)', CERTIFICATION.part25StallShare, '14 CFR 25.149(c): at most 1.13 VSR (seen)'),
    judge('23.149', CERTIFICATION.part23StallShare, '14 CFR 23.149, before amendment 64: at most 1.2 VS1 (seen)'),
  ];
}

/** Shortest and longest gust gradient distance; 14 CFR 25.341(a) (seen). */
export const GUST_GRADIENT_M: readonly [number, number] = [30 * FT, 350 * FT];

/** Reference gust velocities: height, Uref EAS; 14 CFR 25.341(a)(5) (seen). */
const GUST_REFERENCE: readonly (readonly [number, number])[] = [
  [0, 56 * FT],
  [15_000 * FT, 44 * FT],
  [60_000 * FT, 20.86 * FT],
];

/**
 * Reference gust velocity of the 1 − cosine design gust.
 *
 * @param heightM  Height; m; 0 … 60,000 ft, held outside.
 * @returns        Uref; equivalent; m/s.
 * @throws {NumericsError} non-finite-input.
 * @sign           none
 * @source         14 CFR 25.341(a)(5) (seen): 56 ft/s at sea level, 44 at 15,000 ft, 20.86 at 60,000 ft, linear.
 */
export function referenceGustMps(heightM: number): number {
  if (!Number.isFinite(heightM)) throw new NumericsError('non-finite-input', `a height of ${heightM} m`);
  const last = GUST_REFERENCE.length - 1;
  if (heightM <= GUST_REFERENCE[0][0]) return GUST_REFERENCE[0][1];
  if (heightM >= GUST_REFERENCE[last][0]) return GUST_REFERENCE[last][1];
  let i = 0;
  while (heightM >= GUST_REFERENCE[i + 1][0]) i++;
  const [low, at] = GUST_REFERENCE[i];
  const [high, next] = GUST_REFERENCE[i + 1];
  return at + ((heightM - low) / (high - low)) * (next - at);
}

/**
 * Peak of the 1 − cosine design gust: Uds = Uref·Fg·(H/350 ft)^(1/6).
 *
 * @param heightM    Height; m.
 * @param gradientM  Gradient distance H; m; 30 … 350 ft.
 * @param alleviation Flight profile alleviation factor Fg; 0 … 1.
 * @returns          Uds; equivalent; m/s.
 * @throws {NumericsError} bad-argument outside the gradient distances.
 * @sign             none
 * @source           14 CFR 25.341(a)(4) (memory).
 */
export function designGustMps(heightM: number, gradientM: number, alleviation = 1): number {
  const [shortest, longest] = GUST_GRADIENT_M;
  if (!(gradientM >= shortest * (1 - 1e-12) && gradientM <= longest * (1 + 1e-12))) {
    throw new NumericsError('bad-argument', `a gradient distance of ${gradientM} m is outside 30 to 350 ft`);
  }
  return referenceGustMps(heightM) * alleviation * pow(gradientM / longest, 1 / 6);
}

/**
 * Velocity in the 1 − cosine gust: U = ½·Uds·(1 − cos(π s/H)).
 *
 * @param peakMps    Uds; m/s.
 * @param gradientM  H; m; > 0.
 * @param distanceM  Distance into the gust s; m.
 * @returns          U; m/s; zero before 0 and beyond 2H.
 * @throws           Nothing.
 * @sign             That of the peak.
 * @source           14 CFR 25.341(a)(2) (memory).
 */
export function gustVelocityMps(peakMps: number, gradientM: number, distanceM: number): number {
  if (distanceM < 0 || distanceM > 2 * gradientM) return 0;
  return 0.5 * peakMps * (1 - cos((PI * distanceM) / gradientM));
}
