import type { Aircraft } from '../model/aircraft.ts';
import { stallTasMps } from '../model/aircraft.ts';
import { casFromTas } from '../model/airspeeds.ts';
import { ModelError } from '../model/errors.ts';
import { sin } from '../numerics/elementary.ts';
import { DEG } from '../units/constants.ts';
import { CERTIFICATION } from './certification.ts';
import { APPROACH_ROLL_SHARE, APPROACH_SIDESLIP_DEG } from './criteria-tables.ts';
import type { CriterionResult } from './criteria-8785c.ts';
import { STATIC_LIMITS } from './static-limits.ts';
import type { StaticLimit } from './static-limits.ts';
import { createStaticSolver } from './static-solution.ts';
import type { StaticOptions, StaticSolver } from './static-solution.ts';

/** Sideslip beyond which the data do not hold; rad (flight model, validity). */
export const DATA_SIDESLIP_RAD = 15 * DEG;
/** Sideslip at which the search for a limit ends; rad. */
const LARGEST_SIDESLIP_RAD = 60 * DEG;
const NO_ENGINES = { lever: 0, failed: [], feathered: false } as const;
const SCAN_STEP_RAD = 2 * DEG;
const REFINEMENTS = 50;

export interface SideslipPoint {
  betaRad: number;
  phiRad: number;
  aileronRad: number;
  rudderRad: number;
  /** Use of each limit, in the order of STATIC_LIMITS. */
  use: number[];
  /** Side component of the true airspeed: the steady crosswind that this slip balances; m/s. */
  crosswindMps: number;
}

/** What ends a steady sideslip: a control limit, the weight component (no bank balances the side force), or the search. */
export type SideslipLimit = StaticLimit | 'bank' | 'none up to 60° of sideslip';

export interface CrosswindLimit {
  /** By control power alone. */
  controlPower: SideslipPoint;
  limitedBy: SideslipLimit;
  /** The same, but within 15° of sideslip. */
  withinData: SideslipPoint;
  /** Whether the control power reaches beyond 15° of sideslip. */
  outsideData: boolean;
  /** 0.2 VS0 (calibrated) of the configuration; m/s; 14 CFR 23.233. */
  part23Mps: number;
  /** The greater of 20 kt and 0.2 VSR0, at most 25 kt; m/s; 14 CFR 25.237(a). */
  part25Mps: number;
}

export interface SideslipOptions {
  ignore?: readonly StaticLimit[];
  aileronShare?: number;
  withoutRudderRatio?: boolean;
}

/**
 * Steady-heading sideslips from the left to the right at one speed, engine moments zero.
 *
 * @param aircraft   Prepared aircraft.
 * @param tasMps     True airspeed; m/s.
 * @param heightM    Height; m.
 * @param betas      Sideslip angles; rad.
 * @returns          A point per angle; null where no bank balances the side force.
 * @throws {ModelError} bad-argument for a speed that is not positive, singular-trim.
 * @sign             β > 0 wind from the right; surfaces as in the model's README.
 * @source           14 CFR 25.177 (seen) for the manoeuvre; flight model, trim.
 */
export function steadySideslips(
  aircraft: Aircraft,
  tasMps: number,
  heightM: number,
  betas: ArrayLike<number>,
): (SideslipPoint | null)[] {
  const solver = sideslipSolver(aircraft, tasMps, heightM, {});
  return Array.from(betas, (beta) => (solver.solveAtSideslip(tasMps, beta) ? pointOf(solver, tasMps) : null));
}

/**
 * The largest steady crosswind from the right that a wing-down approach holds: V·sin β, engine moments zero.
 *
 * Use of every limit grows with sideslip; the first that is used up binds.
 *
 * @param aircraft  Prepared aircraft.
 * @param tasMps    True airspeed; m/s.
 * @param heightM   Height; m.
 * @param options   Limits that do not count, share of the aileron.
 * @returns         The limit by control power, what binds, and the value within the data.
 * @throws {ModelError} bad-argument, singular-trim.
 * @sign            Wind from the right, bank to the right positive.
 * @source          14 CFR 25.237(a), 23.233 (seen); flight model, steady-heading sideslip.
 */
