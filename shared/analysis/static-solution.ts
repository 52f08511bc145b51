import type { Aircraft } from '../model/aircraft.ts';
import { standardAtmosphere } from '../model/atmosphere.ts';
import { pedalRudderLimitRad, rudderRatioAt } from '../model/controls.ts';
import { engineForcesInto } from '../model/engines.ts';
import type { EngineState } from '../model/engines.ts';
import { createTrimSolution, createTrimSolver } from '../model/trim.ts';
import type { TrimClosure, TrimSolution } from '../model/trim.ts';
import { pedalForceUse, STATIC_LIMITS } from './static-limits.ts';
import type { StaticLimit } from './static-limits.ts';

/** What the engines do in a steady condition. */
export interface EngineSetting {
  /** Lever of the running engines; 0 … 1. */
  lever: number;
  /** Indices of the failed engines. */
  failed: readonly number[];
  /** Failed propellers feathered instead of windmilling; jets windmill all the same. */
  feathered: boolean;
}

export interface StaticOptions {
  heightM: number;
  engines: EngineSetting;
  /** Limits that are not to count (studies). */
  ignore?: readonly StaticLimit[];
  /** Ratio changer left out: full travel at every speed. */
  withoutRudderRatio?: boolean;
  /** Path angle; rad; default 0. */
  pathRad?: number;
  /** Share of the aileron travel that may be used; default 1. */
  aileronShare?: number;
}

/**
 * Steady straight flight of one aircraft at one height: three lateral equations with the fourth unknown given.
 *
 * Y + m g cos θ sin φ = 0, L = 0, N = 0 with the engines' moments; derivatives linear, at CL = m g cos θ cos φ/(qS).
 * Results are written into the fields of this object; nothing is allocated per solution.
 */
export interface StaticSolver {
  /** Bank given; writes the fields; false when the equations are dependent or the speed is no speed. */
  solveAtBank(tasMps: number, phiRad: number): boolean;
  /** Sideslip given, bank found; false also when the weight cannot balance the side force at any bank. */
  solveAtSideslip(tasMps: number, betaRad: number): boolean;
  /** Engine force and moments at a speed; writes `forwardN`, `yawMomentNm`, `rollMomentNm`. */
  loadEngines(tasMps: number): void;
  /** The trim of the last solution: sideslip, bank, surfaces, CL, fin. */
  readonly at: TrimSolution;
  /** How much of each limit is used, in the order of STATIC_LIMITS; 1 is the limit, 0 does not apply. */
  readonly use: Float64Array;
  /** Largest of `use`. */
  largestUse: number;
  /** Index in STATIC_LIMITS of the largest. */
  binding: number;
  /** Rudder that the pedals can command at a speed: travel, ratio and pedal force; rad. */
  rudderLimitRad(tasMps: number): number;
  /** Thrust minus windmilling drag; N. */
  forwardN: number;
  yawMomentNm: number;
  rollMomentNm: number;
  readonly densityKgM3: number;
  readonly sigma: number;
  readonly aircraft: Aircraft;
  readonly heightM: number;
}

/**
 * A solver of steady straight flight.
 *
 * @param aircraft  Prepared aircraft.
 * @param options   Height, engine setting, limits that count.
 * @returns         The solver; one condition at a time.
 * @throws {ModelError} non-finite-input for a height that is not finite.
 * @sign            Surfaces and angles as in the model's README.
 * @source          Flight model, trim and fin stall; 14 CFR 25.149 for what is looked for with it.
 */
