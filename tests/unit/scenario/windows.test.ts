import { describe, expect, it } from 'vitest';
import type { ScenarioDocument } from '#shared/scenario/scenario-schema.ts';
import { cutLeft, fly, runOf } from './support/build-scenario.ts';

type Criterion = NonNullable<ScenarioDocument['criteria']>[number];
const turned = (from: Criterion['from'], to: Criterion['to'], over: Partial<Criterion> = {}): Criterion => ({
  id: 'c',
  title: 'C',
  measure: 'heading-deviation',
  limit: { max: 90, unit: 'deg' },
  from,
  to,
  ...over,
});
const later = { id: 'later', lane: 'notes', kind: 'marker', text: 'x', at: { time_s: 3 } } as const;
const never = { id: 'never', lane: 'notes', kind: 'marker', text: 'x', at: { when: 'ias > 900 kt' } } as const;
const events = [cutLeft, later, never];

function headings(criterion: Criterion): {
  result: ReturnType<ReturnType<typeof runOf>['results']>[number];
  psi: number[];
} {
  const run = runOf({ events, criteria: [criterion], duration_s: 4 });
  const psi: number[] = [run.now.psiRad];
  while (run.ended === null) {
    run.step(run.neutralSample());
    psi.push(run.now.psiRad);
  }
  return { result: run.results()[0], psi };
}
const degrees = (rad: number): number => (rad * 180) / Math.PI;

describe('a window', () => {
  it('opens with the state of the tick in which its event fires and closes with that of its last', () => {
    const { result, psi } = headings(turned('cut', 'later'));
    expect(result.value).toBeCloseTo(Math.max(...psi.slice(120, 361).map((p) => Math.abs(degrees(p - psi[120])))), 9);
  });
  it('reaches seconds beyond an event', () => {
    const { result, psi } = headings(turned({ after: 'cut', plus_s: 1 }, { after: 'cut', plus_s: 2 }));
    expect(result.value).toBeCloseTo(Math.abs(degrees(psi[360] - psi[240])), 9);
  });
  it('to the end takes in the last state', () => {
    const { result, psi } = headings(turned('start', 'end'));
    expect(result.value).toBeCloseTo(Math.abs(degrees(psi[480] - psi[0])), 9);
    expect(result.atS).toBe(4);
  });
  it('that never opens is not reached, apart from met and not met, and required means not passed', () => {
    const run = fly(runOf({ events, criteria: [turned('never', 'end')], duration_s: 4 }));
    expect(run.results()[0]).toMatchObject({ value: null, margin: null, atS: null, verdict: 'not-reached' });
    expect(run.passed()).toBe(false);
    expect(
      fly(runOf({ events, criteria: [turned('never', 'end', { required: false })], duration_s: 4 })).passed(),
    ).toBe(true);
  });
  it('that would open after its end is not reached', () => {
    const waits = { id: 'waits', lane: 'notes', kind: 'marker', text: 'x', at: { when: 't > 2 s' } } as const;
    const run = fly(runOf({ events: [cutLeft, waits], criteria: [turned('waits', 'cut')], duration_s: 4 }));
    expect(run.results()[0].verdict).toBe('not-reached');
  });
  it('from the end looks at the last state alone', () => {
    const run = fly(runOf({ events, duration_s: 4, criteria: [turned('end', 'end', { measure: 'bank' })] }));
    expect(run.results()[0].value).toBeCloseTo(Math.abs(degrees(run.now.phiRad)), 9);
  });
  it('shows its phase and present value while it runs', () => {
    const run = runOf({ events, criteria: [turned('cut', 'later', { measure: 'bank' })], duration_s: 4 });
    expect(fly(run, 60).criteria()[0]).toMatchObject({
      phase: 'waiting',
      now: null,
      value: null,
      verdict: 'not-reached',
    });
    expect(fly(run, 240).criteria()[0]).toMatchObject({ phase: 'running' });
    expect(run.criteria()[0].now).toBeCloseTo(Math.abs(degrees(run.now.phiRad)), 9);
    expect(fly(run, 400).criteria()[0].phase).toBe('done');
  });
  it('of a time that has not come counts on while it is open', () => {
    const run = runOf({
      events,
      duration_s: 4,
      criteria: [turned('cut', 'end', { measure: 'first-correct-pedal', limit: { max: 2, unit: 's' } })],
    });
    expect(fly(run, 240).criteria()[0]).toMatchObject({
      phase: 'running',
      value: null,
      now: 1,
      verdict: 'not-reached',
    });
    expect(fly(run).criteria()[0]).toMatchObject({ phase: 'done', value: null, verdict: 'not-met', note: 'never' });
  });
});
