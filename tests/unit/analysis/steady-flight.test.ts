import { describe, expect, it } from 'vitest';
import { climbPoint, climbRates } from '#shared/analysis/climb.ts';
import { rudderAuthority } from '#shared/analysis/rudder-authority.ts';
import { crosswindLimit, sideslipCriterion, steadySideslips } from '#shared/analysis/sideslip-crosswind.ts';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import type { Aircraft } from '#shared/model/aircraft.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { densityAt } from '#shared/model/atmosphere.ts';
import { engineForces } from '#shared/model/engines.ts';
import { DEG, G0, KT } from '#shared/units/constants.ts';
import { SHIPPED, SHIPPED_SLUGS } from '../../reference/shipped-airframes.ts';

const twin = prepareAircraft(SHIPPED['light-twin']);
const jet = prepareAircraft(SHIPPED['twin-jet']);

function changed(change: (airframe: Airframe) => void): Aircraft {
  const copy = structuredClone(SHIPPED['light-twin']);
  change(copy);
  return prepareAircraft(copy);
}

describe('steady sideslip', () => {
  it('mirrors and is nearly linear in the sideslip', () => {
    const [left, right, double] = steadySideslips(twin, 70 * KT, 0, [-5 * DEG, 5 * DEG, 10 * DEG]);
    expect(left?.rudderRad).toBeCloseTo(-(right?.rudderRad ?? NaN), 12);
    expect(left?.phiRad).toBeCloseTo(-(right?.phiRad ?? NaN), 12);
    expect((double?.aileronRad ?? NaN) / (right?.aileronRad ?? NaN)).toBeCloseTo(2, 1);
    expect(right?.crosswindMps).toBeCloseTo(70 * KT * Math.sin(5 * DEG), 9);
  });

  it('banks into the wind and crosses the controls', () => {
    for (const slug of SHIPPED_SLUGS) {
      const [point] = steadySideslips(prepareAircraft(SHIPPED[slug]), 90 * KT, 0, [6 * DEG]);
      expect(point?.phiRad, slug).toBeGreaterThan(0);
      expect(point?.aileronRad, slug).toBeGreaterThan(0);
      expect(point?.rudderRad, slug).toBeGreaterThan(0);
    }
  });
});

describe('crosswind limit', () => {
  it('uses the binding limit up and no other beyond it', () => {
    const { controlPower, limitedBy } = crosswindLimit(twin, 70 * KT, 0);
    expect(Math.max(...controlPower.use)).toBeCloseTo(1, 9);
    const index = ['rudder travel', 'aileron travel', 'pedal force', 'fin stall'].indexOf(limitedBy);
    expect(controlPower.use[index]).toBeCloseTo(1, 9);
  });

  it('gives the value within 15° of sideslip beside the one by control power', () => {
    const { controlPower, withinData, outsideData } = crosswindLimit(twin, 70 * KT, 0);
    expect(outsideData).toBe(true);
    expect(withinData.betaRad).toBeCloseTo(15 * DEG, 12);
    expect(controlPower.crosswindMps).toBeGreaterThan(withinData.crosswindMps);
    const weak = crosswindLimit(
      changed((a) => (a.controls.rudderMax_deg = 8)),
      70 * KT,
      0,
    );
    expect(weak).toMatchObject({ outsideData: false, limitedBy: 'rudder travel' });
    expect(weak.withinData).toEqual(weak.controlPower);
  });

  it('asks 0.2 VS0 of part 23, and 20 to 25 kt of part 25', () => {
    const { part23Mps, part25Mps } = crosswindLimit(jet, 140 * KT, 0);
    expect(part23Mps).toBeCloseTo(0.2 * 107.9 * KT, 1);
    expect(part25Mps).toBeCloseTo(0.2 * 107.9 * KT, 1);
    expect(crosswindLimit(twin, 70 * KT, 0).part25Mps).toBeCloseTo(20 * KT, 9);
  });

  it('ends where no bank balances the side force', () => {
    const slippery = changed((a) => {
      a.controls.aileronMax_deg = 90;
      a.controls.rudderMax_deg = 90;
      a.fin = undefined;
      a.controls.pedalForce = undefined;
      for (const { derivatives } of a.configurations) for (const row of derivatives) row.CY_beta = -4;
    });
    expect(crosswindLimit(slippery, 120 * KT, 0).limitedBy).toBe('bank');
  });

  it('names dependent controls and bad speeds', () => {
    const dependent = changed((a) => {
      for (const { derivatives } of a.configurations) {
        for (const row of derivatives) Object.assign(row, { Cl_da: 0.1, Cn_da: -0.1, Cl_dr: 0.1, Cn_dr: -0.1 });
      }
    });
    expect(() => crosswindLimit(dependent, 70 * KT, 0)).toThrow(expect.objectContaining({ code: 'singular-trim' }));
    for (const speed of [0, -5, Number.NaN, Infinity]) {
      expect(() => crosswindLimit(twin, speed, 0)).toThrow(expect.objectContaining({ code: 'bad-argument' }));
    }
  });

  it('judges 3.3.7.1 with three quarters of the aileron', () => {
    const criterion = sideslipCriterion(twin, 70 * KT, 0);
    const full = crosswindLimit(twin, 70 * KT, 0);
    expect(criterion.level).toBe('met');
    expect(criterion.value).toBeLessThan(full.controlPower.betaRad / DEG);
    const weak = changed((a) => (a.controls.aileronMax_deg = 4));
    expect(sideslipCriterion(weak, 70 * KT, 0)).toMatchObject({
      level: 'not met',
      remark: 'limited by aileron travel',
    });
  });
});

