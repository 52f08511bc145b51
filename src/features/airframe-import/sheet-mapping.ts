/** Rows of a foreign sheet as quantities of a data set: guessed from their labels, corrected by the person. */
import type { ForeignSet, ImportedSet } from '#shared/model/import-set.ts';
import { importLateralSet } from '#shared/model/import-set.ts';
import type { LateralDerivatives } from '#shared/model/conversions.ts';
import { ModelError } from '#shared/model/errors.ts';
import type { Json } from '../airframe-editing/draft-document.ts';

export type Cell = string | number | boolean | null;

export const DERIVATIVE_KEYS = [
  'CY_beta',
  'CY_p',
  'CY_r',
  'CY_da',
  'CY_dr',
  'Cl_beta',
  'Cl_p',
  'Cl_r',
  'Cl_da',
  'Cl_dr',
  'Cn_beta',
  'Cn_p',
  'Cn_r',
  'Cn_da',
  'Cn_dr',
] as const;
export const SIZE_KEYS = [
  'mass',
  'wingArea',
  'wingSpan',
  'meanChord',
  'speed',
  'density',
  'Ixx',
  'Iyy',
  'Izz',
  'Ixz',
  'alphaDeg',
  'CL',
] as const;
export type Quantity = (typeof SIZE_KEYS)[number] | (typeof DERIVATIVE_KEYS)[number];
export const QUANTITIES: readonly Quantity[] = [...SIZE_KEYS, ...DERIVATIVE_KEYS];
const OPTIONAL = new Set<Quantity>(['Iyy', 'Ixz', 'alphaDeg', 'CL', 'meanChord', 'CY_p', 'CY_r', 'CY_da']);
export const isOptional = (quantity: Quantity): boolean => OPTIONAL.has(quantity);

export const QUANTITY_WORDS: Readonly<Record<(typeof SIZE_KEYS)[number], string>> = {
  mass: 'Mass, or weight in lb',
  wingArea: 'Wing area',
  wingSpan: 'Wing span',
  meanChord: 'Mean chord',
  speed: 'True airspeed',
  density: 'Air density',
  Ixx: 'Ixx',
  Iyy: 'Iyy',
  Izz: 'Izz',
  Ixz: 'Ixz',
  alphaDeg: 'Angle of attack, deg',
  CL: 'Lift coefficient',
};
export const quantityWords = (quantity: Quantity): string =>
  SIZE_KEYS.some((key) => key === quantity)
    ? QUANTITY_WORDS[quantity as keyof typeof QUANTITY_WORDS] // one of its keys: just checked
    : quantity.replace('_', ' ');

