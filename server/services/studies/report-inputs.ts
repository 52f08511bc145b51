import { uncertainFields } from '#shared/analysis/airframe-sampling.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { documentToTable, type TableCell } from '#shared/model/airframe-table.ts';
import { letterOf, type SourceLetter } from '#shared/model/source-letters.ts';
import { valueSource } from '#shared/model/value-source.ts';
import type { ReportInput } from '../../reports/pdf/analysis-report-data.ts';

/** Members shown as inputs: all but sources, texts, and the configurations that the report is not about. */
export function reportInputs(
  airframe: Airframe,
  configuration: string,
  letters: readonly SourceLetter[],
): ReportInput[] {
  const c = airframe.configurations.findIndex(({ name }) => name === configuration);
  const own = `/configurations/${c}/`;
  const uncertain = new Map(uncertainFields(airframe).map((of) => [of.field, of.uncertaintyPct]));
  return documentToTable(airframe)
    .filter(([field]) => !/^\/(?:sources|format|name|description|speeds)/.test(field))
    .filter(([field]) => !field.startsWith('/configurations/') || field.startsWith(own))
    .filter(([field]) => !/\/(?:derivatives|speeds)\/|\/name$/.test(field))
    .map(([field, value]) => ({
      field: memberName(airframe, field),
      value: valueWords(value),
      letter: typeof value === 'number' ? letterOf(letters, valueSource(airframe, field).text) : '',
      uncertaintyPct: uncertain.get(field) ?? null,
    }));
}

function valueWords(value: TableCell): string {
  if (value === null) return '-';
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  return typeof value === 'number' ? grouped(value) : value;
}

/** Six digits; thousands of whole numbers set apart. */
export function grouped(value: number): string {
  const text = String(Number(value.toPrecision(6)));
  return /^-?\d{4,}$/.test(text) ? text.replace(/\B(?=(?:\d{3})+$)/g, ' ') : text;
}

/** A pointer as words: entries of lists by their name, units in brackets. */
function memberName(airframe: Airframe, field: string): string {
  const parts = field.split('/').slice(1);
  const lists: Record<string, readonly { name: string }[]> = {
    engines: airframe.engines,
    configurations: airframe.configurations,
    loadings: airframe.loadings ?? [],
  };
  const words = parts.map((part, i) => {
    const name = /^\d+$/.test(part) ? lists[parts[i - 1]]?.[Number(part)]?.name : undefined;
    const unit = /_(kg|m2|m|kgm2|deg_s|deg|s|kt|per_rad|N|W)$/.exec(part === 'N_per_deg' ? '' : part);
    return name ?? (unit === null ? part : `${part.slice(0, unit.index)} (${UNITS[unit[1]] ?? unit[1]})`);
  });
  const [first] = parts;
  if (first === 'configurations') return words.slice(2).join(', ');
  return [...(first in lists ? [`${first.slice(0, -1)} ${words[1]}`] : words.slice(0, 2)), ...words.slice(2)].join(
    ', ',
  );
}

const UNITS: Readonly<Record<string, string>> = {
  m2: 'm²',
  kgm2: 'kg·m²',
  deg: '°',
  deg_s: '°/s',
  per_rad: 'per rad',
};
