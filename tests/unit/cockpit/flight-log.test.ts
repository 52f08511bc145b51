import { describe, expect, it } from 'vitest';
import type { FiredEvent, RunningCriterion } from '#shared/scenario/run-types.ts';
import { createFlightLog, flagsOf, zeroS } from '../../../src/features/fly/flight-log.ts';
import { countWords, deliveryWords, endWords } from '../../../src/features/fly/result-words.ts';
import { limitsOf, traceRows } from '../../../src/features/fly/trace-layout.ts';
import { createReactionTracker } from '../../../src/runner/reaction-marks.ts';
import { positionWords, scrubberTicks } from '../../../src/components/timeline/scrubber-scale.ts';

const event = (id: string, lane: FiredEvent['lane'], kind: FiredEvent['kind'], timeS: number): FiredEvent => ({
  id,
  lane,
  kind,
  tick: Math.round(timeS * 120),
  timeS,
  text: `${id} happens`,
  injected: false,
});
const criterion = (part: Partial<RunningCriterion>): RunningCriterion => ({
  id: 'hdg',
  title: 'Heading within 20°',
  measure: 'heading-deviation',
  required: true,
  value: 25,
  limit: { max: 20, unit: 'deg' },
  margin: -5,
  atS: 6,
  verdict: 'not-met',
  phase: 'running',
  now: 25,
  ...part,
});

describe('flight log', () => {
  const marks = { ...createReactionTracker().marks, firstCorrectPedalTick: 564, correctSide: 1 as const };
  const fired = [event('hello', 'notes', 'marker', 1), event('cut', 'engines', 'engine-failure', 3)];

  it('puts the zero at the first event that is more than a note', () => {
    expect(zeroS(fired)).toBe(3);
    expect(zeroS([])).toBe(0);
  });
  it('flags carry the letter of their lane and the first pedal its own', () => {
    expect(flagsOf(fired, marks).map((flag) => flag.letter + flag.kind)).toEqual(['Nink', 'Edead', 'Pink']);
  });
  it('lists everything once, in time order, against the zero', () => {
    const log = createFlightLog();
    expect(log.see({ timeS: 7, fired, marks, criteria: [criterion({})] })).toBe(true);
    expect(log.see({ timeS: 8, fired, marks, criteria: [criterion({})] })).toBe(false);
    expect(log.lines(3).map((line) => [Math.round(line.timeS * 10) / 10, line.text, line.kind])).toEqual([
      [-2, 'hello happens', 'plain'],
      [0, 'cut happens', 'failure'],
      [1.7, 'Right pedal begins', 'plain'],
      [3, 'Not met: Heading within 20°', 'not'],
    ]);
  });
  it('does not announce a criterion that can still be met', () => {
    const log = createFlightLog();
    const waiting = criterion({ limit: { min: 80, unit: 'kt' }, margin: -3, phase: 'running' });
    expect(log.see({ timeS: 5, fired: [], marks, criteria: [waiting, criterion({ phase: 'waiting' })] })).toBe(true); // the pedal
    expect(log.lines(0).length).toBe(1);
    expect(log.see({ timeS: 9, fired: [], marks, criteria: [{ ...waiting, phase: 'done' }] })).toBe(true);
  });
});

describe('trace rows', () => {
  const criteria = [
    { measure: 'sideslip' as const, limit: { max: 10, unit: 'deg' } },
    { measure: 'bank' as const, limit: { max: 15, unit: 'deg' } },
    { measure: 'bank-dead-side' as const, limit: { max: 5, unit: 'deg' } },
  ];
  it('take the tightest limit, on the dead side only for the dead side', () => {
    expect(limitsOf('bank', criteria, 1)).toEqual({ max: 15, min: -5 });
    expect(limitsOf('bank', criteria, -1)).toEqual({ max: 5, min: -15 });
    expect(limitsOf('bank', criteria, 0)).toEqual({ max: 15, min: -15 });
    expect(limitsOf('pedal', criteria, 1)).toEqual({});
  });
  it('leave room for the hatch beyond a limit', () => {
    const [row] = traceRows(['sideslip'], criteria, 0);
    expect(row.high).toBeGreaterThanOrEqual(14);
    expect(row.low).toBeLessThanOrEqual(-14);
  });
});

describe('words', () => {
  it('of the end name the cause and what is kept', () => {
    expect(endWords('non-finite', 4.2, 'tick 504: p is not finite')).toContain('p is not finite');
    expect(endWords('completed', 24)).toBe('Flown to the end, 24.0 s');
  });
  it('of the count', () => {
    const met = { verdict: 'met' as const, required: true };
    expect(countWords([met, { ...met, verdict: 'near' }], true)).toBe('All 2 criteria met');
    expect(countWords([met, { ...met, verdict: 'not-met' }], false)).toBe('1 of 2 not met');
    expect(countWords([met, { verdict: 'not-met', required: false }], true)).toBe(
      'Required criteria met; 1 of 2 not met',
    );
    expect(countWords([met, { ...met, verdict: 'not-reached' }], false)).toBe('1 not reached');
  });
  it('of the delivery say what is safe', () => {
    const status = {
      attemptId: 'a',
      state: 'waiting' as const,
      acknowledged: 3,
      recorded: 9,
      retryInS: 4,
      refusal: null,
      result: null,
    };
    expect(deliveryWords(status, true)).toBe('No connection: 6 s kept in this browser. Trying again');
    expect(deliveryWords(status, false)).toContain('do not close it');
    expect(deliveryWords({ ...status, state: 'delivered' }, true)).toBe('Recorded on the server');
    expect(deliveryWords(null, true)).toBe('');
  });
});

describe('scrubber', () => {
  it('labels against the zero and keeps labels apart', () => {
    const ticks = scrubberTicks(24, 3, 1376);
    const labels = ticks.filter((tick) => tick.text !== '');
    expect(labels.map((tick) => tick.text)).toContain('0');
    expect(labels[0].text).toBe('−3');
    for (let i = 1; i < labels.length; i += 1) {
      expect(((labels[i].timeS - labels[i - 1].timeS) * 1376) / 24).toBeGreaterThan(50);
    }
    expect(scrubberTicks(600, 3, 300).length).toBeLessThan(40);
  });
  it('says the position in words', () => {
    expect(positionWords(4.9, 3, true)).toBe('1.9 seconds after the event');
    expect(positionWords(2, 3, true)).toBe('1.0 seconds before the event');
    expect(positionWords(2, 0, false)).toBe('2.0 seconds from the start');
  });
});