/** Letters and digits only, Greek in words: "C_l,β" and "Clbeta" are the same label. */
export function plainLabel(text: string): string {
  return text
    .normalize('NFKD')
    .replace(/\(.*?\)|\[.*?\]/g, '')
    .replace(/β/g, 'beta')
    .replace(/δ|Δ/g, 'd')
    .replace(/ρ/g, 'rho')
    .replace(/α/g, 'alpha')
    .replace(/[^a-zA-Z0-9']/g, '');
}

const SYNONYMS: Partial<Record<Quantity, readonly string[]>> = {
  mass: ['mass', 'weight', 'w', 'm'],
  wingArea: ['wingarea', 's', 'area'],
  wingSpan: ['wingspan', 'b', 'span'],
  meanChord: ['meanchord', 'c', 'chord', 'cbar'],
  speed: ['speed', 'v', 'tas', 'vt', 'u0', 'vto', 'trueairspeed'],
  density: ['density', 'rho', 'airdensity'],
  Ixx: ['ixx', 'ix'],
  Iyy: ['iyy', 'iy'],
  Izz: ['izz', 'iz'],
  Ixz: ['ixz'],
  alphaDeg: ['alpha', 'alphadeg', 'alpha0', 'angleofattack'],
  CL: ['cl', 'liftcoefficient', 'clift'],
};
/** Labels under which each derivative is written: as a coefficient, or dimensional with Y, L and N, primed too. */
function derivativeLabels(key: (typeof DERIVATIVE_KEYS)[number]): string[] {
  const [family, input] = key.split('_');
  const inputs: Record<string, string[]> = {
    beta: ['beta', 'b', 'v'],
    p: ['p'],
    r: ['r'],
    da: ['da', 'deltaa', 'ail'],
    dr: ['dr', 'deltar', 'rud'],
  };
  const dimensional: Record<string, string> = { CY: 'y', Cl: 'l', Cn: 'n' };
  const letter = dimensional[family] ?? '';
  return (inputs[input] ?? []).flatMap((name) => [
    `${family.toLowerCase()}${name}`,
    `${letter}${name}`,
    `${letter}'${name}`,
    `${letter}${name}'`,
  ]);
}

export interface Mapping {
  /** Column of the labels and of the values, from 0. */
  labelColumn: number;
  valueColumn: number;
  /** Row of each quantity, from 0; absent where the sheet has none. */
  rows: Partial<Record<Quantity, number>>;
}

const isNumber = (cell: Cell | undefined): boolean => cell !== null && cell !== undefined && parseNumber(cell).ok;

/** The number of a cell; text with a decimal comma or a blank between thousands is read when that is the only reading. */
export function parseNumber(cell: Cell): { ok: true; value: number } | { ok: false; message: string } {
  if (typeof cell === 'number') return { ok: true, value: cell };
  if (typeof cell !== 'string' || cell.trim() === '') return { ok: false, message: 'the cell is empty' };
  const text = cell.trim().replace(/−/g, '-');
  if (/^[=+@]/.test(text) && !/^\+[\d.]/.test(text))
    return { ok: false, message: `“${cell}” is a formula; give its value` };
  if (/^-?[1-9]\d{0,2}(,\d{3})+(\.\d+)?$/.test(text) && !/^-?\d{1,3},\d{3}$/.test(text))
    return { ok: true, value: Number(text.replace(/,/g, '')) };
  if (/^-?[1-9]\d{0,2},\d{3}$/.test(text))
    return { ok: false, message: `“${cell}” may mean thousands or a decimal comma; write it with a point or without` };
  const point = /^-?\d+,\d+(e[-+]?\d+)?$/i.test(text) ? text.replace(',', '.') : text.replace(/\s(?=\d{3}\b)/g, '');
  const value = Number(point);
  return Number.isFinite(value) && point !== ''
    ? { ok: true, value }
    : { ok: false, message: `“${cell}” is not a number` };
}

/** The mapping that the labels suggest. */
export function guessMapping(rows: readonly (readonly Cell[])[]): Mapping {
  const width = Math.max(1, ...rows.map((row) => row.length));
  let labelColumn = 0;
  let most = -1;
  for (let column = 0; column < width; column += 1) {
    const texts = rows.filter((row) => typeof row[column] === 'string' && !isNumber(row[column])).length;
    if (texts > most) [most, labelColumn] = [texts, column];
  }
  let valueColumn = labelColumn === 0 ? 1 : 0;
  most = -1;
  for (let column = 0; column < width; column += 1) {
    if (column === labelColumn) continue;
    const numbers = rows.filter((row) => isNumber(row[column])).length;
    if (numbers > most) [most, valueColumn] = [numbers, column];
  }
  return { labelColumn, valueColumn, rows: guessRows(rows, labelColumn, valueColumn) };
}

export function guessRows(
  rows: readonly (readonly Cell[])[],
  labelColumn: number,
  valueColumn: number,
): Mapping['rows'] {
  const found: Mapping['rows'] = {};
  const labels = rows.map((row) => {
    const cell = row[labelColumn];
    return typeof cell === 'string' && isNumber(row[valueColumn]) ? plainLabel(cell) : '';
  });
  const take = (quantity: Quantity, wanted: readonly string[], exact: boolean): void => {
    const index = labels.findIndex((label) =>
      wanted.some((name) => (exact ? label === name : label.toLowerCase() === name)),
    );
    if (index >= 0 && found[quantity] === undefined && !Object.values(found).includes(index)) found[quantity] = index;
  };
  // "CL" is the lift, "Cl" begins a rolling moment: letters first with their case, then without.
  take('CL', ['CL', 'CLift'], true);
  for (const key of DERIVATIVE_KEYS) take(key, derivativeLabels(key), false);
  for (const key of SIZE_KEYS) take(key, SYNONYMS[key] ?? [], false);
  return found;
}

export interface SheetMeaning {
  units: ForeignSet['units'];
  axes: ForeignSet['axes'];
  inertiaAxes: ForeignSet['inertiaAxes'];
  form: ForeignSet['form'];
  aileron: 'right' | 'left';
  rudder: 'left' | 'right';
  angles: 'rad' | 'degree';
  rates: 'b/2V' | 'b/V';
  name: string;
  airplaneClass: string;
  configuration: string;
  CLmax: number;
  aileronMaxDeg: number;
  rudderMaxDeg: number;
  source: string;
}

export interface CellProblem {
  quantity: Quantity | null;
  row: number | null;
  message: string;
}
export type Mapped = { ok: true; document: Json; set: ImportedSet } | { ok: false; problems: CellProblem[] };

/** The airframe document of a mapped sheet, or what stands in the way, beside the row. */
export function mapSheet(rows: readonly (readonly Cell[])[], mapping: Mapping, meaning: SheetMeaning): Mapped {
  const problems: CellProblem[] = [];
  const values: Partial<Record<Quantity, number>> = {};
  for (const quantity of QUANTITIES) {
    const row = mapping.rows[quantity];
    if (row === undefined) {
      if (!isOptional(quantity))
        problems.push({
          quantity,
          row: null,
          message: `${quantityWords(quantity)} is not in the sheet yet: choose its row`,
        });
      continue;
    }
    const parsed = parseNumber(rows[row]?.[mapping.valueColumn] ?? null);
    if (parsed.ok) values[quantity] = parsed.value;
    else problems.push({ quantity, row: row + 1, message: `row ${row + 1}: ${parsed.message}` });
  }
  if (problems.length > 0) return { ok: false, problems };
  const v = (quantity: Quantity): number => values[quantity] ?? 0;
  const derivatives = Object.fromEntries(DERIVATIVE_KEYS.map((key) => [key, v(key)])) as unknown as LateralDerivatives; // one value for each key
  try {
    const { aileron, rudder, angles, rates } = meaning;
    const set = importLateralSet({
      units: meaning.units,
      axes: meaning.axes,
      inertiaAxes: meaning.inertiaAxes,
      form: meaning.form,
      conventions: { aileron, rudder, angles, rates },
      mass: v('mass'),
      wingArea: v('wingArea'),
      wingSpan: v('wingSpan'),
      speed: v('speed'),
      density: v('density'),
      Ixx: v('Ixx'),
      Izz: v('Izz'),
      Ixz: v('Ixz'),
      ...(values.Iyy !== undefined && { Iyy: values.Iyy }),
      ...(values.alphaDeg !== undefined && { alphaDeg: values.alphaDeg }),
      ...(values.CL !== undefined && { CL: values.CL }),
      derivatives,
    });
    const length = meaning.units === 'US' ? 0.3048 : 1;
    const chord = values.meanChord === undefined ? set.wingArea_m2 / set.wingSpan_m : values.meanChord * length;
    return { ok: true, set, document: documentOf(set, chord, meaning) };
  } catch (error) {
    const message = error instanceof ModelError ? error.message : 'the values cannot be converted';
    return { ok: false, problems: [{ quantity: null, row: null, message }] };
  }
}

function documentOf(set: ImportedSet, chord: number, meaning: SheetMeaning): Json {
  return {
    format: 'sidewash.airframe/1',
    name: meaning.name,
    class: meaning.airplaneClass,
    geometry: { wingArea_m2: set.wingArea_m2, wingSpan_m: set.wingSpan_m, meanChord_m: chord },
    mass: { ...set.mass },
    configurations: [{ name: meaning.configuration, CLmax: meaning.CLmax, derivatives: [{ ...set.row }] }],
    controls: {
      aileronMax_deg: meaning.aileronMaxDeg,
      rudderMax_deg: meaning.rudderMaxDeg,
      aileronRate_deg_s: 60,
      rudderRate_deg_s: 60,
      lag_s: 0.1,
    },
    sources: [
      { field: '*', text: meaning.source },
      { field: '/controls', text: 'Assumed on import; the sheet gives none. Replace.' },
    ],
  };
}
