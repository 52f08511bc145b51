import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { sidewash, sidewashJson } from './run-command.ts';

const CUT = 'scenarios/left-engine-cut-after-lift-off.json';
const CAUTION =
  'Not an approved training device, not for operational use. The approved flight manual and licensed instruction govern.';

const folder = mkdtempSync(path.join(tmpdir(), 'sidewash-cli-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** A file with the scenario changed at one place. */
function changed(name: string, change: (document: Record<string, never>) => unknown): string {
  const document: Record<string, never> = JSON.parse(readFileSync(CUT, 'utf8'));
  change(document);
  const file = path.join(folder, name);
  writeFileSync(file, JSON.stringify(document));
  return file;
}

describe('sidewash run', () => {
  it('gives exactly the members of the contract, hands off by default', async () => {
    const result = await sidewashJson('run', CUT);
    expect(Object.keys(result)).toEqual(['ended', 'duration_s', 'criteria', 'extremes', 'warnings']);
    const criteria = result.criteria as Record<string, unknown>[]; // checked by the next line
    for (const criterion of criteria)
      expect(Object.keys(criterion)).toEqual(
        expect.arrayContaining(['id', 'value', 'limit', 'margin', 'at_s', 'verdict']),
      );
    expect(Object.keys(result.extremes ?? {})).toEqual([
      'bank_deg',
      'sideslip_deg',
      'yaw_rate_deg_s',
      'roll_rate_deg_s',
      'heading_deg',
      'rudder_deg',
      'aileron_deg',
      'height_loss_ft',
      'ias_min_kt',
    ]);
    expect(criteria.find(({ id }) => id === 'react')).toMatchObject({ value: null, verdict: 'not-met' });
    expect(await sidewashJson('run', CUT, '--pilot', 'hands-off')).toEqual(result);
  });

  it('flies the reference pilot with --delay, and a later one turns further', async () => {
    const heading = async (...more: string[]) => {
      const { extremes } = await sidewashJson('run', CUT, ...more);
      return (extremes as { heading_deg: number }).heading_deg; // the contract above
    };
    const prompt = await heading('--pilot', 'reference');
    expect(await heading('--delay', '1.0s')).toBe(prompt);
    expect(await heading('--delay', '1.5s')).toBeGreaterThan(prompt + 0.5);
    expect(await heading()).toBeGreaterThan(60);
    const { code, out } = await sidewash('run', CUT, '--pilot', 'reference');
    expect(code).toBe(0);
    expect(out).toContain('All required criteria met.');
    expect(out).toContain('its revision (1 is wanted) is not checked');
    expect(out.trimEnd().endsWith(CAUTION)).toBe(true);
  });

  it('writes a row per 1/20 s that agrees with the extremes, the heading unwrapped from the start', async () => {
    const file = path.join(folder, 'run.csv');
    const { extremes, duration_s } = await sidewashJson('run', CUT, '--csv', file);
    const [header, ...lines] = readFileSync(file, 'utf8').trimEnd().split('\n');
    expect(header).toBe(
      'time_s,beta_deg,p_deg_s,r_deg_s,phi_deg,theta_deg,psi_deg,tas_mps,ias_kt,north_m,east_m,height_m,aileron_deg,rudder_deg,slip_ball,thrust_N_left,thrust_N_right',
    );
    const rows = lines.map((line) => line.split(',').map(Number));
    expect(rows.every((row) => row.length === 17 && row.every(Number.isFinite))).toBe(true);
    rows.forEach(([time], i) => expect(time).toBeCloseTo(i / 20, 9));
    expect(rows).toHaveLength(Math.floor(20 * Number(duration_s) + 1e-9) + 1);
    const column = (name: string) => rows.map((row) => row[header.split(',').indexOf(name)]);
    expect(column('psi_deg')[0]).toBe(0);
    const most = (name: string) => Math.max(...column(name).map(Math.abs));
    const seen = extremes as { bank_deg: number; heading_deg: number }; // the contract above
    // A tick between two rows may go a little further than either.
    expect(most('phi_deg')).toBeGreaterThan(seen.bank_deg - 5);
    expect(most('phi_deg')).toBeLessThanOrEqual(seen.bank_deg + 1e-6);
    expect(most('psi_deg')).toBeLessThanOrEqual(seen.heading_deg + 1e-6);
    expect(most('psi_deg')).toBeGreaterThan(seen.heading_deg - 5);
    expect(column('thrust_N_left').at(-1)).toBeLessThan(1);
  });

  it('takes any airframe that has what the scenario names, and says which', async () => {
    const { warnings } = await sidewashJson('run', CUT, '--airframe', 'scenarios/airframes/twin-jet.json');
    expect(JSON.stringify(warnings)).toContain('twin-jet.json');
    const { code, err } = await sidewash('run', CUT, '--airframe', 'scenarios/airframes/single-trainer.json');
    expect(code).toBe(2);
    expect(err).toMatch(/: \/configuration: known-configuration: /u);
  });
});

describe('sidewash budget', () => {
  it('gives exactly the members of the contract, and a run at either side of it agrees', async () => {
    const result = await sidewashJson('budget', CUT);
    expect(Object.keys(result)).toEqual(['budget_s', 'binding', 'intervals_s', 'resolution_s']);
    const budget = Number(result.budget_s);
    const met = async (delayS: number) => {
      const { criteria } = await sidewashJson('run', CUT, '--delay', `${delayS}s`);
      const failed = (criteria as { id: string; verdict: string }[]).filter(({ verdict }) => verdict === 'not-met');
      return failed.filter(({ id }) => id !== 'react').map(({ id }) => id);
    };
    expect(await met(budget - 0.02)).toEqual([]);
    expect(await met(budget + 0.04)).toContain(result.binding);
  });

  it('is null with a reason where nothing can fail or nothing can help', async () => {
    const none = await sidewashJson(
      'budget',
      changed('none.json', (d) => Object.assign(d, { criteria: [] })),
    );
    expect(none).toMatchObject({ budget_s: null, reason: 'met-hands-off' });
    const strict = changed('strict.json', (document) => {
      const criteria: { measure: string; limit: { max: number } }[] = document.criteria;
      for (const { measure, limit } of criteria) if (measure === 'heading-deviation') limit.max = 0.001;
    });
    expect(await sidewashJson('budget', strict)).toMatchObject({ budget_s: null, reason: 'not-met-at-0' });
  });
});

describe('a bad scenario', () => {
  it.each([
    ['another version', { format: 'sidewash.scenario/9' }, '/format: format-version: '],
    ['an unknown member', { weather: 'fine' }, '/weather: unknown-member: '],
    ['a slug that leaves the folder', { airframe: { slug: '../../package', revision: 1 } }, '/airframe/slug: format: '],
    ['a slug without a file', { airframe: { slug: 'nothing', revision: 1 } }, '/airframe/slug: known-airframe: '],
    ['an endless run', { duration_s: 1e9 }, '/duration_s: maximum: '],
    ['a configuration that is not there', { configuration: 'glide' }, '/configuration: known-configuration: '],
    ['no start speed', { start: { height_ft: 300 } }, '/start/ias_kt: required: '],
    [
      'a cycle',
      { events: [{ id: 'a', lane: 'notes', kind: 'marker', text: 'x', at: { after: 'a', delay_s: 1 } }], criteria: [] },
      '/events/0/at: cycle: ',
    ],
  ])('%s: exit code 2, one line with file, field and rule, from run and budget', async (what, change, where) => {
    const file = changed(`${what}.json`, (document) => Object.assign(document, change));
    for (const command of ['run', 'budget']) {
      const { code, out, err } = await sidewash(command, file, '--json');
      expect(code).toBe(2);
      expect(out).toBe('');
      expect(err.startsWith(`sidewash: ${file}: ${where}`), err).toBe(true);
      expect(err.trimEnd()).not.toContain('\n');
    }
  });

  it.each([
    [['--delay', '-1s'], /--delay: -1s is outside/u],
    [['--delay', '1s', '--pilot', 'hands-off'], /--delay: hands off has no delay/u],
    [['--pilot', 'human'], /--pilot: "human" is not one of hands-off, reference/u],
    [['--csv', path.join(folder, 'no', 'such', 'folder.csv')], /--csv: .*cannot be written \(ENOENT\)/u],
  ])('%s is refused', async (more, line) => {
    const { code, err } = await sidewash('run', CUT, ...more);
    expect(code).toBe(2);
    expect(err.trimEnd()).toMatch(line);
  });
});
