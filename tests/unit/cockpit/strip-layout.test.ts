import { describe, expect, it } from 'vitest';
import { DEG } from '#shared/units/constants.ts';
import { largeFrame, placeStrip, smallFrame } from '../../../src/components/instruments/strip-layout.ts';
import type { BalanceNow, BalanceWanted } from '../../../src/components/instruments/balance-verdict.ts';

const now: BalanceNow = {
  timeS: 1.9,
  betaRad: 8.2 * DEG,
  ballWidths: 2.2,
  pedal: 0.49,
  rudderRad: -0.35 * 0.4,
  rudderMaxRad: 0.4,
  rudderAvailableRad: 0.4,
  phiRad: -5.4 * DEG,
};
const wanted: BalanceWanted = { found: true, betaRad: 0, ballWidths: 0.6, pedal: 0.58, phiRad: 2.5 * DEG };

describe('large strip at 920 px', () => {
  const frame = largeFrame(920);
  it('has the proportions of the drawn sheet', () => {
    // Read off the approved drawing of the flying sheet: box 118–706, line at 412, 268 px to the end of a scale.
    expect(frame).toMatchObject({ left: 118, right: 706, centre: 412, half: 268 });
  });

  it('puts under-rudder with a left failure to left, right, left of the line', () => {
    const at = placeStrip(frame, now, wanted);
    expect(at.noseX).toBeCloseTo(412 - 0.82 * 268, 1);
    expect(at.ballX).toBeGreaterThan(frame.centre);
    expect(at.ballX).toBeCloseTo(412 + (1.6 / 2.2) * 268, 1);
    expect(at.pedalX).toBeLessThan(frame.centre);
    expect(at.rudderX).toBeLessThan(at.pedalX); // the rudder lags behind the pedal
  });

  it('slides the scales so that what is wanted lies on the line', () => {
    const held = { ...now, betaRad: wanted.betaRad, ballWidths: wanted.ballWidths, pedal: wanted.pedal };
    const at = placeStrip(frame, held, wanted);
    expect([at.noseX, at.ballX, at.pedalX]).toEqual([frame.centre, frame.centre, frame.centre]);
    // Drawn sheet: the zero of the ball at 342.56 with 0.57 widths wanted.
    expect(placeStrip(frame, held, { ...wanted, ballWidths: 0.57 }).ballZeroX).toBeCloseTo(342.56, 1);
    expect(at.pedalZeroX).toBeLessThan(frame.centre);
  });

  it('clamps past the edge and says on which side', () => {
    const at = placeStrip(frame, { ...now, betaRad: 12 * DEG, pedal: -0.9 }, wanted);
    expect(at.noseX).toBeCloseTo(frame.centre - frame.half, 6);
    expect(at.noseClamp).toBe(-1);
    expect(at.pedalClamp).toBe(-1);
    expect(placeStrip(frame, { ...now, betaRad: -12 * DEG }, wanted).noseClamp).toBe(1);
  });

  it('draws the wings at 0.42 of their slope, left tip down in a left bank, and never past the row', () => {
    const at = placeStrip(frame, now, wanted);
    expect(at.wingDrop).toBeCloseTo(0.42 * 268 * Math.tan(5.4 * DEG), 6);
    expect(at.wantedWingDrop).toBeLessThan(0);
    expect(placeStrip(frame, { ...now, phiRad: -120 * DEG }, wanted).wingDrop).toBe(14);
  });
});

describe('other sizes', () => {
  it('the 700 px strip keeps 158 px to the end of a scale', () => {
    expect(largeFrame(700)).toMatchObject({ right: 486, half: 158 }); // approved drawing of the states sheet
  });
  it('drops labels and then readouts where there is no room', () => {
    expect(largeFrame(500)).toMatchObject({ labels: false, readouts: true });
    expect(largeFrame(340)).toMatchObject({ labels: false, readouts: false });
    expect(largeFrame(340).half).toBeGreaterThan(100);
  });
  it('the small strip keeps its markers inside', () => {
    const frame = smallFrame(136);
    const at = placeStrip(frame, { ...now, betaRad: 30 * DEG }, wanted);
    expect(at.noseX).toBe(22);
  });
});
