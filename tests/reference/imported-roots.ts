/** Roots of a foreign set after its import, for the tests of this folder. */
import { lateralModes } from '#shared/analysis/modes.ts';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import { importLateralSet } from '#shared/model/import-set.ts';
import type { ForeignSet, ImportedSet } from '#shared/model/import-set.ts';
import { buildSmallDisturbance } from '#shared/model/small-disturbance.ts';
import { FT } from '#shared/units/constants.ts';

/** Real and imaginary part; 1/s. */
export type Root = readonly [number, number];

/** kg/m³ in a slug/ft³. */
export const SLUG_PER_FT3 = 515.3788183931961;

function rootsOf(imported: ImportedSet, tasMps: number, densityKgM3: number): Root[] {
  const parsed = parseAirframe({
    format: 'sidewash.airframe/1',
    name: 'Set',
    class: 'III',
    geometry: { wingArea_m2: imported.wingArea_m2, wingSpan_m: imported.wingSpan_m, meanChord_m: 3 },
    mass: imported.mass,
    configurations: [{ name: 'only', CLmax: 2, derivatives: [imported.row] }],
    controls: { aileronMax_deg: 20, rudderMax_deg: 25, aileronRate_deg_s: 60, rudderRate_deg_s: 60, lag_s: 0.1 },
  });
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.issues));
  const { A } = buildSmallDisturbance(prepareAircraft(parsed.airframe), { tasMps, heightM: 0, densityKgM3 });
  return lateralModes(A).modes.map(({ re, im }) => [re, im] as const);
}

/** Roots of a set after import, at its own speed and density: Dutch roll, roll, spiral; imaginary part ≥ 0; 1/s. */
export function imported(set: ForeignSet): Root[] {
  const length = set.units === 'US' ? FT : 1;
  const density = set.units === 'US' ? SLUG_PER_FT3 : 1;
  return rootsOf(importLateralSet(set), set.speed * length, set.density * density);
}
