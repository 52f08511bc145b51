import { DEG } from '#shared/units/constants.ts';
import { parseQuantity } from '#shared/units/quantity.ts';
import type { Dimension } from '#shared/units/quantity.ts';
import type { Command } from './command.ts';
import { UsageError } from './usage-error.ts';

/** The arguments of one command after parsing; every reader names the argument when it refuses it. */
export interface ParsedArguments {
  positionals: readonly string[];
  values: ReadonlyMap<string, string>;
  flags: ReadonlySet<string>;
}

/**
 * Splits raw arguments by the command's own list. `--name value` and `--name=value` are the same; a value may begin with
 * a minus sign when a digit follows.
 */
export function parseArguments(command: Command, raw: readonly string[]): ParsedArguments {
  const positionals: string[] = [];
  const values = new Map<string, string>();
  const flags = new Set<string>();
  for (let i = 0; i < raw.length; i++) {
    const arg = raw[i];
    if (!arg.startsWith('-') || arg === '-' || /^-[\d.]/u.test(arg)) {
      positionals.push(arg);
      continue;
    }
    const [, name, inline] = /^--([^=]+)(?:=(.*))?$/su.exec(arg) ?? [];
    const kind = name !== undefined && Object.hasOwn(command.options, name) ? command.options[name] : undefined;
    if (name === undefined || kind === undefined) {
      throw new UsageError(`${arg}: no such option (usage: sidewash ${command.name} ${command.usage})`);
    }
    if (values.has(name) || flags.has(name)) throw new UsageError(`--${name}: given twice`);
    if (kind === 'flag') {
      if (inline !== undefined) throw new UsageError(`--${name}: takes no value`);
      flags.add(name);
      continue;
    }
    const value = inline ?? raw[++i];
    if (value === undefined || (inline === undefined && value.startsWith('--'))) {
      throw new UsageError(`--${name}: a value is missing`);
    }
    values.set(name, value);
  }
  if (positionals.length < command.positionals.length) {
    const missing = command.positionals[positionals.length];
    throw new UsageError(`${missing}: missing (usage: sidewash ${command.name} ${command.usage})`);
  }
  if (positionals.length > command.positionals.length) {
    throw new UsageError(`${positionals[command.positionals.length]}: one argument too many`);
  }
  return { positionals, values, flags };
}

/** The SI value of a quantity option such as "90kt"; undefined when the option is absent. */
export function quantityOption(args: ParsedArguments, name: string, dimension: Dimension): number | undefined {
  const text = args.values.get(name);
  if (text === undefined) return undefined;
  const parsed = parseQuantity(text, dimension, 'aviation');
  if (!parsed.ok) throw new UsageError(`--${name}: ${parsed.message}`);
  return parsed.value;
}

/** The same, and refused when it is absent. */
export function requiredQuantity(args: ParsedArguments, name: string, dimension: Dimension): number {
  const value = quantityOption(args, name, dimension);
  if (value === undefined) throw new UsageError(`--${name}: missing`);
  return value;
}

/** A plain number within bounds; undefined when the option is absent. */
export function numberOption(args: ParsedArguments, name: string, low: number, high: number): number | undefined {
  const text = args.values.get(name);
  if (text === undefined) return undefined;
  const value = text.trim() === '' ? Number.NaN : Number(text);
  if (!(value >= low && value <= high)) {
    throw new UsageError(`--${name}: "${text}" is not a number from ${low} to ${high}`);
  }
  return value;
}

/** An angle in degrees ("5") or with a unit ("5deg", "0.1rad") within bounds in degrees; rad. */
export function angleOption(args: ParsedArguments, name: string, lowDeg: number, highDeg: number): number | undefined {
  const angle = quantityOption(args, name, 'angle');
  if (angle !== undefined && !(angle >= lowDeg * DEG && angle <= highDeg * DEG)) {
    throw new UsageError(`--${name}: ${args.values.get(name)} is outside ${lowDeg}° to ${highDeg}°`);
  }
  return angle;
}

/** One of a few words; undefined when the option is absent. */
export function choiceOption<T extends string>(
  args: ParsedArguments,
  name: string,
  choices: readonly T[],
): T | undefined {
  const text = args.values.get(name);
  if (text === undefined) return undefined;
  const found = choices.find((choice) => choice === text);
  if (found === undefined) throw new UsageError(`--${name}: "${text}" is not one of ${choices.join(', ')}`);
  return found;
}

/** Bounds within which speeds and heights make sense; outside them nothing is computed. */
const LARGEST_SPEED_MPS = 1000;
const HEIGHT_M: readonly [number, number] = [-500, 20_000];

/** `--height`, checked; default sea level when `fallback` is given. */
export function heightOption(args: ParsedArguments, fallback?: number): number {
  const height = quantityOption(args, 'height', 'height') ?? fallback;
  if (height === undefined) throw new UsageError('--height: missing');
  if (height < HEIGHT_M[0] || height > HEIGHT_M[1]) {
    throw new UsageError(`--height: ${args.values.get('height')} is outside ${HEIGHT_M[0]} m to ${HEIGHT_M[1]} m`);
  }
  return height;
}

/** A speed that must be positive. */
export function speedOption(args: ParsedArguments, name: string): number | undefined {
  const speed = quantityOption(args, name, 'speed');
  if (speed !== undefined && !(speed > 0 && speed <= LARGEST_SPEED_MPS)) {
    throw new UsageError(
      `--${name}: ${args.values.get(name)} is not a speed above 0 and up to ${LARGEST_SPEED_MPS} m/s`,
    );
  }
  return speed;
}
