import { readFileSync } from 'node:fs';
import ExcelJS from 'exceljs';
import { unzipSync, zipSync, strFromU8, strToU8 } from 'fflate';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { sheetCellsSchema, type SheetCells } from '#shared/contracts/airframe-editing.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { tableToDocument } from '#shared/model/airframe-table.ts';
import { type Client, startTestServer, type TestServer } from '../../support/test-server.ts';
import { zipFile } from '../../support/zip-file.ts';

let server: TestServer;
let engineer: Client;
const SLUGS = ['commuter-turboprop', 'four-jet', 'light-twin', 'single-trainer', 'twin-jet'];

beforeAll(async () => {
  server = await startTestServer();
  engineer = await server.client('a.reyes');
});
afterAll(() => server.close());

const send = (bytes: Uint8Array, name = 'table.csv') =>
  engineer('PUT', `/api/airframes/read-sheet?name=${encodeURIComponent(name)}`, { bytes });
async function read(bytes: Uint8Array, name?: string): Promise<SheetCells> {
  const answer = await send(bytes, name);
  expect([answer.status, answer.body]).toEqual([200, expect.anything()]);
  return sheetCellsSchema.parse(answer.body);
}
async function refusal(bytes: Uint8Array, name?: string): Promise<string> {
  const answer = await send(bytes, name);
  expect(answer.status).toBe(422);
  return problemSchema.parse(answer.body).detail;
}
async function workbook(fill: (sheet: ExcelJS.Worksheet) => void): Promise<Buffer> {
  const book = new ExcelJS.Workbook();
  fill(book.addWorksheet('Data'));
  return Buffer.from(await book.xlsx.writeBuffer());
}

/** What spreadsheets run, trim or turn into something else, in places where the format allows text. */
const HOSTILE: Record<string, unknown> = {
  name: '=HYPERLINK("http://example.invalid","x")',
  description: '\t+1; @SUM(1) \r\n"quoted", \'single\' _x0041_ ',
  class: 'I',
  geometry: { wingSpan_m: 10.5, wingArea_m2: 1e-7, note: '' },
  engines: [],
  extra: {
    empty: {},
    none: null,
    yes: true,
    no: false,
    number: '00012',
    list: [
      [1, 2],
      ['-3', ' = '],
    ],
  },
  sources: [{ field: '*', text: '-2+3', uncertainty_pct: 0.1 + 0.2 }],
};

