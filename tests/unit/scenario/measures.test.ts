import { describe, expect, it } from 'vitest';
import type { MeasureName } from '#shared/scenario/scenario-schema.ts';
import { marginOf, verdictOf } from '#shared/scenario/criterion-tracker.ts';
import { MEASURE_TABLE } from '#shared/scenario/measures/measure-table.ts';
import { MEASURES } from '#shared/scenario/scenario-format.ts';
import { judge } from './support/constructed-run.ts';
import type { Constructed, Moment } from './support/constructed-run.ts';
import { FT, KT } from '#shared/units/constants.ts';
import { DEG } from '#shared/units/constants.ts';

const max = (value: number, unit: string) => ({ max: value, unit });
const value = (measure: MeasureName, unit: string, made: Constructed): number | null =>
  judge({ measure, limit: max(1e6, unit) }, made).value;
/** A triangle from 0 to `peak` at 2 s and back to 0 at 4 s, on from there. */
const triangle = (peak: number, t: number): number => peak * (1 - Math.abs(t - 2) / 2);

describe('greatest values', () => {
  const over = (moment: (t: number) => Moment): Constructed => ({ seconds: 3, moment });
  it.each<[MeasureName, string, (t: number) => Moment, number]>([
    ['bank', 'deg', (t) => ({ bankDeg: -triangle(30, t) }), 30],
    ['sideslip', 'deg', (t) => ({ betaDeg: triangle(-12, t) }), 12],
    ['yaw-rate', 'deg/s', (t) => ({ rDegS: triangle(-5, t) }), 5],
    ['roll-rate', 'deg/s', (t) => ({ pDegS: triangle(8, t) }), 8],
    ['ball', 'widths', (t) => ({ ball: -triangle(1.5, t) }), 1.5],
    ['heading-deviation', 'deg', (t) => ({ psiDeg: 350 + triangle(25, t) }), 25],
    ['track-deviation', 'deg', (t) => ({ trackErrorDeg: -triangle(4, t) }), 4],
    ['track-offset', 'm', (t) => ({ offsetM: triangle(-40, t) }), 40],
    ['track-offset', 'ft', (t) => ({ offsetM: triangle(30.48, t) }), 100],
    ['height-loss', 'ft', (t) => ({ heightM: 300 - triangle(60.96, t) }), 200],
    ['height-loss', 'm', (t) => ({ heightM: 300 + t }), 0],
    ['speed-loss', 'kt', (t) => ({ casKt: 100 - triangle(12, t) }), 12],
    ['speed-deviation', 'kt', (t) => ({ casKt: 100 + triangle(7, t) }), 7],
    ['pedal-force', 'N', (t) => ({ full: { pedalForceN: triangle(450, t) } }), 450],
  ])('%s in %s', (measure, unit, moment, expected) => {
    const result = judge({ measure, limit: max(1e6, unit) }, over(moment));
    expect(result.value).toBeCloseTo(expected, 9);
    if (expected > 0) expect(result.atS).toBeCloseTo(2, 9);
  });

  it('of the bank toward the dead side count that side only', () => {
    const swing = (t: number): Moment => ({ bankDeg: t < 1.5 ? -8 : 20 });
    expect(value('bank-dead-side', 'deg', { seconds: 3, moment: swing, deadSide: 1 })).toBeCloseTo(8, 9);
    expect(value('bank-dead-side', 'deg', { seconds: 3, moment: swing, deadSide: -1 })).toBeCloseTo(20, 9);
    expect(judge({ measure: 'bank-dead-side', limit: max(5, 'deg') }, { seconds: 3, moment: swing }).verdict).toBe(
      'not-reached',
    );
  });

  it('of an expression', () => {
    const result = judge(
      { measure: 'expression', expression: 'abs(bank) - 2 deg', limit: max(20, 'deg') },
      over((t) => ({ bankDeg: triangle(-18, t) })),
    );
    expect(result.value).toBeCloseTo(16, 9);
    const never = judge(
      { measure: 'expression', expression: 'since(gust) * 1 deg/s', limit: max(20, 'deg') },
      over(() => ({})),
    );
    expect(never.verdict).toBe('not-reached');
  });
});

