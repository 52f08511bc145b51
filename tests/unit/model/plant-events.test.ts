import { describe, expect, it } from 'vitest';
import { createObservation } from '#shared/model/plant.ts';
import type { Fidelity, Observation, Plant } from '#shared/model/plant-types.ts';
import * as X from '#shared/model/state-layout.ts';
import { DEG, KT } from '#shared/units/constants.ts';
import { fly, flying, shippedAirframe } from './support/plants.ts';

function seen(plant: Plant): Observation {
  const out = createObservation(plant.engineCount);
  plant.observeInto(out);
  return out;
}

describe('start', () => {
  it.each(['large-angle', 'small-disturbance'] as Fidelity[])(
    'is trimmed: centred controls are hands off (%s)',
    (fidelity) => {
      const plant = flying('single-trainer', { setup: { fidelity } });
      const rate = new Float64Array(plant.x.length);
      plant.derivativeInto(rate);
      for (const i of [X.X_P, X.X_R, X.X_PHI, X.X_AILERON, X.X_RUDDER, X.X_THRUST])
        expect(Math.abs(rate[i])).toBeLessThan(1e-9);
      expect(Math.abs(plant.startTrim.rudderRad)).toBeGreaterThan(2 * DEG); // swirl and blade offset of the propeller
      expect(seen(plant)).toMatchObject({ stick: 0, pedal: 0, pedalForceN: 0, phiRad: 0 });
      expect(Math.abs(seen(plant).ballWidths)).toBeLessThan(1e-9);
    },
  );

  it('names what it cannot start from', () => {
    expect(() => flying('light-twin', { setup: { configuration: 'cruise' } })).toThrow(/cruise/);
    expect(() => flying('light-twin', { start: { levers: [1] } })).toThrow(/1 levers for 2/);
    expect(() => flying('light-twin', { tasKt: 60, start: { levers: [0, 1] } })).toThrow(
      expect.objectContaining({ code: 'trim-beyond-travel' }),
    );
    expect(() => flying('light-twin', { start: { casMps: NaN } })).toThrow(/start speed/);
    const automation = { pitch: { mode: 'glidepath' as const }, yawDamper: false, rudderRatio: false };
    expect(() => flying('light-twin', { setup: { automation } })).toThrow(
      expect.objectContaining({ code: 'no-runway' }),
    );
  });
});

describe('engine events', () => {
  it('a failure spools down with its time constant, windmilling at once', () => {
    const plant = flying('light-twin');
    const before = plant.x[X.X_THRUST];
    plant.failEngine(0, 'windmilling');
    const o = seen(plant);
    expect(o.windmillDragN[0]).toBeCloseTo(o.qbarPa * 0.28, 9);
    expect(o.engineState[0]).toBe(1);
    fly(plant, 0.4);
    expect(plant.x[X.X_THRUST] / before).toBeCloseTo(Math.exp(-1), 3);
    expect(seen(plant).thrustAvailableN[0]).toBeGreaterThan(2000);
  });

  it('feathering moves the drag area linearly, and the switch moves it back', () => {
    const plant = flying('light-twin');
    plant.failEngine(0, 'windmilling');
    plant.inputs.feather[0] = 1;
    const area = (): number => seen(plant).windmillDragN[0] / seen(plant).qbarPa;
    fly(plant, 1);
    expect(area()).toBeCloseTo(0.28 - (0.28 - 0.05) / 4, 9);
    expect(seen(plant).engineState[0]).toBe(2);
    fly(plant, 3.5);
    expect(area()).toBeCloseTo(0.05, 9);
    plant.inputs.feather[0] = 0;
    fly(plant, 2);
    expect(area()).toBeCloseTo(0.165, 9);
  });

  it('autofeather is a failure that feathers from the cut', () => {
    const plant = flying('commuter-turboprop');
    plant.failEngine(1, 'feathered');
    fly(plant, 1.5);
    expect(seen(plant).windmillDragN[1] / seen(plant).qbarPa).toBeCloseTo(0.5 * (0.85 + 0.1), 9);
  });

  it('feathering a live engine takes its thrust', () => {
    const plant = flying('light-twin');
    plant.featherEngine(1);
    fly(plant, 3);
    expect(plant.x[X.X_THRUST + 1]).toBeLessThan(10);
    expect(seen(plant).engineState[1]).toBe(2);
  });

  it('a jet that is shut down windmills', () => {
    const plant = flying('twin-jet');
    plant.inputs.feather[1] = 1;
    fly(plant, 6);
    expect(plant.x[X.X_THRUST + 1]).toBeLessThan(1500);
    expect(seen(plant).windmillDragN[1] / seen(plant).qbarPa).toBeCloseTo(0.5, 9);
    expect(seen(plant).engineState[1]).toBe(1);
  });

  it('a partial failure leaves its fraction and no drag; restoring undoes everything', () => {
    const plant = flying('light-twin');
    plant.failEnginePartial(0, 0.4);
    fly(plant, 4);
    expect(seen(plant).thrustN[0] / seen(plant).thrustAvailableN[0]).toBeCloseTo(0.4, 2);
    expect(seen(plant).windmillDragN[0]).toBe(0);
    expect(seen(plant).engineState[0]).toBe(3);
    plant.failEngine(0, 'feathered');
    fly(plant, 2);
    plant.restoreEngine(0);
    expect(seen(plant)).toMatchObject({ engineState: Uint8Array.of(0, 0), windmillDragN: Float64Array.of(0, 0) });
    fly(plant, 5);
    expect(seen(plant).thrustN[0] / seen(plant).thrustAvailableN[0]).toBeCloseTo(1, 2);
  });

  it('a lever event takes the lever until the pilot moves it', () => {
    const plant = flying('light-twin');
    plant.setLever(1, 0.2, 1);
    fly(plant, 0.5);
    expect(seen(plant).levers[1]).toBeCloseTo(0.6, 9);
    fly(plant, 1);
    expect(seen(plant).levers).toEqual(Float64Array.of(1, 0.2));
    plant.inputs.levers[1] = 0.9;
    plant.step();
    expect(seen(plant).levers[1]).toBe(0.9);
    plant.setLever('all', 0.5, 0);
    plant.step();
    expect(seen(plant).levers).toEqual(Float64Array.of(0.5, 0.5));
    expect(() => plant.setLever(2, 0.5, 1)).toThrow(/engine 2/);
    expect(() => plant.failEngine(-1, 'windmilling')).toThrow(/engine -1/);
  });
});

