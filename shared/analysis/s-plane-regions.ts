import { NumericsError } from '../numerics/errors.ts';
import { dutchDampingLimits } from './criteria-8785c.ts';
import { dutchRollMinima, rollModeMaxima, spiralMinima } from './criteria-tables.ts';
import type { AircraftClass, FlightCategory } from './criteria-tables.ts';

export interface SPlaneBoundary {
  level: 1 | 2 | 3;
  /** Upper half of the Dutch roll boundary: oscillations to its left reach the level; 1/s. */
  dutchRoll: { re: number; im: number }[];
  /** Real roots left of this reach the level as a roll mode; 1/s. */
  rollMode: number;
  /** Real roots left of this reach the level as a spiral; 1/s, positive. */
  spiral: number;
}

const LN2 = 0.6931471805599453;
const POINTS = 61;
const SCAN_STEPS = 200;
const BISECTIONS = 40;

/**
 * Boundaries of Levels 1, 2 and 3 in the s-plane, as polylines to draw.
 *
 * For each imaginary part the real part at which all minima of table VI are just held. The rise for roll coupling follows
 * the frequency at each point when |φ/β| is given.
 *
 * @param klass        Class.
 * @param category     Flight phase category.
 * @param largestIm    Highest imaginary part; 1/s; > 0.
 * @param phiOverBeta  |φ/β| taken all along the boundary; 1; null leaves the rise out.
 * @returns            Three boundaries, Level 1 first.
 * @throws {NumericsError} bad-argument when the height is not positive.
 * @sign               Left is stable.
 * @source             MIL-F-8785C, tables VI, VII, VIII (seen).
 */
export function sPlaneBoundaries(
  klass: AircraftClass,
  category: FlightCategory,
  largestIm: number,
  phiOverBeta: number | null,
): SPlaneBoundary[] {
  if (!(largestIm > 0) || !Number.isFinite(largestIm)) {
    throw new NumericsError('bad-argument', `an s-plane of height ${largestIm} 1/s is empty`);
  }
  const minima = dutchRollMinima(klass, category);
  const roll = rollModeMaxima(klass, category);
  const spiral = spiralMinima(category);
  return ([0, 1, 2] as const).map((i) => {
    const dutchRoll: { re: number; im: number }[] = [];
    for (let k = 0; k < POINTS; k++) {
      const im = (largestIm * k) / (POINTS - 1);
      dutchRoll.push({ re: boundaryAt(im, minima[i].omega, klass, category, phiOverBeta, i), im });
    }
    return { level: (i + 1) as 1 | 2 | 3, dutchRoll, rollMode: -1 / roll[i], spiral: LN2 / spiral[i] };
  });
}

/**
 * The real part nearest to the imaginary axis, at height `im`, where frequency and damping are both enough. With the rise
 * for roll coupling a still larger decay may fail again (its ω² is larger), so the first crossing is looked for.
 */
function boundaryAt(
  im: number,
  leastOmega: number,
  klass: AircraftClass,
  category: FlightCategory,
  phiOverBeta: number | null,
  level: 0 | 1 | 2,
): number {
  const frequency = im < leastOmega ? Math.sqrt(leastOmega * leastOmega - im * im) : 0;
  const furthest = frequency + 2 * im + 2;
  const holds = (re: number) => {
    const wn = Math.sqrt(re * re + im * im);
    return wn > 0 && re / wn >= dutchDampingLimits(klass, category, wn, phiOverBeta)[level];
  };
  let short = frequency;
  let enough = frequency;
  for (let k = 0; k <= SCAN_STEPS && !holds(enough); k++) {
    short = enough;
    enough = frequency + (furthest * k) / SCAN_STEPS;
  }
  for (let step = 0; step < BISECTIONS && enough > short; step++) {
    const middle = 0.5 * (enough + short);
    if (holds(middle)) enough = middle;
    else short = middle;
  }
  return -enough;
}
