import {
  CLASS_III_LARGEST_ZETA,
  COUPLED_ROLL_SPIRAL_MINIMA,
  PART_23_ZETA,
  ROLL_COUPLING_RISE,
  ROLL_COUPLING_START,
  dutchRollMinima,
  rollModeMaxima,
  spiralMinima,
} from './criteria-tables.ts';
import type { AircraftClass, FlightCategory, LevelLimits } from './criteria-tables.ts';
import type { LateralModes, Mode } from './modes.ts';

export type CriterionId =
  | 'dutch-damping'
  | 'dutch-frequency'
  | 'roll-mode'
  | 'spiral'
  | 'coupled-roll-spiral'
  | 'time-to-bank'
  | 'roll-oscillation'
  | 'sideslip-approach'
  | '25.181'
  | '23.181';

/** 1, 2 or 3; 4 is worse than Level 3. Paragraphs without levels are met or not. */
export type CriterionLevel = 1 | 2 | 3 | 4 | 'met' | 'not met';

export interface CriterionResult {
  id: CriterionId;
  title: string;
  /** Null when the criterion does not apply; the remark says why. */
  level: CriterionLevel | null;
  /** Computed value; null when there is none. */
  value: number | null;
  unit: string;
  /** Limit of Level 1, or of the paragraph. */
  limit: number | null;
  /** Limits of Levels 1, 2, 3 as far as the source gives them. */
  limits: readonly number[];
  /** Whether the value must be at least or at most the limit. */
  sense: 'at least' | 'at most';
  source: string;
  remark?: string;
}

const MIL = 'MIL-F-8785C';

/**
 * The level that a value reaches against limits that grow easier.
 *
 * @param value   Value.
 * @param limits  Limits of Levels 1, 2, 3 (or fewer).
 * @param sense   Whether the value must be at least or at most the limit.
 * @returns       1, 2 or 3; 4 when no limit is held or the value is NaN.
 * @throws        Nothing.
 * @sign          none
 * @source        MIL-F-8785C, 1.5 (levels of flying qualities).
 */
export function levelOf(value: number, limits: readonly number[], sense: 'at least' | 'at most'): 1 | 2 | 3 | 4 {
  for (let i = 0; i < limits.length; i++) {
    if (sense === 'at least' ? value >= limits[i] : value <= limits[i]) return (i + 1) as 1 | 2 | 3;
  }
  return 4;
}

/**
 * Least Dutch roll damping ratio for Levels 1, 2, 3 at a given frequency and roll coupling.
 *
 * The larger of ζ and ζω/ω of table VI, with the rise for ω²|φ/β| above 20; for Class III never more than 0.7.
 *
 * @param klass        Class.
 * @param category     Flight phase category.
 * @param wn           ω_n; rad/s; > 0.
 * @param phiOverBeta  |φ/β| in the mode; 1; null counts as none.
 * @returns            Three damping ratios, Level 1 first.
 * @throws             Nothing.
 * @sign               none
 * @source             MIL-F-8785C, 3.3.1.1 and table VI (seen).
 */
export function dutchDampingLimits(
  klass: AircraftClass,
  category: FlightCategory,
  wn: number,
  phiOverBeta: number | null,
): LevelLimits {
  const excess = Math.max(0, wn * wn * (phiOverBeta ?? 0) - ROLL_COUPLING_START);
  const minima = dutchRollMinima(klass, category);
  const limit = (i: 0 | 1 | 2) => {
    const governing = Math.max(minima[i].zeta, (minima[i].zetaOmega + ROLL_COUPLING_RISE[i] * excess) / wn);
    return klass === 'III' ? Math.min(governing, CLASS_III_LARGEST_ZETA) : governing;
  };
  return [limit(0), limit(1), limit(2)];
}

/**
 * The criteria that follow from the modes alone, in the order of the specification.
 *
 * @param found        Modes with the yaw damper off or on, as the caller chose.
 * @param phiOverBeta  |φ/β| of the Dutch roll; null when there is none.
 * @param klass        Class.
 * @param category     Flight phase category.
 * @returns            dutch-damping, dutch-frequency, roll-mode, spiral, coupled-roll-spiral, 25.181, 23.181.
 * @throws             Nothing.
 * @sign               none
 * @source             MIL-F-8785C 3.3.1.1–3.3.1.4, tables VI–VIII; 14 CFR 25.181(b), 23.181(b).
 */
export function modalCriteria(
  found: LateralModes,
  phiOverBeta: number | null,
  klass: AircraftClass,
  category: FlightCategory,
): CriterionResult[] {
  const of = (kind: Mode['kind']) => found.modes.find((mode) => mode.kind === kind);
  const dutch = of('dutch-roll');
  const coupled = of('roll-spiral');
  const pair = pairState(found);
  return [
    dutchDamping(dutch, pair, phiOverBeta, klass, category),
    dutchFrequency(dutch, pair, klass, category),
    rollMode(of('roll'), klass, category),
    spiral(of('spiral'), category),
    coupledRollSpiral(coupled, category),
    dampingParagraph('25.181', dutch, pair, 0, '14 CFR 25.181(b): positively damped (seen)'),
    dampingParagraph(
      '23.181',
      dutch,
      pair,
      PART_23_ZETA,
      '14 CFR 23.181(b), before amendment 64: 1/10 amplitude in 7 cycles (memory)',
    ),
  ];
}

const NO_OSCILLATION = 'two real roots stand in place of the Dutch roll';

