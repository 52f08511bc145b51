import { describe, expect, it } from 'vitest';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { Fidelity, Plant } from '#shared/model/plant-types.ts';
import * as X from '#shared/model/state-layout.ts';
import { DEG, KT } from '#shared/units/constants.ts';
import { AIRFRAMES, fly, flying, shippedAirframe } from './support/plants.ts';

/** States that change sign in the mirror. */
const ODD = new Set([X.X_BETA, X.X_P, X.X_R, X.X_PHI, X.X_PSI, X.X_EAST, X.X_AILERON, X.X_RUDDER, X.X_WASHOUT]);

/** The airframe seen in a mirror: engines on the other side, propellers turning the other way, in the same order. */
function mirrored(airframe: Airframe): Airframe {
  const out = structuredClone(airframe);
  for (const engine of out.engines) {
    engine.y_m = -engine.y_m;
    engine.rotation = engine.rotation === 'clockwise' ? 'counter-clockwise' : 'clockwise';
  }
  return out;
}

function differences(one: Plant, other: Plant): string[] {
  const out: string[] = [];
  one.x.forEach((value, i) => {
    const image = ODD.has(i) ? -other.x[i] : other.x[i];
    if (value !== image) out.push(`state ${i}: ${value} and ${image}`);
  });
  return out;
}

/** A busy half minute; `side` −1 flies its mirror image. */
function busyFlight(slug: (typeof AIRFRAMES)[number][0], fidelity: Fidelity, side: 1 | -1): Plant {
  const airframe = shippedAirframe(slug);
  const plant = flying(slug, {
    airframe: side === 1 ? airframe : mirrored(airframe),
    start: { pathRad: 0.02 },
    setup: {
      fidelity,
      air: { windFromRad: side * 50 * DEG, windMps: 6, profile: 'power-law', turbulence: 'none' },
      automation: { pitch: { mode: 'hold-path', pathRad: 0.02 }, yawDamper: true, rudderRatio: true },
    },
  });
  fly(plant, 20, (tick) => {
    if (tick === 60) plant.failEngine(0, 'feathered');
    if (tick === 200) plant.inputs.pedal = 0.4 * side;
    if (tick === 260) plant.inputs.stick = 0.25 * side;
    if (tick === 400)
      plant.addGust({ axis: 'lateral', shape: 'one-minus-cosine', peak: -8 * side, gradientDistanceM: 60 });
    if (tick === 480) plant.addGust({ axis: 'roll-rate', shape: 'ramp', peak: 0.05 * side, overS: 1 });
    if (tick === 600) plant.changeWind(-20 * DEG * side, 9 * KT, 3);
    if (tick === 700) plant.setRudderTrim(-4 * DEG * side, 1);
    if (tick === 800) plant.setLever('all', 0.7, 0.5);
    if (tick === 1100) plant.jamAileron();
    if (tick === 1500) plant.hardoverRudder(side);
    if (tick === 1560) plant.restoreControls();
  });
  return plant;
}

describe.each(AIRFRAMES)('the mirrored %s with mirrored events', (slug) => {
  it.each(['large-angle', 'small-disturbance'] as const)('flies the mirrored run bit for bit: %s', (fidelity) => {
    const one = busyFlight(slug, fidelity, 1);
    const other = busyFlight(slug, fidelity, -1);
    expect(Math.abs(one.x[X.X_PSI])).toBeGreaterThan(0.05);
    expect(differences(one, other)).toEqual([]);
  });
});
