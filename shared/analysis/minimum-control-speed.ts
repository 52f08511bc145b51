import type { Aircraft } from '../model/aircraft.ts';
import { stallTasMps } from '../model/aircraft.ts';
import { casFromTas } from '../model/airspeeds.ts';
import { ModelError } from '../model/errors.ts';
import { exp, ln } from '../numerics/elementary.ts';
import { DEG } from '../units/constants.ts';
import { CERTIFICATION } from './certification.ts';
import { STATIC_LIMITS } from './static-limits.ts';
import type { StaticLimit } from './static-limits.ts';
import { createStaticSolver } from './static-solution.ts';
import type { StaticSolver } from './static-solution.ts';

/** The bank that may be used: exactly so much toward the live engine, or the best from 0 to a limit. */
export type BankRule = { exactlyRad: number } | { upToRad: number };

export interface ControlSpeedRequest {
  heightM: number;
  /** Indices of the failed engines; at least one. */
  failed: readonly number[];
  /** Default: the best up to 5° toward the live engine. */
  bank?: BankRule;
  /** Lever of the running engines; default 1. */
  lever?: number;
  feathered?: boolean;
  ignore?: readonly StaticLimit[];
}

export interface ControlSpeed {
  found: true;
  /** Calibrated; m/s. */
  casMps: number;
  tasMps: number;
  limitedBy: StaticLimit;
  phiRad: number;
  betaRad: number;
  aileronRad: number;
  rudderRad: number;
  /** Bank at which the sideslip is zero at this speed; null when no bank gives it. */
  zeroSideslipBankRad: number | null;
  stallCasMps: number;
  belowStall: boolean;
}

export type NoControlSpeedReason = 'no-engine-moment' | 'held-at-every-speed' | 'held-at-no-speed' | 'singular-trim';

export interface NoControlSpeed {
  found: false;
  reason: NoControlSpeedReason;
  message: string;
  stallCasMps: number;
}

/** Speeds are looked at between these multiples of the 1 g stall speed. */
const LOWEST = 0.25;
const HIGHEST = 6;
const SCAN_STEPS = 28;
/** Speed is refined to this fraction of itself. */
const SPEED_SETTLED = 1e-9;
const MAX_REFINEMENTS = 60;
/** An engine yawing moment below this fraction of weight × span is none. */
const NO_MOMENT = 1e-9;
export const DEFAULT_BANK_LIMIT_RAD = CERTIFICATION.controlSpeedBankRad;
const LARGEST_BANK_RAD = 60 * DEG;

/**
 * Static minimum control speed: the lowest speed at which straight flight is held with the named engines failed.
 *
 * The use of the worst limit falls with speed; the search comes down from six times the stall speed to the first speed
 * that is not held and refines the boundary, so that every speed above the answer (up to there) is held. Dynamics are not
 * in it: a sudden failure needs more.
 *
 * @param aircraft  Prepared aircraft.
 * @param request   Failure, height, bank rule, lever, limits.
 * @returns         The speed with what binds, or the reason why there is none.
 * @throws {ModelError} unknown-engine, bad-argument, non-finite-input.
 * @sign            Bank positive to the right; surfaces as in the model's README.
 * @source          14 CFR 25.149 (seen) for the conditions; flight model, minimum control speed.
 */
export function minimumControlSpeed(aircraft: Aircraft, request: ControlSpeedRequest): ControlSpeed | NoControlSpeed {
  const solver = solverFor(aircraft, request);
  const rule = request.bank ?? { upToRad: DEFAULT_BANK_LIMIT_RAD };
  const stallTas = stallTasMps(aircraft, solver.densityKgM3);
  const stallCasMps = casFromTas(stallTas, request.heightM);
  const none = (reason: NoControlSpeedReason, message: string): NoControlSpeed => ({
    found: false,
    reason,
    message,
    stallCasMps,
  });

  const high = HIGHEST * stallTas;
  const low = LOWEST * stallTas;
  solver.loadEngines(stallTas);
  const scale = aircraft.massKg * aircraft.spanM;
  if (Math.abs(solver.yawMomentNm) + Math.abs(solver.rollMomentNm) <= NO_MOMENT * scale) {
    return none('no-engine-moment', 'the failure leaves no moment to hold');
  }
  const down = exp(-ln(high / low) / SCAN_STEPS);
  let held = NaN;
  let notHeld = NaN;
  let solved = false;
  let speed = high;
  for (let k = 0; k <= SCAN_STEPS; k++, speed *= down) {
    const use = worstUse(solver, speed, rule, true);
    if (use < Infinity) solved = true;
    if (use <= 1) held = speed;
    else if (held === held) {
      notHeld = speed;
      break;
    }
  }
  if (held !== held) {
    return solved
      ? none('held-at-no-speed', `straight flight is not held at any speed up to ${HIGHEST} times the stall speed`)
      : none('singular-trim', 'the trim equations are dependent: no control balances the moments');
  }
  if (notHeld !== notHeld) {
    return none('held-at-every-speed', `straight flight is held down to ${LOWEST} of the stall speed`);
  }
  const tasMps = refine(solver, notHeld, held, rule);
  worstUse(solver, tasMps, rule);
  const answer: ControlSpeed = {
    found: true,
    casMps: casFromTas(tasMps, request.heightM),
    tasMps,
    limitedBy: STATIC_LIMITS[solver.binding],
    phiRad: solver.at.phiRad,
    betaRad: solver.at.betaRad,
    aileronRad: solver.at.aileronRad,
    rudderRad: solver.at.rudderRad,
    zeroSideslipBankRad: null,
    stallCasMps,
    belowStall: tasMps < stallTas,
  };
  if (solver.solveAtSideslip(tasMps, 0)) answer.zeroSideslipBankRad = solver.at.phiRad;
  return answer;
}