describe('first correct pedal', () => {
  const pedal = (at: number, size: number, lasts: number, deadSide: -1 | 0 | 1 = 1, rDegS = 0): Constructed => ({
    seconds: 4,
    deadSide,
    moment: (t) => ({ pedal: 0.05 + (t >= at - 1e-9 && t < at + lasts - 1e-9 ? size : 0), rDegS }),
  });
  const first = (made: Constructed): number | null => value('first-correct-pedal', 's', made);
  it('is the first tick of 0.2 s of 10 % more than at the start of the window, toward the live side', () => {
    expect(first(pedal(1, 0.11, 1))).toBeCloseTo(1, 9);
    expect(first(pedal(1, 0.09, 1))).toBeNull();
    expect(first(pedal(1, 0.5, 0.2))).toBeCloseTo(1, 9);
    expect(first(pedal(1, 0.5, 0.19))).toBeNull();
    expect(first(pedal(1, -0.5, 1))).toBeNull();
    expect(first(pedal(1, -0.5, 1, -1))).toBeCloseTo(1, 9);
  });
  it('works against the yaw when no engine has failed', () => {
    expect(first(pedal(1, 0.5, 1, 0, -3))).toBeCloseTo(1, 9);
    expect(first(pedal(1, 0.5, 1, 0, 3))).toBeNull();
    expect(first(pedal(1, 0.5, 1, 0, 0))).toBeNull();
  });
  it('never is not met and says so', () => {
    expect(judge({ measure: 'first-correct-pedal', limit: max(2, 's') }, pedal(1, 0, 1))).toMatchObject({
      value: null,
      margin: null,
      verdict: 'not-met',
      note: 'never',
    });
  });
  it('the other way is wrong pedal, and its time adds up', () => {
    const wrong = (made: Constructed): number | null => value('wrong-pedal-time', 's', made);
    expect(wrong(pedal(1, -0.3, 0.5))).toBeCloseTo(0.5, 9);
    expect(wrong(pedal(1, 0.3, 0.5))).toBe(0);
    expect(wrong(pedal(1, -0.3, 0.5, -1))).toBe(0);
    expect(wrong(pedal(1, 0.3, 0.5, 0, 3))).toBeCloseTo(0.5, 9);
  });
});

describe('yaw arrested', () => {
  const yaw = (rate: (t: number) => number) =>
    judge({ measure: 'yaw-arrested', limit: max(3, 's') }, { seconds: 6, moment: (t) => ({ rDegS: rate(t) }) });
  it('is the start of the first second below 1°/s after the rate has exceeded 2°/s', () => {
    const result = yaw((t) => (t < 1 ? 0.5 : t < 2 ? -4 : t < 2.5 ? 0.2 : t < 2.6 ? 1.5 : 0));
    expect(result.value).toBeCloseTo(2.6, 2);
    expect(result.verdict).toBe('near');
  });
  it('is not needed when the rate never exceeded 2°/s', () => {
    expect(yaw(() => 1.9)).toMatchObject({ value: 0, verdict: 'met', note: 'not needed' });
  });
  it('exceeded and never held is not met', () => {
    expect(yaw((t) => (t < 5.2 ? 4 : 0))).toMatchObject({ value: null, verdict: 'not-met', note: 'never' });
  });
});

