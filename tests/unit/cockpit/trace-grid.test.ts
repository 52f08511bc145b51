import { describe, expect, it } from 'vitest';
import { createPictureQuality } from '../../../src/runner/picture-quality.ts';
import { createRedrawPacer } from '../../../src/components/charts/redraw-pacer.ts';
import {
  type TraceRow,
  emptyColumn,
  flagPositions,
  gridLength,
  rangeFor,
  tableTimes,
  valueAt,
  widen,
} from '../../../src/components/charts/trace-grid.ts';

const row: TraceRow = { id: 'bank', name: 'Bank', unit: 'deg', digits: 1, low: -10, high: 10 };

describe('trace grid', () => {
  it('has thirty samples a second and both ends', () => {
    expect(gridLength(30)).toBe(901);
    expect(emptyColumn(2).length).toBe(61);
  });
  it('widens a range by half until a value fits, and leaves it alone otherwise', () => {
    const base = [-10, 10] as const;
    expect(widen(base, 9)).toBe(base);
    expect(widen(base, 15)).toEqual([-10, 20]);
    expect(widen(base, -55)[0]).toBeLessThanOrEqual(-55);
    expect(widen(base, Number.NaN)).toBe(base);
    expect(rangeFor(row, [[null, 12, -3], undefined])).toEqual([-10, 20]);
  });
  it('reads the nearest sample and nothing where nothing is known', () => {
    const column = emptyColumn(1);
    column[15] = 4;
    expect(valueAt(column, 0.51)).toBe(4);
    expect(valueAt(column, 0.9)).toBeNull();
    expect(valueAt(undefined, 0)).toBeNull();
  });
  it('keeps flags apart without moving the first', () => {
    expect(flagPositions([100, 105, 300], 25)).toEqual([100, 125, 300]);
  });
  it('lists every second and the events in the table', () => {
    const times = tableTimes(3, [{ id: 'e', timeS: 1.5, letter: 'E', text: 'cut', kind: 'dead' }]);
    expect(times).toEqual([0, 1, 1.5, 2, 3]);
  });
});

describe('redraw pacer', () => {
  const run = (pacer: ReturnType<typeof createRedrawPacer>, gapMs: number, frames: number, from: number) => {
    let draws = 0;
    for (let i = 1; i <= frames; i += 1) if (pacer.due(from + i * gapMs)) draws += 1;
    return draws;
  };
  it('draws every second frame of a 60 Hz screen', () => {
    expect(run(createRedrawPacer(), 1000 / 60, 120, 0)).toBeGreaterThanOrEqual(59);
    expect(run(createRedrawPacer(), 1000 / 60, 120, 0)).toBeLessThanOrEqual(61);
  });
  it('falls back while frames are slow and recovers slowly', () => {
    const pacer = createRedrawPacer();
    run(pacer, 40, 200, 0);
    expect(pacer.rateHz).toBeLessThanOrEqual(5);
    run(pacer, 16.7, 2000, 8000);
    expect(pacer.rateHz).toBe(30);
  });
  it('does not take a hidden tab for a slow screen', () => {
    const pacer = createRedrawPacer();
    for (let i = 1; i < 200; i += 1) pacer.due(i * 1000);
    expect(pacer.rateHz).toBe(30);
  });
});

describe('picture quality', () => {
  const run = (quality: ReturnType<typeof createPictureQuality>, gapMs: number, frames: number, from: number) => {
    let changes = 0;
    for (let i = 1; i <= frames; i += 1) if (quality.frame(from + i * gapMs)) changes += 1;
    return changes;
  };
  it('falls step by step while frames are slow, and stays at full on a fast machine', () => {
    const quality = createPictureQuality();
    expect(run(quality, 1000 / 60, 600, 0)).toBe(0);
    expect(quality.resolution).toBe(1);
    expect(run(quality, 34, 51, 10_000)).toBe(1);
    expect(quality.resolution).toBe(0.8);
    run(quality, 34, 1000, 20_000);
    expect(quality.resolution).toBe(0.45);
  });
  it('rises again only after long fast stretches', () => {
    const quality = createPictureQuality();
    run(quality, 34, 60, 0);
    expect(run(quality, 1000 / 60, 300, 10_000)).toBe(0);
    expect(run(quality, 1000 / 60, 500, 20_000)).toBe(1);
    expect(quality.resolution).toBe(1);
  });
});
