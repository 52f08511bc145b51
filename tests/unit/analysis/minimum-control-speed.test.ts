import { describe, expect, it } from 'vitest';
import { criticalEngine } from '#shared/analysis/critical-engine.ts';
import { controlSpeedCurve, controlSpeedFactors } from '#shared/analysis/control-speed-factors.ts';
import { minimumControlSpeed } from '#shared/analysis/minimum-control-speed.ts';
import type { ControlSpeed, ControlSpeedRequest } from '#shared/analysis/minimum-control-speed.ts';
import { createStaticSolver } from '#shared/analysis/static-solution.ts';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import type { Aircraft } from '#shared/model/aircraft.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { pedalRudderLimitRad } from '#shared/model/controls.ts';
import { easFromTas } from '#shared/model/airspeeds.ts';
import { DEG, KT } from '#shared/units/constants.ts';
import { SHIPPED } from '../../reference/shipped-airframes.ts';

const twin = prepareAircraft(SHIPPED['light-twin']);
const LEFT_FAILED = { heightM: 0, failed: [0] };

function found(aircraft: Aircraft, request: ControlSpeedRequest): ControlSpeed {
  const result = minimumControlSpeed(aircraft, request);
  if (!result.found) throw new Error(result.message);
  return result;
}

function changed(change: (airframe: Airframe) => void, slug: 'light-twin' | 'twin-jet' = 'light-twin'): Aircraft {
  const copy = structuredClone(SHIPPED[slug]);
  change(copy);
  return prepareAircraft(copy);
}

