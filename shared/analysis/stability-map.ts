import { eigenvalues4Into } from '../numerics/eigen4.ts';
import { NumericsError, requireFinite } from '../numerics/errors.ts';
import { levelOf } from './criteria-8785c.ts';
import {
  CLASS_III_LARGEST_ZETA,
  COUPLED_ROLL_SPIRAL_MINIMA,
  ROLL_COUPLING_RISE,
  ROLL_COUPLING_START,
  dutchRollMinima,
  rollModeMaxima,
  spiralMinima,
} from './criteria-tables.ts';
import type { AircraftClass, FlightCategory } from './criteria-tables.ts';
import { participation } from './mode-participation.ts';

/** A system matrix that is linear in two parameters: A = base + x·alongX + y·alongY. */
export interface BilinearSystem {
  base: Float64Array;
  alongX: Float64Array;
  alongY: Float64Array;
}

/** Which modes a cell has. */
export const CELL_PATTERN = { ordinary: 0, coupled: 1, realPair: 2 } as const;

export interface StabilityMap {
  xs: Float64Array;
  ys: Float64Array;
  /** Row-major, one row per y. Damping ratio of the Dutch roll; NaN where there is none. */
  dutchZeta: Float64Array;
  /** Frequency of the Dutch roll; rad/s; NaN where there is none. */
  dutchOmega: Float64Array;
  /** Roll root; 1/s; the real part of the oscillation where roll and spiral are one. */
  roll: Float64Array;
  /** Spiral root; 1/s; the same. */
  spiral: Float64Array;
  /** Largest real part of all roots; 1/s. */
  growth: Float64Array;
  /** Worst level of the modal criteria; 1, 2, 3 or 4. */
  level: Uint8Array;
  /** Values of CELL_PATTERN. */
  pattern: Uint8Array;
}

/** A pair with less sideslip in it than this (both roots together) is no Dutch roll; as in `lateralModes`. */
const DUTCH_ROLL_SHARE = 0.3;
const LN2 = 0.6931471805599453;
const LARGEST_CELLS = 4_000_000;

/**
 * Dutch roll damping, roll, spiral and the criteria level over a grid of two parameters.
 *
 * One eigenvalue solution per cell; modes named as `lateralModes` names them (its rule for the common pattern, the
 * participations only where it is in doubt); level is the worst of dutch-damping, dutch-frequency, roll-mode, spiral and
 * coupled-roll-spiral.
 *
 * @param system    Matrix and its two directions; 4×4 row-major each; lateral pattern (φ acts on β̇ only).
 * @param xs        Values of the first parameter.
 * @param ys        Values of the second.
 * @param klass     Class.
 * @param category  Flight phase category.
 * @returns         Fields over the grid, row-major with one row per y.
 * @throws {NumericsError} bad-argument for an empty or too large grid, non-finite-input.
 * @sign            none
 * @source          MIL-F-8785C, tables VI–VIII; `lateralModes`.
 */
export function stabilityMap(
  system: BilinearSystem,
  xs: ArrayLike<number>,
  ys: ArrayLike<number>,
  klass: AircraftClass,
  category: FlightCategory,
): StabilityMap {
  const columns = xs.length;
  const rows = ys.length;
  const cells = columns * rows;
  if (!(cells > 0) || cells > LARGEST_CELLS) {
    throw new NumericsError('bad-argument', `a grid of ${columns} × ${rows} cells is empty or above ${LARGEST_CELLS}`);
  }
  requireFinite(xs, columns, 'first parameter');
  requireFinite(ys, rows, 'second parameter');
  const { base, alongX, alongY } = system;
  requireFinite(base, 16, 'system matrix');
  const map: StabilityMap = {
    xs: Float64Array.from(xs),
    ys: Float64Array.from(ys),
    dutchZeta: new Float64Array(cells),
    dutchOmega: new Float64Array(cells),
    roll: new Float64Array(cells),
    spiral: new Float64Array(cells),
    growth: new Float64Array(cells),
    level: new Uint8Array(cells),
    pattern: new Uint8Array(cells),
  };
  const a = new Float64Array(16);
  const row = new Float64Array(16);
  const roots = new Float64Array(8);
  const judge = createCellJudge(klass, category);
  for (let j = 0; j < rows; j++) {
    for (let k = 0; k < 16; k++) row[k] = base[k] + ys[j] * alongY[k];
    for (let i = 0; i < columns; i++) {
      const x = xs[i];
      for (let k = 0; k < 16; k++) a[k] = row[k] + x * alongX[k];
      eigenvalues4Into(roots, a);
      judge(map, j * columns + i, a, roots);
    }
  }
  return map;
}

