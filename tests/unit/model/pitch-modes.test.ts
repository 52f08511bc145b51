import { describe, expect, it } from 'vitest';
import { createObservation } from '#shared/model/plant.ts';
import type { Observation, PitchMode, Plant, RunwaySetup } from '#shared/model/plant-types.ts';
import { glidepathPathRad } from '#shared/model/pitch-assistant.ts';
import * as X from '#shared/model/state-layout.ts';
import { DEG, FT, KT } from '#shared/units/constants.ts';
import type { Flight } from './support/plants.ts';
import { fly, flying } from './support/plants.ts';

function seen(plant: Plant): Observation {
  const out = createObservation(plant.engineCount);
  plant.observeInto(out);
  return out;
}

function pitching(pitch: PitchMode, flight: Flight = {}): Plant {
  const setup = { ...flight.setup, automation: { pitch, yawDamper: false, rudderRatio: true } };
  return flying('light-twin', { ...flight, setup });
}

/** Keeps the spiral out of tests of the pitch. */
function levelWings(plant: Plant): void {
  plant.inputs.stick = -2 * plant.x[X.X_PHI] - plant.x[X.X_P];
}

describe('hold-path', () => {
  it('closes a path error with a time constant of 1 s, wings level or banked', () => {
    for (const stick of [0, 0.25]) {
      const plant = pitching({ mode: 'hold-path', pathRad: 0 }, { tasKt: 110 });
      plant.inputs.stick = stick;
      fly(plant, 1.5);
      plant.inputs.stick = 0;
      plant.setPitchMode({ mode: 'hold-path', pathRad: 2 * DEG });
      const from = plant.x[X.X_THETA];
      fly(plant, 1);
      expect((2 * DEG - plant.x[X.X_THETA]) / (2 * DEG - from)).toBeCloseTo(Math.exp(-1), 3);
    }
  });

  it('stops at 0.95 CLmax: stall warning, the path falls away', () => {
    const plant = pitching({ mode: 'hold-path', pathRad: 0 }, { tasKt: 66, start: { levers: [0, 0] } });
    let warned = false;
    fly(plant, 6, () => {
      const o = seen(plant);
      expect(o.CL).toBeLessThanOrEqual(0.95 * 1.7 + 1e-12);
      warned ||= o.stallWarning;
    });
    expect(warned).toBe(true);
    expect(plant.x[X.X_THETA]).toBeLessThan(-0.01);
    expect(seen(plant).outsideData).toBe(true);
  });

  it('lets go beyond 70° of bank: lift equals weight', () => {
    const plant = pitching({ mode: 'hold-path', pathRad: 0 }, { tasKt: 130 });
    plant.inputs.stick = 1;
    fly(plant, 3, () => {
      const o = seen(plant);
      const beyond = Math.cos(o.phiRad) < Math.cos(70 * DEG);
      expect(o.assistantLetGo).toBe(beyond);
      if (beyond) expect(o.loadFactor).toBeCloseTo(1, 12);
    });
    expect(seen(plant).assistantLetGo).toBe(true);
  });
});

describe('hold-lift', () => {
  it('keeps the trimmed lift coefficient', () => {
    const plant = pitching({ mode: 'hold-lift' });
    plant.failEngine(0, 'windmilling');
    fly(plant, 3, () => expect(seen(plant).CL).toBe(plant.startTrim.CL));
  });
});

describe('hold-speed', () => {
  it('finds the path that holds the speed', () => {
    const plant = pitching({ mode: 'hold-speed', targetCasMps: 100 * KT }, { tasKt: 92 });
    fly(plant, 90, () => levelWings(plant));
    expect(seen(plant).casMps / KT).toBeCloseTo(100, 0);
    expect(seen(plant).verticalSpeedMps).toBeGreaterThan(2);
  });

  it('starts at the present path and moves it by no more than 3° a second, within 12°', () => {
    const plant = pitching({ mode: 'hold-path', pathRad: 0 }, { tasKt: 120, heightFt: 3000 });
    plant.setPitchMode({ mode: 'hold-speed', targetCasMps: 80 * KT });
    let steepest = 0;
    fly(plant, 12, (tick) => {
      steepest = Math.max(steepest, plant.x[X.X_THETA]);
      // a first-order follower of a 3°/s ramp lags by 1 s
      if (tick === 120) expect(plant.x[X.X_THETA] / DEG).toBeLessThan(3 * Math.exp(-1) + 0.01);
    });
    expect(steepest / DEG).toBeGreaterThan(11);
    expect(steepest / DEG).toBeLessThan(12);
  });
});

