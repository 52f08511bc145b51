import { describe, expect, it } from 'vitest';
import { scenarioDifferences } from '#shared/scenario/differences.ts';
import { cutLeft, scenarioOf, shippedScenario } from './support/build-scenario.ts';

const gust = {
  id: 'gust',
  lane: 'air',
  kind: 'gust',
  axis: 'lateral',
  shape: 'one-minus-cosine',
  from: 'right',
  peak_kt: 12,
  gradientDistance_m: 60,
  at: { time_s: 4 },
} as const;
const heading = {
  id: 'h',
  title: 'Heading',
  measure: 'heading-deviation',
  limit: { max: 20, unit: 'deg' },
} as const;

describe('differences of two scenarios', () => {
  it('are none between a scenario and itself', () => {
    const scenario = shippedScenario('crosswind-landing-with-de-crab');
    expect(scenarioDifferences(scenario, structuredClone(scenario))).toEqual([]);
  });

  it('say what changed, from what to what, in its unit', () => {
    const before = scenarioOf({ events: [cutLeft, gust], criteria: [heading] });
    const after = scenarioOf({
      start: { ias_kt: 95, height_ft: 2000, levers: [1, 1] },
      events: [
        { ...cutLeft, at: { time_s: 3 } },
        { ...gust, peak_kt: 15, vary: { peak_kt: [12, 18] } },
      ],
      criteria: [{ ...heading, limit: { max: 15, unit: 'deg' }, required: false }],
    });
    const texts = scenarioDifferences(before, after).map(({ part, text }) => `${part}: ${text}`);
    expect(texts).toContain('Start: speed 100 → 95 kt');
    expect(texts.find((text) => text.includes('fails'))).toMatch(/1 s → .*3 s/);
    expect(texts.find((text) => text.includes('ust'))).toContain('peak 12 → 15 kt');
    expect(texts.find((text) => text.includes('ust'))).toContain('peak drawn from 12 to 18 kt');
    expect(texts.find((text) => text.startsWith('Criteria'))).toMatch(/at most 20 deg → at most 15 deg.*wished/);
    expect(texts).toHaveLength(4);
  });

  it('name what was added, removed and put in another order', () => {
    const marker = { id: 'm', lane: 'notes', kind: 'marker', text: 'Look', at: { time_s: 2 } } as const;
    const one = scenarioOf({ events: [cutLeft, gust] });
    const other = scenarioOf({ events: [gust, cutLeft, marker] });
    const there = scenarioDifferences(one, other).map(({ text }) => text);
    expect(there.some((text) => text.endsWith(': added'))).toBe(true);
    expect(there).toContain('order changed');
    expect(scenarioDifferences(other, one).some(({ text, id }) => text.endsWith(': removed') && id === 'm')).toBe(true);
  });
});