describe('control events', () => {
  it('surfaces follow lag and rate, and stop at their travel', () => {
    const plant = flying('light-twin', { setup: { fidelity: 'small-disturbance' } });
    plant.inputs.stick = 1;
    const start = plant.x[X.X_AILERON];
    fly(plant, 0.1);
    expect((plant.x[X.X_AILERON] - start) / DEG).toBeCloseTo(9, 6); // 90°/s
    fly(plant, 1.5);
    expect(plant.x[X.X_AILERON] / DEG).toBeCloseTo(20 + start / DEG < 20 ? 20 + start / DEG : 20, 4);
  });

  it('a jam holds the surface, at an angle it is sent there, restoring gives it back', () => {
    const plant = flying('light-twin');
    const held = plant.x[X.X_RUDDER];
    plant.jamRudder();
    plant.inputs.pedal = 1;
    fly(plant, 1);
    expect(plant.x[X.X_RUDDER]).toBe(held);
    expect(seen(plant).rudderAvailableRad).toBe(0);
    plant.jamRudder(-10 * DEG);
    fly(plant, 1);
    expect(plant.x[X.X_RUDDER] / DEG).toBeCloseTo(-10, 3);
    plant.restoreControls();
    fly(plant, 1);
    expect(plant.x[X.X_RUDDER] / DEG).toBeLessThan(-20);
  });

  it('a hardover runs at the surface rate to the stop of its side', () => {
    const plant = flying('light-twin', { setup: { fidelity: 'small-disturbance' } });
    const start = plant.x[X.X_RUDDER];
    plant.hardoverRudder(1);
    fly(plant, 0.1);
    expect((plant.x[X.X_RUDDER] - start) / DEG).toBeCloseTo(-9, 6);
    fly(plant, 0.5);
    expect(plant.x[X.X_RUDDER] / DEG).toBeCloseTo(-25, 3);
  });

  it('half aileron halves the rolling moment of the aileron', () => {
    const plant = flying('light-twin');
    plant.inputs.stick = 0.5;
    fly(plant, 0.3);
    const whole = seen(plant).rollParts.aileron;
    plant.halveAileron();
    expect(seen(plant).rollParts.aileron).toBeCloseTo(whole / 2, 9);
  });

  it('rudder trim: the event sets it in absolute terms, the pilot adds beside the start trim', () => {
    const plant = flying('light-twin');
    plant.inputs.rudderTrim = 0.1; // right: δr < 0
    fly(plant, 1);
    expect(plant.x[X.X_RUDDER]).toBeCloseTo(plant.startTrim.rudderRad - 2.5 * DEG, 4);
    plant.setRudderTrim(6 * DEG, 1);
    fly(plant, 2);
    expect(plant.x[X.X_RUDDER] / DEG).toBeCloseTo(6, 4);
    plant.inputs.rudderTrim = 0.2;
    fly(plant, 1);
    expect(plant.x[X.X_RUDDER] / DEG).toBeCloseTo(3.5, 3);
  });

  it('the yaw damper opposes yaw within its authority and fades as the turn goes on', () => {
    const damped = { pitch: { mode: 'hold-path' as const, pathRad: 0 }, yawDamper: true, rudderRatio: true };
    const plant = flying('twin-jet', { setup: { automation: damped } });
    plant.addGust({ axis: 'lateral', shape: 'step', peak: 12 });
    let largest = 0;
    fly(plant, 4, () => {
      const o = seen(plant);
      largest = Math.max(largest, Math.abs(o.yawDamperRad));
      const washed = plant.x[X.X_R] - plant.x[X.X_WASHOUT];
      if (Math.abs(washed) > 1e-6) expect(Math.sign(o.yawDamperRad)).toBe(Math.sign(washed)); // δr > 0 yaws left
    });
    expect(largest / DEG).toBeGreaterThan(1);
    expect(largest / DEG).toBeLessThanOrEqual(3 + 1e-9);
    plant.setYawDamper(false);
    expect(seen(plant).yawDamperRad).toBe(0);
  });

  it('the ratio changer gives full pedal k times the travel, and sticks where it is', () => {
    const automation = { pitch: { mode: 'hold-path' as const, pathRad: 0 }, yawDamper: false, rudderRatio: true };
    const plant = flying('twin-jet', { tasKt: 240, heightFt: 0, setup: { configuration: 'clean', automation } });
    const k = seen(plant).rudderRatio;
    expect(k).toBeCloseTo(160 / 240, 9);
    expect(seen(plant).rudderAvailableRad).toBeCloseTo(k * 28 * DEG, 9);
    plant.setRudderRatio('stuck');
    plant.setLever('all', 0, 0);
    fly(plant, 20);
    expect(seen(plant).easMps).toBeLessThan(235 * KT);
    expect(seen(plant).rudderRatio).toBe(k);
    plant.setRudderRatio('normal');
    expect(seen(plant).rudderRatio).toBeGreaterThan(k);
    const off = flying('twin-jet', { tasKt: 240, setup: { automation: { ...automation, rudderRatio: false } } });
    expect(seen(off).rudderRatio).toBe(1);
  });

  it('the pedal force limit stops the pedal: light twin, 22 N/° at 80 kt, 667 N', () => {
    const plant = flying('light-twin', { tasKt: 130, heightFt: 0, setup: { fidelity: 'small-disturbance' } });
    plant.inputs.pedal = 1;
    fly(plant, 1.5);
    const share = (plant.startTrim.rudderRad - plant.x[X.X_RUDDER]) / DEG;
    expect(share).toBeCloseTo(667 / 22 / (130 / 80) ** 2, 3);
    expect(seen(plant).pedalForceN).toBeCloseTo(667, 1);
    expect(seen(plant).rudderSaturated).toBe(true);
  });
});

describe('configuration', () => {
  it('changes over 4 s, and a second change waits for the first', () => {
    const plant = flying('light-twin');
    const drag = (): number => {
      const o = seen(plant);
      return o.forceDragN / (o.qbarPa * 17) - 0.052 * o.CL * o.CL;
    };
    const clean = drag();
    plant.setConfiguration('approach');
    plant.setConfiguration('take-off');
    fly(plant, 4 - 1 / 120);
    expect(drag()).toBeGreaterThan(clean + 0.03);
    fly(plant, 4.2);
    expect(drag()).toBeCloseTo(clean, 3);
    expect(plant.aircraft.configuration).toBe('take-off');
    expect(() => plant.setConfiguration('cruise')).toThrow(/cruise/);
  });

  it('blends derivatives linearly', () => {
    const plant = flying('light-twin');
    plant.setConfiguration('approach');
    fly(plant, 2);
    const o = seen(plant);
    const [from, to] = shippedAirframe('light-twin').configurations.map(
      ({ CD0, kInduced }) => CD0 + kInduced * o.CL * o.CL,
    );
    expect(o.forceDragN / (o.qbarPa * 17)).toBeCloseTo(0.5 * (from + to) + 0.165 * o.betaRad ** 2, 9);
  });
});