describe('pedal reversals', () => {
  const swings = (pedal: (t: number) => number): number | null =>
    value('pedal-reversals', 'count', { seconds: 8, moment: (t) => ({ pedal: pedal(t) }) });
  it('count swings from over 60 % to over 60 % the other way within 3 s', () => {
    expect(swings((t) => (t < 1 ? 0.7 : t < 2 ? 0 : -0.7))).toBe(1);
    expect(swings((t) => (t < 1 ? 0.7 : t < 4.1 ? 0 : -0.7))).toBe(0);
    expect(swings((t) => (t < 1 ? 0.7 : -0.59))).toBe(0);
    expect(swings((t) => (Math.floor(t) % 2 === 0 ? 0.9 : -0.9))).toBe(8);
  });
});

describe('recovery', () => {
  it('lever back: 20 % of travel on the live engines', () => {
    const lever = (right: (t: number) => number, failed = [1, 0]) =>
      value('lever-reduced', 's', { seconds: 3, failed, moment: (t) => ({ levers: [1, right(t)] }) });
    expect(lever((t) => (t < 1 ? 0.9 : 0.7))).toBeCloseTo(1, 9);
    expect(lever((t) => (t < 1 ? 0.9 : 0.75))).toBeNull();
    expect(lever((t) => 0.9 - 0.1 * t)).toBeCloseTo(2, 2);
    expect(lever(() => 0.9)).toBeNull();
  });
  it('nose lowered: 3° of path below the start of the window', () => {
    expect(value('nose-lowered', 's', { seconds: 4, moment: (t) => ({ thetaDeg: 5 - 1.001 * t }) })).toBeCloseTo(3, 2);
    expect(value('nose-lowered', 's', { seconds: 2, moment: (t) => ({ thetaDeg: 5 - t }) })).toBeNull();
  });
  it('speed regained: above the given value', () => {
    const regained = (aim: number, unit: string) =>
      judge(
        { measure: 'speed-regained', value: aim, unit, limit: max(10, 's') },
        { seconds: 5, moment: (t) => ({ casKt: 60 + 10 * t }) },
      );
    expect(regained(80, 'kt').value).toBeCloseTo(2.0083, 3); // first tick above
    expect(regained(80 * KT, 'm/s').value).toBeCloseTo(2.0083, 3);
    expect(regained(200, 'kt').verdict).toBe('not-met');
  });
  it('climb rate: mean over the window', () => {
    const climb = judge(
      { measure: 'climb-rate', limit: { min: 100, unit: 'ft/min' } },
      { seconds: 6, moment: (t) => ({ heightM: 100 + (t * 119 * FT) / 60 + Math.sin(Math.PI * t) }) },
    );
    expect(climb.value).toBeCloseTo(119, 6);
    expect(climb.verdict).toBe('near');
  });
});

describe('engines', () => {
  it('wrong engine: a live one shut by its lever after a failure, or feathered', () => {
    const count = (moment: (t: number) => Moment, failed = [1, 0]) =>
      value('wrong-engine', 'count', { seconds: 3, failed, moment });
    expect(count(() => ({}))).toBe(0);
    expect(count((t) => ({ levers: [1, t > 1 ? 0 : 1] }))).toBe(1);
    expect(count((t) => ({ levers: [t > 1 ? 0 : 1, 1] }))).toBe(0);
    expect(count((t) => ({ levers: [1, t > 1 ? 0.5 : 1] }))).toBe(0);
    expect(count((t) => ({ levers: [0, t > 1 ? 0 : 1] }), [0, 0])).toBe(0);
    expect(count((t) => ({ feather: [0, t > 1 ? 1 : 0] }))).toBe(1);
    expect(count((t) => ({ feather: [t > 1 ? 1 : 0, 0] }))).toBe(0);
    expect(count((t) => ({ feather: [0, t > 1 ? 1 : 0], levers: [1, t > 2 ? 0 : 1] }))).toBe(1);
  });
  it('feathered within: every failed engine', () => {
    const time = (feather: (t: number) => number[], failed: number[]) =>
      value('feathered-within', 's', { seconds: 3, failed, moment: (t) => ({ feather: feather(t) }) });
    expect(time((t) => [t >= 1 ? 1 : 0, 0], [1, 0])).toBeCloseTo(1, 9);
    expect(time((t) => [t >= 1 ? 1 : 0, 0], [1, 1])).toBeNull();
    expect(time((t) => [t >= 1 ? 1 : 0, t >= 2 ? 1 : 0], [1, 1])).toBeCloseTo(2, 9);
    expect(time(() => [1, 0], [0, 0])).toBeNull();
  });
});

