/** Files that are no airframe: one line that names the file, the field and the rule; exit code 2; nothing on standard output. */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { sidewash, sidewashJson } from './run-command.ts';

const TWIN = 'scenarios/airframes/light-twin.json';
const text = readFileSync(TWIN, 'utf8');
const folder = mkdtempSync(path.join(tmpdir(), 'sidewash-bad-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

function fileOf(name: string, content: string | Uint8Array): string {
  const file = path.join(folder, name);
  writeFileSync(file, content);
  return file;
}

/** The twin with one member changed in its text. */
function twinWith(from: string | RegExp, to: string): string {
  const made = text.replace(from, to);
  expect(made).not.toBe(text);
  return made;
}

async function refused(file: string): Promise<string> {
  const { code, out, err } = await sidewash('modes', file, '--ias', '90kt', '--json');
  expect(code).toBe(2);
  expect(out).toBe('');
  expect(err.startsWith(`sidewash: ${file}: `)).toBe(true);
  expect(err.trimEnd()).not.toMatch(/\p{Cc}/u);
  return err.trimEnd().slice(`sidewash: ${file}: `.length);
}

describe('not JSON', () => {
  it.each([
    ['empty', '', /^not valid JSON/u],
    ['NaN', twinWith('"mass_kg": 1750', '"mass_kg": NaN'), /^not valid JSON \(Unexpected token 'N'/u],
    [
      'binary',
      Uint8Array.from({ length: 3000 }, (_, i) => (i * 167) % 256),
      /^not valid JSON \(it is not UTF-8 text\)/u,
    ],
    ['Latin-1', Buffer.from(twinWith('Light piston', 'L\u00EFght piston'), 'latin1'), /it is not UTF-8 text/u],
    ['UTF-16', Buffer.from(text, 'utf16le'), /^not valid JSON/u],
    ['too long', ' '.repeat(8_000_001), /^larger than 8000000 bytes$/u],
    ['nested without end', `${'['.repeat(100_000)}${']'.repeat(100_000)}`, /^\/: type: the file is a list/u],
  ])('%s', async (name, content, line) => {
    expect(await refused(fileOf(name, content))).toMatch(line);
  });

  it('an endless device is not read to its end', async () => {
    expect(await refused('/dev/zero')).toMatch(/^larger than/u);
  });

  it('a mark of byte order is let pass', async () => {
    const file = fileOf('bom.json', `\uFEFF${text}`);
    expect(await sidewashJson('modes', file, '--ias', '90kt')).toMatchObject({ height_m: 0 });
  });
});

describe('refusals of the format, one by one (flight model, section 2)', () => {
  it.each([
    ['an infinite number', '"mass_kg": 1750', '"mass_kg": 1e999', '/mass/mass_kg: finite: '],
    ['no mass', '"mass_kg": 1750,', '', '/mass/mass_kg: required: '],
    ['mass 0', '"mass_kg": 1750', '"mass_kg": 0', '/mass/mass_kg: positive: '],
    ['a negative wing', '"wingArea_m2": 17.0', '"wingArea_m2": -17', '/geometry/wingArea_m2: positive: '],
    ['no span', '"wingSpan_m": 11.3', '"wingSpan_m": 0', '/geometry/wingSpan_m: positive: '],
    ['an aspect ratio above 40', '"wingSpan_m": 11.3', '"wingSpan_m": 26.1', '/geometry/wingSpan_m: aspect-ratio: '],
    ['an aspect ratio below 1', '"wingSpan_m": 11.3', '"wingSpan_m": 4.1', '/geometry/wingSpan_m: aspect-ratio: '],
    ['inertias of no body', '"Ixz_kgm2": 150', '"Ixz_kgm2": 4879', '/mass/Ixz_kgm2: inertia: '],
    ['an engine name twice', '"name": "right"', '"name": " left "', '/engines/1/name: unique: '],
    ['a configuration name twice', '"name": "approach"', '"name": "take-off"', '/configurations/1/name: unique: '],
    ['another version', 'sidewash.airframe/1', 'sidewash.airframe/2', '/format: one-of: '],
    ['an unknown member', '"mass_kg": 1750', '"colour": 1, "mass_kg": 1750', '/mass/colour: unknown-member: '],
    ['a prototype', '"mass_kg": 1750', '"__proto__": {}, "mass_kg": 1750', '/mass/__proto__: unknown-member: '],
    ['a number as text', '"mass_kg": 1750', '"mass_kg": "1750"', '/mass/mass_kg: type: '],
  ])('%s', async (name, from, to, where) => {
    expect((await refused(fileOf(`${name}.json`, twinWith(from, to)))).startsWith(where)).toBe(true);
  });

  it('an inertia at the very limit is refused, and taken just inside it', async () => {
    // Ixx·Izz = 3500·6800 = 23.8e6; √ = 4878.52
    await refused(fileOf('at.json', twinWith('"Ixz_kgm2": 150', '"Ixz_kgm2": -4878.53')));
    const inside = fileOf('in.json', twinWith('"Ixz_kgm2": 150', '"Ixz_kgm2": -4878.52'));
    const { code, err } = await sidewash('modes', inside, '--ias', '90kt', '--json');
    expect(err).not.toMatch(/inertia/u);
    expect([0, 2]).toContain(code);
  });

  it('a ninth engine', async () => {
    const document: { engines: object[] } = JSON.parse(text);
    document.engines = Array.from({ length: 9 }, (_, i) => ({ ...document.engines[0], name: `engine ${i}` }));
    expect(await refused(fileOf('nine.json', JSON.stringify(document)))).toMatch(/^\/engines: engine-count: /u);
  });
});

describe('names from files', () => {
  it('with control characters stay on their line, and one with a comma can be named', async () => {
    const odd = fileOf('odd.json', twinWith('"name": "right"', '"name": "right\\n\\u001b[31m, outer"'));
    const { out } = await sidewash('vmc', odd, '--failed', 'left');
    expect(out.split('\n')[0]).toContain('failed: left');
    const comma = fileOf('comma.json', twinWith('"name": "right"', '"name": "right, outer"'));
    expect(await sidewashJson('vmc', comma, '--failed', 'right, outer')).toMatchObject({ failed: 'right, outer' });
    expect(await sidewashJson('vmc', odd, '--failed', 'right\n\u001b[31m, outer')).toMatchObject({ belowStall: false });
    const { code, err } = await sidewash('vmc', odd, '--failed', 'third');
    expect(code).toBe(2);
    expect(err.trimEnd()).not.toMatch(/\p{Cc}/u);
  });
});

describe('conditions outside the data', () => {
  it('are said below the text, and on standard error beside JSON', async () => {
    const slow = await sidewash('modes', TWIN, '--ias', '40kt');
    expect(slow.out).toMatch(/Below the 1 g stall: level flight needs CL 3\.89/u);
    expect(slow.out).toMatch(/outside the rows \(0\.45 to 1\.45\)/u);
    const json = await sidewash('crosswind', TWIN, '--ias', '40kt', '--json');
    expect(json.err).toMatch(/^note: Below the 1 g stall/u);
    expect(JSON.parse(json.out)).toMatchObject({ outsideData: true });
    const fast = await sidewash('modes', TWIN, '--ias', '900kt', '--height', '60000ft');
    expect(fast.out).toMatch(/Mach 2\.85; the airspeed relations hold below 1/u);
    expect((await sidewash('modes', TWIN, '--ias', '90kt')).out).not.toMatch(/outside the data/iu);
  });
});

describe('a reader that stops early', () => {
  it('ends the command without a stack trace', () => {
    const { status, stderr } = spawnSync(
      'sh',
      ['-c', `"${process.execPath}" server/cli/sidewash.mjs check --json | head -c 10`],
      { encoding: 'utf8' },
    );
    expect(status).toBe(0);
    expect(stderr).toBe('');
  });
});
