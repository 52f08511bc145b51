import { describe, expect, it } from 'vitest';
import { prepareAircraft, stabilityInertias, stallTasMps } from '#shared/model/aircraft.ts';
import { densityAt } from '#shared/model/atmosphere.ts';
import { derivativesAtInto, outsideRows, ROLL_R, SIDE_BETA, YAW_BETA, YAW_R } from '#shared/model/derivatives.ts';
import { inertiasBodyToStability, inertiasStabilityToBody } from '#shared/model/inertia.ts';
import { ModelError } from '#shared/model/errors.ts';
import { DEG, KT } from '#shared/units/constants.ts';
import { shippedAirframe } from './support/plants.ts';

const twin = shippedAirframe('light-twin');

function at(aircraft: ReturnType<typeof prepareAircraft>, CL: number): Float64Array {
  const out = new Float64Array(15);
  derivativesAtInto(out, aircraft.derivatives, CL);
  return out;
}

describe('derivative rows', () => {
  const aircraft = prepareAircraft(twin);

  it('are linear in CL between rows and held beyond the ends', () => {
    expect(at(aircraft, 0.7)[YAW_BETA]).toBeCloseTo(0.5 * (0.088 + 0.085), 12);
    expect(at(aircraft, 0.95)[ROLL_R]).toBeCloseTo(0.22, 12);
    expect(at(aircraft, 0.1)).toEqual(at(aircraft, 0.45));
    expect(at(aircraft, 3)).toEqual(at(aircraft, 1.45));
    expect(outsideRows(aircraft.derivatives, 1.5)).toBeCloseTo(0.05, 12);
    expect(outsideRows(aircraft.derivatives, 1)).toBe(0);
  });

  it('may come in any order', () => {
    const shuffled = structuredClone(twin);
    shuffled.configurations[0].derivatives.reverse();
    expect(prepareAircraft(shuffled).derivatives).toEqual(aircraft.derivatives);
  });
});

describe('loading', () => {
  const loaded = structuredClone(twin);
  const aft = 0.2;
  loaded.loadings = [{ name: 'aft', mass_kg: 1600, cgAft_m: aft, Izz_kgm2: 6900 }];
  const base = prepareAircraft(twin);
  const moved = prepareAircraft(loaded, { loading: 'aft' });

  it('moves derivatives as a shift of the reference point does', () => {
    // independent form: N' = N + Δ·Y, and the old reference meets β + Δ·r/V
    const d0 = at(base, 1);
    const d1 = at(moved, 1);
    const shift = aft / twin.geometry.wingSpan_m;
    expect(d1[YAW_BETA]).toBeCloseTo(d0[YAW_BETA] + shift * d0[SIDE_BETA], 12);
    const sideR = d0[2] + 2 * shift * d0[SIDE_BETA];
    expect(d1[2]).toBeCloseTo(sideR, 12);
    expect(d1[YAW_R]).toBeCloseTo(d0[YAW_R] + 2 * shift * d0[YAW_BETA] + shift * sideR, 12);
    expect(d1[YAW_BETA]).toBeLessThan(d0[YAW_BETA]);
    expect(moved.fin?.armM).toBeCloseTo(4.7 - aft, 12);
  });

  it('takes its own mass and inertias and keeps the others', () => {
    expect(moved).toMatchObject({ massKg: 1600, Izz: 6900, Ixx: 3500, loading: 'aft' });
  });

  it('must exist, as must the configuration', () => {
    expect(() => prepareAircraft(twin, { loading: 'none such' })).toThrow(ModelError);
    expect(() => prepareAircraft(twin, { configuration: 'cruise' })).toThrow(/take-off, approach/);
  });
});

describe('inertias', () => {
  it('are rotated for the condition when given in body axes', () => {
    const body = structuredClone(twin);
    body.mass.axes = 'body';
    body.configurations[0].derivatives.forEach((row, i) => (row.alpha_deg = 2 + 4 * i));
    const aircraft = prepareAircraft(body);
    const CL = 0.7; // halfway between the first rows: alpha 4°
    const got = stabilityInertias(aircraft, CL);
    expect(got).toEqual(inertiasBodyToStability({ Ixx: 3500, Izz: 6800, Ixz: 150 }, 4 * DEG));
    expect(got.Ixx + got.Izz).toBeCloseTo(3500 + 6800, 9);
    expect(got.Ixx * got.Izz - got.Ixz * got.Ixz).toBeCloseTo(3500 * 6800 - 150 * 150, 3);
    const back = inertiasStabilityToBody(got, 4 * DEG);
    expect(back.Ixz).toBeCloseTo(150, 9);
  });

  it('are held constant when given in stability axes', () => {
    const aircraft = prepareAircraft(twin);
    expect(stabilityInertias(aircraft, 0.5)).toEqual(stabilityInertias(aircraft, 1.4));
  });

  it('take Iyy absent as the larger of Izz − Ixx and Ixx', () => {
    const without = structuredClone(twin);
    delete without.mass.Iyy_kgm2;
    expect(prepareAircraft(without).Iyy).toBe(3500);
    without.mass.Izz_kgm2 = 9000;
    expect(prepareAircraft(without).Iyy).toBe(5500);
  });
});

describe('dorsal fin', () => {
  it('raises the stall angle only where the data gives one', () => {
    const data = structuredClone(twin);
    expect(prepareAircraft(data, { dorsal: true }).fin?.stallAngleRad).toBeCloseTo(21 * DEG, 12);
    if (data.fin) data.fin.stallAngleWithDorsal_deg = 28;
    expect(prepareAircraft(data, { dorsal: true }).fin?.stallAngleRad).toBeCloseTo(28 * DEG, 12);
    expect(prepareAircraft(data).fin?.stallAngleRad).toBeCloseTo(21 * DEG, 12);
  });
});

describe('stall', () => {
  // flight model §9, computed by an independent implementation: light twin 60.5 kt, commuter 84.5, twin jet 107.9
  it.each([
    ['light-twin', 60.5],
    ['commuter-turboprop', 84.5],
    ['twin-jet', 107.9],
  ] as const)('of the %s is at %f kt', (slug, kt) => {
    expect(stallTasMps(prepareAircraft(shippedAirframe(slug)), densityAt(0)) / KT).toBeCloseTo(kt, 1);
  });
});
