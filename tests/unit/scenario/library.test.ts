/** The shipped library: what each scenario intends happens, with the pilot it is meant for. */
import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { createReferencePilot, flyRun, handsOff } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { Run } from '#shared/scenario/run-types.ts';
import { DEG } from '#shared/units/constants.ts';
import { airframeOf, fly, shippedScenario } from './support/build-scenario.ts';

const folder = new URL('../../../scenarios/', import.meta.url);
const slugs = readdirSync(folder)
  .filter((name) => name.endsWith('.json'))
  .map((name) => name.slice(0, -5));

/** Shown rather than solved: what they show is asserted below, each by name. */
const DEMONSTRATIONS = [
  'adverse-yaw-in-a-roll',
  'decelerating-below-minimum-control-speed',
  'dorsal-fin-against-the-gust',
  'fin-stall-by-gust',
  'recovery-below-minimum-control-speed',
  'rudder-hardover',
  'rudder-jam-in-crosswind',
  'steady-sideslip-and-release',
];
/** Solved by hands that the reference pilot does not have: levers and pitch. */
const SOLVED = slugs.filter((slug) => !DEMONSTRATIONS.includes(slug));

function start(slug: string): Run {
  const scenario = shippedScenario(slug);
  return createRun({ scenario, airframe: airframeOf(scenario.airframe.slug), seed: scenario.seed });
}
function flown(slug: string, delayS: number | null, onTick?: (run: Run) => void): Run {
  const run = start(slug);
  return flyRun(run, delayS === null ? handsOff() : createReferencePilot(run, delayS), Infinity, onTick);
}

describe('the library', () => {
  it('has at least twenty scenarios on all five airframes, each with purpose, talking point and criteria', () => {
    expect(slugs.length).toBeGreaterThanOrEqual(20);
    const airframes = new Set(slugs.map((slug) => shippedScenario(slug).airframe.slug));
    expect(airframes.size).toBe(5);
    for (const slug of slugs) {
      const { title, summary, purpose, talkingPoint, criteria } = shippedScenario(slug);
      for (const text of [summary, purpose, talkingPoint]) expect(text.length, slug).toBeGreaterThan(20);
      expect(title.length, slug).toBeLessThan(60);
      expect(criteria.length, slug).toBeGreaterThan(0);
    }
  });

  it.each(SOLVED)('%s: failed hands off, met by the reference pilot after 1 s', (slug) => {
    expect(flown(slug, null).passed()).toBe(false);
    const run = flown(slug, 1);
    const open = run.results().filter(({ required, verdict }) => required && verdict !== 'met' && verdict !== 'near');
    expect(open.map(({ id, verdict, value }) => `${id} ${verdict} ${value}`)).toEqual([]);
    expect(run.passed()).toBe(true);
  });

  it.each(SOLVED)('%s: met with other draws too', (slug) => {
    const scenario = shippedScenario(slug);
    for (const seed of [101, 102, 103]) {
      const run = createRun({ scenario, airframe: airframeOf(scenario.airframe.slug), seed });
      flyRun(run, createReferencePilot(run, 1));
      expect(run.passed(), `seed ${seed}`).toBe(true);
    }
  });

  it('shows every fact of the table in its README', () => {
    const readme = readFileSync(new URL('README.md', folder), 'utf8');
    const rows = [...readme.matchAll(/^\| ([^|]+) \| `([a-z0-9-]+)`/gm)].map(([, fact, slug]) => ({ fact, slug }));
    expect(rows.length).toBeGreaterThanOrEqual(14);
    for (const { fact, slug } of rows) expect(slugs, fact).toContain(slug);
  });
});

