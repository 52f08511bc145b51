import Papa from 'papaparse';
import { describe, expect, it } from 'vitest';
import { csvField, csvText } from '../../../server/reports/csv-text.ts';

describe('CSV text', () => {
  it('never starts a field with what a spreadsheet takes for a formula', () => {
    for (const text of [
      '=1+1',
      '+31',
      '-2+3',
      '@SUM(A1)',
      '\t=1',
      ' =1',
      '\r=1',
      '\uff1d1',
      '=HYPERLINK("http://x")',
    ]) {
      const [[read]] = Papa.parse<string[]>(csvField(text), { delimiter: ',' }).data;
      expect(read, JSON.stringify(text)).toBe(`'${text}`);
    }
    expect(csvField('O’Brien = pilot')).toBe('O’Brien = pilot');
    expect(csvField(-1.25)).toBe('-1.25');
    expect(csvField(Number.NaN)).toBe('');
  });

  it('is read back as it was by a CSV reader, with every script, quotes and line ends', () => {
    const rows = [
      ['Name', 'Words'],
      ['Łukasz "Lu" Żak', 'a, b; c'],
      ['山田 太郎', 'first\nsecond\r\nthird'],
      ['محمد', ' spaces '],
    ];
    expect(Papa.parse<string[]>(csvText(rows).slice(1).trimEnd(), { delimiter: ',' }).data).toEqual(rows);
    expect(csvText(rows).startsWith('\ufeff')).toBe(true);
  });
});