/** Writes the fields of one cell from its matrix and roots. */
export type CellJudge = (
  map: Omit<StabilityMap, 'xs' | 'ys'>,
  cell: number,
  a: Float64Array,
  roots: Float64Array,
) => void;

/**
 * Names the roots of one cell and writes its fields; the limits are looked up once.
 *
 * @param klass     Class.
 * @param category  Flight phase category.
 * @returns         The function that judges a cell; its matrix 4×4 row-major, its roots as \`eigenvalues4Into\` gives them.
 * @throws          Nothing.
 * @sign            none
 * @source          MIL-F-8785C, tables VI–VIII; \`lateralModes\`.
 */
export function createCellJudge(klass: AircraftClass, category: FlightCategory): CellJudge {
  const dutch = dutchRollMinima(klass, category);
  const rollLimits = rollModeMaxima(klass, category);
  const spiralLimits = spiralMinima(category);
  const largestZeta = klass === 'III' ? CLASS_III_LARGEST_ZETA : Infinity;

  /** Level of an oscillation against table VI; the rise for roll coupling only where ω² alone could pass 20. */
  function dutchLevel(a: Float64Array, re: number, im: number): number {
    const omega2 = re * re + im * im;
    const omega = Math.sqrt(omega2);
    const zeta = -re / omega;
    const excess = Math.max(0, omega2 * phiOverBeta(a, re, im) - ROLL_COUPLING_START);
    for (let l = 0; l < 3; l++) {
      const limit = dutch[l];
      const decay = (limit.zetaOmega + ROLL_COUPLING_RISE[l] * excess) / omega;
      const least = Math.min(Math.max(limit.zeta, decay), largestZeta);
      if (zeta >= least && omega >= limit.omega) return l + 1;
    }
    return 4;
  }

  function realRootLevel(root: number, isRoll: boolean): number {
    if (isRoll) return root < 0 ? levelOf(-1 / root, rollLimits, 'at most') : 4;
    return root > 0 ? levelOf(LN2 / root, spiralLimits, 'at least') : 1;
  }

  return (map, cell, a, roots) => {
    const firstIsPair = roots[1] > 0;
    const secondIsPair = roots[5] > 0;
    map.growth[cell] = Math.max(roots[0], roots[2], roots[4], roots[6]);
    if (firstIsPair !== secondIsPair) {
      const at = firstIsPair ? 0 : 4;
      const re = roots[at];
      const im = roots[at + 1];
      const u = roots[4 - at];
      const v = roots[6 - at];
      const low = Math.min(u, v);
      const high = Math.max(u, v);
      if (isClearDutchRoll(re, im, low, high) || 2 * participation(a, 4, re, im, 0) >= DUTCH_ROLL_SHARE) {
        map.dutchOmega[cell] = Math.sqrt(re * re + im * im);
        map.dutchZeta[cell] = -re / map.dutchOmega[cell];
        const rollIsLow = Math.abs(low) >= Math.abs(high);
        map.roll[cell] = rollIsLow ? low : high;
        map.spiral[cell] = rollIsLow ? high : low;
        map.pattern[cell] = CELL_PATTERN.ordinary;
        map.level[cell] = Math.max(
          dutchLevel(a, re, im),
          realRootLevel(map.roll[cell], true),
          realRootLevel(map.spiral[cell], false),
        );
        return;
      }
      map.dutchOmega[cell] = NaN;
      map.dutchZeta[cell] = NaN;
      map.roll[cell] = re;
      map.spiral[cell] = re;
      map.pattern[cell] = CELL_PATTERN.realPair;
      map.level[cell] = Math.max(high > 0 ? 4 : 1, coupledLevel(re, category));
      return;
    }
    if (firstIsPair) {
      const firstShare = participation(a, 4, roots[0], roots[1], 0);
      const at = firstShare >= participation(a, 4, roots[4], roots[5], 0) ? 0 : 4;
      map.dutchOmega[cell] = Math.sqrt(roots[at] * roots[at] + roots[at + 1] * roots[at + 1]);
      map.dutchZeta[cell] = -roots[at] / map.dutchOmega[cell];
      map.roll[cell] = roots[4 - at];
      map.spiral[cell] = roots[4 - at];
      map.pattern[cell] = CELL_PATTERN.coupled;
      map.level[cell] = Math.max(dutchLevel(a, roots[at], roots[at + 1]), coupledLevel(roots[4 - at], category));
      return;
    }
    const reals = [roots[0], roots[2], roots[4], roots[6]];
    reals.sort((x, y) => participation(a, 4, y, 0, 0) - participation(a, 4, x, 0, 0));
    const rollFirst = Math.abs(reals[2]) >= Math.abs(reals[3]);
    map.dutchOmega[cell] = NaN;
    map.dutchZeta[cell] = NaN;
    map.roll[cell] = rollFirst ? reals[2] : reals[3];
    map.spiral[cell] = rollFirst ? reals[3] : reals[2];
    map.pattern[cell] = CELL_PATTERN.realPair;
    map.level[cell] = Math.max(
      Math.max(reals[0], reals[1]) > 0 ? 4 : 1,
      realRootLevel(map.roll[cell], true),
      realRootLevel(map.spiral[cell], false),
    );
  };
}

