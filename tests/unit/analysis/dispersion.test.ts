import { describe, expect, it } from 'vitest';
import { drawAirframe, uncertainFields } from '#shared/analysis/airframe-sampling.ts';
import { createStaticDispersion, quantile } from '#shared/analysis/dispersion.ts';
import { valueAt } from '#shared/model/field-issue.ts';
import { SHIPPED } from '../../reference/shipped-airframes.ts';

const airframe = SHIPPED['light-twin'];
const SEED = 9;

describe('uncertain fields', () => {
  it('are derivatives, mass, drag, fin and engines under "*", no geometry, limits or break points', () => {
    const fields = uncertainFields(airframe).map((field) => field.field);
    expect(fields).toContain('/configurations/0/derivatives/1/Cn_beta');
    expect(fields).toContain('/mass/Izz_kgm2');
    expect(fields).toContain('/engines/0/power_W');
    for (const exact of ['/geometry/wingSpan_m', '/controls/rudderMax_deg', '/configurations/0/derivatives/1/CL']) {
      expect(fields).not.toContain(exact);
    }
  });

  it('take the uncertainty of the longest pointer, and any number that is named itself', () => {
    const sources = [
      { field: '*', text: 'all', uncertainty_pct: 10 },
      { field: '/configurations/0', text: 'take-off', uncertainty_pct: 20 },
      { field: '/configurations/0/derivatives/0/Cn_beta', text: 'measured', uncertainty_pct: 2 },
      { field: '/geometry/wingSpan_m', text: 'drawing', uncertainty_pct: 1 },
    ];
    const fields = uncertainFields({ ...airframe, sources });
    const of = (pointer: string) => fields.find((field) => field.field === pointer)?.uncertaintyPct;
    expect(of('/mass/mass_kg')).toBe(10);
    expect(of('/configurations/0/derivatives/0/Cl_beta')).toBe(20);
    expect(of('/configurations/0/derivatives/0/Cn_beta')).toBe(2);
    expect(of('/configurations/1/derivatives/0/Cn_beta')).toBe(10);
    expect(of('/geometry/wingSpan_m')).toBe(1);
  });
});

describe('draws', () => {
  const fields = uncertainFields(airframe);

  it('have a standard deviation of half the stated uncertainty and are cut at three of them (4,000 draws, seed 9)', () => {
    const pointer = '/mass/mass_kg';
    const draws = Array.from(
      { length: 4000 },
      (_, i) => Number(valueAt(drawAirframe(airframe, fields, SEED, i), pointer)) / airframe.mass.mass_kg - 1,
    );
    const mean = draws.reduce((sum, x) => sum + x / draws.length, 0);
    const deviation = Math.sqrt(draws.reduce((sum, x) => sum + (x - mean) ** 2 / draws.length, 0));
    expect(Math.abs(mean)).toBeLessThan(0.004);
    expect(deviation).toBeGreaterThan(0.047);
    expect(deviation).toBeLessThan(0.053);
    expect(Math.max(...draws.map(Math.abs))).toBeLessThanOrEqual(0.15);
  });

  it('do not change when another number becomes certain, and leave the airframe as it was', () => {
    const before = structuredClone(airframe);
    const all = drawAirframe(airframe, fields, SEED, 5);
    const fewer = drawAirframe(
      airframe,
      fields.filter((field) => field.field !== '/mass/mass_kg'),
      SEED,
      5,
    );
    expect(fewer.mass.Ixx_kgm2).toBe(all.mass.Ixx_kgm2);
    expect(fewer.mass.mass_kg).toBe(airframe.mass.mass_kg);
    expect(airframe).toEqual(before);
  });
});

describe('dispersion of static results', () => {
  const request = { condition: { tasMps: 46, heightM: 0 }, seed: SEED, draws: 60 };

  it('is the same in one piece and in many, and spreads about the nominal values', () => {
    const whole = createStaticDispersion(airframe, request);
    expect(whole.advance(60)).toBe(true);
    const pieces = createStaticDispersion(airframe, request);
    while (!pieces.advance(7)) expect(pieces.done % 7).toBe(0);
    expect(pieces.result()).toEqual(whole.result());
    for (const spread of whole.result().spreads) {
      expect(spread.values).toHaveLength(60);
      expect(spread.p5).toBeLessThan(spread.p50);
      expect(spread.p50).toBeLessThan(spread.p95);
      expect(Math.abs(spread.mean - spread.nominal)).toBeLessThan(4 * spread.standardDeviation);
    }
  });

  it('counts draws without a value by their reason', () => {
    const job = createStaticDispersion(SHIPPED['single-trainer'], { ...request, draws: 5 });
    job.advance(5);
    const speed = job.result().spreads.find((spread) => spread.quantity === 'minimum-control-speed');
    expect(speed?.without).toEqual({ 'no-engine-moment': 5 });
    expect(speed?.nominal).toBeNaN();
  });

  it('is refused by name without uncertainties or draws', () => {
    expect(() => createStaticDispersion({ ...airframe, sources: [] }, request)).toThrow(
      expect.objectContaining({ field: '/sources' }),
    );
    expect(() => createStaticDispersion(airframe, { ...request, draws: 0 })).toThrow(
      expect.objectContaining({ field: 'draws' }),
    );
  });
});

describe('quantile', () => {
  it('interpolates between neighbours', () => {
    expect(quantile(Float64Array.of(1, 2, 4), 0.75)).toBe(3);
    expect(quantile(new Float64Array(0), 0.5)).toBeNaN();
  });
});
