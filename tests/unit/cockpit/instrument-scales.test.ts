import { describe, expect, it } from 'vitest';
import { DEG } from '#shared/units/constants.ts';
import { headingText, nearestTurn, pathOffsetRad } from '../../../src/components/instruments/flight-path.ts';
import { edgeLabels, spread } from '../../../src/components/instruments/label-layout.ts';
import { limitText, marginScale, placeOn } from '../../../src/components/instruments/margin-scale.ts';
import { clockText, noseText, sided, tickerTime } from '../../../src/components/instruments/side-format.ts';
import { fractionIn, windowFor, windowForPair } from '../../../src/components/instruments/tape-window.ts';

describe('tape windows', () => {
  it('stay put while the value is inside and then cut by whole steps', () => {
    const first = windowFor(null, 88, 60, 10, 0);
    expect(first).toEqual({ low: 60, high: 120 });
    expect(windowFor(first, 100, 60, 10, 0)).toBe(first);
    const next = windowFor(first, 113, 60, 10, 0);
    expect(next).not.toBe(first);
    expect(next.low % 10).toBe(0);
    expect(fractionIn(next, 113)).toBeGreaterThan(0.15);
    expect(fractionIn(next, 113)).toBeLessThan(0.85);
  });

  it('never cross their floor, and the floor itself does not move them', () => {
    const ground = windowFor(null, 20, 600, 100, 0);
    expect(ground.low).toBe(0);
    expect(windowFor(ground, 0, 600, 100, 0)).toBe(ground);
  });

  it('keep nose and path in sight, and the nose when they part too far', () => {
    const w = windowForPair(null, 80, 88, 40, 10);
    expect(w.low).toBeLessThan(80);
    expect(w.high).toBeGreaterThan(88);
    const far = windowForPair(w, 20, 110, 40, 10);
    expect(far.low).toBeLessThan(20);
    expect(far.high).toBeGreaterThan(20);
  });
});

describe('directions', () => {
  it('the path lies right of the nose by the sideslip when the wings are level', () => {
    expect(pathOffsetRad(8 * DEG, 0, 0)).toBeCloseTo(8 * DEG, 12);
  });
  it('steep bank turns sideslip out of the horizontal', () => {
    expect(Math.abs(pathOffsetRad(8 * DEG, 90 * DEG, 0))).toBeLessThan(1e-9);
  });
  it('says headings as they are spoken', () => {
    expect([headingText(0), headingText(359.6), headingText(-10), headingText(5)]).toEqual([
      '360',
      '360',
      '350',
      '005',
    ]);
    expect(nearestTurn(-100, 262)).toBe(260);
  });
});

describe('labels', () => {
  it('are moved apart and kept inside', () => {
    expect(spread([100, 104, 300], 15, 0, 310)).toEqual([100, 115, 300]);
    const tight = spread([305, 306, 307], 15, 0, 310);
    expect(tight[2] - tight[1]).toBeGreaterThanOrEqual(15);
    expect(Math.max(...tight)).toBeLessThanOrEqual(310);
  });
  it('of the heading edge go outward and never onto another mark', () => {
    const [nose, path] = edgeLabels(
      [
        { x: 260, width: 58 },
        { x: 420, width: 58 },
      ],
      11,
      0,
      900,
    );
    expect([nose.side, path.side]).toEqual(['left', 'right']);
    const close = edgeLabels(
      [
        { x: 300, width: 58 },
        { x: 304, width: 58 },
        { x: 308, width: 66 },
      ],
      11,
      0,
      900,
    );
    expect(close.filter((l) => l.side === 'none').length).toBe(1);
  });
});

describe('criterion bars', () => {
  it('hatch what is forbidden and place the limit', () => {
    const max = marginScale({ max: 20, unit: 'deg' });
    expect(placeOn(max, 20)).toBeCloseTo(max.limits[0], 12);
    expect(max.forbidden).toEqual([[max.limits[0], 1]]);
    const min = marginScale({ min: 80, unit: 'kt' });
    expect(placeOn(min, 80)).toBeCloseTo(min.limits[0], 12);
    expect(min.forbidden[0][0]).toBe(0);
    const within = marginScale({ within: [-2, 4], unit: 'deg' });
    expect(within.limits.map((l) => within.from + l * (within.to - within.from))).toEqual([-2, 4]);
  });
  it('take a limit of zero', () => {
    const zero = marginScale({ max: 0, unit: 's' });
    expect(placeOn(zero, 0)).toBe(0);
    expect(Number.isFinite(placeOn(zero, 3))).toBe(true);
    expect(Number.isFinite(placeOn(marginScale({ min: 0, unit: 'ft/min' }), -3))).toBe(true);
  });
  it('name limit and unit', () => {
    expect(limitText({ max: 20, unit: 'deg' })).toBe('20°');
    expect(limitText({ min: 75, unit: 'kt' })).toBe('at least 75 kt');
    expect(limitText({ within: [-2, 4], unit: 'deg' })).toBe('−2 to 4°');
  });
});

describe('figures', () => {
  it('carry sides, not signs', () => {
    expect([noseText(8.2), noseText(-5.6), noseText(0.02)]).toEqual(['8.2°L', '5.6°R', '0.0°']);
    expect([sided(49, 0, '%'), sided(-0.4, 0, '%'), sided(Number.NaN, 1, '')]).toEqual(['49%R', '0%', '–']);
  });
  it('clock and ticker keep width and true minus', () => {
    expect([clockText(1.9), clockText(-1.8), clockText(0), clockText(75.25)]).toEqual([
      '+00:01.9',
      '−00:01.8',
      '+00:00.0',
      '+01:15.3',
    ]);
    expect([tickerTime(1.9), tickerTime(0), tickerTime(-1.8)]).toEqual(['+01.9', '00.0', '−01.8']);
  });
});
