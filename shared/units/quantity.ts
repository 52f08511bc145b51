import { DEG, FT, KT, LB, LBF, SLUG } from './constants.ts';

/** What people prefer to read: aviation (kt, ft, deg) or SI (m/s, m, deg). */
export type UnitPreference = 'aviation' | 'si';

export type Dimension =
  | 'speed'
  | 'height'
  | 'distance'
  | 'vertical-speed'
  | 'angle'
  | 'angular-rate'
  | 'time'
  | 'mass'
  | 'force'
  | 'moment'
  | 'area'
  | 'inertia'
  | 'power'
  | 'pressure'
  | 'density'
  | 'per-angle'
  | 'ratio';

interface DimensionUnits {
  /** Multiply a value in the unit to get SI. The first name of equal factors is the one printed. */
  units: Readonly<Record<string, number>>;
  aviation: string;
  si: string;
  digits: number;
}

const FT_MIN = FT / 60;

/** Every unit accepted, by dimension, with its factor to SI. */
export const DIMENSIONS: Readonly<Record<Dimension, DimensionUnits>> = {
  speed: {
    units: { kt: KT, kts: KT, 'm/s': 1, 'km/h': 1 / 3.6, 'ft/s': FT, mph: 0.44704 },
    aviation: 'kt',
    si: 'm/s',
    digits: 1,
  },
  height: { units: { ft: FT, m: 1, km: 1000 }, aviation: 'ft', si: 'm', digits: 0 },
  distance: { units: { m: 1, ft: FT, km: 1000, NM: 1852 }, aviation: 'm', si: 'm', digits: 1 },
  'vertical-speed': { units: { 'ft/min': FT_MIN, fpm: FT_MIN, 'm/s': 1 }, aviation: 'ft/min', si: 'm/s', digits: 0 },
  angle: { units: { deg: DEG, '°': DEG, rad: 1 }, aviation: 'deg', si: 'deg', digits: 1 },
  'angular-rate': { units: { 'deg/s': DEG, '°/s': DEG, 'rad/s': 1 }, aviation: 'deg/s', si: 'deg/s', digits: 1 },
  time: { units: { s: 1, ms: 0.001, min: 60 }, aviation: 's', si: 's', digits: 2 },
  mass: { units: { kg: 1, lb: LB, lbs: LB, slug: SLUG, t: 1000 }, aviation: 'kg', si: 'kg', digits: 0 },
  force: { units: { N: 1, kN: 1000, lbf: LBF, daN: 10 }, aviation: 'N', si: 'N', digits: 0 },
  moment: { units: { 'N·m': 1, Nm: 1, 'lbf·ft': LBF * FT }, aviation: 'N·m', si: 'N·m', digits: 0 },
  area: { units: { 'm²': 1, m2: 1, 'ft²': FT * FT, ft2: FT * FT }, aviation: 'm²', si: 'm²', digits: 2 },
  inertia: {
    units: { 'kg·m²': 1, kgm2: 1, 'slug·ft²': SLUG * FT * FT, slugft2: SLUG * FT * FT },
    aviation: 'kg·m²',
    si: 'kg·m²',
    digits: 0,
  },
  power: { units: { W: 1, kW: 1000, hp: 745.6998715822702 }, aviation: 'kW', si: 'kW', digits: 0 },
  pressure: { units: { Pa: 1, hPa: 100, 'lbf/ft²': LBF / (FT * FT) }, aviation: 'Pa', si: 'Pa', digits: 0 },
  density: {
    units: { 'kg/m³': 1, kgm3: 1, 'slug/ft³': SLUG / (FT * FT * FT) },
    aviation: 'kg/m³',
    si: 'kg/m³',
    digits: 4,
  },
  'per-angle': {
    units: {
      '/rad': 1,
      'per rad': 1,
      '1/rad': 1,
      '/deg': 1 / DEG,
      'per deg': 1 / DEG,
      '1/deg': 1 / DEG,
      '/°': 1 / DEG,
    },
    aviation: '/rad',
    si: '/rad',
    digits: 4,
  },
  ratio: { units: { '': 1, '%': 0.01 }, aviation: '', si: '', digits: 3 },
};

export type ParsedQuantity = { ok: true; value: number } | { ok: false; message: string };

/** A decimal number, then an optional unit, with or without a space. */
const PATTERN = /^\s*([+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?)\s*(\S.*?)?\s*$/u;

/**
 * The SI value of a text such as "90kt", "46.3 m/s" or "−5°".
 *
 * @param text        What a person or a script wrote.
 * @param dimension   The dimension it must have.
 * @param preference  Whose unit is meant when the text has none.
 * @returns           SI value (rad for angles), or one sentence that says what is wrong and what is accepted.
 */
export function parseQuantity(text: string, dimension: Dimension, preference: UnitPreference): ParsedQuantity {
  const known = DIMENSIONS[dimension];
  const match = PATTERN.exec(text.replace('−', '-'));
  const accepted = Object.keys(known.units)
    .filter((unit) => unit !== '')
    .join(', ');
  if (!match) return { ok: false, message: `"${text}" is not a number with a unit (accepted units: ${accepted})` };
  const unit = match[2] ?? known[preference];
  if (!Object.hasOwn(known.units, unit)) {
    return { ok: false, message: `"${text}": the unit "${unit}" is not one of ${accepted}` };
  }
  const value = Number(match[1]) * known.units[unit];
  if (!Number.isFinite(value)) return { ok: false, message: `"${text}" is not a finite number` };
  return { ok: true, value };
}

/** The unit in which a dimension is shown. */
export function unitOf(dimension: Dimension, preference: UnitPreference): string {
  return DIMENSIONS[dimension][preference];
}

/** An SI value in the shown unit of its dimension. */
export function inUnit(valueSI: number, dimension: Dimension, preference: UnitPreference): number {
  const known = DIMENSIONS[dimension];
  return valueSI / known.units[known[preference]];
}

/**
 * A value with its unit for reading, as "90.0 kt"; a value that is not finite reads "–".
 *
 * @param valueSI     SI value (rad for angles).
 * @param dimension   Its dimension.
 * @param preference  Aviation or SI units.
 * @param digits      Decimals; default the dimension's own.
 */
export function formatQuantity(
  valueSI: number,
  dimension: Dimension,
  preference: UnitPreference,
  digits: number = DIMENSIONS[dimension].digits,
): string {
  if (!Number.isFinite(valueSI)) return '–';
  const unit = unitOf(dimension, preference);
  const shown = inUnit(valueSI, dimension, preference).toFixed(digits);
  const signed = /^-0(?:\.0*)?$/u.test(shown) ? shown.slice(1) : shown.replace('-', '−');
  if (unit === '') return signed;
  return unit === 'deg' ? `${signed}°` : unit === 'deg/s' ? `${signed}°/s` : `${signed} ${unit}`;
}
