/** A sheet with a quantity in each column: headings found, rows converted on their own, cells answered beside themselves. */
import { describe, expect, it } from 'vitest';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import { DEG } from '#shared/units/constants.ts';
import {
  cellName,
  guessColumns,
  mapColumns,
  type ColumnMapping,
} from '../../../src/features/airframe-import/column-mapping.ts';
import { USUAL_MEANING } from '../../../src/features/airframe-import/import-meanings.ts';
import type { Cell } from '../../../src/features/airframe-import/sheet-mapping.ts';

const HEAD: Cell[] = 'alpha,CL,CYb,Clb,Cnb,Clp,Cnp,Clr,Cnr,CYdr,Clda,Cnda,Cldr,Cndr,Remark'.split(',');
const row = (alpha: Cell, CL: Cell, Cnb: Cell, remark = ''): Cell[] => [
  ...[alpha, CL, -0.7, -0.09, Cnb, -0.5, -0.05, 0.2, -0.13, 0.15, 0.16, -0.01, 0.02, -0.07],
  remark,
];
const SHEET: Cell[][] = [['Series 4'], HEAD, row(6, 1.2, 0.09), row(2, 0.5, 0.11, 'cruise'), []];
const TYPED = { mass: '1750', wingArea: '17', wingSpan: '11.3', Ixx: '2900', Izz: '5400' };
const mappingOf = (change: Partial<ColumnMapping> = {}): ColumnMapping => ({
  ...guessColumns(SHEET),
  typed: TYPED,
  ...change,
});
const meaning = { ...USUAL_MEANING, name: 'Tunnel', source: 'Invented' };

describe('a sheet in columns', () => {
  it('has its heading row and columns found; a remark is not imported', () => {
    const { headRow, columns } = guessColumns(SHEET);
    expect(headRow).toBe(1);
    expect(columns).toMatchObject({ alphaDeg: 0, CL: 1, CY_beta: 2, Cl_beta: 3, Cn_beta: 4, Cn_dr: 13 });
    expect(Object.values(columns)).not.toContain(14);
  });

  it('becomes entries in order of lift coefficient that the format accepts', () => {
    const mapped = mapColumns(SHEET, mappingOf(), meaning);
    expect(mapped.problems).toEqual([]);
    const parsed = parseAirframe(mapped.document);
    if (!parsed.ok) throw new Error(JSON.stringify(parsed.issues));
    const [configuration] = parsed.airframe.configurations;
    expect(configuration.derivatives.map((one) => [one.CL, one.Cn_beta])).toEqual([
      [0.5, 0.11],
      [1.2, 0.09],
    ]);
    expect(parsed.airframe.mass.mass_kg).toBe(1750);
  });

  it('takes the unit and the sign of one column on its own', () => {
    const mapped = mapColumns(
      SHEET,
      mappingOf({ adjust: { Cn_beta: { angles: 'degree' }, Cn_dr: { turned: true } } }),
      meaning,
    );
    const first = mapped.converted[0]?.set.row;
    expect(first?.Cn_beta).toBeCloseTo(0.09 / DEG, 10);
    expect(first?.Cn_dr).toBe(0.07);
    expect(first?.CY_beta).toBe(-0.7);
    expect(mapped.converted[0]?.given.Cn_dr).toBe(-0.07);
  });

  it('answers beside the cell, and imports the rest once the row is left out', () => {
    const spoilt = [...SHEET, row(9, '1.5O', 0.08), row(11, 1.7, '=A1')];
    const mapped = mapColumns(spoilt, mappingOf(), meaning);
    expect(mapped.document).toBeNull();
    expect(mapped.problems.map((one) => [cellName(one.row ?? -1, one.column ?? -1), one.quantity])).toEqual([
      ['row 6, B', 'CL'],
      ['row 7, E', 'Cn_beta'],
    ]);
    expect(mapped.problems[1]?.message).toContain('formula');
    const left = mapColumns(spoilt, mappingOf({ left: [5, 6] }), meaning);
    expect([left.problems.length, left.converted.length]).toEqual([0, 2]);
  });

  it('names what is in no column, two rows of one lift coefficient, and body axes without an angle', () => {
    const { mass: _mass, ...lighter } = TYPED;
    expect(mapColumns(SHEET, mappingOf({ typed: lighter }), meaning).problems).toMatchObject([
      { row: null, quantity: 'mass' },
    ]);
    expect(mapColumns(SHEET, mappingOf({ typed: { ...TYPED, mass: 'heavy' } }), meaning).problems).toMatchObject([
      { row: null, quantity: 'mass' },
    ]);
    const twice = [...SHEET, row(3, 0.5, 0.1)];
    expect(mapColumns(twice, mappingOf(), meaning).problems).toMatchObject([{ row: 5, quantity: 'CL' }]);
    const { alphaDeg: _alpha, ...columns } = guessColumns(SHEET).columns;
    const body = mapColumns(SHEET, mappingOf({ columns }), { ...meaning, axes: 'body' });
    expect(body.problems[0]?.message).toContain('angle of attack');
  });
});
