import type { Aircraft } from '../model/aircraft.ts';
import { stallTasMps } from '../model/aircraft.ts';
import { SEA_LEVEL_DENSITY } from '../model/atmosphere.ts';
import { ModelError } from '../model/errors.ts';
import { buildSmallDisturbance } from '../model/small-disturbance.ts';
import type { LateralCondition, SmallDisturbance } from '../model/small-disturbance.ts';
import { classicalApproximations } from './approximations.ts';
import type { ClassicalApproximations } from './approximations.ts';
import { APPROACH_SIDESLIP_DEG } from './criteria-tables.ts';
import type { AircraftClass, FlightCategory, SpeedRange } from './criteria-tables.ts';
import { modalCriteria } from './criteria-8785c.ts';
import type { CriterionId, CriterionResult } from './criteria-8785c.ts';
import { withYawDamper } from './lateral-system.ts';
import { modeShapes } from './mode-shapes.ts';
import type { ModeShape } from './mode-shapes.ts';
import { lateralModes } from './modes.ts';
import type { LateralModes } from './modes.ts';
import { rollOscillationCriterion, timeToBankCriterion } from './roll-performance.ts';
import { sideslipCriterion } from './sideslip-crosswind.ts';

export interface LateralAnalysis {
  system: SmallDisturbance;
  /** The matrix that the modes belong to: the system's, or with the washout as fifth state. */
  a: Float64Array;
  n: 4 | 5;
  found: LateralModes;
  shapes: ModeShape[];
  approximations: ClassicalApproximations;
  criteria: CriterionResult[];
  class: AircraftClass;
  category: FlightCategory;
}

export interface LateralAnalysisOptions {
  class?: Aircraft['class'];
  category?: FlightCategory;
  /** Yaw damper on (its washout is the fifth state); default off. */
  yawDamper?: boolean;
}

/** Up to this multiple of the stall speed Classes III and IV are in the low range of table IX. */
const LOW_RANGE = 1.8;

const ORDER: readonly CriterionId[] = [
  'dutch-damping',
  'dutch-frequency',
  'roll-mode',
  'spiral',
  'coupled-roll-spiral',
  'time-to-bank',
  'roll-oscillation',
  'sideslip-approach',
  '25.181',
  '23.181',
];

/**
 * The class as the criteria know it: "II" alone means II-L.
 *
 * @param klass  As in the airframe file.
 * @returns      Class of MIL-F-8785C.
 * @source       MIL-F-8785C 1.3; choice of II-L ours.
 */
export function criteriaClass(klass: Aircraft['class']): AircraftClass {
  return klass === 'II' ? 'II-L' : klass;
}

/**
 * Everything about the lateral motion in one condition: matrices, modes, shapes, approximations, criteria.
 *
 * @param aircraft   Prepared aircraft.
 * @param condition  Speed, height, path.
 * @param options    Class, category, yaw damper.
 * @returns          The analysis; criteria that do not apply say so.
 * @throws {ModelError} bad-argument for a speed that is not positive or a damper that the airframe does not have,
 *                   non-finite-input.
 * @throws {NumericsError} no-convergence, bad-argument for matrices beyond all bounds.
 * @sign             As the model's README.
 * @source           MIL-F-8785C; 14 CFR 25.181(b), 23.181(b).
 */
export function analyseLateral(
  aircraft: Aircraft,
  condition: LateralCondition,
  options: LateralAnalysisOptions = {},
): LateralAnalysis {
  const system = buildSmallDisturbance(aircraft, condition);
  const klass = criteriaClass(options.class ?? aircraft.class);
  const category = options.category ?? aircraft.category;
  const damped = options.yawDamper ?? false;
  if (damped && !aircraft.yawDamper) {
    throw new ModelError('bad-argument', 'the airframe has no yaw damper', 'yawDamper');
  }
  const a = damped && aircraft.yawDamper ? withYawDamper(system.A, system.B.rudder, aircraft.yawDamper) : system.A;
  const n = damped ? 5 : 4;
  const found = lateralModes(a, n);
  const shapes = modeShapes(a, n, found, system.tasMps, system.densityKgM3 / SEA_LEVEL_DENSITY);
  const dutch = shapes.find(({ mode }) => mode.kind === 'dutch-roll');
  const { controls } = aircraft;
  const roll = {
    a,
    n,
    column: system.B.aileron,
    rudder: system.B.rudder,
    aileron: { lagS: controls.lagS, rateRadS: controls.aileronRateRadS, maxRad: controls.aileronMaxRad },
  } as const;
  const range: SpeedRange = system.tasMps <= LOW_RANGE * stallTasMps(aircraft, system.densityKgM3) ? 'low' : 'medium';
  const criteria = [
    ...modalCriteria(found, dutch?.phiOverBeta ?? null, klass, category),
    timeToBankCriterion(roll, klass, category, range),
    rollOscillationCriterion(roll, category),
    approachSideslip(aircraft, system, category),
  ].sort((x, y) => ORDER.indexOf(x.id) - ORDER.indexOf(y.id));
  const approximations = classicalApproximations(system.A);
  return { system, a, n, found, shapes, approximations, criteria, class: klass, category };
}

/** 3.3.7.1 applies to the approach (category C); a trim without a solution is its reason. */
function approachSideslip(aircraft: Aircraft, system: SmallDisturbance, category: FlightCategory): CriterionResult {
  const notJudged = (remark: string): CriterionResult => ({
    id: 'sideslip-approach',
    title: 'Steady sideslip with 75 % of the roll control',
    level: null,
    value: null,
    unit: 'deg',
    limit: APPROACH_SIDESLIP_DEG,
    limits: [APPROACH_SIDESLIP_DEG],
    sense: 'at least',
    source: 'MIL-F-8785C 3.3.7.1 (seen)',
    remark,
  });
  if (category !== 'C') return notJudged('asked of the approach only (category C)');
  try {
    return sideslipCriterion(aircraft, system.tasMps, system.heightM);
  } catch (error) {
    if (error instanceof ModelError) return notJudged(error.message);
    throw error;
  }
}