function solverFor(aircraft: Aircraft, request: ControlSpeedRequest): StaticSolver {
  const { failed, heightM, lever = 1, feathered = false, ignore } = request;
  for (const index of failed) {
    if (!(index in aircraft.engines)) throw new ModelError('unknown-engine', `there is no engine number ${index}`);
  }
  if (failed.length === 0) throw new ModelError('bad-argument', 'no engine is named as failed', 'failed');
  if (!(lever >= 0 && lever <= 1))
    throw new ModelError('bad-argument', `a lever of ${lever} is outside 0 … 1`, 'lever');
  const bank = request.bank ? ('upToRad' in request.bank ? request.bank.upToRad : request.bank.exactlyRad) : 0;
  if (!(Math.abs(bank) <= LARGEST_BANK_RAD)) {
    throw new ModelError('bad-argument', `a bank of ${bank / DEG}° is outside ±60°`, 'bank');
  }
  return createStaticSolver(aircraft, { heightM, engines: { lever, failed, feathered }, ignore });
}

/**
 * +1 when the live side is on the right: the moments yaw (else roll) the aeroplane to the left.
 *
 * @param solver  With its engines loaded.
 * @returns       +1 right, −1 left.
 * @source        derived here: sign of the moment.
 */
export function liveSide(solver: Pick<StaticSolver, 'yawMomentNm' | 'rollMomentNm'>): 1 | -1 {
  const moment = solver.yawMomentNm === 0 ? solver.rollMomentNm : solver.yawMomentNm;
  return moment > 0 ? -1 : 1;
}

/**
 * Use of the worst limit at a speed with the bank that the rule allows; leaves the solver at that solution. With
 * `anyHeld` the first bank that is held will do.
 */
function worstUse(solver: StaticSolver, tasMps: number, rule: BankRule, anyHeld = false): number {
  solver.loadEngines(tasMps);
  const side = liveSide(solver);
  if ('exactlyRad' in rule) return useAt(solver, tasMps, side * rule.exactlyRad);
  return leastUse(solver, tasMps, side, rule.upToRad, anyHeld);
}

function useAt(solver: StaticSolver, tasMps: number, phiRad: number): number {
  return solver.solveAtBank(tasMps, phiRad) ? solver.largestUse : Infinity;
}

/** Bank step with which a slope is felt, as a fraction of the range. */
const FEELER = 1e-5;
const MAX_CUTS = 20;
/** The bank is settled when line and value differ by no more than this. */
const USE_SETTLED = 1e-8;

/**
 * Least use over banks from 0 to `upTo`, with the solver left there.
 *
 * The use of each limit is close to |linear| in sin φ, so the worst of them is convex and nearly made of straight pieces:
 * the lines at the two ends of a bracket meet near the minimum, and the point there replaces one of the ends.
 */
function leastUse(solver: StaticSolver, tasMps: number, side: number, upToRad: number, anyHeld: boolean): number {
  const at = (share: number) => useAt(solver, tasMps, side * share * upToRad);
  if (upToRad === 0) return at(0);
  let right = 1;
  let rightUse = at(1);
  if (anyHeld && rightUse <= 1) return rightUse;
  let rightSlope = (rightUse - at(1 - FEELER)) / FEELER;
  if (!(rightSlope > 0)) return at(1);
  let left = 0;
  let leftUse = at(0);
  if (anyHeld && leftUse <= 1) return leftUse;
  let leftSlope = (at(FEELER) - leftUse) / FEELER;
  if (!(leftSlope < 0)) return at(0);
  let best = rightUse < leftUse ? 1 : 0;
  let bestUse = Math.min(leftUse, rightUse);
  for (let cut = 0; cut < MAX_CUTS; cut++) {
    const meet = (leftUse - rightUse + rightSlope * right - leftSlope * left) / (rightSlope - leftSlope);
    const middle = 0.5 * (left + right);
    const share = meet > left && meet < right ? meet : middle;
    const line = leftUse + leftSlope * (share - left);
    const use = at(share);
    if (anyHeld && use <= 1) return use;
    if (use < bestUse) {
      best = share;
      bestUse = use;
    }
    if (Math.abs(use - line) <= USE_SETTLED || right - left < FEELER) break;
    const slope = (at(share + FEELER) - use) / FEELER;
    if (slope > 0) {
      right = share;
      rightUse = use;
      rightSlope = slope;
    } else {
      left = share;
      leftUse = use;
      leftSlope = slope;
    }
  }
  return at(best);
}

/** The lowest speed that is held between one that is not and one that is: false position (Illinois) with bisection. */
function refine(solver: StaticSolver, notHeld: number, held: number, rule: BankRule): number {
  let low = notHeld;
  let high = held;
  let excessLow = worstUse(solver, low, rule) - 1;
  let excessHigh = worstUse(solver, high, rule) - 1;
  let last = 0;
  for (let i = 0; i < MAX_REFINEMENTS && high - low > SPEED_SETTLED * high; i++) {
    const middle = 0.5 * (low + high);
    const line = high - (excessHigh * (high - low)) / (excessHigh - excessLow);
    const speed = line > low && line < high && i % 4 !== 3 ? line : middle;
    const excess = worstUse(solver, speed, rule) - 1;
    if (excess > 0) {
      low = speed;
      excessLow = excess;
      if (last === 1) excessHigh *= 0.5;
      last = 1;
    } else {
      high = speed;
      excessHigh = excess;
      if (last === -1) excessLow *= 0.5;
      last = -1;
      if (excess > -1e-12) break;
    }
  }
  return high;
}
