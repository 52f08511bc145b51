import { describe, expect, it } from 'vitest';
import { HOLDS_TO_STOP, createFixedClock } from '../../../src/runner/fixed-clock.ts';

/** Ticks flown over `seconds` with frames of the given lengths, repeated. */
function fly(gapsMs: readonly number[], seconds: number, rate = 1): number {
  const clock = createFixedClock();
  clock.rate = rate;
  clock.start(0);
  let now = 0;
  let ticks = 0;
  for (let i = 0; now < seconds * 1000 - 1e-9; i += 1) {
    now += gapsMs[i % gapsMs.length];
    ticks += clock.advance(now).ticks;
  }
  return ticks;
}

describe('fixed clock', () => {
  it('flies 120 ticks a second at any frame rate', () => {
    for (const gaps of [[1000 / 60], [1000 / 144], [1000 / 24], [10, 30, 5, 75]]) {
      expect(Math.abs(fly(gaps, 12) - 1440)).toBeLessThanOrEqual(1);
    }
  });
  it('slows by the rate and loses nothing to rounding', () => {
    expect(Math.abs(fly([1000 / 60], 60, 0.1) - 720)).toBeLessThanOrEqual(1);
  });
  it('holds a late frame instead of flying it blind, and says how long', () => {
    const clock = createFixedClock();
    clock.start(0);
    clock.advance(16);
    const late = clock.advance(16 + 400);
    expect(late).toEqual({ ticks: 0, heldMs: 400, stopped: null });
    expect(clock.running).toBe(true);
    expect(clock.advance(16 + 400 + 100).ticks).toBeGreaterThan(10);
  });
  it('stops on a sleeping page', () => {
    const clock = createFixedClock();
    clock.start(0);
    expect(clock.advance(5000)).toEqual({ ticks: 0, heldMs: 5000, stopped: 'gap' });
    expect(clock.running).toBe(false);
    expect(clock.advance(5016).ticks).toBe(0);
  });
  it('stops when the machine cannot keep up', () => {
    const clock = createFixedClock();
    clock.start(0);
    let now = 0;
    let stopped: string | null = null;
    let frames = 0;
    while (!stopped && frames < 20) {
      now += 300;
      frames += 1;
      stopped = clock.advance(now).stopped;
    }
    expect(stopped).toBe('slow');
    expect(frames).toBe(HOLDS_TO_STOP);
  });
  it('takes a clock that is set back as no time', () => {
    const clock = createFixedClock();
    clock.start(1000);
    expect(clock.advance(500).ticks).toBe(0);
    expect(clock.advance(600).ticks).toBe(12);
  });
});
