/** Minimum control speed and stall for the marks of the airspeed edge, by the same analysis as everywhere else. */
import { minimumControlSpeed } from '#shared/analysis/minimum-control-speed.ts';
import { prepareAircraft, stallTasMps } from '#shared/model/aircraft.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { casFromTas } from '#shared/model/airspeeds.ts';
import { densityAt } from '#shared/model/atmosphere.ts';
import { ModelError } from '#shared/model/errors.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import { FT } from '#shared/units/constants.ts';
import type { ComputedSpeeds } from './speed-marks.ts';

/**
 * At the start height, loading and configuration, bank up to 5°, full lever, propeller windmilling. The critical engine is
 * the one whose failure gives the highest speed; a pair abreast of each other counts singly.
 */
export function computeSpeeds(scenario: Scenario, airframe: Airframe): ComputedSpeeds {
  const heightM = scenario.start.height_ft * FT;
  try {
    const aircraft = prepareAircraft(airframe, {
      configuration: scenario.configuration ?? undefined,
      loading: scenario.loading,
      dorsal: scenario.automation.dorsalFin,
    });
    const stallMps = casFromTas(stallTasMps(aircraft, densityAt(heightM)), heightM);
    const speeds = airframe.engines.map((_, engine) => minimumControlSpeed(aircraft, { heightM, failed: [engine] }));
    const found = speeds.flatMap((speed) => (speed.found ? [speed.casMps] : []));
    return { minimumControlMps: found.length > 0 ? Math.max(...found) : null, stallMps };
  } catch (error) {
    if (error instanceof ModelError) return { minimumControlMps: null, stallMps: null };
    throw error;
  }
}