function dutchDamping(
  dutch: Mode | undefined,
  pair: PairState,
  phiOverBeta: number | null,
  klass: AircraftClass,
  category: FlightCategory,
): CriterionResult {
  const base = {
    id: 'dutch-damping' as const,
    title: 'Dutch roll damping ratio',
    unit: '',
    sense: 'at least' as const,
    source: `${MIL} 3.3.1.1, table VI (seen)`,
  };
  if (dutch?.wn === undefined || dutch.zeta === undefined) {
    const minima = dutchRollMinima(klass, category).map((row) => row.zeta);
    return { ...base, ...withoutDutchRoll(pair), limit: minima[0], limits: minima };
  }
  const limits = dutchDampingLimits(klass, category, dutch.wn, phiOverBeta);
  return { ...base, level: levelOf(dutch.zeta, limits, 'at least'), value: dutch.zeta, limit: limits[0], limits };
}

function dutchFrequency(
  dutch: Mode | undefined,
  pair: PairState,
  klass: AircraftClass,
  category: FlightCategory,
): CriterionResult {
  const limits = dutchRollMinima(klass, category).map((row) => row.omega);
  const base = {
    id: 'dutch-frequency' as const,
    title: 'Dutch roll frequency',
    unit: 'rad/s',
    sense: 'at least' as const,
    source: `${MIL} 3.3.1.1, table VI (seen)`,
    limit: limits[0],
    limits,
  };
  if (dutch?.wn === undefined) return { ...base, ...withoutDutchRoll(pair) };
  return { ...base, level: levelOf(dutch.wn, limits, 'at least'), value: dutch.wn };
}

/** What two real roots in place of the Dutch roll do; a root at zero neither converges nor diverges. */
type PairState = 'divergent' | 'neutral' | 'convergent';

function pairState(found: LateralModes): PairState {
  const roots = found.modes.filter((mode) => mode.kind === 'real-pair');
  if (roots.some((mode) => mode.doubleS !== undefined)) return 'divergent';
  return roots.some((mode) => mode.halveS === undefined) ? 'neutral' : 'convergent';
}

/** A divergence in place of the Dutch roll is worse than Level 3; a pair without one has no Dutch roll to judge. */
function withoutDutchRoll(pair: PairState): Pick<CriterionResult, 'level' | 'value' | 'remark'> {
  if (pair === 'divergent') return { level: 4, value: null, remark: `${NO_OSCILLATION}, one of them divergent` };
  const which = pair === 'neutral' ? 'one of them neutral' : 'both convergent';
  return { level: null, value: null, remark: `${NO_OSCILLATION}, ${which}: there is no Dutch roll to judge` };
}

function rollMode(roll: Mode | undefined, klass: AircraftClass, category: FlightCategory): CriterionResult {
  const limits = rollModeMaxima(klass, category);
  const base = {
    id: 'roll-mode' as const,
    title: 'Roll mode time constant',
    unit: 's',
    sense: 'at most' as const,
    source: `${MIL} 3.3.1.2, table VII (seen)`,
    limit: limits[0],
    limits,
  };
  if (!roll) return { ...base, level: null, value: null, remark: 'roll and spiral are one oscillation' };
  if (roll.tauS === undefined || roll.tauS < 0) {
    return { ...base, level: 4, value: roll.tauS ?? null, remark: 'the roll mode does not converge' };
  }
  return { ...base, level: levelOf(roll.tauS, limits, 'at most'), value: roll.tauS };
}

function spiral(mode: Mode | undefined, category: FlightCategory): CriterionResult {
  const limits = spiralMinima(category);
  const base = {
    id: 'spiral' as const,
    title: 'Spiral time to double',
    unit: 's',
    sense: 'at least' as const,
    source: `${MIL} 3.3.1.3, table VIII (seen)`,
    limit: limits[0],
    limits,
  };
  if (!mode) return { ...base, level: null, value: null, remark: 'roll and spiral are one oscillation' };
  if (mode.doubleS === undefined) return { ...base, level: 1, value: null, remark: 'the spiral does not diverge' };
  return { ...base, level: levelOf(mode.doubleS, limits, 'at least'), value: mode.doubleS };
}

function coupledRollSpiral(mode: Mode | undefined, category: FlightCategory): CriterionResult {
  const base = {
    id: 'coupled-roll-spiral' as const,
    title: 'Coupled roll–spiral damping ζω',
    unit: 'rad/s',
    sense: 'at least' as const,
    source: `${MIL} 3.3.1.4 (seen)`,
    limit: COUPLED_ROLL_SPIRAL_MINIMA[0],
    limits: COUPLED_ROLL_SPIRAL_MINIMA,
  };
  if (!mode) return { ...base, level: null, value: null, remark: 'roll and spiral are two separate modes' };
  const value = -mode.re;
  if (category === 'A') {
    return { ...base, level: 4, value, remark: 'not permitted where there is more than gentle manoeuvring' };
  }
  return { ...base, level: levelOf(value, COUPLED_ROLL_SPIRAL_MINIMA, 'at least'), value };
}

function dampingParagraph(
  id: '25.181' | '23.181',
  dutch: Mode | undefined,
  pair: PairState,
  limit: number,
  source: string,
): CriterionResult {
  const base = {
    id,
    title: id === '25.181' ? 'Dutch roll positively damped' : 'Dutch roll to 1/10 amplitude in 7 cycles',
    unit: '',
    sense: 'at least' as const,
    source,
    limit,
    limits: [limit],
  };
  if (dutch?.zeta === undefined) {
    const { value, remark } = withoutDutchRoll(pair);
    return { ...base, level: pair === 'convergent' ? 'met' : 'not met', value, remark };
  }
  const met = limit === 0 ? dutch.zeta > 0 : dutch.zeta >= limit;
  return { ...base, level: met ? 'met' : 'not met', value: dutch.zeta };
}