describe('export', () => {
  it.each(SLUGS)('of %s reads back to the identical document in all three formats', async (slug) => {
    const stored: unknown = JSON.parse(readFileSync(`scenarios/airframes/${slug}.json`, 'utf8'));
    const at = `/api/airframes/${slug}/revisions/1/export`;
    const json = await engineer('GET', `${at}.json`);
    expect(json.body).toEqual(stored);
    expect(JSON.stringify(json.body)).toBe(JSON.stringify(stored));
    expect(json.headers.get('content-disposition')).toContain(`${slug}-revision-1.json`);
    for (const format of ['csv', 'xlsx']) {
      const file = await engineer('GET', `${at}.${format}`);
      const cells = await read(file.bytes, `${slug}.${format}`);
      expect(cells.sheets[0].remarks).toEqual([]);
      const back = tableToDocument(cells.sheets[0].rows);
      expect(back.ok && JSON.stringify(back.document)).toBe(JSON.stringify(stored));
    }
  });

  it('of a draft full of formulas and odd texts gives no formula and the same draft again', async () => {
    const made = await engineer('POST', '/api/airframes', { json: { slug: 'hostile', document: HOSTILE } });
    expect(made.status).toBe(201);
    const csv = await engineer('GET', '/api/airframes/hostile/revisions/1/export.csv');
    const lines = csv.bytes.toString('utf8');
    expect(lines.startsWith('\ufefffield,value,kind\r\n')).toBe(true);
    expect(lines).not.toMatch(/(?:^|,)"?[=+@\t]/m);
    const xlsx = await engineer('GET', '/api/airframes/hostile/revisions/1/export.xlsx');
    const sheet = strFromU8(unzipSync(xlsx.bytes)['xl/worksheets/sheet1.xml']);
    expect(sheet).not.toContain('<f>');
    for (const file of [csv, xlsx]) {
      const back = tableToDocument((await read(file.bytes, 'hostile')).sheets[0].rows);
      expect(back.ok && JSON.stringify(back.document)).toBe(JSON.stringify(HOSTILE));
    }
  });

  it('knows no other format', async () => {
    expect((await engineer('GET', '/api/airframes/light-twin/revisions/1/export.pdf')).status).toBe(422);
    expect((await engineer('GET', '/api/airframes/light-twin/revisions/7/export.csv')).status).toBe(404);
  });
});

describe('a CSV file', () => {
  it('is read in UTF-8, UTF-16 and Latin-1, with whatever stands between cells', async () => {
    const text = 'name;Flügelfläche;Cn_beta\nA;16,5;0.09\n';
    const rows = [
      ['name', 'Flügelfläche', 'Cn_beta'],
      ['A', '16,5', '0.09'],
    ];
    const swapped = Buffer.from(text, 'utf16le').swap16();
    const forms = [
      Buffer.from(text),
      Buffer.from(`\ufeff${text}`),
      Buffer.from(`\ufeff${text}`, 'utf16le'),
      Buffer.concat([Buffer.from([0xfe, 0xff]), swapped]),
      Buffer.from(text, 'utf16le'),
      Buffer.from(text, 'latin1'),
    ];
    for (const form of forms) expect((await read(form)).sheets[0].rows).toEqual(rows);
    const latin = await read(Buffer.from(text, 'latin1'));
    expect(latin.sheets[0].remarks[0]).toMatchObject({ row: 1, column: null });
    expect(latin.sheets[0].remarks[0].message).toContain('Latin-1');
  });

  it('gets remarks on decimal commas, formulas and rows that are too long', async () => {
    const { rows, remarks } = (await read(Buffer.from('a\tb\n1.234,5\t=1+2\n1\t2\t3\n'))).sheets[0];
    expect(rows[1]).toEqual(['1.234,5', '=1+2']);
    expect(remarks.map(({ row, column }) => [row, column])).toEqual([
      [2, 1],
      [2, 2],
      [3, null],
    ]);
    expect(remarks[0].message).toContain('1234.5');
  });

  it.each([
    ['nothing', Buffer.from(' \n\n'), 'empty'],
    [
      'random bytes',
      Buffer.from(Array.from({ length: 9000 }, (_, i) => (i * i * 7919 + i * 31) % 256)),
      'neither a workbook nor text',
    ],
    ['10 MB of one letter', Buffer.alloc(10 * 1024 * 1024, 'a'), 'no lines of a table'],
    ['10 MB of zeros', Buffer.alloc(10 * 1024 * 1024), 'neither a workbook nor text'],
    ['10 MB of empty rows and cells', Buffer.alloc(10 * 1024 * 1024, ',\n'), 'larger than 20000 rows'],
    ['a quotation mark left open', Buffer.from('a,b\n1,"2\n3,4\n'), 'quotation mark in row 2'],
    ['a PDF', Buffer.from('%PDF-1.7\n'), 'is a PDF'],
    ['an old workbook', Buffer.from('d0cf11e0a1b11ae100', 'hex'), 'old .xls format'],
  ])('of %s is refused in words', async (_what, bytes, words) => {
    expect(await refusal(bytes)).toContain(words);
  });

  it('beyond 10 MB is refused before it is read', async () => {
    const answer = await send(Buffer.alloc(10 * 1024 * 1024 + 1, 'a'));
    expect(answer.status).toBe(413);
    expect((await send(Buffer.alloc(12 * 1024 * 1024, 'a'))).status).toBe(413);
  });

  it('with another name is told by its content', async () => {
    expect(await refusal(Buffer.from('a,b\n1,2\n'), 'data.xlsx')).toContain('is no workbook');
    expect((await read(Buffer.from('a,b\n'), '../../etc/data.txt')).fileName).toBe('data.txt');
  });
});

describe('a workbook', () => {
  it('gives its cells by kind, merged ones once, formulas as text', async () => {
    const bytes = await workbook((sheet) => {
      sheet.addRow(['name', 'value', 'note']);
      sheet.addRow(['Cn_beta', 0.087, '0,09']);
      sheet.addRow(['sum', { formula: 'B2*2', result: 0.174 }, true]);
      sheet.getCell('A5').value = 'wide';
      sheet.mergeCells('A5:C6');
    });
    const { name, rows, remarks } = (await read(bytes, 'data.xlsx')).sheets[0];
    expect(name).toBe('Data');
    expect(rows).toEqual([['name', 'value', 'note'], ['Cn_beta', 0.087, '0,09'], ['sum', '=B2*2', true], [], ['wide']]);
    expect(remarks.map(({ row, column }) => [row, column])).toEqual([
      [2, 3],
      [3, 2],
      [5, 1],
    ]);
    expect(remarks[2].message).toContain('A5:C6');
  });

  it('with a merge, a validation and a name over every cell is read at once all the same', async () => {
    const parts = unzipSync(await workbook((sheet) => sheet.addRow(['a', 1])));
    const all = 'A1:XFD1048576';
    const name = 'xl/worksheets/sheet1.xml';
    parts[name] = strToU8(
      strFromU8(parts[name]).replace(
        '</sheetData>',
        `</sheetData><mergeCells count="1"><mergeCell ref="${all}"/></mergeCells><dataValidations count="1"><dataValidation type="list" sqref="${all}"><formula1>"a"</formula1></dataValidation></dataValidations>`,
      ),
    );
    parts['xl/workbook.xml'] = strToU8(
      strFromU8(parts['xl/workbook.xml']).replace(
        '</sheets>',
        `</sheets><definedNames><definedName name="x">Data!$A$1:$XFD$1048576</definedName></definedNames>`,
      ),
    );
    const { rows, remarks } = (await read(Buffer.from(zipSync(parts)), 'big.xlsx')).sheets[0];
    expect(rows).toEqual([['a', 1]]);
    expect(remarks[0].message).toContain(all);
  });

  it('that unpacks to far more than it is is refused by what it declares and by what it does', async () => {
    const bomb = { name: 'xl/worksheets/sheet1.xml', content: new Uint8Array(200 * 1024 * 1024) };
    const book = { name: 'xl/workbook.xml', content: Buffer.from('<workbook/>') };
    const open = zipFile([book, bomb]);
    expect(open.length).toBeLessThan(1024 * 1024);
    expect(await refusal(open, 'bomb.xlsx')).toContain('unpacks to more than 32 MB');
    const lying = zipFile([book, { ...bomb, declared: 1000 }]);
    expect(await refusal(lying, 'bomb.xlsx')).toContain('damaged');
    const many = Array.from({ length: 3000 }, (_, i) => ({ name: `xl/media/${i}.png`, content: new Uint8Array() }));
    expect(await refusal(zipFile(many), 'many.xlsx')).toContain('3000 parts');
  });

  it.each([
    ['another archive', () => zipFile([{ name: 'readme.txt', content: Buffer.from('hello') }]), 'no workbook'],
    ['half a file', async () => (await workbook((sheet) => sheet.addRow([1]))).subarray(0, 900), 'damaged'],
    ['broken cells', () => zipFile([{ name: 'xl/workbook.xml', content: Buffer.from('<<<') }]), 'damaged'],
    ['cells far away', () => workbook((sheet) => (sheet.getCell('A30000').value = 1)), 'larger than 20000 rows'],
  ])('that is %s is refused in words', async (_what, make, words) => {
    expect(await refusal(await make(), 'file.xlsx')).toContain(words);
  });

  it('that took its reader down leaves the next one read', async () => {
    expect((await read(Buffer.from('a,b\n1,2\n'))).sheets[0].rows).toEqual([
      ['a', 'b'],
      ['1', '2'],
    ]);
  });
});