describe('climb', () => {
  it('balances power: rate × weight = (thrust − drag) × speed', () => {
    const V = 95 * KT;
    const { rateMps } = climbPoint(twin, V, 1000, { lever: 0.8, failed: [], feathered: false });
    const qS = 0.5 * densityAt(1000) * V * V * twin.wingAreaM2;
    const CL = (twin.massKg * G0) / qS;
    const drag = qS * (twin.CD0 + twin.kInduced * CL * CL);
    const { forwardN } = engineForces(twin, [0.8, 0.8], ['running', 'running'], V, 1000);
    expect(rateMps * twin.massKg * G0).toBeCloseTo((forwardN - drag) * V, 5);
  });

  it('falls from all engines to one feathered to one windmilling, and a jet cannot feather', () => {
    const rates = climbRates(twin, 90 * KT, 0, 0);
    const [all, windmilling, feathered] = [rates.allEngines, rates.windmilling, rates.feathered].map(
      (point) => point?.rateMps ?? NaN,
    );
    expect(all).toBeGreaterThan(feathered);
    expect(feathered).toBeGreaterThan(windmilling);
    const jetRates = climbRates(jet, 150 * KT, 0, 0);
    expect(jetRates.feathered?.rateMps).toBe(jetRates.windmilling?.rateMps);
  });

  it('is worse with the ball centred than with zero sideslip', () => {
    const zero = climbRates(twin, 90 * KT, 0, 0).windmilling;
    const ball = climbRates(twin, 90 * KT, 0, 0, 1, 'ball-centred').windmilling;
    expect(ball?.betaRad).not.toBe(0);
    expect(ball?.rateMps).toBeLessThan(zero?.rateMps ?? NaN);
  });
});

describe('rudder authority', () => {
  it('meets the demand exactly at the minimum control speed with wings level', () => {
    const speed = 75.8 * KT; // flight model §9, independent implementation, ±3 %
    const [below, above] = rudderAuthority(twin, 0, [0], [0.97 * speed, 1.03 * speed]);
    expect(below.neededLevelRad).toBeGreaterThan(below.availableRad);
    expect(above.neededLevelRad).toBeLessThan(above.availableRad);
  });

  it('is full with and without the ratio changer up to 160 kt, and less with it above', () => {
    const noForce = { ...jet, controls: { ...jet.controls, pedalForce: null } };
    const [slow, fast] = rudderAuthority(noForce, 0, [0], [150 * KT, 240 * KT]);
    expect(slow.availableRad).toBeCloseTo(slow.withoutRatioRad, 12);
    expect(fast.availableRad / fast.withoutRatioRad).toBeCloseTo(160 / 240, 3);
  });
});