describe('touchdown', () => {
  const moment = (t: number): Moment => ({
    bankDeg: t < 3 ? 30 : -2,
    psiDeg: 95,
    offsetM: -4,
    acrossMps: -3 * KT,
    full: { trackRad: 90 * DEG, verticalSpeedMps: -(300 * FT) / 60 },
  });
  it.each<[MeasureName, string, number]>([
    ['touchdown-crab', 'deg', 5],
    ['touchdown-drift', 'kt', 3],
    ['touchdown-bank', 'deg', 2],
    ['touchdown-offset', 'm', 4],
    ['touchdown-sink', 'ft/min', 300],
  ])('%s is read in its tick', (measure, unit, expected) => {
    const result = judge({ measure, limit: max(1e3, unit) }, { seconds: 3, moment, ended: 'touchdown' });
    expect(result.value).toBeCloseTo(expected, 6);
    expect(result.atS).toBe(3);
    expect(judge({ measure, limit: max(1e3, unit) }, { seconds: 3, moment, ended: 'completed' }).verdict).toBe(
      'not-reached',
    );
  });
});

describe('time', () => {
  it.each<[MeasureName, 'outsideData' | 'stallWarning' | 'finStalled' | 'rudderSaturated']>([
    ['outside-data-time', 'outsideData'],
    ['stall-warning-time', 'stallWarning'],
    ['fin-stall-time', 'finStalled'],
    ['rudder-saturation-time', 'rudderSaturated'],
  ])('%s adds up the ticks in it', (measure, member) => {
    const made: Constructed = { seconds: 3, moment: (t) => ({ full: { [member]: (t >= 1 && t < 1.5) || t >= 2.75 } }) };
    expect(value(measure, 's', made)).toBe(0.75);
    expect(
      judge({ measure, limit: max(0, 's') }, { seconds: 1, moment: () => ({ full: { [member]: false } }) }),
    ).toMatchObject({ value: 0, verdict: 'met', margin: 0 });
  });
});

describe('verdicts', () => {
  it.each<[number, Parameters<typeof marginOf>[1], number, string]>([
    [10, { max: 20, unit: 'deg' }, 10, 'met'],
    [15.9, { max: 20, unit: 'deg' }, 4.1, 'met'],
    [16, { max: 20, unit: 'deg' }, 4, 'near'],
    [20, { max: 20, unit: 'deg' }, 0, 'near'],
    [20.01, { max: 20, unit: 'deg' }, -0.01, 'not-met'],
    [0, { max: 0, unit: 'count' }, 0, 'met'],
    [1, { max: 0, unit: 'count' }, -1, 'not-met'],
    [130, { min: 100, unit: 'ft/min' }, 30, 'met'],
    [110, { min: 100, unit: 'ft/min' }, 10, 'near'],
    [90, { min: 100, unit: 'ft/min' }, -10, 'not-met'],
    [5, { within: [0, 10], unit: 'deg' }, 5, 'met'],
    [9.5, { within: [0, 10], unit: 'deg' }, 0.5, 'near'],
    [-1, { within: [0, 10], unit: 'deg' }, -1, 'not-met'],
  ])('%s against %o', (measured, limit, margin, verdict) => {
    expect(marginOf(measured, limit)).toBeCloseTo(margin, 9);
    expect(verdictOf(marginOf(measured, limit), limit)).toBe(verdict);
  });
});

it('the table describes every measure of the format', () => {
  expect(Object.keys(MEASURE_TABLE).sort()).toEqual([...MEASURES].sort());
});
