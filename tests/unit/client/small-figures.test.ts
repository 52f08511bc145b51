import { describe, expect, it } from 'vitest';
import { filledShare, LIMIT_AT } from '../../../src/components/margin-geometry.ts';
import { pageTicks } from '../../../src/components/page-ticks.ts';
import { sparkPath } from '../../../src/components/spark-path.ts';
import { ariaSort, nextSort } from '../../../src/components/table-columns.ts';
import { timeLineMarks } from '../../../src/components/time-line-marks.ts';

const count = (path: string): number => path.split('M').length - 1;

describe('page ruler', () => {
  it('has one tick a page and the end', () => {
    expect(count(pageTicks(1, 4, 110).ticks)).toBe(5);
  });

  it('has ticks every ten pages above forty, and the bar stays visible and inside', () => {
    const ruler = pageTicks(500, 500, 120);
    expect(count(ruler.ticks)).toBe(51);
    expect(ruler.barWidth).toBeGreaterThanOrEqual(4);
    expect(ruler.barX + ruler.barWidth).toBeLessThanOrEqual(120);
  });

  it('moves the bar by its own width from page to page', () => {
    const [first, second] = [pageTicks(1, 5, 101), pageTicks(2, 5, 101)];
    expect(second.barX - first.barX).toBeCloseTo(first.barWidth, 1);
  });
});

describe('margin bar', () => {
  it('ends at the limit when nothing is left, short of it with a margin, past it without', () => {
    expect(filledShare(0, { max: 10 })).toBeCloseTo(LIMIT_AT);
    expect(filledShare(5, { max: 10 })).toBeCloseTo(LIMIT_AT / 2);
    expect(filledShare(-1, { max: 10 })).toBeGreaterThan(LIMIT_AT);
  });

  it('stays on the bar and is empty when never measured', () => {
    expect(filledShare(-100, { max: 10 })).toBe(1);
    expect(filledShare(null, { max: 10 })).toBe(0);
    expect(filledShare(1, { within: [-2, 2] })).toBeCloseTo(LIMIT_AT / 2);
  });
});

describe('thumbnail trace', () => {
  it('draws positive upward, zero on the middle, the limit on the hatched edge', () => {
    const { path, end, upper } = sparkPath([0, 1, 2], [0, 5, 10], 10, 100, 40, null);
    expect(path.startsWith('M0 20')).toBe(true);
    expect(end).toEqual([100, upper]);
  });

  it('clamps what leaves the frame and skips what is not finite', () => {
    const { path, end } = sparkPath([0, 1, 2], [0, Number.NaN, 1000], 10, 100, 40, null);
    expect(path).toBe('M0 20L100 1');
    expect(end).toEqual([100, 1]);
  });

  it('draws nothing without samples and marks the event only where it lies inside', () => {
    expect(sparkPath([], [], 10, 100, 40, null).end).toBeNull();
    expect(sparkPath([0, 10], [0, 0], 10, 100, 40, 5).eventX).toBe(50);
    expect(sparkPath([0, 10], [0, 0], 10, 100, 40, 11).eventX).toBeNull();
  });
});

describe('small time line', () => {
  it('puts flags in order of time, apart from each other, and conditions last', () => {
    const marks = timeLineMarks(
      [
        { lane: 'notes', atS: null },
        { lane: 'air', atS: 4 },
        { lane: 'engines', atS: 3 },
      ],
      3,
    );
    expect(marks.map((mark) => mark.letter)).toEqual(['E', 'G', 'N']);
    expect(marks[1]!.x - marks[0]!.x).toBeGreaterThanOrEqual(18);
    expect(marks[0]!.footX).toBe(11);
    expect(marks[2]!.footX).toBeNull();
  });
});

describe('table sorting', () => {
  it('turns the direction on the same column and starts upward on another', () => {
    expect(nextSort('title', 'title')).toBe('-title');
    expect(nextSort('-title', 'title')).toBe('title');
    expect(nextSort('-title', 'updatedAt')).toBe('updatedAt');
  });

  it('says the direction only on the sorted column', () => {
    expect(ariaSort('-title', 'title')).toBe('descending');
    expect(ariaSort('title', 'title')).toBe('ascending');
    expect(ariaSort('title', 'updatedAt')).toBeUndefined();
    expect(ariaSort('title', undefined)).toBeUndefined();
  });
});
