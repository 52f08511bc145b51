import { describe, expect, it } from 'vitest';
import { DEG } from '#shared/units/constants.ts';
import { createReactionTracker } from '../../../src/runner/reaction-marks.ts';
import { phasesOf } from '../../../src/features/replay/phases.ts';
import { filmTimes, nearestFrame } from '../../../src/features/replay/film.ts';
import { observation } from './fakes.ts';

interface Flown {
  pedal: (t: number) => number;
  yaw?: (t: number) => number;
  bank?: (t: number) => number;
}
/** Event at 1 s, ten seconds flown, left engine dead. */
function track({ pedal, yaw = () => 0, bank = () => 0 }: Flown, deadSide: -1 | 0 | 1 = 1) {
  const tracker = createReactionTracker();
  for (let tick = 0; tick <= 1200; tick += 1) {
    const t = tick / 120;
    const now = observation({ tick, timeS: t, pedal: pedal(t), rRadS: yaw(t), phiRad: bank(t) });
    if (tick === 121) tracker.begin(now, 120);
    else tracker.see(now, tick > 121 ? deadSide : 0);
  }
  return tracker.marks;
}

describe('reaction marks', () => {
  it('first correct pedal: 10 % beyond its value at the event, held for 0.2 s, toward the live side', () => {
    const marks = track({ pedal: (t) => (t < 2.5 ? 0.05 : 0.2) });
    expect(marks.firstCorrectPedalTick).toBe(299);
    expect(marks.correctSide).toBe(1);
    expect(marks.firstWrongPedalTick).toBeNull();
  });
  it('a jab of less than 0.2 s is none', () => {
    const marks = track({ pedal: (t) => (t > 2 && t < 2.15 ? 0.5 : t > 4 ? 0.5 : 0) });
    expect(marks.firstCorrectPedalTick).toBe(480);
  });
  it('the other way is the wrong pedal, mirrored for the right engine', () => {
    expect(track({ pedal: (t) => (t > 2 ? -0.4 : 0) }).firstWrongPedalTick).not.toBeNull();
    expect(track({ pedal: (t) => (t > 2 ? -0.4 : 0) }, -1).firstCorrectPedalTick).not.toBeNull();
  });
  it('with no engine failed the correct pedal goes against the yaw', () => {
    const marks = track({ pedal: (t) => (t > 2 ? -0.4 : 0), yaw: () => 5 * DEG }, 0);
    expect(marks.correctSide).toBe(-1);
  });
  it('yaw is arrested once it has begun and then stayed below 1°/s for a second', () => {
    const marks = track({ pedal: () => 0, yaw: (t) => (t < 1.5 ? 0 : t < 4 ? 5 * DEG : 0.2 * DEG) });
    expect(marks.yawArrestedTick).toBe(480);
    expect(track({ pedal: () => 0, yaw: () => 0.5 * DEG }).yawArrestedTick).toBeNull();
  });
  it('keeps the greatest bank with its side', () => {
    const marks = track({ pedal: () => 0, bank: (t) => (t > 3 && t < 4 ? -20 * DEG : 5 * DEG) });
    expect(marks.peakBankRad).toBeCloseTo(-20 * DEG, 9);
  });
});

describe('phases', () => {
  it('recognise, correct, hold meet without gaps', () => {
    const marks = track({ pedal: (t) => (t < 2.5 ? 0 : 0.6), yaw: (t) => (t < 1.2 ? 0 : t < 4 ? -5 * DEG : 0) });
    const phases = phasesOf(marks, 10, true);
    expect(phases.map((p) => p.text)).toEqual(['all engines', 'recognise 1.5 s', 'correct 1.5 s', 'hold']);
    for (let i = 1; i < phases.length; i += 1) expect(phases[i].fromS).toBe(phases[i - 1].toS);
    expect(phases[0].fromS).toBe(0);
    expect(phases.at(-1)?.toS).toBe(10);
  });
  it('say when the pedal never came and when nothing happened', () => {
    expect(phasesOf(track({ pedal: () => 0 }), 10, true).at(-1)?.text).toBe('no correct pedal');
    expect(phasesOf(createReactionTracker().marks, 10, false)[0].text).toBe('nothing happened');
  });
});

describe('film', () => {
  it('starts at the event and turns whole pages', () => {
    expect(filmTimes(3, 30, 3.2, 6)).toEqual([3, 4, 5, 6, 7, 8]);
    expect(filmTimes(3, 30, 9, 6)).toEqual([9, 10, 11, 12, 13, 14]);
    expect(filmTimes(3, 30, 0, 6)[0]).toBe(3);
    expect(filmTimes(3, 5, 3, 6)).toEqual([3, 4, 5]);
    expect(filmTimes(8, 5, 3, 6)).toEqual([5]);
  });
  it('finds the frame nearest to the cursor', () => {
    expect(nearestFrame([3, 4, 5], 4.4)).toBe(1);
  });
});