/** A quick oscillation beside a slow real root needs no look at the participations. */
function isClearDutchRoll(re: number, im: number, low: number, high: number): boolean {
  return im > 3 * Math.abs(re) && im > 3 * Math.abs(high) && low < 0;
}

function coupledLevel(re: number, category: FlightCategory): number {
  return category === 'A' ? 4 : levelOf(-re, COUPLED_ROLL_SPIRAL_MINIMA, 'at least');
}

/**
 * |φ/β| in the mode of eigenvalue re + i·im, in closed form for a lateral matrix whose φ column acts on β̇ only.
 *
 * @param a   System matrix; 4×4 row-major.
 * @param re  Real part; 1/s.
 * @param im  Imaginary part; 1/s.
 * @returns   |φ/β|; Infinity when the mode has no sideslip.
 * @throws    Nothing.
 * @sign      none
 * @source    Rows p, r and φ of (λI − A)v = 0 with β = 1; derived here.
 */
export function phiOverBeta(a: ArrayLike<number>, re: number, im: number): number {
  // [λ − Lp, −Lr; −Np, λ − Nr] [p; r] = [Lβ; Nβ]
  const pRe = re - a[5];
  const rRe = re - a[10];
  const detRe = pRe * rRe - im * im - a[6] * a[9];
  const detIm = im * (pRe + rRe);
  // Numerators of p and r (before division by det).
  const pNumRe = a[4] * rRe + a[6] * a[8];
  const pNumIm = a[4] * im;
  const rNumRe = a[8] * pRe + a[9] * a[4];
  const rNumIm = a[8] * im;
  // φ = (a31·p + a32·r)/λ
  const topRe = a[13] * pNumRe + a[14] * rNumRe;
  const topIm = a[13] * pNumIm + a[14] * rNumIm;
  const bottom = (detRe * detRe + detIm * detIm) * (re * re + im * im);
  return bottom > 0 ? Math.sqrt((topRe * topRe + topIm * topIm) / bottom) : Infinity;
}
