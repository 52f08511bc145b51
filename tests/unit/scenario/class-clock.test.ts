import { describe, expect, it } from 'vitest';
import { betterOffset, contradicts } from '#shared/scenario/class-clock.ts';

const known = { offsetMs: 1000, roundTripMs: 40 };

describe('the server’s clock', () => {
  it('is known from the sharper of two measurements that agree, and from the newer when the clock was set', () => {
    expect(betterOffset({ offsetMs: 0, roundTripMs: Number.POSITIVE_INFINITY }, known)).toBe(known);
    const blurred = { offsetMs: 1200, roundTripMs: 600 };
    expect(betterOffset(known, blurred)).toBe(known);
    expect(betterOffset(blurred, known)).toBe(known);
    const set = { offsetMs: -119_000, roundTripMs: 600 };
    expect(betterOffset(known, set)).toBe(set);
  });

  it('is doubted when a message tells a time that lies ahead, or farther back than a message takes', () => {
    expect(contradicts(known, 51_000, 50_000)).toBe(false);
    expect(contradicts(known, 51_030, 50_000)).toBe(false);
    expect(contradicts(known, 51_050, 50_000)).toBe(true);
    expect(contradicts(known, 50_750, 50_000)).toBe(false);
    expect(contradicts(known, 50_650, 50_000)).toBe(true);
    // This browser's clock was put forward by two minutes.
    expect(contradicts(known, 51_000, 170_000)).toBe(true);
  });
});
