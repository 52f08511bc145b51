import type { Aircraft } from '../model/aircraft.ts';
import { ModelError } from '../model/errors.ts';
import { G0 } from '../units/constants.ts';
import { asin } from '../numerics/elementary.ts';
import { createStaticSolver } from './static-solution.ts';
import type { EngineSetting } from './static-solution.ts';

export interface ClimbPoint {
  /** Steady rate of climb; m/s. */
  rateMps: number;
  /** Path angle; rad. */
  gammaRad: number;
  /** Sideslip that counts in the drag; rad. */
  betaRad: number;
}

export type ClimbTechnique = 'zero-sideslip' | 'ball-centred';

export interface ClimbRates {
  allEngines: ClimbPoint;
  /** The named engine failed and windmilling; null without engines. */
  windmilling: ClimbPoint | null;
  /** The same, feathered; for a jet the windmilling drag stays. */
  feathered: ClimbPoint | null;
}

/**
 * Steady climb rate at a true airspeed from thrust and the configuration's polar.
 *
 * sin γ = (ΣT − ΣD_windmilling − D)/(m g), D = qS(CD0 + k·CL² + CD_β²·β²), CL = m g/(qS); sideslip zero, or that of the
 * ball-centred trim; drag of deflected surfaces is not in the data.
 *
 * @param aircraft   Prepared aircraft.
 * @param tasMps     True airspeed; m/s.
 * @param heightM    Height; m.
 * @param setting    Lever, failed engines, feathering.
 * @param technique  How the asymmetry is flown; default zero sideslip.
 * @returns          Rate, path angle and sideslip.
 * @throws {ModelError} bad-argument for a speed that is not positive, singular-trim.
 * @sign             Climb positive.
 * @source           Flight model, engines and forces; steady flight, small path angles in CL.
 */
export function climbPoint(
  aircraft: Aircraft,
  tasMps: number,
  heightM: number,
  setting: EngineSetting,
  technique: ClimbTechnique = 'zero-sideslip',
): ClimbPoint {
  if (!(tasMps > 0) || !Number.isFinite(tasMps)) {
    throw new ModelError('bad-argument', `a speed of ${tasMps} m/s is not positive`, 'speed');
  }
  let betaRad = 0;
  const solver = createStaticSolver(aircraft, { heightM, engines: setting });
  solver.loadEngines(tasMps);
  if (technique === 'ball-centred') {
    if (!solver.solveAtBank(tasMps, 0)) throw new ModelError('singular-trim', 'the trim equations are dependent');
    betaRad = solver.at.betaRad;
  }
  const qS = 0.5 * solver.densityKgM3 * tasMps * tasMps * aircraft.wingAreaM2;
  const weight = aircraft.massKg * G0;
  const CL = weight / qS;
  const drag = qS * (aircraft.CD0 + aircraft.kInduced * CL * CL + aircraft.CDbeta2 * betaRad * betaRad);
  const sine = Math.min(1, Math.max(-1, (solver.forwardN - drag) / weight));
  return { rateMps: tasMps * sine, gammaRad: asin(sine), betaRad };
}

/**
 * Climb rates with all engines, with one windmilling and with it feathered.
 *
 * @param aircraft   Prepared aircraft.
 * @param tasMps     True airspeed; m/s.
 * @param heightM    Height; m.
 * @param failed     Index of the engine that fails.
 * @param lever      Lever of the running engines; 0 … 1.
 * @param technique  How the asymmetry is flown.
 * @returns          Three points.
 * @throws {ModelError} unknown-engine, bad-argument, singular-trim.
 * @sign             Climb positive.
 * @source           `climbPoint`.
 */
export function climbRates(
  aircraft: Aircraft,
  tasMps: number,
  heightM: number,
  failed: number,
  lever = 1,
  technique: ClimbTechnique = 'zero-sideslip',
): ClimbRates {
  const at = (indices: number[], feathered: boolean) =>
    climbPoint(aircraft, tasMps, heightM, { lever, failed: indices, feathered }, technique);
  const allEngines = at([], false);
  if (aircraft.engines.length === 0) return { allEngines, windmilling: null, feathered: null };
  if (!(failed in aircraft.engines)) throw new ModelError('unknown-engine', `there is no engine number ${failed}`);
  return { allEngines, windmilling: at([failed], false), feathered: at([failed], true) };
}
