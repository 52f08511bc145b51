import { describe, expect, it } from 'vitest';
import type { AttemptDetail } from '#shared/contracts/attempts.ts';
import { whenWords } from '../../../src/views/date-words.ts';
import { measureWords, valueWords } from '../../../src/views/measure-words.ts';
import { flownState } from '../../../src/views/my-flights/flown-state.ts';
import { leastMargins } from '../../../src/views/my-flights/least-margins.ts';
import { pedalChart } from '../../../src/views/my-flights/pedal-chart.ts';
import { bestPedalS, pedalSeries } from '../../../src/views/my-flights/pedal-series.ts';

type Criterion = NonNullable<AttemptDetail['result']>['criteria'][number];

function criterion(measure: string, value: number | null, max: number, more: Partial<Criterion> = {}): Criterion {
  const margin = value === null ? null : max - value;
  return {
    id: measure,
    title: measure,
    measure,
    required: true,
    value,
    limit: { max, unit: measure === 'first-correct-pedal' ? 's' : 'deg' },
    margin,
    atS: null,
    verdict: margin === null || margin < 0 ? 'not-met' : 'met',
    ...more,
  };
}

/** Only what the figures read; the rest of the answer plays no part here. */
function attempt(startedAt: string, criteria: Criterion[], title = 'Cut'): AttemptDetail {
  const detail: Partial<AttemptDetail> = {
    id: startedAt,
    scenarioTitle: title,
    number: 1,
    startedAt,
    result: {
      ended: 'completed',
      durationS: 30,
      criteria,
      passed: false,
      stateHash: '0'.repeat(16),
      statesAgree: true,
      firstDifferenceTick: null,
      rewinds: 0,
      modelVersion: '1',
      computedAt: startedAt,
    },
  };
  return detail as AttemptDetail; // a full answer would need a whole scenario and airframe
}

describe('first correct pedal over the attempts', () => {
  const series = pedalSeries([
    attempt('2026-06-03', [criterion('first-correct-pedal', 1.4, 1.6)]),
    attempt('2026-06-01', [criterion('first-correct-pedal', null, 1.6)]),
    attempt('2026-06-02', [criterion('sideslip', 4, 10)]),
    attempt('2026-06-04', [criterion('first-correct-pedal', 2, 1.6, { verdict: 'not-reached' })]),
    attempt('2026-06-05', [criterion('first-correct-pedal', 1.1, 2.4)], 'Other'),
  ]);

  it('keeps those that were judged by it, oldest first', () => {
    expect(series.map((each) => each.valueS)).toEqual([null, 1.4, 1.1]);
    expect(series.map((each) => each.met)).toEqual([false, true, true]);
  });

  it('takes the best of the same scenario only', () => {
    expect(bestPedalS(series, 'Cut')).toBe(1.4);
    expect(bestPedalS(series, 'Never flown')).toBeNull();
  });

  it('draws later higher, hatches above each limit and puts "never" on the upper edge', () => {
    const chart = pedalChart(series, 386, 264);
    expect(chart.points[0]).toMatchObject({ y: chart.top, never: true });
    expect(chart.points[1]!.y).toBeLessThan(chart.points[2]!.y);
    expect(chart.points[1]!.y).toBeGreaterThan(chart.columns[1]!.limitY!);
    expect(chart.columns[2]!.limitY!).toBeLessThan(chart.columns[1]!.limitY!);
    expect(chart.seconds.map((second) => second.text)).toEqual(['0', '1', '2', '3']);
  });

  it('makes room for a late pedal', () => {
    const late = pedalChart([{ ...series[1]!, valueS: 14 }], 386, 264);
    expect(late.points[0]!.y).toBeGreaterThanOrEqual(late.top);
    expect(late.seconds.length).toBeLessThan(8);
  });
});

describe('least margins', () => {
  it('keeps the worst of each measure and lists the worst measure first', () => {
    const margins = leastMargins([
      attempt('a', [criterion('sideslip', 9, 10), criterion('heading-deviation', 5, 20)]),
      attempt('b', [criterion('sideslip', 11, 10), criterion('heading-deviation', 12, 20)]),
    ]);
    expect(margins.map((each) => [each.measure, each.margin])).toEqual([
      ['sideslip', -1],
      ['heading-deviation', 8],
    ]);
  });

  it('puts what never happened before all, and leaves out what was not reached', () => {
    const margins = leastMargins([
      attempt('a', [
        criterion('sideslip', 11, 10),
        criterion('first-correct-pedal', null, 2),
        criterion('ball', null, 1, { verdict: 'not-reached' }),
      ]),
    ]);
    expect(margins.map((each) => each.measure)).toEqual(['first-correct-pedal', 'sideslip']);
  });
});

describe('words', () => {
  it('writes values in the unit of their criterion', () => {
    expect(valueWords(2.66, 'deg', true)).toBe('+2.7°');
    expect(valueWords(-0.12, 's', true)).toBe('−0.1 s');
    expect(valueWords(0.01, 's', true)).toBe('0.0 s');
    expect(valueWords(147.2, 'N', true)).toBe('+147 N');
    expect(valueWords(null, 's')).toBe('–');
  });

  it('names a measure, and lets one that is not known any more stand', () => {
    expect(measureWords('first-correct-pedal')).toBe('First correct pedal');
    expect(measureWords('a-measure-of-old')).toBe('a-measure-of-old');
  });

  it('calls the day today, yesterday, then by its date', () => {
    const now = new Date(2026, 5, 4, 15, 0);
    const at = (...parts: [number, number, number, number]): string => new Date(...parts, 5).toISOString();
    expect(whenWords(at(2026, 5, 4, 9), now)).toBe('today, 09:05');
    expect(whenWords(at(2026, 5, 3, 23), now)).toBe('yesterday, 23:05');
    expect(whenWords(at(2026, 4, 28, 9), now)).toBe('28 May');
    expect(whenWords(at(2025, 4, 28, 9), now)).toBe('28 May 2025');
  });

  it('tells not flown, without result and judged apart', () => {
    expect(flownState(null).word).toBe('Not flown');
    expect(flownState({ mine: 2, lastVerdict: null })).toMatchObject({ word: 'No result', met: false });
    expect(flownState({ mine: 2, lastVerdict: 'near' })).toMatchObject({ word: 'Met, close', met: true });
    expect(flownState({ mine: 2, lastVerdict: 'not-met' }).met).toBe(false);
  });
});