export function createStaticSolver(aircraft: Aircraft, options: StaticOptions): StaticSolver {
  const air = standardAtmosphere(options.heightM);
  const { engines } = aircraft;
  const levers = new Float64Array(engines.length).fill(options.engines.lever);
  const states = engines.map((_, i): EngineState => {
    if (!options.engines.failed.includes(i)) return 'running';
    return options.engines.feathered ? 'feathered' : 'windmilling';
  });
  const forces = { forwardN: 0, yawNm: 0, rollNm: 0 };
  const trim = createTrimSolver();
  const condition = {
    tasMps: 0,
    heightM: options.heightM,
    thetaRad: options.pathRad ?? 0,
    densityKgM3: air.densityKgM3,
    engineYawNm: 0,
    engineRollNm: 0,
  };
  const atBank = { kind: 'bank' as const, phiRad: 0 };
  const atSideslip = { kind: 'sideslip' as const, betaRad: 0 };
  const counts = STATIC_LIMITS.map((limit) => !(options.ignore ?? []).includes(limit));
  const aileronLimit = aircraft.controls.aileronMaxRad * (options.aileronShare ?? 1);
  const rootSigma = Math.sqrt(air.sigma);

  const at = createTrimSolution();
  const use = new Float64Array(STATIC_LIMITS.length);
  const solver: StaticSolver = {
    solveAtBank,
    solveAtSideslip,
    loadEngines,
    rudderLimitRad,
    at,
    use,
    largestUse: 0,
    binding: 0,
    forwardN: 0,
    yawMomentNm: 0,
    rollMomentNm: 0,
    densityKgM3: air.densityKgM3,
    sigma: air.sigma,
    aircraft,
    heightM: options.heightM,
  };

  let loadedMps = NaN;

  function loadEngines(tasMps: number): void {
    if (tasMps === loadedMps) return;
    loadedMps = tasMps;
    engineForcesInto(forces, engines, levers, states, tasMps, air.densityKgM3, air.soundMps);
    solver.forwardN = forces.forwardN;
    solver.yawMomentNm = forces.yawNm;
    solver.rollMomentNm = forces.rollNm;
  }

  function fullPedalRad(easMps: number): number {
    return options.withoutRudderRatio
      ? aircraft.controls.rudderMaxRad
      : aircraft.controls.rudderMaxRad * rudderRatioAt(aircraft.controls.rudderRatio, easMps);
  }

  function rudderLimitRad(tasMps: number): number {
    const eas = tasMps * rootSigma;
    if (!counts[STATIC_LIMITS.indexOf('pedal force')]) return fullPedalRad(eas);
    return pedalRudderLimitRad(aircraft.controls, eas, options.withoutRudderRatio ? 1 : undefined);
  }

  function solveAtBank(tasMps: number, phiRad: number): boolean {
    atBank.phiRad = phiRad;
    return solve(tasMps, atBank);
  }

  function solveAtSideslip(tasMps: number, betaRad: number): boolean {
    atSideslip.betaRad = betaRad;
    return solve(tasMps, atSideslip);
  }

  /** Solves the trim and works out how much of each limit its surfaces use. */
  function solve(tasMps: number, closure: TrimClosure): boolean {
    if (!(tasMps > 0) || !(tasMps < Infinity)) return false;
    loadEngines(tasMps);
    condition.tasMps = tasMps;
    condition.engineYawNm = solver.yawMomentNm;
    condition.engineRollNm = solver.rollMomentNm;
    if (trim.solveInto(at, aircraft, condition, closure) !== null) return false;
    const eas = tasMps * rootSigma;
    const travel = fullPedalRad(eas);
    use[0] = Math.abs(at.rudderRad) / travel;
    use[1] = Math.abs(at.aileronRad) / aileronLimit;
    use[2] = pedalForceUse(aircraft, eas, at.rudderRad, travel);
    use[3] = Math.abs(at.finAngleRad) / at.finStallAngleRad;
    let largest = 0;
    let binding = 0;
    for (let i = 0; i < use.length; i++) {
      if (!counts[i]) use[i] = 0;
      if (use[i] > largest) {
        largest = use[i];
        binding = i;
      }
    }
    solver.largestUse = largest;
    solver.binding = binding;
    return largest < Infinity;
  }

  return solver;
}
