import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { documentToExactTable, EXACT_TABLE_HEAD, tableToDocument } from '#shared/model/airframe-table.ts';
import { airframeDocument } from '../../support/airframe-arbitrary.ts';

const SEED = 20261201;

/** Members with any text at all, also what looks like numbers, formulas, lists or commands. */
const anyText = fc.oneof(
  fc.string({ unit: 'binary' }),
  fc.constantFrom('', '=1+1', '-2', '@x', "'a", '[]', '{}', 'true', '007', '_x0041_', ' a ', '1e5'),
);
const leaf = fc.oneof(anyText, fc.double({ noNaN: true, noDefaultInfinity: true }), fc.boolean(), fc.constant(null));
const tree = fc.letrec((tie) => ({
  value: fc.oneof({ maxDepth: 3 }, leaf, fc.array(tie('value'), { maxLength: 3 }), tie('members')),
  members: fc.dictionary(fc.stringMatching(/^[a-z/~]{1,6}$/), tie('value'), { maxKeys: 4 }),
})).members;

const plain = (value: unknown): unknown => JSON.parse(JSON.stringify(value));

describe('the table with kinds', () => {
  it('reads back to the identical document, as typed cells and as text', () => {
    fc.assert(
      fc.property(fc.oneof(airframeDocument, tree), (given) => {
        const document = plain(given);
        const rows = documentToExactTable(document);
        if (rows.length === 1 && rows[0][0] === '') return; // an empty document has no members to name
        const typed = tableToDocument([[...EXACT_TABLE_HEAD], ...rows]);
        const asText = rows.map((row) => row.map((cell) => (cell === null ? '' : String(cell))));
        const text = tableToDocument([[...EXACT_TABLE_HEAD], ...asText]);
        expect(typed).toEqual({ ok: true, document });
        expect(text).toEqual({ ok: true, document });
      }),
      { seed: SEED, numRuns: 400 },
    );
  });

  it('holds no text that a spreadsheet would run', () => {
    fc.assert(
      fc.property(tree, (given) => {
        for (const [, value, kind] of documentToExactTable(plain(given)))
          if (kind === 'text' || kind === 'quoted') expect(String(value)).not.toMatch(/^[=+\-@\t\r]/);
      }),
      { seed: SEED, numRuns: 400 },
    );
  });

  it('refuses a number with a decimal comma by its row', () => {
    const read = tableToDocument([
      ['field', 'value', 'kind'],
      ['/mass/mass_kg', '1,5', 'number'],
    ]);
    expect(read).toMatchObject({ ok: false, row: 2 });
    if (!read.ok) expect(read.remedy).toContain('decimal point');
  });

  it('takes a retyped text as it stands, and a third column of another name as a remark', () => {
    const retyped = tableToDocument([
      ['field', 'value', 'kind'],
      ['/name', 'Twin', 'quoted'],
      ['/note', 12, 'text'],
    ]);
    expect(retyped).toEqual({ ok: true, document: { name: 'Twin', note: '12' } });
    const foreign = tableToDocument([
      ['field', 'value', 'remark'],
      ['/x', '12', 'text'],
    ]);
    expect(foreign).toEqual({ ok: true, document: { x: 12 } });
  });
});
