/** Tables of MIL-F-8785C (5 November 1980), as seen in two transcriptions that agree, with their exceptions. */

export type AircraftClass = 'I' | 'II-L' | 'II-C' | 'III' | 'IV';
export type FlightCategory = 'A' | 'B' | 'C';
/** Limits for Levels 1, 2 and 3. */
export type LevelLimits = readonly [number, number, number];

export interface DutchRollMinimum {
  zeta: number;
  /** Minimum of ζω_n; rad/s; 0 where the table has a dash. */
  zetaOmega: number;
  /** Minimum of ω_n; rad/s. */
  omega: number;
}

const LEVEL_2: DutchRollMinimum = { zeta: 0.02, zetaOmega: 0.05, omega: 0.4 };
const LEVEL_3: DutchRollMinimum = { zeta: 0, zetaOmega: 0, omega: 0.4 };

/**
 * Table VI: least Dutch roll damping and frequency for Levels 1, 2, 3.
 *
 * Category A, Class IV in air combat and ground attack asks ζ ≥ 0.4 instead of 0.19; that case is not chosen here.
 *
 * @param klass     Class.
 * @param category  Flight phase category.
 * @returns         Minima, Level 1 first; all of them apply together.
 * @throws          Nothing.
 * @sign            none
 * @source          MIL-F-8785C, table VI (seen).
 */
export function dutchRollMinima(
  klass: AircraftClass,
  category: FlightCategory,
): readonly [DutchRollMinimum, DutchRollMinimum, DutchRollMinimum] {
  const agile = klass === 'I' || klass === 'IV';
  let first: DutchRollMinimum;
  if (category === 'A') first = { zeta: 0.19, zetaOmega: 0.35, omega: agile ? 1 : 0.4 };
  else if (category === 'B') first = { zeta: 0.08, zetaOmega: 0.15, omega: 0.4 };
  else if (agile || klass === 'II-C') first = { zeta: 0.08, zetaOmega: 0.15, omega: 1 };
  else first = { zeta: 0.08, zetaOmega: 0.1, omega: 0.4 };
  return [first, LEVEL_2, LEVEL_3];
}

/** Above ω²|φ/β| = 20 (rad/s)² the least ζω_n rises by these times the excess; MIL-F-8785C 3.3.1.1 (seen). */
export const ROLL_COUPLING_RISE: LevelLimits = [0.014, 0.009, 0.005];
export const ROLL_COUPLING_START = 20;
/** The most Dutch roll damping that is asked of Class III; MIL-F-8785C table VI, note (seen). */
export const CLASS_III_LARGEST_ZETA = 0.7;

/**
 * Largest roll-mode time constant of Levels 1, 2 and 3.
 *
 * @param klass     Class of the aeroplane.
 * @param category  Flight phase category.
 * @returns         s.
 * @source          MIL-F-8785C 3.3.1.2, table VII (seen).
 */
export function rollModeMaxima(klass: AircraftClass, category: FlightCategory): LevelLimits {
  const quick = category !== 'B' && (klass === 'I' || klass === 'IV' || (category === 'C' && klass === 'II-C'));
  return quick ? [1, 1.4, 10] : [1.4, 3, 10];
}

/**
 * Least time to double of the spiral of Levels 1, 2 and 3.
 *
 * @param category  Flight phase category.
 * @returns         s.
 * @source          MIL-F-8785C 3.3.1.3, table VIII (seen).
 */
export function spiralMinima(category: FlightCategory): LevelLimits {
  return category === 'B' ? [20, 8, 4] : [12, 8, 4];
}

/** 3.3.1.4: least ζω_n of a coupled roll–spiral in categories B and C; rad/s; MIL-F-8785C (seen). */
export const COUPLED_ROLL_SPIRAL_MINIMA: LevelLimits = [0.5, 0.3, 0.15];

/**
 * Least ratio of the first roll-rate minimum to the first peak after a step, of Levels 1 and 2.
 *
 * @param category  Flight phase category.
 * @returns         Ratios; 0 asks nothing.
 * @source          MIL-F-8785C 3.3.2.2 (seen).
 */
export function rollOscillationMinima(category: FlightCategory): readonly [number, number] {
  return category === 'B' ? [0.25, 0] : [0.6, 0.25];
}

export type SpeedRange = 'low' | 'medium' | 'high';

export interface BankRequirement {
  angleDeg: number;
  /** Longest time; s; Levels 1, 2, 3. */
  seconds: LevelLimits;
}

/**
 * Table IX: longest time to a bank angle.
 *
 * @param klass     Class.
 * @param category  Flight phase category.
 * @param range     Low up to 1.8 Vmin, high above 0.7 Vmax; counts for Classes III and IV only.
 * @returns         Angle in degrees and times in s.
 * @throws          Nothing.
 * @sign            none
 * @source          MIL-F-8785C, table IX (Classes I and II seen twice, III and IV in one transcription).
 */
export function timeToBankLimits(klass: AircraftClass, category: FlightCategory, range: SpeedRange): BankRequirement {
  switch (klass) {
    case 'I':
      if (category === 'A') return { angleDeg: 60, seconds: [1.3, 1.7, 2.6] };
      if (category === 'B') return { angleDeg: 60, seconds: [1.7, 2.5, 3.4] };
      return { angleDeg: 30, seconds: [1.3, 1.8, 2.6] };
    case 'II-L':
    case 'II-C':
      if (category === 'A') return { angleDeg: 45, seconds: [1.4, 1.9, 2.8] };
      if (category === 'B') return { angleDeg: 45, seconds: [1.9, 2.8, 3.8] };
      return klass === 'II-L' ? { angleDeg: 30, seconds: [1.8, 2.5, 3.6] } : { angleDeg: 25, seconds: [1, 1.5, 2] };
    case 'III':
      if (category === 'C') return { angleDeg: 30, seconds: [2.5, 4, 6] };
      if (category === 'A') {
        if (range === 'low') return { angleDeg: 30, seconds: [1.8, 2.4, 3] };
        return { angleDeg: 30, seconds: range === 'medium' ? [1.5, 2, 3] : [2, 2.5, 3] };
      }
      return { angleDeg: 30, seconds: range === 'medium' ? [2, 3.3, 5] : [2.3, 3.9, 5] };
    case 'IV':
      if (category === 'C') return { angleDeg: 30, seconds: [1.1, 1.3, 2] };
      if (category === 'B') return { angleDeg: 90, seconds: [1.7, 2.5, 3.4] };
      return range === 'low' ? { angleDeg: 30, seconds: [1.1, 1.5, 2] } : { angleDeg: 90, seconds: [1.3, 1.7, 2.6] };
  }
}

/** 3.3.7.1: at least this sideslip on the approach … */
export const APPROACH_SIDESLIP_DEG = 10;
/** … with roll control within this share of what there is; MIL-F-8785C (seen). */
export const APPROACH_ROLL_SHARE = 0.75;
/** 14 CFR 23.181(b), before amendment 64: to 1/10 amplitude in 7 cycles, ζ ≥ 0.052 (memory). */
export const PART_23_ZETA = 0.052;