describe('what is shown', () => {
  it('right stick alone: the nose goes left first, then right', () => {
    const after: number[] = [];
    flown('adverse-yaw-in-a-roll', null, ({ now, timeS }) => {
      if (timeS > 2) after.push(now.psiRad);
    });
    expect(Math.min(...after) / DEG).toBeLessThan(-1);
    expect((after.at(-1) ?? 0) / DEG).toBeGreaterThan(5);
  });

  it('one knot a second on one engine: the heading is held until below the minimum control speed, and lost after it', () => {
    let below = false;
    let saturated = 0;
    const run = flown('decelerating-below-minimum-control-speed', 1, ({ now, fired }) => {
      below ||= fired.some(({ id }) => id === 'below');
      if (below && now.rudderSaturated) saturated += 1;
    });
    expect(below).toBe(true);
    expect(saturated).toBeGreaterThan(120);
    const verdicts = Object.fromEntries(run.results().map(({ id, verdict }) => [id, verdict]));
    expect(verdicts).toMatchObject({ heading: 'met', hold: 'not-met' });
  });

  it('lever back and nose down bring it back, full power does not', () => {
    const run = start('recovery-below-minimum-control-speed');
    const pilot = createReferencePilot(run, 1);
    let below = Number.POSITIVE_INFINITY;
    fly(run, Infinity, (sample) => {
      pilot.sampleInto(sample);
      if (run.fired.some(({ id }) => id === 'below')) below = Math.min(below, run.timeS);
      const since = run.timeS - below;
      if (since < 1) return;
      // Lever back and stick forward until there is speed again, then power.
      sample.levers[1] = since < 10 ? 9000 : 32767;
      sample.pitch = since < 4 ? -16000 : 0;
    });
    const open = run.results().filter(({ required, verdict }) => required && verdict !== 'met' && verdict !== 'near');
    expect(open.map(({ id, value }) => `${id} ${value}`)).toEqual([]);
    expect(flown('recovery-below-minimum-control-speed', 1).passed()).toBe(false);
  });

  it('the gust stalls the plain fin and not the one with a dorsal fin', () => {
    const stalled = (slug: string): number => {
      let ticks = 0;
      flown(slug, null, ({ now }) => {
        if (now.finStalled) ticks += 1;
      });
      return ticks;
    };
    expect(stalled('fin-stall-by-gust')).toBeGreaterThan(12);
    expect(stalled('dorsal-fin-against-the-gust')).toBe(0);
  });

  it('a held pedal holds a sideslip, and letting go brings the nose back', () => {
    const beta: { t: number; deg: number }[] = [];
    flown(
      'steady-sideslip-and-release',
      null,
      ({ now, timeS }) => void beta.push({ t: timeS, deg: now.betaRad / DEG }),
    );
    const between = (from: number, to: number) => beta.filter(({ t }) => t > from && t < to).map(({ deg }) => deg);
    const held = between(7, 11);
    // Left pedal: the wind comes from the right of the nose, steadily.
    expect(Math.min(...held)).toBeGreaterThan(7);
    expect(Math.max(...held) - Math.min(...held)).toBeLessThan(2.5);
    expect(Math.max(...between(15, 18).map(Math.abs))).toBeLessThan(3);
  });

  it('a rudder hard over is not held by anybody within the data, and the run says so', () => {
    const run = flown('rudder-hardover', 1);
    expect(run.warnings.join(' ')).toMatch(/outside the data/i);
    expect(Math.abs(flown('rudder-hardover', null).now.phiRad) / DEG).toBeGreaterThan(60);
  });

  it('a jammed rudder leaves the line to the aileron', () => {
    const offset = (run: Run) => run.results().find(({ id }) => id === 'offset')?.verdict;
    expect(offset(flown('rudder-jam-in-crosswind', null))).toBe('not-met');
    expect(offset(flown('rudder-jam-in-crosswind', 1))).toBe('met');
  });

  it('the turn is co-ordinated: the reference pilot slips less than 4° on the way in and less than 1° settled', () => {
    const beta: number[] = [];
    flown('co-ordinated-turn', 1, ({ now }) => void beta.push(Math.abs(now.betaRad) / DEG));
    expect(Math.max(...beta)).toBeLessThan(4);
    expect(Math.max(...beta.slice(10 * 120))).toBeLessThan(1);
  });
});
