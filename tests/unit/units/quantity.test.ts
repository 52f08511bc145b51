import { describe, expect, it } from 'vitest';
import { DEG, FT, KT } from '#shared/units/constants.ts';
import { formatQuantity, parseQuantity } from '#shared/units/quantity.ts';
import { wrap2Pi, wrapPi } from '#shared/units/angles.ts';

describe('parseQuantity', () => {
  it.each([
    ['90kt', 'speed', 90 * KT],
    ['46.3m/s', 'speed', 46.3],
    [' 46.3 m/s ', 'speed', 46.3],
    ['1e2ft/s', 'speed', 100 * FT],
    ['0ft', 'height', 0],
    ['-5deg', 'angle', -5 * DEG],
    ['−5°', 'angle', -5 * DEG],
    ['90', 'speed', 90 * KT],
    ['1.0s', 'time', 1],
    ['75%', 'ratio', 0.75],
    ['0.75', 'ratio', 0.75],
  ] as const)('reads %s as a %s', (text, dimension, si) => {
    expect(parseQuantity(text, dimension, 'aviation')).toEqual({ ok: true, value: si });
  });

  it('takes the unit of the preference when none is written', () => {
    expect(parseQuantity('46', 'speed', 'si')).toEqual({ ok: true, value: 46 });
  });

  it.each([
    ['fast', 'speed'],
    ['', 'speed'],
    ['90 ft', 'speed'],
    ['1e999kt', 'speed'],
    ['90kt 5', 'speed'],
    ['90toString', 'speed'],
  ] as const)('refuses %j as a %s and names the accepted units', (text, dimension) => {
    const result = parseQuantity(text, dimension, 'aviation');
    expect(result.ok).toBe(false);
    if (!result.ok) expect(result.message).toMatch(/kt|finite/u);
  });
});

describe('formatQuantity', () => {
  it('shows the unit of the preference', () => {
    expect(formatQuantity(90 * KT, 'speed', 'aviation')).toBe('90.0 kt');
    expect(formatQuantity(90 * KT, 'speed', 'si')).toBe('46.3 m/s');
    expect(formatQuantity(-5 * DEG, 'angle', 'aviation')).toBe('−5.0°');
  });

  it('writes no minus before a rounded zero and no number for NaN', () => {
    expect(formatQuantity(-0.0001 * DEG, 'angle', 'aviation')).toBe('0.0°');
    expect(formatQuantity(Number.NaN, 'speed', 'aviation')).toBe('–');
  });
});

describe('wrapping', () => {
  it('keeps the direction', () => {
    for (let angle = -20; angle < 20; angle += 0.37) {
      for (const wrapped of [wrapPi(angle), wrap2Pi(angle)]) {
        expect(Math.cos(wrapped)).toBeCloseTo(Math.cos(angle), 12);
        expect(Math.sin(wrapped)).toBeCloseTo(Math.sin(angle), 12);
      }
      expect(wrapPi(angle)).toBeGreaterThan(-Math.PI);
      expect(wrapPi(angle)).toBeLessThanOrEqual(Math.PI);
      expect(wrap2Pi(angle)).toBeGreaterThanOrEqual(0);
      expect(wrap2Pi(angle)).toBeLessThan(2 * Math.PI);
    }
  });

  it('takes half a turn as +π', () => {
    expect(wrapPi(-Math.PI)).toBe(Math.PI);
    expect(wrapPi(Math.PI)).toBe(Math.PI);
  });
});
