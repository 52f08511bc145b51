/** A scenario and an airframe as the setup of a plant: units and defaults resolved. */
import type { Airframe } from '../model/airframe-schema.ts';
import type { PitchMode, PlantSetup, RunwaySetup } from '../model/plant-types.ts';
import { DEG, FT, KT } from '../units/constants.ts';
import type { Scenario } from './scenario-format.ts';
import { startLevers } from './scenario-schema.ts';

/** Full travel of a recorded control. */
export const FULL = 32767;

/** A fraction of travel as it is recorded and flown. */
export function quantised(share: number): number {
  return Math.round(share * FULL) / FULL;
}

/**
 * A compass direction in (−π, π]; 360° is 0 exactly, and a direction east of north is that west of it with the sign changed
 * to the last bit, so that a mirrored scenario flies the mirrored run.
 */
export function compassRad(deg: number): number {
  const turned = deg % 360;
  return (turned > 180 ? turned - 360 : turned <= -180 ? turned + 360 : turned) * DEG;
}

/** A pitch mode of the format, whether of `automation` or of an event. */
export interface PitchMembers {
  mode: PitchMode['mode'];
  path_deg?: number;
  target_kt?: number;
  rate_kt_s?: number;
}

/** A pitch mode in SI units; what is left out takes the values of the moment. */
export function pitchMode(pitch: PitchMembers, now: { pathRad: number; casMps: number }): PitchMode {
  const pathRad = pitch.path_deg === undefined ? now.pathRad : pitch.path_deg * DEG;
  switch (pitch.mode) {
    case 'hold-lift':
      return { mode: 'hold-lift' };
    case 'hold-path':
      return { mode: 'hold-path', pathRad };
    case 'hold-speed':
      return { mode: 'hold-speed', targetCasMps: pitch.target_kt === undefined ? now.casMps : pitch.target_kt * KT };
    case 'decelerate':
      return {
        mode: 'decelerate',
        rateMps2: (pitch.rate_kt_s ?? 0) * KT,
        targetCasMps: pitch.target_kt === undefined ? undefined : pitch.target_kt * KT,
      };
    case 'glidepath':
      return { mode: 'glidepath' };
    case 'manual':
      return { mode: 'manual', pathRad };
  }
}

/** The runway in SI units; null without one. */
export function runwaySetup(scenario: Scenario): RunwaySetup | null {
  const { runway, start } = scenario;
  if (!runway) return null;
  return {
    headingRad: compassRad(runway.heading_deg ?? start.heading_deg),
    elevationM: runway.elevation_ft * FT,
    widthM: runway.width_m,
    thresholdM: runway.threshold_m,
    glidepathRad: runway.glidepath_deg * DEG,
    gearHeightM: runway.gearHeight_m,
  };
}

/** The setup of the plant that flies a scenario. Levers are quantised as a pilot's would be. */
export function plantSetup(scenario: Scenario, airframe: Airframe, seed: number): PlantSetup {
  const { start, air, automation } = scenario;
  const casMps = start.ias_kt * KT;
  const pathRad = start.path_deg * DEG;
  return {
    airframe,
    configuration: scenario.configuration ?? undefined,
    loading: scenario.loading,
    fidelity: scenario.fidelity,
    technique: scenario.technique,
    start: {
      casMps,
      heightM: start.height_ft * FT,
      headingRad: compassRad(start.heading_deg),
      pathRad,
      levers: startLevers(scenario, airframe.engines.length).map(quantised),
    },
    runway: runwaySetup(scenario),
    air: {
      windFromRad: compassRad(air.windFrom_deg),
      windMps: air.wind_kt * KT,
      profile: air.profile,
      turbulence: air.turbulence,
    },
    automation: {
      pitch: pitchMode(automation.pitch ?? { mode: 'hold-path' }, { pathRad, casMps }),
      yawDamper: automation.yawDamper ?? true,
      rudderRatio: automation.rudderRatio ?? true,
      dorsalFin: automation.dorsalFin,
    },
    seed,
  };
}
