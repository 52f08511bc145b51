/** The rows of the derivative table: three groups of five, and where their sources are found. */
import type { Airframe } from '#shared/model/airframe-schema.ts';

export const DERIVATIVE_GROUPS = [
  { name: 'Side force, per radian', letter: 'CY' },
  { name: 'Rolling moment, per radian', letter: 'Cl' },
  { name: 'Yawing moment, per radian', letter: 'Cn' },
] as const;

export const DERIVATIVE_SUFFIXES = [
  { key: 'beta', sign: 'β' },
  { key: 'p', sign: 'p' },
  { key: 'r', sign: 'r' },
  { key: 'da', sign: 'δa' },
  { key: 'dr', sign: 'δr' },
] as const;

export interface SourceOfValue {
  text: string;
  uncertaintyPct: number | null;
  /** Index of the entry in `sources`; null when nothing names the value. */
  index: number | null;
  /** True when only the entry for everything applies. */
  general: boolean;
}

/** The source that applies to a value: the entry with the longest pointer that contains it, "*" last. */
export function sourceOf(airframe: Pick<Airframe, 'sources'>, pointer: string): SourceOfValue {
  let best: SourceOfValue = { text: '', uncertaintyPct: null, index: null, general: true };
  let length = -1;
  (airframe.sources ?? []).forEach((source, index) => {
    const general = source.field === '*';
    const fits = general || pointer === source.field || pointer.startsWith(`${source.field}/`);
    const weight = general ? 0 : source.field.length;
    if (!fits || weight < length) return;
    length = weight;
    best = { text: source.text, uncertaintyPct: source.uncertainty_pct ?? null, index, general };
  });
  return best;
}
