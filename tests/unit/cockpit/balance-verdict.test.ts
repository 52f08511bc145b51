import { describe, expect, it } from 'vitest';
import { DEG } from '#shared/units/constants.ts';
import {
  type BalanceNow,
  type BalanceWanted,
  SETTLE_S,
  balanceError,
  createVerdictTracker,
  instantVerdict,
  verdictRemedy,
  verdictWord,
} from '../../../src/components/instruments/balance-verdict.ts';

const now = (betaDeg: number, pedal: number, timeS = 0): BalanceNow => ({
  timeS,
  betaRad: betaDeg * DEG,
  ballWidths: 0,
  pedal,
  rudderRad: 0,
  rudderMaxRad: 0.4,
  rudderAvailableRad: 0.4,
  phiRad: 0,
});
const wanted = (betaDeg = 0, pedal = 0.6): BalanceWanted => ({
  found: true,
  betaRad: betaDeg * DEG,
  ballWidths: 0.6,
  pedal,
  phiRad: 2.5 * DEG,
});

describe('balance error', () => {
  it('adds half of each share of its gate: 1.4° and 14 % each count one half', () => {
    // Convention of the design page: e = ½·s·(β−β*)/gβ + ½·s·(δp*−δp)/gp.
    expect(balanceError(now(1.4, 0.6), wanted(), 1)).toBeCloseTo(0.5, 12);
    expect(balanceError(now(0, 0.46), wanted(), 1)).toBeCloseTo(0.5, 12);
    expect(balanceError(now(1.4, 0.46), wanted(), 1)).toBeCloseTo(1, 12);
  });

  it('mirrors exactly when the other engine fails', () => {
    const left = balanceError(now(5, 0.2), wanted(0, 0.6), 1);
    const right = balanceError(now(-5, -0.2), wanted(0, -0.6), -1);
    expect(right).toBeCloseTo(left, 12);
  });
});

describe('instant verdict', () => {
  it('left engine dead, hands off: toward the dead side and more right pedal', () => {
    expect(instantVerdict(now(8.2, 0), wanted(), 1)).toBe('dead');
    expect(verdictWord('dead', 1)).toBe('Toward dead side');
    expect(verdictRemedy('dead', 1)).toBe('more right pedal');
    expect(verdictRemedy('dead', -1)).toBe('more left pedal');
  });

  it('too much pedal: toward the live side', () => {
    expect(instantVerdict(now(-5.6, 0.64), wanted(), 1)).toBe('live');
  });

  it('is not balanced when sideslip and pedal cancel in e but each is beyond two gates', () => {
    const crossed = now(4.2, 0.6 + 0.42);
    expect(Math.abs(balanceError(crossed, wanted(), 1))).toBeLessThan(1e-9);
    expect(instantVerdict(crossed, wanted(), 1)).not.toBe('balanced');
  });

  it('follows the wanted sideslip of the ball-centred technique', () => {
    expect(instantVerdict(now(2.5, 0.7), wanted(2.5, 0.7), 1)).toBe('balanced');
    expect(instantVerdict(now(0, 0.7), wanted(6, 0.7), 1)).toBe('live');
  });

  it('names the pedal while both engines run', () => {
    expect(verdictWord(instantVerdict(now(6, 0), wanted(0, 0), 0), 0)).toBe('Wants right pedal');
    expect(verdictWord(instantVerdict(now(-6, 0), wanted(0, 0), 0), 0)).toBe('Wants left pedal');
  });
});

describe('verdict over time', () => {
  it('changes only after a quarter of a second without a break', () => {
    const tracker = createVerdictTracker();
    tracker.update(now(0, 0.6, 0), wanted(), 1);
    let changedAt = Number.NaN;
    for (let tick = 1; tick <= 120 && Number.isNaN(changedAt); tick += 1) {
      if (tracker.update(now(6, 0.6, tick / 120), wanted(), 1) === 'dead') changedAt = tick / 120;
    }
    // First different sample at 1/120 s; the change must follow SETTLE_S later, to a tick.
    expect(changedAt).toBeCloseTo(SETTLE_S + 1 / 120, 6);
  });

  it('a swing shorter than that changes nothing', () => {
    const tracker = createVerdictTracker();
    for (let tick = 0; tick < 240; tick += 1) {
      const swing = tick % 40 >= 16; // 0.13 s in, 0.2 s out
      expect(tracker.update(now(swing ? 6 : 0, 0.6, tick / 120), wanted(), 1)).toBe('balanced');
    }
  });

  it('takes the verdict at once after a seek', () => {
    const tracker = createVerdictTracker();
    tracker.update(now(0, 0.6, 1), wanted(), 1);
    expect(tracker.update(now(8, 0, 20), wanted(), 1)).toBe('dead');
    expect(tracker.update(now(0, 0.6, 3), wanted(), 1)).toBe('balanced');
  });
});
