import type { Aircraft } from '../model/aircraft.ts';
import { casFromTas } from '../model/airspeeds.ts';
import { ModelError } from '../model/errors.ts';
import { createStaticSolver } from './static-solution.ts';

export interface RudderAuthorityPoint {
  tasMps: number;
  casMps: number;
  /** Rudder that full pedal gives, ratio changer and pedal force counted; rad. */
  availableRad: number;
  /** The same without the ratio changer; rad. */
  withoutRatioRad: number;
  /** Rudder (size) that straight flight after the cut needs, wings level; rad; null where there is no solution. */
  neededLevelRad: number | null;
  /** The same with the bank of zero sideslip; rad. */
  neededZeroSideslipRad: number | null;
  /** Engine yawing moment of the cut; N·m. */
  yawMomentNm: number;
}

/**
 * Rudder authority against speed beside what a cut needs.
 *
 * @param aircraft  Prepared aircraft.
 * @param heightM   Height; m.
 * @param failed    Indices of the failed engines.
 * @param speeds    True airspeeds; m/s; each positive.
 * @param lever     Lever of the running engines; 0 … 1.
 * @returns         A point per speed.
 * @throws {ModelError} bad-argument for a speed that is not positive, unknown-engine.
 * @sign            Sizes; the side follows from the failure.
 * @source          Flight model, controls and trim.
 */
export function rudderAuthority(
  aircraft: Aircraft,
  heightM: number,
  failed: readonly number[],
  speeds: ArrayLike<number>,
  lever = 1,
): RudderAuthorityPoint[] {
  for (const index of failed) {
    if (!(index in aircraft.engines)) throw new ModelError('unknown-engine', `there is no engine number ${index}`);
  }
  const engines = { lever, failed, feathered: false };
  const withRatio = createStaticSolver(aircraft, { heightM, engines });
  const without = createStaticSolver(aircraft, { heightM, engines, withoutRudderRatio: true });
  return Array.from(speeds, (tasMps) => {
    if (!(tasMps > 0) || !Number.isFinite(tasMps)) {
      throw new ModelError('bad-argument', `a speed of ${tasMps} m/s is not positive`, 'speeds');
    }
    const level = withRatio.solveAtBank(tasMps, 0) ? Math.abs(withRatio.at.rudderRad) : null;
    const banked = withRatio.solveAtSideslip(tasMps, 0) ? Math.abs(withRatio.at.rudderRad) : null;
    withRatio.loadEngines(tasMps);
    return {
      tasMps,
      casMps: casFromTas(tasMps, heightM),
      availableRad: withRatio.rudderLimitRad(tasMps),
      withoutRatioRad: without.rudderLimitRad(tasMps),
      neededLevelRad: level,
      neededZeroSideslipRad: banked,
      yawMomentNm: withRatio.yawMomentNm,
    };
  });
}
