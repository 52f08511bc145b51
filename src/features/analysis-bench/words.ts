/** Names and numbers as the Analysis screen writes them. */
import type { Mode } from '#shared/analysis/modes.ts';
import type { CriterionResult } from '#shared/analysis/criteria-8785c.ts';
import type { DerivativeKey } from '../../runner/workers/analysis/bench-condition.ts';
import { KT } from '#shared/units/constants.ts';
import { inUnit, type UnitPreference } from '#shared/units/quantity.ts';

export const MODE_NAMES: Readonly<Record<Mode['kind'], string>> = {
  'dutch-roll': 'Dutch roll',
  roll: 'Roll',
  spiral: 'Spiral',
  'roll-spiral': 'Coupled roll–spiral',
  'real-pair': 'Real pair in place of the Dutch roll',
  washout: 'Damper washout',
};

const SIGNS: Readonly<Record<string, string>> = { beta: 'β', p: 'p', r: 'r', da: 'δa', dr: 'δr' };

/** Derivative as letter and subscript. */
export function derivativeName(key: DerivativeKey): { letter: string; sub: string } {
  const [letter = '', suffix = ''] = key.split('_');
  return { letter, sub: SIGNS[suffix] ?? suffix };
}
export const derivativeText = (key: DerivativeKey): string => {
  const { letter, sub } = derivativeName(key);
  return `${letter}${sub}`;
};

export function number(value: number | null | undefined, digits = 3): string {
  if (value === null || value === undefined || Number.isNaN(value)) return '–';
  if (!Number.isFinite(value)) return '∞';
  return String(Number(value.toPrecision(digits)));
}

/** What a mode does, in one short line. */
export function modeWords(mode: Mode): string {
  if (mode.im > 0) return `ζ ${number(mode.zeta)}, ω ${number(mode.wn)}`;
  if (mode.kind === 'spiral' || mode.kind === 'real-pair') {
    if (mode.doubleS !== undefined) return `doubles in ${number(mode.doubleS)} s`;
    if (mode.halveS !== undefined) return `halves in ${number(mode.halveS)} s`;
    return 'neutral';
  }
  return mode.tauS === undefined ? 'neutral' : `τ ${number(mode.tauS)} s`;
}

export function levelWords(level: CriterionResult['level']): string {
  if (level === null) return 'does not apply';
  if (level === 'met') return 'met';
  if (level === 'not met') return 'not met';
  return level === 4 ? 'below Level 3' : `Level ${level}`;
}
export function levelState(level: CriterionResult['level']): 'met' | 'near' | 'not' | 'not-reached' {
  if (level === null) return 'not-reached';
  if (level === 1 || level === 'met') return 'met';
  return level === 4 || level === 'not met' ? 'not' : 'near';
}

/** Angle with the side in words: 3.2° right. */
export function sided(deg: number | null, digits = 1): string {
  if (deg === null || Number.isNaN(deg)) return '–';
  const size = Math.abs(deg).toFixed(digits);
  if (Number(size) === 0) return '0°';
  return `${size}° ${deg > 0 ? 'right' : 'left'}`;
}

export type SourcesOfDerivatives = Partial<Record<DerivativeKey, { text: string; pct: number | null; letter: string }>>;

/** A speed in kt as the number to show, in the unit that is preferred. */
export function shownSpeed(kt: number, units: UnitPreference): number;
export function shownSpeed(kt: number | null, units: UnitPreference): number | null;
export function shownSpeed(kt: number | null, units: UnitPreference): number | null {
  return kt === null ? null : inUnit(kt * KT, 'speed', units);
}
/** The same of a list. */
export const shownSpeeds = (kt: readonly (number | null)[], units: UnitPreference): (number | null)[] =>
  kt.map((one) => shownSpeed(one, units));
