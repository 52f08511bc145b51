import { readdirSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { createReferencePilot, flyRun, handsOff } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { Run } from '#shared/scenario/run-types.ts';
import { DEG } from '#shared/units/constants.ts';
import { airframeOf, fly, shippedScenario } from './support/build-scenario.ts';

const slugs = readdirSync(new URL('../../../scenarios/', import.meta.url))
  .filter((name) => name.endsWith('.json'))
  .map((name) => name.slice(0, -5));
const FIRST_SIX = [
  'left-engine-cut-after-lift-off',
  'right-engine-cut-after-lift-off',
  'engine-cut-in-the-climb',
  'twin-jet-cut-at-low-speed',
  'twin-jet-cut-at-high-speed',
  'crosswind-gust-on-final',
];

function start(slug: string): Run {
  const scenario = shippedScenario(slug);
  return createRun({ scenario, airframe: airframeOf(scenario.airframe.slug), seed: scenario.seed });
}

describe('the first six scenarios', () => {
  it.each(FIRST_SIX)('%s: failed hands off, met by the reference pilot after 1 s', (slug) => {
    expect(flyRun(start(slug), handsOff()).passed()).toBe(false);
    const run = start(slug);
    flyRun(run, createReferencePilot(run, 1));
    expect(
      run.results().filter(({ required, verdict }) => required && verdict !== 'met' && verdict !== 'near'),
    ).toEqual([]);
    expect(run.passed()).toBe(true);
  });
  it.each(FIRST_SIX)('%s says what it is for', (slug) => {
    const { purpose, talkingPoint, summary, criteria } = shippedScenario(slug);
    for (const text of [purpose, talkingPoint, summary]) expect(text.length).toBeGreaterThan(20);
    expect(criteria.length).toBeGreaterThan(1);
  });
});

it.each(slugs.filter((slug) => shippedScenario(slug).events.some(({ kind }) => kind === 'engine-failure')))(
  '%s: a reference pilot of 1 s never reaches fin stall (flight model, section 5)',
  (slug) => {
    const run = start(slug);
    let stalled = 0;
    flyRun(run, createReferencePilot(run, 1), Infinity, ({ now }) => {
      if (now.finStalled) stalled++;
    });
    expect(stalled).toBe(0);
  },
);

describe('the left engine cut after lift-off', () => {
  it('hands off yaws left, then rolls left, and spirals', () => {
    const run = start('left-engine-cut-after-lift-off');
    const first: Record<string, number> = {};
    flyRun(run, handsOff(), Infinity, ({ now, timeS }) => {
      const cut = run.fired[0]?.timeS;
      if (cut === undefined) return;
      if (now.rRadS < -2 * DEG) first.yaw ??= timeS - cut;
      if (now.phiRad < -5 * DEG) first.bank ??= timeS - cut;
      if (now.phiRad < -60 * DEG) first.spiral ??= timeS - cut;
    });
    expect(first.yaw).toBeLessThan(first.bank);
    expect(first.bank).toBeLessThan(first.spiral);
    expect(run.now.psiRad).toBeLessThan(60 * DEG); // started at 90°, turned left
  });

  it.each([
    [1, 0.45],
    [1, 0.6],
    [1.5, 0.5],
  ])('is met by a key: %s s after the cut right pedal of %s held, the wings kept level', (delay, pedal) => {
    const run = start('left-engine-cut-after-lift-off');
    fly(run, Infinity, (sample) => {
      const cut = run.fired[0]?.timeS;
      const acts = cut !== undefined && run.timeS >= cut + delay;
      sample.pedal = acts ? Math.round(pedal * 32767) : 0;
      // A stick key held while the wing is low, as a person would.
      const { phiRad } = run.now;
      sample.stick = acts && phiRad < -3 * DEG ? 10000 : acts && phiRad > 6 * DEG ? -8000 : 0;
    });
    expect(
      run
        .results()
        .map(({ id, verdict }) => `${id} ${verdict}`)
        .filter((line) => line.endsWith('not-met')),
    ).toEqual([]);
    expect(run.passed()).toBe(true);
  });

  it('left pedal makes it worse and is counted as wrong', () => {
    const run = fly(start('left-engine-cut-after-lift-off'), Infinity, (sample, tick) => {
      sample.pedal = tick > 500 ? -16384 : 0;
    });
    expect(run.passed()).toBe(false);
    expect(run.results().find(({ id }) => id === 'react')).toMatchObject({ value: null, verdict: 'not-met' });
  });
});
