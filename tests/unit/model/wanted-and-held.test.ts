import { describe, expect, it } from 'vitest';
import { pilotRudderRad, rudderRatioAt } from '#shared/model/controls.ts';
import { finAngleRad, finEffectiveAngleRad, finStallAngleRad } from '#shared/model/fin.ts';
import { createObservation, createWanted } from '#shared/model/plant.ts';
import * as X from '#shared/model/state-layout.ts';
import { surfaceAfter } from '#shared/model/surfaces.ts';
import { sinCosInto } from '#shared/numerics/sin-cos.ts';
import { cos, sin } from '#shared/numerics/elementary.ts';
import { DEG } from '#shared/units/constants.ts';
import { AIRFRAMES, fly, flying, shippedAirframe } from './support/plants.ts';

describe('wanted values', () => {
  it.each(AIRFRAMES)('flown, they hold straight flight on the dead engine: %s', (slug) => {
    const plant = flying(slug);
    const wanted = createWanted();
    const now = createObservation(plant.engineCount);
    plant.failEngine(0, 'windmilling');
    fly(plant, 8, () => {
      plant.wantedInto(wanted);
      expect(wanted.found).toBe(true);
      plant.inputs.pedal = wanted.pedal;
      // the stick that holds the wanted bank
      const { [X.X_P]: p, [X.X_PHI]: phi } = plant.x;
      plant.inputs.stick = wanted.stick + 2 * (wanted.phiRad - phi) - 1 * p;
    });
    plant.observeInto(now);
    expect(Math.abs(now.rRadS) / DEG).toBeLessThan(0.6);
    expect(Math.abs(now.betaRad - wanted.betaRad) / DEG).toBeLessThan(1);
    expect(Math.abs(now.ballWidths - wanted.ballWidths)).toBeLessThan(0.2);
  });

  it('ask for right pedal and bank to the right when the left engine is dead, and less of it ball-centred', () => {
    const plant = flying('light-twin', { tasKt: 80 });
    plant.failEngine(0, 'windmilling');
    fly(plant, 1.5);
    const zero = createWanted();
    const ball = createWanted();
    plant.wantedInto(zero, 'zero-sideslip');
    plant.wantedInto(ball, 'ball-centred');
    expect(zero.pedal).toBeGreaterThan(0.2);
    expect(zero.phiRad).toBeGreaterThan(2 * DEG);
    expect(zero.ballWidths).toBeGreaterThan(0.3); // half a ball toward the live engine (common practice)
    expect(ball).toMatchObject({ phiRad: 0 });
    expect(Math.abs(ball.ballWidths)).toBeLessThan(1e-9);
    expect(ball.pedal).toBeGreaterThan(zero.pedal);
  });

  it('say when there is no trim', () => {
    const plant = flying('light-twin');
    plant.x[X.X_THRUST] = 0;
    plant.x[X.X_THRUST + 1] = 1e6;
    const wanted = createWanted();
    plant.wantedInto(wanted, 'zero-sideslip');
    expect(wanted.found).toBe(false);
  });
});

describe('what the hot loop repeats without calls', () => {
  it('the pilot share of the rudder is that of controls.ts', () => {
    for (const [slug, kt] of AIRFRAMES) {
      for (const mode of ['ratio', 'limit'] as const) {
        const airframe = shippedAirframe(slug);
        if (airframe.controls.rudderRatio) airframe.controls.rudderRatio.mode = mode;
        for (const share of [1, 1.4, 2]) {
          const plant = flying(slug, { airframe, tasKt: share * kt, setup: { fidelity: 'small-disturbance' } });
          const { controls } = plant.aircraft;
          const now = createObservation(plant.engineCount);
          for (const pedal of [-1, -0.3, 0.6, 1, 5]) {
            plant.inputs.pedal = pedal;
            fly(plant, 2.5);
            plant.observeInto(now);
            const k = rudderRatioAt(controls.rudderRatio, now.easMps);
            const wanted = pilotRudderRad(controls, Math.min(pedal, 1), now.easMps, k) + plant.startTrim.rudderRad;
            const held = Math.max(-controls.rudderMaxRad, Math.min(controls.rudderMaxRad, wanted));
            expect(now.rudderRatio).toBe(k);
            expect(plant.x[X.X_RUDDER]).toBeCloseTo(held, 9);
          }
        }
      }
    }
  });

  it('the fin stall is that of fin.ts', () => {
    const plant = flying('light-twin');
    const { fin } = plant.aircraft;
    if (!fin) throw new Error('no fin');
    const now = createObservation(2);
    let stalled = 0;
    for (let beta = -40; beta <= 40; beta += 2.5) {
      for (const rudder of [-20, 0, 12]) {
        Object.assign(plant.x, { [X.X_BETA]: beta * DEG, [X.X_RUDDER]: rudder * DEG, [X.X_R]: 0.1, [X.X_P]: -0.2 });
        plant.observeInto(now);
        const angle = finAngleRad(fin, beta * DEG, -0.2, 0.1, now.tasMps, rudder * DEG);
        const stall = finStallAngleRad(fin, angle, rudder * DEG);
        const lost = finEffectiveAngleRad(fin, angle, stall) - angle;
        expect(now.finAngleRad).toBeCloseTo(angle, 12);
        expect(now.yawParts.fin).toBeCloseTo(now.qbarPa * fin.areaM2 * fin.liftSlopePerRad * lost * fin.armM, 6);
        expect(now.finStalled).toBe(Math.abs(angle) > stall);
        if (now.finStalled) stalled++;
      }
    }
    expect(stalled).toBeGreaterThan(20);
  });

  it('the surfaces solve their lag and rate', () => {
    // by very short steps
    for (const [from, command] of [
      [0, 0.05],
      [0.3, -0.3],
      [-0.1, 0.2],
    ]) {
      let at = from;
      const dt = 1e-6;
      for (let i = 0; i < 250_000; i++) {
        at += dt * Math.max(-1.2, Math.min(1.2, (command - at) / 0.08));
        if (i === 49_999) expect(surfaceAfter(from, command, 1.2, 0.08, 0.05)).toBeCloseTo(at, 5);
      }
      expect(surfaceAfter(from, command, 1.2, 0.08, 0.25)).toBeCloseTo(at, 5);
    }
  });

  it('sine and cosine are those of the elementary functions to the last bit, or the last but one', () => {
    const table = [0, 0, 0];
    let different = 0;
    for (let i = 0; i < 50_000; i++) {
      table[0] = (i / 50_000 - 0.5) * (i % 3 === 0 ? 40 : i % 3 === 1 ? 1 : 2000);
      const angle = table[0];
      sinCosInto(table, 1);
      if (table[1] !== sin(angle) || table[2] !== cos(angle)) different++;
      expect(Math.abs(table[1] - sin(angle))).toBeLessThan(2.3e-16);
      expect(Math.abs(table[2] - cos(angle))).toBeLessThan(2.3e-16);
    }
    expect(different).toBeLessThan(50);
    for (const odd of [NaN, Infinity]) {
      table[0] = odd;
      sinCosInto(table, 1);
      expect(table[1]).toBeNaN();
    }
    table[0] = 1e7;
    sinCosInto(table, 1);
    expect(table[1]).toBe(sin(1e7));
  });
});
