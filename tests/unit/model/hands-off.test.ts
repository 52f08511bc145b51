import { describe, expect, it } from 'vitest';
import { createObservation } from '#shared/model/plant.ts';
import * as X from '#shared/model/state-layout.ts';
import { DEG } from '#shared/units/constants.ts';
import { flying } from './support/plants.ts';

describe('light twin, take-off data, 80 kt TAS at 300 ft, path 0, levers 1, hold-path, left engine cut at 1 s', () => {
  const plant = flying('light-twin', { tasKt: 80 });
  const now = createObservation(2);
  const at: Record<string, number> = {};
  let passed100 = NaN;
  let leftYaw = NaN;
  let leftRoll = NaN;
  for (let tick = 0; tick < 13 * 120; tick++) {
    if (tick === 120) plant.failEngine(0, 'windmilling');
    plant.step();
    plant.observeInto(now);
    const since = now.timeS - 1;
    if (Number.isNaN(leftYaw) && now.rRadS < -2 * DEG) leftYaw = since;
    if (Number.isNaN(leftRoll) && now.phiRad < -2 * DEG) leftRoll = since;
    if (Number.isNaN(passed100) && Math.abs(now.phiRad) > 100 * DEG) passed100 = since;
    if (tick === 12 * 120) Object.assign(at, { psi: now.psiRad, theta: now.thetaRad, phi: now.phiRad });
  }

  it('passes 100° of bank 5.96 s after the cut, within 3 %', () => {
    // flight model §9, computed with an independent implementation
    expect(Math.abs(passed100 / 5.96 - 1)).toBeLessThan(0.03);
  });

  it('yaws left first, then rolls left, and ends in a spiral to the left', () => {
    // common practice: a fact any instructor would check
    expect(leftYaw).toBeLessThan(leftRoll);
    expect(at.psi).toBeLessThan(-60 * DEG);
    expect(at.theta).toBeLessThan(-20 * DEG);
    expect(plant.x[X.X_PHI]).toBeLessThan(0);
  });
});
