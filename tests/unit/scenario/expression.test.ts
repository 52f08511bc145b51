import { describe, expect, it } from 'vitest';
import { compileCondition, compileQuantity } from '#shared/scenario/expression/expression.ts';
import { MADE_COUNT, MADE_SIGNAL, STATE_SIGNAL } from '#shared/scenario/expression/names.ts';
import type { ExpressionInputs } from '#shared/scenario/expression/names.ts';
import { stateLength } from '#shared/model/state-layout.ts';
import { DEG, FT, KT } from '#shared/units/constants.ts';

/** 80 kt indicated, 100 ft, heading 350°, bank 10° left, yaw rate 4°/s, pedal half right; "cut" fired 2.5 s ago. */
function inputs(): ExpressionInputs {
  const x = new Float64Array(stateLength(2));
  const v = new Float64Array(MADE_COUNT);
  x[STATE_SIGNAL.phiRad] = -10 * DEG;
  x[STATE_SIGNAL.rRadS] = 4 * DEG;
  x[STATE_SIGNAL.tasMps] = 85 * KT;
  v[MADE_SIGNAL.timeS] = 5;
  v[MADE_SIGNAL.casMps] = 80 * KT;
  v[MADE_SIGNAL.heightAboveRunwayM] = 100 * FT;
  v[MADE_SIGNAL.headingRad] = 350 * DEG;
  v[MADE_SIGNAL.pedal] = 0.5;
  v[MADE_SIGNAL.ballWidths] = -0.4;
  v[MADE_SIGNAL.vmcMps] = 66 * KT;
  v[MADE_SIGNAL.stallMps] = 60 * KT;
  return { x, v, sinceS: (id) => (id === 'cut' || id === 'left-cut' ? 2.5 : NaN) };
}

function holds(text: string): boolean {
  const compiled = compileCondition(text);
  if (!compiled.ok) throw new Error(`${text}: ${compiled.problem.message}`);
  return compiled.condition.holds(inputs());
}

describe('a condition', () => {
  it.each([
    ['ias < vmc + 25 kt and since(cut) > 2 s', true],
    ['ias < 80 kt', false],
    ['ias <= 41.2 m/s', true],
    ['ias > 8000 ft/min', true],
    ['tas - ias == 5 kt', false],
    ['height < 31 m', true],
    ['heading > 349 deg and heading < 351 deg', true],
    ['bank < -5 deg', true],
    ['abs(bank) > 5 deg', true],
    ['yaw_rate > 3 deg/s', true],
    ['yaw_rate * 2 s > 7 deg', true],
    ['pedal >= 50 %', true],
    ['pedal > 60% or pedal < 40%', false],
    ['pedal - 20 % > 0.29', true],
    ['ball < -0.3 widths', true],
    ['min(ias, tas) > 79 kt', true],
    ['max(ias, tas, stall) > 84 kt', true],
    ['sqrt(ias * tas) > 82 kt', true],
    ['(ias - stall) / 2 s > 9 kt/s', true],
    ['yaw_rate / 2 deg/s > 1.9 and yaw_rate / 2 deg/s < 2.1', true],
    ['since(cut) * 2 deg/s > 4.9 deg', true],
    ['5 ft / min(1 s, 2 s) < 2 m/s', true],
    ['not ias > 90 kt', true],
    ['not ias > 70 kt and t > 1 s', false],
    ['t > 4 s or t < 1 s and ias > 200 kt', true],
    ['since(left-cut) > 2 s', true],
    ['pedal > 3 count', false],
  ])('%s is %s', (text, expected) => {
    expect(holds(text)).toBe(expected);
  });

  it('that reads the time since an event that has not fired is false, whatever else it says', () => {
    expect(holds('since(gust) > 1 s')).toBe(false);
    expect(holds('not since(gust) > 1 s')).toBe(false);
    expect(holds('t > 1 s or since(gust) > 1 s')).toBe(false);
  });

  it('names the events and quantities it reads', () => {
    const compiled = compileCondition('since(cut) > 2 s and ias < vmc');
    expect(compiled.ok && compiled.condition.sinceIds).toEqual(['cut']);
    expect(compiled.ok && compiled.condition.names).toEqual(['ias', 'vmc']);
  });
});

