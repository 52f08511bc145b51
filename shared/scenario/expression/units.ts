/**
 * The units of expressions and limits, with their dimension and their factor to SI.
 *
 * mathjs' own units are not used: it reads "kt" as kilotonne and costs microseconds.
 */
import { DEG, FT, KT } from '../../units/constants.ts';

/** Exponents of the base dimensions. Angle and ball width count as dimensions of their own, so that "bank > 5" is refused. */
export interface Dimension {
  length: number;
  time: number;
  angle: number;
  force: number;
  width: number;
}

function dimension(part: Partial<Dimension> = {}): Dimension {
  return { length: 0, time: 0, angle: 0, force: 0, width: 0, ...part };
}

export const NUMBER: Dimension = dimension();
export const LENGTH: Dimension = dimension({ length: 1 });
export const TIME: Dimension = dimension({ time: 1 });
export const SPEED: Dimension = dimension({ length: 1, time: -1 });
export const ACCELERATION: Dimension = dimension({ length: 1, time: -2 });
export const ANGLE: Dimension = dimension({ angle: 1 });
export const ANGULAR_RATE: Dimension = dimension({ angle: 1, time: -1 });
export const FORCE: Dimension = dimension({ force: 1 });
export const WIDTH: Dimension = dimension({ width: 1 });

export interface Unit {
  readonly dimension: Dimension;
  /** Multiply a value in the unit to get SI (rad for angles). */
  readonly factor: number;
}

/** Every unit a limit or an expression may name. */
export const UNITS: Readonly<Record<string, Unit>> = {
  kt: { dimension: SPEED, factor: KT },
  'm/s': { dimension: SPEED, factor: 1 },
  'ft/min': { dimension: SPEED, factor: FT / 60 },
  ft: { dimension: LENGTH, factor: FT },
  m: { dimension: LENGTH, factor: 1 },
  deg: { dimension: ANGLE, factor: DEG },
  'deg/s': { dimension: ANGULAR_RATE, factor: DEG },
  s: { dimension: TIME, factor: 1 },
  N: { dimension: FORCE, factor: 1 },
  'kt/s': { dimension: ACCELERATION, factor: KT },
  widths: { dimension: WIDTH, factor: 1 },
  count: { dimension: NUMBER, factor: 1 },
  '%': { dimension: NUMBER, factor: 0.01 },
};

/** The units that may stand alone in an expression; the others are quotients of these. */
export const WORD_UNITS: readonly string[] = ['kt', 'ft', 'deg', 'm', 's', 'N', 'widths', 'count'];

export function sameDimension(a: Dimension, b: Dimension): boolean {
  return (
    a.length === b.length && a.time === b.time && a.angle === b.angle && a.force === b.force && a.width === b.width
  );
}

/** Dimension of a·bⁿ. */
export function timesPower(a: Dimension, b: Dimension, n: number): Dimension {
  return {
    length: a.length + n * b.length,
    time: a.time + n * b.time,
    angle: a.angle + n * b.angle,
    force: a.force + n * b.force,
    width: a.width + n * b.width,
  };
}

/** The units that carry a dimension, for messages and for choosing a limit's unit; empty when none does. */
export function unitsOf(d: Dimension): string[] {
  return Object.keys(UNITS).filter((name) => sameDimension(UNITS[name].dimension, d));
}

/** A dimension in words for messages, as "a speed (kt, m/s, ft/min)". */
export function dimensionWords(d: Dimension): string {
  if (sameDimension(d, NUMBER)) return 'a plain number (no unit, count or %)';
  const known: readonly (readonly [Dimension, string])[] = [
    [SPEED, 'a speed'],
    [LENGTH, 'a length'],
    [ANGLE, 'an angle'],
    [ANGULAR_RATE, 'an angular rate'],
    [TIME, 'a time'],
    [FORCE, 'a force'],
    [ACCELERATION, 'an acceleration'],
    [WIDTH, 'a ball deflection'],
  ];
  const found = known.find(([dim]) => sameDimension(dim, d));
  if (found) return `${found[1]} (${unitsOf(d).join(', ')})`;
  const parts = (Object.keys(d) as (keyof Dimension)[])
    .filter((key) => d[key] !== 0)
    .map((key) => (d[key] === 1 ? key : `${key}^${d[key]}`));
  return `a quantity of ${parts.join('·')}`;
}
