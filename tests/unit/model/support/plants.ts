import { readFileSync } from 'node:fs';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { casFromTas } from '#shared/model/airspeeds.ts';
import { createPlant } from '#shared/model/plant.ts';
import type { Plant, PlantOptions, PlantSetup } from '#shared/model/plant-types.ts';
import { FT, KT } from '#shared/units/constants.ts';

/** The five invented airframes, with a speed (kt TAS) at which each flies comfortably in its first configuration. */
export const AIRFRAMES = [
  ['light-twin', 90],
  ['commuter-turboprop', 115],
  ['single-trainer', 75],
  ['twin-jet', 150],
  ['four-jet', 165],
] as const;

export type AirframeSlug = (typeof AIRFRAMES)[number][0];

export function airframeDocument(slug: AirframeSlug): Record<string, unknown> {
  return JSON.parse(readFileSync(new URL(`../../../../scenarios/airframes/${slug}.json`, import.meta.url), 'utf8'));
}

export function shippedAirframe(slug: AirframeSlug): Airframe {
  const parsed = parseAirframe(airframeDocument(slug));
  if (!parsed.ok) throw new Error(`${slug}: ${parsed.issues.map(({ message }) => message).join('; ')}`);
  return parsed.airframe;
}

export interface Flight {
  airframe?: Airframe;
  tasKt?: number;
  heightFt?: number;
  setup?: Partial<PlantSetup>;
  start?: Partial<PlantSetup['start']>;
  options?: PlantOptions;
}

/** A plant of a shipped airframe at full levers, level, calm air; everything can be overridden. */
export function flying(slug: AirframeSlug, flight: Flight = {}): Plant {
  const airframe = flight.airframe ?? shippedAirframe(slug);
  const heightM = (flight.heightFt ?? 300) * FT;
  const tasKt = flight.tasKt ?? AIRFRAMES.find(([name]) => name === slug)?.[1] ?? 100;
  const setup: PlantSetup = {
    airframe,
    fidelity: 'large-angle',
    technique: 'zero-sideslip',
    air: { windFromRad: 0, windMps: 0, profile: 'none', turbulence: 'none' },
    automation: { pitch: { mode: 'hold-path', pathRad: 0 }, yawDamper: false, rudderRatio: true },
    seed: 1,
    ...flight.setup,
    start: {
      casMps: casFromTas(tasKt * KT, heightM),
      heightM,
      headingRad: 0,
      pathRad: 0,
      levers: airframe.engines.map(() => 1),
      ...flight.start,
    },
  };
  return createPlant(setup, flight.options);
}

/** Steps a plant through a time; fails the test when it stops. */
export function fly(plant: Plant, seconds: number, each?: (tick: number) => void): void {
  const ticks = Math.round(seconds * 120);
  for (let i = 0; i < ticks; i++) {
    each?.(i);
    if (!plant.step()) throw new Error(plant.fault ?? 'stopped');
  }
}
