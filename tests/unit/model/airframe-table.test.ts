import { readFileSync, readdirSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { documentToTable, tableToDocument } from '#shared/model/airframe-table.ts';

const folder = 'scenarios/airframes';

describe('an airframe as a table of members', () => {
  for (const file of readdirSync(folder).filter((name) => name.endsWith('.json'))) {
    it(`gives ${file} back exactly, also when every cell is text as in CSV`, () => {
      const document: unknown = JSON.parse(readFileSync(`${folder}/${file}`, 'utf8'));
      const rows = documentToTable(document);
      expect(tableToDocument(rows)).toEqual({ ok: true, document });
      const asText = rows.map(([field, value]) => [field, value === null ? '' : String(value)]);
      expect(tableToDocument([['field', 'value'], ...asText])).toEqual({ ok: true, document });
    });
  }

  it('names the row that cannot be read', () => {
    expect(
      tableToDocument([
        ['/mass/mass_kg', 1],
        ['mass', 2],
      ]),
    ).toMatchObject({ ok: false, row: 2 });
    expect(tableToDocument([['/a/1', 1]])).toMatchObject({ ok: true });
    expect(
      tableToDocument([
        ['/a/0', 1],
        ['/a/2', 1],
      ]),
    ).toMatchObject({ ok: false, row: 2 });
    expect(
      tableToDocument([
        ['/a', 1],
        ['/a', 1],
      ]),
    ).toMatchObject({ ok: false, row: 2, message: '/a is given twice' });
    expect(tableToDocument([])).toMatchObject({ ok: false });
  });

  it('refuses names that would reach into the language', () => {
    expect(tableToDocument([['/__proto__/polluted', 1]])).toMatchObject({ ok: false, row: 1 });
    expect({}).not.toHaveProperty('polluted');
  });
});
