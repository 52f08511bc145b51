import type { Airframe } from '../../model/airframe-schema.ts';
import { prepareAircraft } from '../../model/aircraft.ts';
import { DEG, KT } from '../../units/constants.ts';
import { NumericsError } from '../../numerics/errors.ts';
import { controlSpeedFactors } from '../control-speed-factors.ts';
import type { ControlSpeedFactor } from '../control-speed-factors.ts';
import { criticalEngine } from '../critical-engine.ts';
import { minimumControlSpeed } from '../minimum-control-speed.ts';
import { facts, shown, values } from './case-builders.ts';
import type { FactRow, ValueRow } from './case-builders.ts';
import type { ShippedAirframes, ShippedSlug } from './practice-checks.ts';
import type { PublishedCase } from './published-case.ts';

const MULTI_ENGINED: readonly ShippedSlug[] = ['light-twin', 'commuter-turboprop', 'twin-jet', 'four-jet'];
const PROPELLERS: readonly ShippedSlug[] = ['light-twin', 'commuter-turboprop'];

/** Slug, failed engine, kt at 0° and 5°, stall kt; sea level, first configuration, full lever, windmilling. */
const INDEPENDENT: readonly (readonly [ShippedSlug, number, number, number, number])[] = [
  ['light-twin', 0, 75.8, 66.3, 60.5],
  ['light-twin', 1, 71.0, 60.8, 60.5],
  ['commuter-turboprop', 0, 106.9, 92.0, 84.5],
  ['twin-jet', 0, 145.5, 114.8, 107.9],
];

function speedAt(airframe: Airframe, failed: number, bankDeg: number): number {
  const bank = { exactlyRad: bankDeg * DEG };
  const result = minimumControlSpeed(prepareAircraft(airframe), { heightM: 0, failed: [failed], bank });
  if (!result.found) throw new NumericsError('bad-argument', result.message);
  return result.casMps / KT;
}

function independentRows(airframes: ShippedAirframes): ValueRow[] {
  return INDEPENDENT.flatMap(([slug, failed, level, banked, stall]): ValueRow[] => {
    const airframe = airframes[slug];
    const name = `${airframe.name}, ${airframe.engines[failed].name} engine`;
    const id = `vmc-${slug}-${failed}`;
    const stallKt = () =>
      minimumControlSpeed(prepareAircraft(airframe), { heightM: 0, failed: [failed] }).stallCasMps / KT;
    return [
      [`${id}-level`, `${name}: wings level`, 'kt', level, 0.1, () => speedAt(airframe, failed, 0)],
      [`${id}-banked`, `${name}: 5° of bank`, 'kt', banked, 0.1, () => speedAt(airframe, failed, 5)],
      [`${id}-stall`, `${name}: stall`, 'kt', stall, 0.1, stallKt],
    ];
  });
}

/** The change that a factor makes on each airframe; kt. */
function changes(airframes: ShippedAirframes, slugs: readonly ShippedSlug[], factor: ControlSpeedFactor): number[] {
  return slugs.map((slug) => {
    const row = controlSpeedFactors(airframes[slug], { heightM: 0 }).rows.find((entry) => entry.factor === factor);
    return row?.deltaMps == null ? NaN : row.deltaMps / KT;
  });
}

const list = (numbers: readonly number[]) => `${numbers.map(shown).join(', ')} kt`;

function factRows(airframes: ShippedAirframes): FactRow[] {
  const rises = (slugs: readonly ShippedSlug[], factor: ControlSpeedFactor) => () => {
    const all = changes(airframes, slugs, factor);
    return { holds: all.every((kt) => kt > 0), shown: list(all) };
  };
  const falls = (slugs: readonly ShippedSlug[], factor: ControlSpeedFactor) => () => {
    const all = changes(airframes, slugs, factor);
    return { holds: all.every((kt) => kt < 0), shown: list(all) };
  };
  return [
    [
      'vmc-level',
      'Bank',
      'Wings level the minimum control speed is higher than with 5° toward the live engine',
      rises(MULTI_ENGINED, 'bank'),
    ],
    [
      'vmc-per-degree',
      'Bank',
      'Between 1.8 and 7.7 kt per degree, averaged from 0° to 5°, on the shipped airframes',
      () => {
        const all = MULTI_ENGINED.map(
          (slug) => (controlSpeedFactors(airframes[slug], { heightM: 0 }).perDegreeMps ?? NaN) / KT,
        );
        return { holds: all.every((kt) => kt >= 1.8 && kt <= 7.7), shown: list(all) };
      },
    ],
    ['vmc-mass', 'Mass', 'Banked, lower mass raises it', rises(MULTI_ENGINED, 'mass')],
    ['vmc-cg', 'Centre of gravity', 'Aft loading raises it', rises(MULTI_ENGINED, 'centre of gravity')],
    [
      'vmc-mass-level',
      'Mass',
      'Wings level the mass does not matter beyond the change of rows',
      () => {
        const airframe = airframes['light-twin'];
        const [configuration] = airframe.configurations;
        const oneRow = {
          ...airframe,
          configurations: [{ ...configuration, derivatives: [configuration.derivatives[1]] }],
        };
        const lighter = { ...oneRow, mass: { ...oneRow.mass, mass_kg: 0.8 * oneRow.mass.mass_kg } };
        const [a, b] = [oneRow, lighter].map((subject) => speedAt(subject, 0, 0));
        return { holds: Math.abs(a - b) < 1e-4, shown: `${list([a, b])} with one row` };
      },
    ],
    ['vmc-height', 'Height', 'Height lowers it on propeller aeroplanes', falls(PROPELLERS, 'height')],
    ['vmc-feathered', 'Propeller', 'Feathering lowers it', falls(PROPELLERS, 'feathered')],
    ['vmc-lever', 'Power', 'Less power on the live engine lowers it', falls(MULTI_ENGINED, 'lever')],
    [
      'critical-engine',
      'Critical engine',
      'With two clockwise propellers the left engine is critical; with two counter-clockwise ones the right',
      () => {
        const airframe = airframes['light-twin'];
        const turned = {
          ...airframe,
          engines: airframe.engines.map((engine) => ({ ...engine, rotation: 'counter-clockwise' as const })),
        };
        const [a, b] = [airframe, turned].map(
          (subject) => criticalEngine(prepareAircraft(subject), { heightM: 0 }).name,
        );
        return { holds: a === 'left' && b === 'right', shown: `${a}, ${b}` };
      },
    ],
    [
      'critical-outboard',
      'Critical engine',
      'With four engines an outboard one is critical',
      () => {
        const { name } = criticalEngine(prepareAircraft(airframes['four-jet']), { heightM: 0 });
        return { holds: name.includes('outer'), shown: name };
      },
    ],
  ];
}

/** Minimum control speeds of the shipped airframes: independent values, and what moves them. */
export function shippedControlSpeedCases(airframes: ShippedAirframes): PublishedCase[] {
  const independent = { source: 'an independent implementation of the flight model', provenance: 'computed' } as const;
  const practice = { source: 'common practice; on the shipped airframes', provenance: 'common practice' } as const;
  return [
    ...values({ group: 'Minimum control speed: shipped airframes', ...independent }, independentRows(airframes)),
    ...facts({ group: 'Minimum control speed: what moves it', ...practice }, factRows(airframes)),
  ];
}
