import { describe, expect, it } from 'vitest';
import { stabilityInertias } from '#shared/model/aircraft.ts';
import { createObservation } from '#shared/model/plant.ts';
import type { Fidelity, MomentParts, Observation, Plant } from '#shared/model/plant-types.ts';
import * as X from '#shared/model/state-layout.ts';
import { DEG } from '#shared/units/constants.ts';
import { AIRFRAMES, fly, flying } from './support/plants.ts';

const G = 9.80665;
const sum = (parts: MomentParts): number => Object.values(parts).reduce((a: number, b: number) => a + b, 0);

/** A failure with late pedal, a gust that stalls the fin of some, turbulence and a changing wind. */
function roughFlight(slug: (typeof AIRFRAMES)[number][0], fidelity: Fidelity, each: (plant: Plant) => void): void {
  const plant = flying(slug, {
    setup: {
      fidelity,
      air: { windFromRad: 2, windMps: 8, profile: 'power-law', turbulence: 'moderate' },
      automation: { pitch: { mode: 'hold-path', pathRad: 0.01 }, yawDamper: true, rudderRatio: true },
    },
  });
  fly(plant, 12, (tick) => {
    if (tick === 30) plant.failEngine(0, 'windmilling');
    if (tick === 200) plant.inputs.pedal = 0.5;
    if (tick === 260) plant.addGust({ axis: 'lateral', shape: 'one-minus-cosine', peak: 22, gradientDistanceM: 40 });
    if (tick === 500) plant.inputs.stick = -0.3;
    if (tick === 700) plant.changeWind(4, 3, 4);
    if (tick === 900) plant.halveAileron();
    if (tick % 60 === 0 || (tick > 260 && tick < 300)) each(plant);
  });
}

describe.each(AIRFRAMES)('forces drawn, %s', (slug) => {
  it.each(['large-angle', 'small-disturbance'] as const)(
    'add up to m·a and I·ω̇ at every sampled tick: %s',
    (fidelity) => {
      let samples = 0;
      roughFlight(slug, fidelity, (plant) => {
        const o = createObservation(plant.engineCount);
        plant.observeInto(o);
        const rate = new Float64Array(plant.x.length);
        plant.derivativeInto(rate);
        const m = plant.aircraft.massKg;
        const weight = o.forceWeightN;
        samples++;
        const near = (got: number, wanted: number, scale: number): void =>
          expect(Math.abs(got - wanted)).toBeLessThan(1e-9 * scale);

        const side = o.forceRudderN + o.forceFinN + o.forceSideN;
        const { Ixx, Izz } = stabilityInertias(plant.aircraft, plant.startTrim.CL);
        // moments of the forces at their points: half-wing lifts, fin, rudder, engines, coupling
        const { fin } = plant.aircraft;
        const rollDrawn =
          (o.forceLiftLeftN - o.forceLiftRightN) * o.liftLeverM +
          o.forceFinN * (fin?.heightM ?? 0) +
          o.rollParts.rudder +
          o.engineRollNm +
          o.rollParts.inertia;
        near(rollDrawn, Ixx * rate[X.X_P], weight);
        near(sum(o.rollParts), Ixx * rate[X.X_P], weight);
        near(o.rollTotalNm, Ixx * rate[X.X_P], weight);
        near(sum(o.yawParts), Izz * rate[X.X_R], weight);
        near(o.yawTotalNm, Izz * rate[X.X_R], weight);

        if (fidelity === 'small-disturbance') {
          near(side + weight * Math.cos(o.thetaRad) * o.phiRad, m * o.ayMps2, weight);
          return;
        }
        const forward = o.thrustN.reduce((a, b) => a + b, 0) - o.windmillDragN.reduce((a, b) => a + b, 0);
        near(forward - o.forceDragN - weight * Math.sin(o.thetaRad), m * o.axMps2, weight);
        near(side + weight * Math.cos(o.thetaRad) * Math.sin(o.phiRad), m * o.ayMps2, weight);
        const up = o.forceLiftLeftN + o.forceLiftRightN;
        near(-up + weight * Math.cos(o.thetaRad) * Math.cos(o.phiRad), m * o.azMps2, weight);
      });
      expect(samples).toBeGreaterThan(20);
    },
  );
});

describe('accelerations', () => {
  it('are those of the track over the ground: second differences of the position', () => {
    const plant = flying('light-twin', {
      setup: { air: { windFromRad: 1, windMps: 9, profile: 'power-law', turbulence: 'none' } },
    });
    const o = createObservation(2);
    const positions: number[][] = [];
    let seen: Observation | null = null;
    plant.inputs.stick = 0.5;
    fly(plant, 3.2, (tick) => {
      if (tick === 100) plant.changeWind(-1, 4, 2);
      if (tick >= 340 && tick <= 342) {
        plant.observeInto(o);
        positions.push([o.northM, o.eastM, o.heightM]);
        if (tick === 341) seen = structuredClone(o);
      }
    });
    const s = seen as Observation | null;
    if (!s) throw new Error('not sampled');
    const [n, e, h] = [0, 1, 2].map((i) => (positions[2][i] - 2 * positions[1][i] + positions[0][i]) * 120 * 120);
    // body axes to north, east, up
    const [sf, cf, st, ct, sp, cp] = [s.phiRad, s.thetaRad, s.psiRad].flatMap((a) => [Math.sin(a), Math.cos(a)]);
    const { axMps2: x, ayMps2: y, azMps2: z } = s;
    const ahead = x * ct + y * sf * st + z * cf * st;
    const right = y * cf - z * sf;
    expect(ahead * cp - right * sp).toBeCloseTo(n, 2);
    expect(ahead * sp + right * cp).toBeCloseTo(e, 2);
    expect(x * st - y * sf * ct - z * cf * ct).toBeCloseTo(h, 2);
    expect(Math.abs(s.phiRad)).toBeGreaterThan(15 * DEG);
  });
});

describe('energy', () => {
  it.each(AIRFRAMES)('changes by the work of thrust, drag and side force only: %s', (slug) => {
    const plant = flying(slug);
    const o = createObservation(plant.engineCount);
    const m = plant.aircraft.massKg;
    const energy = (): number => m * (0.5 * plant.x[X.X_V] ** 2 + G * plant.x[X.X_HEIGHT]);
    const power = (): number => {
      plant.observeInto(o);
      const forward = o.thrustN.reduce((a, b) => a + b, 0) - o.windmillDragN.reduce((a, b) => a + b, 0) - o.forceDragN;
      const side = o.forceRudderN + o.forceFinN + o.forceSideN;
      return o.tasMps * (forward * Math.cos(o.betaRad) + side * Math.sin(o.betaRad));
    };
    plant.inputs.stick = 0.4;
    const start = energy();
    let work = 0;
    let before = power();
    fly(plant, 6, (tick) => {
      if (tick === 0) plant.failEngine(0, 'windmilling');
      const now = power();
      if (tick > 0) work += (0.5 * (before + now)) / 120;
      before = now;
    });
    work += (0.5 * (before + power())) / 120;
    expect(Math.abs(energy() - start - work)).toBeLessThan(2e-4 * Math.abs(work) + 1e-5 * start);
  });
});