export function crosswindLimit(
  aircraft: Aircraft,
  tasMps: number,
  heightM: number,
  options: SideslipOptions = {},
): CrosswindLimit {
  const solver = sideslipSolver(aircraft, tasMps, heightM, options);
  const { beta, limitedBy } = largestSideslip(solver, tasMps);
  if (!solver.solveAtSideslip(tasMps, beta)) throw new ModelError('singular-trim', 'no steady sideslip has a solution');
  const controlPower = pointOf(solver, tasMps);
  const within = Math.min(beta, DATA_SIDESLIP_RAD);
  solver.solveAtSideslip(tasMps, within);
  const withinData = pointOf(solver, tasMps);
  const stallCas = casFromTas(stallTasMps(aircraft, solver.densityKgM3), heightM);
  const share = CERTIFICATION.crosswindStallShare * stallCas;
  return {
    controlPower,
    limitedBy,
    withinData,
    outsideData: beta > DATA_SIDESLIP_RAD,
    part23Mps: share,
    part25Mps: Math.min(CERTIFICATION.crosswindMostMps, Math.max(CERTIFICATION.crosswindLeastMps, share)),
  };
}

/**
 * MIL-F-8785C 3.3.7.1: the sideslip that the approach holds with three quarters of the roll control.
 *
 * @param aircraft  Prepared aircraft in its approach configuration.
 * @param tasMps    True airspeed; m/s.
 * @param heightM   Height; m.
 * @returns         The criterion with the largest sideslip in degrees.
 * @throws {ModelError} bad-argument, singular-trim.
 * @sign            none
 * @source          MIL-F-8785C 3.3.7.1 (seen).
 */
export function sideslipCriterion(aircraft: Aircraft, tasMps: number, heightM: number): CriterionResult {
  const solver = sideslipSolver(aircraft, tasMps, heightM, { aileronShare: APPROACH_ROLL_SHARE });
  const { beta, limitedBy } = largestSideslip(solver, tasMps);
  const value = beta / DEG;
  return {
    id: 'sideslip-approach',
    title: 'Steady sideslip with 75 % of the roll control',
    level: value >= APPROACH_SIDESLIP_DEG ? 'met' : 'not met',
    value,
    unit: 'deg',
    limit: APPROACH_SIDESLIP_DEG,
    limits: [APPROACH_SIDESLIP_DEG],
    sense: 'at least',
    source: 'MIL-F-8785C 3.3.7.1 (seen)',
    remark: value >= LARGEST_SIDESLIP_RAD / DEG ? limitedBy : `limited by ${limitedBy}`,
  };
}

function sideslipSolver(aircraft: Aircraft, tasMps: number, heightM: number, options: SideslipOptions): StaticSolver {
  if (!(tasMps > 0) || !Number.isFinite(tasMps)) {
    throw new ModelError('bad-argument', `a speed of ${tasMps} m/s is not positive`, 'speed');
  }
  const settings: StaticOptions = { heightM, engines: NO_ENGINES, ...options };
  const solver = createStaticSolver(aircraft, settings);
  if (!solver.solveAtSideslip(tasMps, 0)) {
    throw new ModelError('singular-trim', 'the trim equations are dependent: aileron and rudder act alike');
  }
  return solver;
}

/** The sideslip at which the first limit is used up: scan, then bisection. */
function largestSideslip(solver: StaticSolver, tasMps: number): { beta: number; limitedBy: SideslipLimit } {
  const holds = (beta: number) => solver.solveAtSideslip(tasMps, beta) && solver.largestUse <= 1;
  let held = 0;
  let notHeld = 0;
  while (held < LARGEST_SIDESLIP_RAD) {
    const next = Math.min(held + SCAN_STEP_RAD, LARGEST_SIDESLIP_RAD);
    if (!holds(next)) {
      notHeld = next;
      break;
    }
    held = next;
  }
  if (notHeld === 0) return { beta: held, limitedBy: 'none up to 60° of sideslip' };
  for (let i = 0; i < REFINEMENTS; i++) {
    const middle = 0.5 * (held + notHeld);
    if (holds(middle)) held = middle;
    else notHeld = middle;
  }
  const solvable = solver.solveAtSideslip(tasMps, notHeld);
  return { beta: held, limitedBy: solvable ? STATIC_LIMITS[solver.binding] : 'bank' };
}

function pointOf(solver: StaticSolver, tasMps: number): SideslipPoint {
  return {
    betaRad: solver.at.betaRad,
    phiRad: solver.at.phiRad,
    aileronRad: solver.at.aileronRad,
    rudderRad: solver.at.rudderRad,
    use: Array.from(solver.use),
    crosswindMps: tasMps * sin(solver.at.betaRad),
  };
}
