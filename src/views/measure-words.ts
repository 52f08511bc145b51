/** Measures and their values in words for tables and charts. */
import { MEASURE_TABLE } from '#shared/scenario/measures/measure-table.ts';

const LABELS: ReadonlyMap<string, string> = new Map(
  Object.entries(MEASURE_TABLE).map(([measure, { label }]) => [measure, label]),
);

/** Name of a measure; a result of an older program may carry one that is not known any more. */
export function measureWords(measure: string): string {
  return LABELS.get(measure) ?? measure;
}

const SYMBOLS: Readonly<Record<string, string>> = { deg: '°', 'deg/s': '°/s', count: '' };

/** "+2.7°", "−0.1 s": a value in the unit its criterion was written in. */
export function valueWords(value: number | null, unit: string, signed = false, digits = 1): string {
  if (value === null || !Number.isFinite(value)) return '–';
  const places = unit === 'count' || Math.abs(value) >= 100 ? 0 : digits;
  const text = Math.abs(value).toFixed(places);
  const zero = Number(text) === 0;
  const sign = value < 0 && !zero ? '−' : signed && !zero ? '+' : '';
  return `${sign}${text}${SYMBOLS[unit] ?? (unit === '' ? '' : ` ${unit}`)}`;
}
