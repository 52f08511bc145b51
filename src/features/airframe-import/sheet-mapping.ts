/** Rows of a foreign sheet as quantities of a data set: guessed from their labels, corrected by the person. */
import type { ForeignSet, ImportedSet } from '#shared/model/import-set.ts';
import { importLateralSet } from '#shared/model/import-set.ts';
import type { LateralDerivatives } from '#shared/model/conversions.ts';
import { ModelError } from '#shared/model/errors.ts';
import { DEG, FT } from '#shared/units/constants.ts';
import type { Json } from '../airframe-editing/draft-document.ts';
import {
  DERIVATIVE_KEYS,
  type Quantity,
  QUANTITIES,
  isOptional,
  quantityWords,
  plainLabel,
  guessLabels,
} from './sheet-labels.ts';

export type Cell = string | number | boolean | null;

export interface Mapping {
  /** Column of the labels and of the values, from 0. */
  labelColumn: number;
  valueColumn: number;
  /** Row of each quantity, from 0; absent where the sheet has none. */
  rows: Partial<Record<Quantity, number>>;
  /** Values that the sheet has not, as typed. */
  typed?: TypedValues;
  adjust?: Adjustments;
}
export type TypedValues = Partial<Record<Quantity, string>>;
/** Where one quantity is not written as the whole sheet is. */
export interface Adjustment {
  angles?: 'rad' | 'degree';
  turned?: boolean;
}
export type Adjustments = Partial<Record<Quantity, Adjustment>>;

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
  const labels = rows.map((row) => {
    const cell = row[labelColumn];
    return typeof cell === 'string' && isNumber(row[valueColumn]) ? plainLabel(cell) : '';
  });
  return guessLabels(labels);
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

/** A quantity that may be missing: speed and density are needed for dimensional values or to find the lift coefficient. */
export function mayBeMissing(quantity: Quantity, meaning: SheetMeaning, hasLift: boolean): boolean {
  const needless = meaning.form === 'non-dimensional' && hasLift && (quantity === 'speed' || quantity === 'density');
  return needless || isOptional(quantity);
}

/** The value as the whole sheet writes its values. */
export function adjusted(value: number, one: Adjustment | undefined, meaning: SheetMeaning): number {
  let now = one?.turned ? -value : value;
  if (one?.angles === 'degree' && meaning.angles === 'rad') now /= DEG;
  if (one?.angles === 'rad' && meaning.angles === 'degree') now *= DEG;
  return now;
}

/** One condition with its values as read. @throws {ModelError} when they cannot be converted. */
export function convertCondition(values: Partial<Record<Quantity, number>>, meaning: SheetMeaning): ImportedSet {
  const v = (quantity: Quantity): number => values[quantity] ?? 0;
  const derivatives = Object.fromEntries(DERIVATIVE_KEYS.map((key) => [key, v(key)])) as unknown as LateralDerivatives; // one value for each key
  const { aileron, rudder, angles, rates } = meaning;
  return importLateralSet({
    units: meaning.units,
    axes: meaning.axes,
    inertiaAxes: meaning.inertiaAxes,
    form: meaning.form,
    conventions: { aileron, rudder, angles, rates },
    mass: v('mass'),
    wingArea: v('wingArea'),
    wingSpan: v('wingSpan'),
    // Not used where the lift coefficient is given and nothing is dimensional.
    speed: values.speed ?? 1,
    density: values.density ?? 1,
    Ixx: v('Ixx'),
    Izz: v('Izz'),
    Ixz: v('Ixz'),
    ...(values.Iyy !== undefined && { Iyy: values.Iyy }),
    ...(values.alphaDeg !== undefined && { alphaDeg: values.alphaDeg }),
    ...(values.CL !== undefined && { CL: values.CL }),
    derivatives,
  });
}

/** Mean chord in m: the sheet's own, or the geometric one. */
export function chordOf(set: ImportedSet, given: number | undefined, meaning: SheetMeaning): number {
  return given === undefined ? set.wingArea_m2 / set.wingSpan_m : given * (meaning.units === 'US' ? FT : 1);
}

/** The airframe document of a mapped sheet, or what stands in the way, beside the row. */
export function mapSheet(rows: readonly (readonly Cell[])[], mapping: Mapping, meaning: SheetMeaning): Mapped {
  const problems: CellProblem[] = [];
  const values: Partial<Record<Quantity, number>> = {};
  const hasLift = mapping.rows.CL !== undefined || (mapping.typed?.CL ?? '') !== '';
  for (const quantity of QUANTITIES) {
    const row = mapping.rows[quantity];
    const typed = mapping.typed?.[quantity] ?? '';
    if (row === undefined && typed.trim() === '') {
      if (!mayBeMissing(quantity, meaning, hasLift))
        problems.push({
          quantity,
          row: null,
          message: `${quantityWords(quantity)} is not in the sheet yet: choose its row, or type it`,
        });
      continue;
    }
    const parsed = parseNumber(row === undefined ? typed : (rows[row]?.[mapping.valueColumn] ?? null));
    if (parsed.ok) values[quantity] = adjusted(parsed.value, mapping.adjust?.[quantity], meaning);
    else
      problems.push({
        quantity,
        row: row === undefined ? null : row + 1,
        message: row === undefined ? parsed.message : `row ${row + 1}: ${parsed.message}`,
      });
  }
  if (problems.length > 0) return { ok: false, problems };
  try {
    const set = convertCondition(values, meaning);
    return { ok: true, set, document: documentOf([set], chordOf(set, values.meanChord, meaning), meaning) };
  } catch (error) {
    const message = error instanceof ModelError ? error.message : 'the values cannot be converted';
    return { ok: false, problems: [{ quantity: null, row: null, message }] };
  }
}

/** Sets of one aeroplane, each an entry by lift coefficient; geometry and mass are those of the first. */
export function documentOf(sets: readonly [ImportedSet, ...ImportedSet[]], chord: number, meaning: SheetMeaning): Json {
  const [first] = sets;
  const entries = sets.map((set) => ({ ...set.row })).sort((a, b) => a.CL - b.CL);
  return {
    format: 'sidewash.airframe/1',
    name: meaning.name,
    class: meaning.airplaneClass,
    geometry: { wingArea_m2: first.wingArea_m2, wingSpan_m: first.wingSpan_m, meanChord_m: chord },
    mass: { ...first.mass },
    configurations: [{ name: meaning.configuration, CLmax: meaning.CLmax, derivatives: entries }],
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

/** The numbers of a mapped sheet as its cells say, before any conversion. */
export function givenValues(rows: readonly (readonly Cell[])[], mapping: Mapping): Partial<Record<Quantity, number>> {
  const values: Partial<Record<Quantity, number>> = {};
  for (const quantity of QUANTITIES) {
    const row = mapping.rows[quantity];
    const parsed = row === undefined ? null : parseNumber(rows[row]?.[mapping.valueColumn] ?? null);
    if (parsed?.ok) values[quantity] = parsed.value;
  }
  return values;
}
