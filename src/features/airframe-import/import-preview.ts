/** Converted values, modes and levels of an airframe before it is saved. */
import { densityAt } from '#shared/model/atmosphere.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { G0, KT } from '#shared/units/constants.ts';
import { consequencesOf, type Consequences } from '../revision-difference/consequences.ts';
import { DERIVATIVE_KEYS, type Quantity } from './sheet-labels.ts';

export interface PreviewLine {
  name: string;
  value: string;
  /** As the file gives it. */
  given?: string;
  state?: 'met' | 'near' | 'not';
}
export interface PreviewBlock {
  title: string;
  lines: PreviewLine[];
}
export interface ImportPreview {
  blocks: PreviewBlock[];
  /** Null where the modes cannot be computed. */
  motion: Consequences | null;
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
const levelState = (level: number): 'met' | 'near' | 'not' => (level === 1 ? 'met' : level === 4 ? 'not' : 'near');

/** One entry of the data, at the speed that its lift coefficient holds level at sea level. */
export function importPreview(
  airframe: Airframe,
  configurationIndex = 0,
  rowIndex = 0,
  given: Partial<Record<Quantity, number>> | null = null,
): ImportPreview {
  const configuration = airframe.configurations[configurationIndex] ?? airframe.configurations[0];
  const row = configuration.derivatives[rowIndex] ?? configuration.derivatives[0];
  const line = (name: string, value: number, quantity: Quantity): PreviewLine => {
    const raw = given?.[quantity];
    return { name, value: shortly(value), ...(raw !== undefined && { given: shortly(raw) }) };
  };
  const { geometry, mass } = airframe;
  const blocks: PreviewBlock[] = [
    {
      title: 'Geometry and mass',
      lines: [
        line('Wing area, m²', geometry.wingArea_m2, 'wingArea'),
        line('Span, m', geometry.wingSpan_m, 'wingSpan'),
        line('Mass, kg', mass.mass_kg, 'mass'),
        line('Ixx, kg·m²', mass.Ixx_kgm2, 'Ixx'),
        line('Izz, kg·m²', mass.Izz_kgm2, 'Izz'),
        line('Ixz, kg·m²', mass.Ixz_kgm2, 'Ixz'),
        { name: 'Axes of the inertias', value: mass.axes },
      ],
    },
    {
      title: `Derivatives at CL ${shortly(row.CL)}, stability axes, per radian`,
      lines: DERIVATIVE_KEYS.map((key) => line(key.replace('_', ' '), row[key], key)),
    },
  ];
  const tasMps = Math.sqrt((2 * mass.mass_kg * G0) / (densityAt(0) * geometry.wingArea_m2 * row.CL));
  try {
    const motion = consequencesOf(airframe, { configuration: configuration.name, tasMps, heightM: 0 });
    blocks.unshift({
      title: `Modes at ${(tasMps / KT).toFixed(0)} kt true, sea level`,
      lines: motion.modes.map((mode) => ({
        name: KIND_WORDS[mode.kind] ?? mode.kind,
        value:
          mode.wn !== undefined && mode.zeta !== undefined
            ? `ω ${mode.wn.toFixed(3)} rad/s, ζ ${mode.zeta.toFixed(3)}`
            : `${mode.re.toFixed(4)} 1/s`,
      })),
    });
    blocks.splice(1, 0, {
      title: `Criteria, class ${motion.klass}, category ${motion.category}`,
      lines: motion.criteria.flatMap((one) =>
        typeof one.level === 'number'
          ? [
              {
                name: one.title,
                value: one.level === 4 ? 'below Level 3' : `Level ${one.level}`,
                state: levelState(one.level),
              },
            ]
          : [],
      ),
    });
    return { blocks, motion };
  } catch (error) {
    blocks.unshift({
      title: 'Modes',
      lines: [{ name: 'Cannot be computed', value: error instanceof Error ? error.message : '' }],
    });
    return { blocks, motion: null };
  }
}