describe('decelerate', () => {
  it('follows a target that falls at its rate', () => {
    const plant = pitching({ mode: 'decelerate', rateMps2: 1 * KT }, { tasKt: 110, start: { levers: [0.1, 0.1] } });
    const start = seen(plant).casMps;
    fly(plant, 20);
    expect((start - seen(plant).casMps) / KT).toBeGreaterThan(17);
    expect((start - seen(plant).casMps) / KT).toBeLessThan(23);
  });

  it('stops falling at its target', () => {
    const pitch: PitchMode = { mode: 'decelerate', rateMps2: -2 * KT, targetCasMps: 95 * KT };
    const plant = pitching(pitch, { tasKt: 105, heightFt: 4000, start: { levers: [0.4, 0.4] } });
    fly(plant, 60, () => levelWings(plant));
    expect(seen(plant).casMps / KT).toBeCloseTo(95, 0);
  });
});

describe('manual', () => {
  it('moves the path target at 6° a second within 20°', () => {
    const plant = pitching({ mode: 'manual' }, { tasKt: 120 });
    plant.inputs.pitch = 0.5;
    fly(plant, 1);
    plant.inputs.pitch = 0;
    fly(plant, 8);
    expect(plant.x[X.X_THETA] / DEG).toBeCloseTo(3, 2);
    plant.inputs.pitch = -1;
    fly(plant, 6);
    plant.inputs.pitch = 0;
    fly(plant, 6);
    expect(plant.x[X.X_THETA] / DEG).toBeCloseTo(-20, 1);
  });
});

describe('glidepath', () => {
  const runway: RunwaySetup = {
    headingRad: 0,
    elevationM: 100,
    widthM: 30,
    thresholdM: 1500,
    glidepathRad: 3 * DEG,
    gearHeightM: 1.5,
  };

  it('adds 0.05° per foot of height error and flares from 25 ft of wheel height to −0.7°', () => {
    const on = 1000 * Math.tan(3 * DEG);
    expect(glidepathPathRad(3 * DEG, 1000, on, 1.5) / DEG).toBeCloseTo(-3, 9);
    expect(glidepathPathRad(3 * DEG, 1000, on + 20 * FT, 1.5) / DEG).toBeCloseTo(-4, 9);
    expect(glidepathPathRad(3 * DEG, 0, 1.5 + 12.5 * FT, 1.5) / DEG).toBeCloseTo(-1.85, 9);
    expect(glidepathPathRad(3 * DEG, -100, 1.5, 1.5) / DEG).toBeCloseTo(-0.7, 9);
  });

  it('flies down to a gentle touchdown near the threshold', () => {
    const heightFt = (100 + 1500 * Math.tan(3 * DEG)) / FT;
    const plant = pitching(
      { mode: 'glidepath' },
      {
        tasKt: 85,
        heightFt,
        start: { pathRad: -3 * DEG, levers: [0.25, 0.25] },
        setup: { runway, configuration: 'approach' },
      },
    );
    let ticks = 0;
    while (seen(plant).heightAboveRunwayM > 1.5 && ticks++ < 120 * 60) plant.step();
    const o = seen(plant);
    expect(-o.verticalSpeedMps).toBeGreaterThan(0.2);
    expect(-o.verticalSpeedMps).toBeLessThan(1.2);
    expect(o.northM).toBeGreaterThan(1450);
    expect(o.northM).toBeLessThan(1800);
  });
});
