import { execFileSync } from 'node:child_process';
import { accessSync, constants, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { sidewash, sidewashJson } from './run-command.ts';

const TWIN = 'scenarios/airframes/light-twin.json';
const JET = 'scenarios/airframes/twin-jet.json';
const TRAINER = 'scenarios/airframes/single-trainer.json';
const CAUTION =
  'Not an approved training device, not for operational use. The approved flight manual and licensed instruction govern.';

const folder = mkdtempSync(path.join(tmpdir(), 'sidewash-cli-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** A file with the twin changed at one place. */
function changedTwin(name: string, change: (document: Record<string, never>) => unknown): string {
  const document: Record<string, never> = JSON.parse(readFileSync(TWIN, 'utf8'));
  change(document);
  const file = path.join(folder, name);
  writeFileSync(file, JSON.stringify(document));
  return file;
}

describe('sidewash modes', () => {
  it('gives exactly the members of the contract', async () => {
    const result = await sidewashJson('modes', TWIN, '--ias', '90kt', '--height', '0ft');
    expect(Object.keys(result)).toEqual(['speed_mps', 'height_m', 'CL', 'modes', 'criteria']);
    expect(result.speed_mps).toBeCloseTo(46.3, 3);
    expect(result.height_m).toBe(0);
    expect(result.modes).toEqual([
      {
        kind: 'dutch-roll',
        real_per_s: expect.any(Number),
        imag_per_s: expect.any(Number),
        wn_rad_s: expect.any(Number),
        zeta: expect.any(Number),
        period_s: expect.any(Number),
        halve_s: expect.any(Number),
      },
      {
        kind: 'roll',
        real_per_s: expect.any(Number),
        imag_per_s: 0,
        tau_s: expect.any(Number),
        halve_s: expect.any(Number),
      },
      {
        kind: 'spiral',
        real_per_s: expect.any(Number),
        imag_per_s: 0,
        tau_s: expect.any(Number),
        double_s: expect.any(Number),
      },
    ]);
    const criteria = result.criteria as { id: string }[]; // the shape the next line checks
    expect(criteria.map((criterion) => criterion.id)).toEqual([
      'dutch-damping',
      'dutch-frequency',
      'roll-mode',
      'spiral',
      'coupled-roll-spiral',
      'time-to-bank',
      'roll-oscillation',
      'sideslip-approach',
      '25.181',
      '23.181',
    ]);
    for (const criterion of criteria)
      expect(Object.keys(criterion)).toEqual(expect.arrayContaining(['id', 'level', 'value', 'limit', 'source']));
  });

  it('takes true airspeed with --speed and calibrated with --ias', async () => {
    const high = ['--height', '10000ft'];
    const tas = await sidewashJson('modes', JET, '--speed', '288.70kt', ...high);
    const cas = await sidewashJson('modes', JET, '--ias', '250kt', ...high);
    // 250 kt CAS at 10,000 ft is 288.70 kt TAS (computed, reference page).
    expect(cas.speed_mps).toBeCloseTo(Number(tas.speed_mps), 1);
    expect(await sidewashJson('modes', JET, '--speed=150m/s')).toMatchObject({ speed_mps: 150, height_m: 0 });
  });

  it('adds the washout with --yaw-damper and shifts limits with --category and --class', async () => {
    const damped = await sidewashJson('modes', JET, '--ias', '141kt', '--yaw-damper');
    expect(damped.modes).toHaveLength(4);
    const limitOf = async (...more: string[]) => {
      const { criteria } = await sidewashJson('modes', TWIN, '--ias', '90kt', ...more);
      return (criteria as { id: string; limit: number }[]).find((c) => c.id === 'roll-mode')?.limit; // contract above
    };
    expect(await limitOf()).toBe(1);
    expect(await limitOf('--category', 'B')).toBe(1.4);
    expect(await limitOf('--class', 'III')).toBe(1.4);
  });

  it('prints text for people with the caution last', async () => {
    const { code, out } = await sidewash('modes', TWIN, '--ias', '90kt', '--height', '0ft');
    expect(code).toBe(0);
    expect(out).toContain('Dutch roll');
    expect(out).toContain('90.0 kt calibrated');
    expect(out.trimEnd().endsWith(CAUTION)).toBe(true);
  });
});

describe('sidewash vmc', () => {
  it('gives exactly the members of the contract, for the critical engine', async () => {
    const result = await sidewashJson('vmc', TWIN, '--height', '0ft');
    expect(Object.keys(result)).toEqual([
      'vmc_kt',
      'vmc_tas_kt',
      'failed',
      'limitedBy',
      'bank_deg',
      'beta_deg',
      'aileron_deg',
      'rudder_deg',
      'zeroSideslipBank_deg',
      'stall_kt',
      'belowStall',
    ]);
    // Flight model §9, independent implementation: 66.3 kt at 5°, stall 60.5 kt, ±3 % or 0.3 kt.
    expect(Number(result.vmc_kt)).toBeGreaterThan(66);
    expect(Number(result.vmc_kt)).toBeLessThan(66.6);
    expect(result).toMatchObject({ failed: 'left', limitedBy: 'rudder travel', belowStall: false });
    expect(Number(result.bank_deg)).toBeCloseTo(5, 6);
    expect(Number(result.rudder_deg)).toBeCloseTo(-25, 4);
  });

  it('holds a bank exactly, up to a limit, at part lever, feathered and with named engines', async () => {
    const speed = async (...more: string[]) => Number((await sidewashJson('vmc', TWIN, ...more)).vmc_kt);
    expect(await speed('--bank', '0')).toBeCloseTo(75.8, 0);
    expect(await speed('--bank', '5deg')).toBeCloseTo(await speed('--bank-limit', '5'), 6);
    expect(await speed('--lever', '0.7')).toBeLessThan(await speed());
    expect(await speed('--feathered')).toBeLessThan(await speed());
    expect(await speed('--failed', 'right')).toBeLessThan(await speed('--failed', 'left'));
    const two = await sidewashJson('vmc', 'scenarios/airframes/four-jet.json', '--failed', 'left outer,left inner');
    expect(two.failed).toBe('left outer,left inner');
  });

  it('says null with a reason when there is none', async () => {
    expect(await sidewashJson('vmc', TRAINER, '--height', '0ft')).toMatchObject({
      vmc_kt: null,
      reason: 'no-engine-moment',
    });
  });
});

describe('sidewash crosswind', () => {
  it('gives exactly the members of the contract', async () => {
    const result = await sidewashJson('crosswind', TWIN, '--speed', '70kt', '--height', '0ft');
    expect(Object.keys(result)).toEqual([
      'crosswind_kt',
      'crosswindWithinData_kt',
      'limitedBy',
      'outsideData',
      'beta_deg',
      'bank_deg',
      'aileron_deg',
      'rudder_deg',
    ]);
    expect(Number(result.crosswindWithinData_kt)).toBeCloseTo(70 * Math.sin(Math.PI / 12), 6);
    for (const member of ['beta_deg', 'bank_deg', 'aileron_deg', 'rudder_deg'])
      expect(Number(result[member])).toBeGreaterThan(0);
  });
});

describe('sidewash check', () => {
  it('shows value beside value and agrees everywhere', async () => {
    const { code, out } = await sidewash('check');
    expect(code).toBe(0);
    expect(out).toMatch(/(\d+) of \1 agree\./u);
    expect(out).toContain(CAUTION);
    const { checks, agreed, total } = await sidewashJson('check');
    expect(agreed).toBe(total);
    expect(checks).toHaveLength(Number(total));
  });
});

describe('wrong input', () => {
  it.each([
    [
      'a missing file',
      ['modes', 'nothing.json', '--ias', '90kt'],
      /^sidewash: nothing\.json: cannot be read \(no such file\)$/u,
    ],
    ['a folder', ['modes', 'scenarios', '--ias', '90kt'], /scenarios: cannot be read \(it is a folder\)/u],
    ['no JSON', ['modes', 'tests/unit/cli/README.md', '--ias', '90kt'], /README\.md: not valid JSON/u],
    ['another format', ['vmc', 'package.json'], /package\.json: \/format: /u],
    ['no speed', ['modes', TWIN], /--speed or --ias: missing/u],
    ['both speeds', ['modes', TWIN, '--ias', '90kt', '--speed', '90kt'], /--speed and --ias: give one/u],
    ['a wrong unit', ['modes', TWIN, '--ias', '90ft'], /--ias: .*"ft" is not one of kt/u],
    ['a negative speed', ['crosswind', TWIN, '--speed', '-5kt'], /--speed: -5kt is not a speed/u],
    ['an absurd height', ['vmc', TWIN, '--height', '900000ft'], /--height: 900000ft is outside/u],
    [
      'an unknown configuration',
      ['vmc', TWIN, '--configuration', 'gliding'],
      /light-twin\.json: configuration: unknown-configuration: .*take-off, approach/u,
    ],
    ['an unknown engine', ['vmc', TWIN, '--failed', 'middle'], /--failed: "middle" is no engine .*left, right/u],
    ['an engine twice', ['vmc', TWIN, '--failed', 'left,left'], /--failed: an engine is named twice/u],
    ['both banks', ['vmc', TWIN, '--bank', '5', '--bank-limit', '5'], /--bank and --bank-limit: give one/u],
    ['a lever beyond 1', ['vmc', TWIN, '--lever', '1.5'], /--lever: "1\.5" is not a number from 0 to 1/u],
    ['an unknown option', ['vmc', TWIN, '--hieght', '0ft'], /--hieght: no such option/u],
    ['an option without a value', ['vmc', TWIN, '--height'], /--height: a value is missing/u],
    ['an option twice', ['vmc', TWIN, '--height', '0ft', '--height', '1ft'], /--height: given twice/u],
    ['a flag with a value', ['vmc', TWIN, '--json=yes'], /--json: takes no value/u],
    ['no file', ['vmc'], /AIRFRAME\.json: missing/u],
    ['two files', ['vmc', TWIN, JET], /one argument too many/u],
    ['an unknown command', ['fly'], /fly: no such command; there are modes, vmc/u],
    [
      'an unknown category',
      ['modes', TWIN, '--ias', '90kt', '--category', 'D'],
      /--category: "D" is not one of A, B, C/u,
    ],
    ['a damper that is not there', ['modes', TWIN, '--ias', '90kt', '--yaw-damper'], /light-twin\.json: yawDamper: /u],
  ] as const)('%s: exit code 2, one line, no stack trace', async (_what, argv, line) => {
    const { code, out, err } = await sidewash(...argv);
    expect(code).toBe(2);
    expect(out).toBe('');
    expect(err.trimEnd()).toMatch(line);
    expect(err.trimEnd()).not.toContain('\n');
    expect(err).not.toMatch(/\n\s+at /u);
  });

  it('names the field and the rule of a broken airframe', async () => {
    const file = changedTwin('broken.json', (document) => Object.assign(document.mass, { Ixz_kgm2: 90_000 }));
    const { code, err } = await sidewash('modes', file, '--ias', '90kt');
    expect(code).toBe(2);
    expect(err).toContain(`${file}: /mass/Ixz_kgm2: inertia: `);
  });

  it('warns on standard error about a remarkable airframe and goes on', async () => {
    const file = changedTwin('remarkable.json', (document) => Object.assign(document.mass, { Iyy_kgm2: undefined }));
    const { code, out, err } = await sidewash('vmc', file, '--height', '0ft');
    expect(code).toBe(0);
    expect(err).toContain('warning: ');
    expect(out).toContain('Minimum control speed');
  });
});

describe('the command itself', () => {
  it('lists every command with its usage', async () => {
    const { code, out } = await sidewash('--help');
    expect(code).toBe(0);
    for (const name of ['modes', 'vmc', 'crosswind', 'run', 'budget', 'check']) expect(out).toContain(`  ${name} `);
    expect((await sidewash()).code).toBe(2);
  });

  it('runs from the sources through its executable, as npx starts it', () => {
    const { bin }: { bin: Record<string, string> } = JSON.parse(readFileSync('package.json', 'utf8'));
    accessSync(bin.sidewash, constants.X_OK);
    const out = execFileSync(process.execPath, [bin.sidewash, 'vmc', TWIN, '--height', '0ft', '--json'], {
      encoding: 'utf8',
    });
    expect(JSON.parse(out)).toMatchObject({ failed: 'left' });
  });
});