describe('an expression is refused with its place', () => {
  const deep = (n: number): string => `${'('.repeat(n)}t${')'.repeat(n)} > 1 s`;
  it.each([
    ['speed < 80 kt', 0, 'not a known name'],
    ['ias < 80 knots', 9, 'not a known name'],
    ['ias < 80', 6, 'units do not match'],
    ['ias < 80 deg', 6, 'units do not match'],
    ['bank > 0', 7, 'units do not match'],
    ['ias + height > 80 kt', 6, 'units do not match'],
    ['min(ias, height) > 80 kt', 9, 'units do not match'],
    ['ias', 0, 'true or false'],
    ['t > 3 s and pedal', 12, 'joins comparisons'],
    ['ias.constructor < 80 kt', 3, 'not allowed'],
    ['constructor > 1', 0, 'not a known name'],
    ['ias["x"] > 1 kt', 3, 'not allowed'],
    ['ias = 80 kt', 4, 'assigns'],
    ['t > 3 s; t > 4 s', 7, 'not allowed'],
    ['f(x) = x', 0, 'not a known name'],
    ['ias ^ 2 > 3', 4, 'powers'],
    ['9^9^9 > 1', 1, 'powers'],
    ['1e999 > t', 0, 'not a number'],
    ['"a" == "a"', 0, 'not allowed'],
    ['t > 3 s ? t : t', 8, 'not allowed'],
    ['cos(t) > 1', 0, 'not a known name'],
    ['1 s < t < 2 s', 8, 'chained'],
    ['t > 1 s and 60 kt < ias < 80 kt', 24, 'chained'],
    ['ias > 1e200 * 1e200 kt', 6, 'too large'],
    ['ias / 0 > 1 kt', 6, 'divides by zero'],
    ['ias > 5 kt / (2 - 2)', 14, 'divides by zero'],
    ['ias % 3 kt > 2', 6, 'operator is missing'],
    ['2 ias > 3 kt', 2, 'operator is missing'],
    ['ias > kt', 6, 'no number before it'],
    ['ias > 5 ft/s', 8, 'not a unit'],
    ['t > 3 min', 6, 'only in ft/min'],
    ['abs(t, t) > 1 s', 0, 'one argument'],
    ['max(t) > 1 s', 0, 'two or more'],
    ['since() > 1 s', 6, 'names no event'],
    ['since(cut > 1 s', 5, 'not closed'],
    ['(t > 1 s', 8, 'cannot be read'],
    ['t >', 3, 'cannot be read'],
    ['t xor t', 2, 'not a known name'],
    ['', 0, 'empty'],
    ['   ', 0, 'empty'],
    [deep(17), 16, 'nested'],
    [`${'- '.repeat(17)}t > 1 s`, 34, 'nested'],
    [`${'abs('.repeat(17)}t${')'.repeat(17)} > 1 s`, 67, 'nested'],
    [`t > 1 s ${'and t > 1 s '.repeat(40)}`, 400, 'characters long'],
  ])('%s', (text, position, message) => {
    const compiled = compileCondition(text);
    expect(compiled.ok).toBe(false);
    if (compiled.ok) return;
    expect(compiled.problem.position).toBe(position);
    expect(compiled.problem.message).toContain(message);
    expect(compiled.problem.remedy).not.toBe('');
  });

  it('but nesting of 16 and a length of 400 are allowed', () => {
    expect(compileCondition(deep(16)).ok).toBe(true);
    const long = `t > 1 s${' and t > 1 s'.repeat(32)}`;
    expect(compileCondition(long.padEnd(400)).ok).toBe(true);
    expect(compileCondition(long.padEnd(401)).ok).toBe(false);
  });
});

describe('a measured expression', () => {
  it('has the dimension of what it computes', () => {
    const compiled = compileQuantity('abs(bank) + 2 * abs(sideslip)');
    expect(compiled.ok && compiled.quantity.dimension.angle).toBe(1);
    expect(compiled.ok && compiled.quantity.value(inputs()) / DEG).toBeCloseTo(10, 12);
  });
  it('must be a quantity', () => {
    const compiled = compileQuantity('ias < 80 kt');
    expect(compiled.ok).toBe(false);
  });
});
