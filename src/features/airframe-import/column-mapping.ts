/** Sheets with a quantity in each column and a condition in each row: every good row becomes an entry by lift coefficient. */
import { ModelError } from '#shared/model/errors.ts';
import type { ImportedSet } from '#shared/model/import-set.ts';
import type { Json } from '../airframe-editing/draft-document.ts';
import { guessLabels, plainLabel, QUANTITIES, type Quantity, quantityWords } from './sheet-labels.ts';
import {
  type Adjustments,
  adjusted,
  type Cell,
  chordOf,
  convertCondition,
  documentOf,
  mayBeMissing,
  parseNumber,
  type SheetMeaning,
  type TypedValues,
} from './sheet-mapping.ts';

export interface ColumnMapping {
  /** Row of the headings, from 0; values begin below it. */
  headRow: number;
  /** Column of each quantity, from 0. */
  columns: Partial<Record<Quantity, number>>;
  adjust: Adjustments;
  typed: TypedValues;
  /** Rows left out, from 0. */
  left: readonly number[];
}
export interface SheetProblem {
  /** From 0; null for what concerns the whole sheet. */
  row: number | null;
  column: number | null;
  quantity: Quantity | null;
  message: string;
}
export interface ConvertedRow {
  row: number;
  /** As the cells say, before any conversion. */
  given: Partial<Record<Quantity, number>>;
  set: ImportedSet;
}
export interface MappedColumns {
  problems: SheetProblem[];
  converted: ConvertedRow[];
  /** Null while something stands in the way. */
  document: Json | null;
}

const HEAD_WITHIN = 12;
const letterOf = (column: number): string =>
  (column >= 26 ? String.fromCharCode(64 + Math.floor(column / 26)) : '') + String.fromCharCode(65 + (column % 26));
export const cellName = (row: number, column: number): string => `row ${row + 1}, ${letterOf(column)}`;
export const columnName = letterOf;

/** The heading row that names most quantities, and their columns. */
export function guessColumns(rows: readonly (readonly Cell[])[]): ColumnMapping {
  let best: Pick<ColumnMapping, 'headRow' | 'columns'> = { headRow: 0, columns: {} };
  rows.slice(0, HEAD_WITHIN).forEach((row, headRow) => {
    const columns = guessLabels(row.map((cell) => (typeof cell === 'string' ? plainLabel(cell) : '')));
    if (Object.keys(columns).length > Object.keys(best.columns).length) best = { headRow, columns };
  });
  return { ...best, adjust: {}, typed: {}, left: [] };
}

/** Rows that hold a condition: below the headings, not empty, not left out. */
export function conditionRows(rows: readonly (readonly Cell[])[], mapping: ColumnMapping): number[] {
  return rows.flatMap((row, index) =>
    index > mapping.headRow &&
    !mapping.left.includes(index) &&
    Object.values(mapping.columns).some(
      (column) => row[column] !== null && row[column] !== undefined && row[column] !== '',
    )
      ? [index]
      : [],
  );
}

/** The airframe document of a sheet in columns, and beside each cell what stands in the way. */
export function mapColumns(
  rows: readonly (readonly Cell[])[],
  mapping: ColumnMapping,
  meaning: SheetMeaning,
): MappedColumns {
  const problems: SheetProblem[] = [];
  const common = typedValues(mapping, meaning, problems);
  const conditions = conditionRows(rows, mapping);
  if (conditions.length === 0)
    problems.push({ row: null, column: null, quantity: null, message: 'no row below the headings holds a condition' });
  const converted: ConvertedRow[] = [];
  for (const row of conditions) {
    const given: Partial<Record<Quantity, number>> = {};
    const values = { ...common };
    const before = problems.length;
    for (const quantity of QUANTITIES) {
      const column = mapping.columns[quantity];
      if (column === undefined) continue;
      const cell = rows[row]?.[column] ?? null;
      if ((cell === null || cell === '') && mayBeMissing(quantity, meaning, true)) continue;
      const parsed = parseNumber(cell);
      if (parsed.ok) {
        given[quantity] = parsed.value;
        values[quantity] = adjusted(parsed.value, mapping.adjust[quantity], meaning);
      } else problems.push({ row, column, quantity, message: `${quantityWords(quantity)}: ${parsed.message}` });
    }
    if (problems.length > before || problems.some((one) => one.row === null)) continue;
    try {
      converted.push({ row, given, set: convertCondition(values, meaning) });
    } catch (error) {
      const message = error instanceof ModelError ? error.message : 'the values cannot be converted';
      problems.push({ row, column: null, quantity: null, message });
    }
  }
  sameLiftTwice(converted, problems);
  const [first, ...others] = converted;
  const chord = first?.given.meanChord ?? common.meanChord;
  return {
    problems,
    converted,
    document:
      first && problems.length === 0
        ? documentOf([first.set, ...others.map(({ set }) => set)], chordOf(first.set, chord, meaning), meaning)
        : null,
  };
}

function typedValues(
  mapping: ColumnMapping,
  meaning: SheetMeaning,
  problems: SheetProblem[],
): Partial<Record<Quantity, number>> {
  const values: Partial<Record<Quantity, number>> = {};
  const hasLift = mapping.columns.CL !== undefined;
  for (const quantity of QUANTITIES) {
    if (mapping.columns[quantity] !== undefined) continue;
    const typed = mapping.typed[quantity]?.trim() ?? '';
    if (typed === '') {
      if (!mayBeMissing(quantity, meaning, hasLift))
        problems.push({
          row: null,
          column: null,
          quantity,
          message: `${quantityWords(quantity)} is in no column: choose one, or type it`,
        });
      continue;
    }
    const parsed = parseNumber(typed);
    if (parsed.ok) values[quantity] = adjusted(parsed.value, mapping.adjust[quantity], meaning);
    else problems.push({ row: null, column: null, quantity, message: `${quantityWords(quantity)}: ${parsed.message}` });
  }
  return values;
}

/** Entries are told apart by their lift coefficient: two rows of the same one cannot both be kept. */
function sameLiftTwice(converted: readonly ConvertedRow[], problems: SheetProblem[]): void {
  converted.forEach((one, i) => {
    const earlier = converted.slice(0, i).find((other) => other.set.row.CL === one.set.row.CL);
    if (earlier)
      problems.push({
        row: one.row,
        column: null,
        quantity: 'CL',
        message: `lift coefficient ${Number(one.set.row.CL.toPrecision(4))} is that of row ${earlier.row + 1} too: leave one out`,
      });
  });
}
