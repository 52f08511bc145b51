import { describe, expect, it } from 'vitest';
import { prepareAircraft, stallTasMps } from '#shared/model/aircraft.ts';
import { densityAt } from '#shared/model/atmosphere.ts';
import { buildSmallDisturbance } from '#shared/model/small-disturbance.ts';
import type { Fidelity, Plant } from '#shared/model/plant-types.ts';
import * as X from '#shared/model/state-layout.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { tasFromCas } from '#shared/model/airspeeds.ts';
import { DEG, FT, KT } from '#shared/units/constants.ts';
import { AIRFRAMES, flying, shippedAirframe } from './support/plants.ts';

const LATERAL = [X.X_BETA, X.X_P, X.X_R, X.X_PHI];

/** The airframe with engines that pull straight ahead on the centre line: no engine moments, as the specification asks. */
function withoutEngineMoments(airframe: Airframe): Airframe {
  const quiet = structuredClone(airframe);
  for (const engine of quiet.engines) {
    Object.assign(engine, { y_m: 0, bladeOffset_m: 0, swirlArm_m: 0, torqueArm_m: 0, slipstreamLift: 0 });
  }
  return quiet;
}

/** Partial derivatives of the lateral state derivatives with one state, central differences about a steady trim. */
function column(plant: Plant, base: Float64Array, index: number, step: number): number[] {
  const up = base.slice();
  const down = base.slice();
  up[index] += step;
  down[index] -= step;
  const high = new Float64Array(base.length);
  const low = new Float64Array(base.length);
  plant.derivativeInto(high, up);
  plant.derivativeInto(low, down);
  return LATERAL.map((row) => (high[row] - low[row]) / (2 * step));
}

/** The start state with the thrust that makes the trim steady (V' = 0). */
function steadyState(plant: Plant): Float64Array {
  const state = plant.x.slice();
  const rate = new Float64Array(state.length);
  plant.derivativeInto(rate, state);
  const missing = -rate[X.X_V] * plant.aircraft.massKg;
  for (let i = 0; i < plant.engineCount; i++) state[X.X_THRUST + i] += missing / plant.engineCount;
  return state;
}

const close = (got: number, wanted: number, what: string): void => {
  const tolerance = 1e-6 * Math.max(Math.abs(wanted), 1e-3); // flight model §3: 1e-6 relative, below 1e-3 absolutely
  expect(Math.abs(got - wanted), `${what}: ${got} against ${wanted}`).toBeLessThan(tolerance);
};

describe.each(AIRFRAMES)('linearised about wings-level trim: %s', (slug) => {
  const airframe = withoutEngineMoments(shippedAirframe(slug));
  const cases = airframe.configurations.flatMap(({ name }) => {
    const stallKt = stallTasMps(prepareAircraft(airframe, { configuration: name }), densityAt(300 * FT)) / KT;
    return [1.13, 1.4, 1.9, 2.6].flatMap((share) =>
      ([0, -3, 5] as const).map((pathDeg) => [name, share * stallKt, pathDeg] as const),
    );
  });

  it.each(cases)('%s at %f kt, path %i°', (configuration, tasKt, pathDeg) => {
    for (const fidelity of ['large-angle', 'small-disturbance'] as Fidelity[]) {
      const pathRad = pathDeg * DEG;
      const plant = flying(slug, {
        airframe,
        tasKt,
        start: { pathRad },
        setup: {
          configuration,
          fidelity,
          automation: { pitch: { mode: 'hold-path', pathRad }, yawDamper: false, rudderRatio: true },
        },
      });
      const { heightM, casMps } = plant.setup.start;
      const aircraft = prepareAircraft(airframe, { configuration });
      const linear = buildSmallDisturbance(aircraft, {
        tasMps: tasFromCas(casMps, heightM),
        heightM,
        thetaRad: pathRad,
      });
      const base = steadyState(plant);
      LATERAL.forEach((state, j) => {
        const step = j === 1 || j === 2 ? 1e-3 : 3e-4;
        column(plant, base, state, step).forEach((got, i) => {
          close(got, linear.A[4 * i + j], `${fidelity} A[${i}][${j}]`);
        });
      });
      column(plant, base, X.X_AILERON, 1e-3).forEach((got, i) => close(got, linear.B.aileron[i], `aileron ${i}`));
      column(plant, base, X.X_RUDDER, 1e-3).forEach((got, i) => close(got, linear.B.rudder[i], `rudder ${i}`));
    }
  });
});

describe('asymmetric thrust', () => {
  it.each(AIRFRAMES)('enters as the engine moment inputs say: %s', (slug) => {
    const plant = flying(slug);
    const base = steadyState(plant);
    const { tasMps, heightM } = { tasMps: base[X.X_V], heightM: base[X.X_HEIGHT] };
    const { B } = buildSmallDisturbance(plant.aircraft, { tasMps, heightM });
    plant.aircraft.engines.forEach((engine, i) => {
      const got = column(plant, base, X.X_THRUST + i, 1);
      const yaw = -(engine.yEffectiveM + engine.spin * engine.swirlArmM);
      const roll = -(engine.slipstreamLift * engine.yM + engine.spin * engine.torqueArmM);
      for (const row of [1, 2]) expect(got[row]).toBeCloseTo(B.yawMoment[row] * yaw + B.rollMoment[row] * roll, 9);
    });
  });
});

describe('body-axis inertias', () => {
  it('are rotated for the trim in both fidelities', () => {
    const airframe = withoutEngineMoments(shippedAirframe('light-twin'));
    airframe.mass.axes = 'body';
    airframe.configurations[0].derivatives.forEach((row, i) => (row.alpha_deg = 3 + 5 * i));
    const plant = flying('light-twin', { airframe });
    const linear = buildSmallDisturbance(plant.aircraft, { tasMps: plant.x[X.X_V], heightM: plant.x[X.X_HEIGHT] });
    expect(Math.abs(linear.Ixz - 150)).toBeGreaterThan(50);
    const base = steadyState(plant);
    column(plant, base, X.X_BETA, 3e-4).forEach((got, i) => close(got, linear.A[4 * i], `A[${i}][0]`));
    column(plant, base, X.X_P, 1e-3).forEach((got, i) => close(got, linear.A[4 * i + 1], `A[${i}][1]`));
  });
});
