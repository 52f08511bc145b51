/** Converted values and modes of an airframe before it is saved. */
import { lateralModes } from '#shared/analysis/modes.ts';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import { densityAt } from '#shared/model/atmosphere.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { buildSmallDisturbance } from '#shared/model/small-disturbance.ts';
import { G0, KT } from '#shared/units/constants.ts';
import { DERIVATIVE_KEYS } from './sheet-mapping.ts';

export interface PreviewBlock {
  title: string;
  lines: { name: string; value: string }[];
}

const shortly = (value: number): string =>
  Math.abs(value) >= 1000 ? Math.round(value).toString() : String(Number(value.toPrecision(4)));
const KIND_WORDS: Readonly<Record<string, string>> = {
  'dutch-roll': 'Dutch roll',
  roll: 'Roll',
  spiral: 'Spiral',
  'roll-spiral': 'Coupled roll–spiral',
  'real-pair': 'Real pair',
};

/** The first configuration at the speed that its first row's lift coefficient holds level at sea level. */
export function importPreview(airframe: Airframe): PreviewBlock[] {
  const [configuration] = airframe.configurations;
  const [row] = configuration.derivatives;
  const blocks: PreviewBlock[] = [
    {
      title: 'Geometry and mass',
      lines: [
        { name: 'Wing area, m²', value: shortly(airframe.geometry.wingArea_m2) },
        { name: 'Span, m', value: shortly(airframe.geometry.wingSpan_m) },
        { name: 'Mass, kg', value: shortly(airframe.mass.mass_kg) },
        { name: 'Ixx, kg·m²', value: shortly(airframe.mass.Ixx_kgm2) },
        { name: 'Izz, kg·m²', value: shortly(airframe.mass.Izz_kgm2) },
        { name: 'Ixz, kg·m²', value: shortly(airframe.mass.Ixz_kgm2) },
      ],
    },
    {
      title: `Derivatives at CL ${shortly(row.CL)}, stability axes, per radian`,
      lines: DERIVATIVE_KEYS.map((key) => ({ name: key.replace('_', ' '), value: shortly(row[key]) })),
    },
  ];
  const tasMps = Math.sqrt((2 * airframe.mass.mass_kg * G0) / (densityAt(0) * airframe.geometry.wingArea_m2 * row.CL));
  try {
    const aircraft = prepareAircraft(airframe, { configuration: configuration.name });
    const { modes } = lateralModes(buildSmallDisturbance(aircraft, { tasMps, heightM: 0 }).A);
    blocks.push({
      title: `Modes at ${(tasMps / KT).toFixed(0)} kt true, sea level`,
      lines: modes.map((mode) => ({
        name: KIND_WORDS[mode.kind] ?? mode.kind,
        value:
          mode.wn !== undefined && mode.zeta !== undefined
            ? `ω ${mode.wn.toFixed(3)} rad/s, ζ ${mode.zeta.toFixed(3)}`
            : `${mode.re.toFixed(4)} 1/s`,
      })),
    });
  } catch (error) {
    blocks.push({
      title: 'Modes',
      lines: [{ name: 'Cannot be computed', value: error instanceof Error ? error.message : '' }],
    });
  }
  return blocks;
}