describe('static minimum control speed', () => {
  it('holds every limit at the answer and none of the banks 0.1 % below it', () => {
    for (const slug of ['light-twin', 'commuter-turboprop', 'twin-jet', 'four-jet'] as const) {
      const aircraft = prepareAircraft(SHIPPED[slug]);
      aircraft.engines.forEach((_, index) => {
        const { tasMps, phiRad } = found(aircraft, { heightM: 500, failed: [index] });
        const solver = createStaticSolver(aircraft, {
          heightM: 500,
          engines: { lever: 1, failed: [index], feathered: false },
        });
        expect(solver.solveAtBank(tasMps, phiRad)).toBe(true);
        expect(solver.largestUse).toBeLessThanOrEqual(1 + 1e-7);
        const side = Math.sign(phiRad) || 1;
        for (let bank = 0; bank <= 5; bank += 0.05) {
          solver.solveAtBank(0.999 * tasMps, side * bank * DEG);
          expect(solver.largestUse).toBeGreaterThan(1);
        }
      });
    }
  });

  it('is the lowest of the exactly held banks when the bank is free', () => {
    const aircraft = prepareAircraft(SHIPPED['four-jet']);
    const free = found(aircraft, { heightM: 0, failed: [1] });
    const banks = Float64Array.from({ length: 101 }, (_, i) => i * 0.05 * DEG);
    const curve = controlSpeedCurve(aircraft, { heightM: 0, failed: [1] }, 'bank', banks);
    const lowest = Math.min(...curve.map(({ result }) => (result.found ? result.tasMps : Infinity)));
    expect(free.tasMps).toBeLessThanOrEqual(lowest * (1 + 1e-9));
    expect(free.tasMps).toBeGreaterThan(lowest * 0.999);
  });

  it('names what binds', () => {
    const named = (change: (airframe: Airframe) => void) =>
      found(changed(change), { ...LEFT_FAILED, bank: { exactlyRad: 5 * DEG } }).limitedBy;
    expect(named(() => undefined)).toBe('rudder travel');
    expect(named((a) => (a.controls.aileronMax_deg = 3))).toBe('aileron travel');
    expect(named((a) => a.controls.pedalForce && (a.controls.pedalForce.limit_N = 250))).toBe('pedal force');
    expect(named((a) => a.fin && (a.fin.stallAngle_deg = 6))).toBe('fin stall');
  });

  it('leaves out the limits that are to be ignored', () => {
    const weak = changed((a) => a.controls.pedalForce && (a.controls.pedalForce.limit_N = 250));
    const ignored = found(weak, { ...LEFT_FAILED, ignore: ['pedal force'] });
    expect(ignored.tasMps).toBeCloseTo(found(twin, LEFT_FAILED).tasMps, 9);
    expect(found(weak, LEFT_FAILED).tasMps).toBeGreaterThan(ignored.tasMps);
  });

  it('counts the ratio changer where it binds', () => {
    const jet = prepareAircraft(SHIPPED['twin-jet']);
    const slow = found(jet, { ...LEFT_FAILED, bank: { exactlyRad: -5 * DEG } });
    const eas = easFromTas(slow.tasMps, 0);
    expect(eas).toBeGreaterThan(160 * KT);
    expect(Math.abs(slow.rudderRad)).toBeCloseTo(pedalRudderLimitRad(jet.controls, eas), 6);
  });

  it('mirrors: engines, rotations and failure swapped give the mirrored answer', () => {
    const mirrored = changed((a) => {
      for (const engine of a.engines) {
        engine.y_m = -engine.y_m;
        engine.rotation = engine.rotation === 'clockwise' ? 'counter-clockwise' : 'clockwise';
      }
    });
    const [a, b] = [found(twin, LEFT_FAILED), found(mirrored, LEFT_FAILED)];
    expect(b.tasMps).toBeCloseTo(a.tasMps, 9);
    for (const member of ['phiRad', 'betaRad', 'aileronRad', 'rudderRad'] as const) {
      expect(b[member]).toBeCloseTo(-a[member], 9);
    }
  });

  it('gives the bank at which the sideslip is zero', () => {
    const result = found(twin, LEFT_FAILED);
    const solver = createStaticSolver(twin, { heightM: 0, engines: { lever: 1, failed: [0], feathered: false } });
    solver.solveAtBank(result.tasMps, result.zeroSideslipBankRad ?? NaN);
    expect(Math.abs(solver.at.betaRad)).toBeLessThan(1e-9);
  });

  it('marks an answer below the stall', () => {
    const weak = changed((a) => a.engines.forEach((engine) => (engine.power_W = 60_000)));
    const result = found(weak, LEFT_FAILED);
    expect(result.belowStall).toBe(true);
    expect(result.casMps).toBeLessThan(result.stallCasMps);
  });

  it('takes several failed engines on one side as worse than one', () => {
    const jet = prepareAircraft(SHIPPED['four-jet']);
    const one = found(jet, LEFT_FAILED).tasMps;
    expect(found(jet, { heightM: 0, failed: [0, 1] }).tasMps).toBeGreaterThan(one);
    expect(found(jet, { heightM: 0, failed: [0, 2] }).tasMps).toBeLessThan(one);
  });

  it.each([
    ['no-engine-moment', prepareAircraft(SHIPPED['single-trainer'])],
    ['held-at-no-speed', changed((a) => (a.controls.rudderMax_deg = 0.01))],
    ['held-at-every-speed', changed((a) => a.engines.forEach((engine) => (engine.staticThrust_N = 1)))],
    [
      'singular-trim',
      changed((a) => {
        for (const configuration of a.configurations) {
          for (const row of configuration.derivatives) Object.assign(row, { CY_dr: 0, Cl_dr: 0, Cn_dr: 0 });
        }
      }),
    ],
  ] as const)('says %s instead of a number', (reason, aircraft) => {
    const result = minimumControlSpeed(aircraft, LEFT_FAILED);
    expect(result).toMatchObject({ found: false, reason });
    expect(result.stallCasMps).toBeGreaterThan(0);
  });

  it.each([
    ['unknown-engine', { heightM: 0, failed: [7] }],
    ['bad-argument', { heightM: 0, failed: [] }],
    ['bad-argument', { heightM: 0, failed: [0], lever: 1.5 }],
    ['bad-argument', { heightM: 0, failed: [0], bank: { exactlyRad: Number.NaN } }],
    ['non-finite-input', { heightM: Number.NaN, failed: [0] }],
  ] as const)('refuses a bad request by name: %s', (code, request) => {
    expect(() => minimumControlSpeed(twin, request)).toThrow(expect.objectContaining({ code }));
  });
});

describe('critical engine', () => {
  it('is the first listed when both failures weigh the same', () => {
    expect(criticalEngine(prepareAircraft(SHIPPED['twin-jet']), { heightM: 0 }).index).toBe(0);
  });

  it('is refused by name without engines', () => {
    const glider = changed((a) => (a.engines = []));
    expect(() => criticalEngine(glider, { heightM: 0 })).toThrow(expect.objectContaining({ code: 'unknown-engine' }));
  });
});

describe('factor table', () => {
  it('has a row per factor with a size, and names configurations and the other engine', () => {
    const { base, rows, perDegreeMps, failed } = controlSpeedFactors(SHIPPED['light-twin'], { heightM: 0 });
    expect(base.found).toBe(true);
    expect(failed).toBe('left');
    expect(rows.map((row) => row.factor)).toEqual([
      'height',
      'mass',
      'centre of gravity',
      'bank',
      'lever',
      'feathered',
      'configuration',
      'engine',
    ]);
    for (const row of rows) expect(Number.isFinite(row.deltaMps)).toBe(true);
    // Wings level minus 5°, per degree: the same five degrees as the bank row (the free bank is 5° here).
    const bank = rows.find((row) => row.factor === 'bank')?.deltaMps ?? NaN;
    expect(perDegreeMps).toBeCloseTo(bank / 5, 6);
  });
});
