/** The runway of a scenario as the model and the stage take it; SI and radians. */
import type { RunwaySetup } from '#shared/model/plant-types.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import { DEG, FT } from '#shared/units/constants.ts';

export function stageRunway(scenario: Scenario): RunwaySetup | null {
  const { runway } = scenario;
  if (!runway) return null;
  return {
    headingRad: runway.heading_deg * DEG,
    elevationM: runway.elevation_ft * FT,
    widthM: runway.width_m,
    thresholdM: runway.threshold_m,
    glidepathRad: runway.glidepath_deg * DEG,
    gearHeightM: runway.gearHeight_m,
  };
}
