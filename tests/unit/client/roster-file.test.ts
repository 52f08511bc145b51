import { describe, expect, it } from 'vitest';
import { readLines, readRoster } from '../../../src/views/administration/roster-file.ts';

const bytes = (text: string): Uint8Array => new TextEncoder().encode(text);

describe('a roster file', () => {
  it('takes its columns in any order and letter case, quotes, semicolons and a byte-order mark', () => {
    const rows = readRoster(
      bytes('\ufeffCOHORT;E-Mail;Name\r\n26-A;a@b.example;"Lund; Per"\r\n\r\n;c@d.example;李 文\r\n'),
    );
    expect(rows).toEqual([
      { line: 2, name: 'Lund; Per', email: 'a@b.example', roles: '', cohort: '26-A' },
      { line: 4, name: '李 文', email: 'c@d.example', roles: '', cohort: '' },
    ]);
  });

  it.each(['\n', '\r\n'])('numbers its lines past line breaks within quotes (%j)', (end) => {
    const text = ['name,email', '"Lund,', 'Per",p@b.example', '', '"A', '', 'B",a@b.example', 'C,c@b.example', ''].join(
      end,
    );
    expect(readRoster(bytes(text)).map(({ line, email }) => [line, email])).toEqual([
      [2, 'p@b.example'],
      [5, 'a@b.example'],
      [8, 'c@b.example'],
    ]);
  });

  it('may have two columns between semicolons', () => {
    expect(readRoster(bytes('name;email\nMoe, Ida;i@b.example\n'))).toMatchObject([{ name: 'Moe, Ida', line: 2 }]);
  });

  it('is read in UTF-16 that says so', () => {
    const text = '\ufeffname\temail\n李 文\tw@b.example\n';
    const little = Uint8Array.from(Buffer.from(text, 'utf16le'));
    const big = Uint8Array.from(Buffer.from(text, 'utf16le').swap16());
    for (const file of [little, big])
      expect(readRoster(file)[0]).toMatchObject({ name: '李 文', email: 'w@b.example' });
  });

  it.each([
    ['nothing in it', new Uint8Array(0), /empty/],
    ['Windows-1252', Uint8Array.from([...bytes('name,email\nL'), 0x92, ...bytes('Abb,l@b.example\n')]), /not UTF-8/],
    ['no address heading', bytes('name,phone\nA,1\n'), /no heading “email”/],
    ['a heading alone', bytes('name,email\n'), /no rows/],
    ['Latin-1', Uint8Array.from([...bytes('name,email\nJos'), 0xe9, ...bytes(',j@b.example\n')]), /not UTF-8/],
    ['UTF-16', Uint8Array.from(Buffer.from('name,email\nA,a@b.example\n', 'utf16le')), /not text/],
    ['too much', new Uint8Array(1_000_001), /larger than 1 MB/],
  ])('is refused with %s', (_what, content, message) => {
    expect(() => readRoster(content)).toThrow(message);
  });
});

describe('written lines', () => {
  it('are a name and an address, or an address alone', () => {
    expect(readLines('Nowak, K., k.nowak@b.example\n\n  x@y.example', 'trainee', '')).toEqual([
      { line: 1, name: 'Nowak, K.', email: 'k.nowak@b.example', roles: 'trainee', cohort: '' },
      { line: 3, name: 'x', email: 'x@y.example', roles: 'trainee', cohort: '' },
    ]);
  });
});
