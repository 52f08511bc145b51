import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { climbRates } from '#shared/analysis/climb.ts';
import { controlSpeedFactors } from '#shared/analysis/control-speed-factors.ts';
import { criticalEngine } from '#shared/analysis/critical-engine.ts';
import { createStaticDispersion } from '#shared/analysis/dispersion.ts';
import { analyseLateral } from '#shared/analysis/lateral-analysis.ts';
import { minimumControlSpeed } from '#shared/analysis/minimum-control-speed.ts';
import { timeResponse } from '#shared/analysis/responses.ts';
import { rudderAuthority } from '#shared/analysis/rudder-authority.ts';
import { crosswindLimit, steadySideslips } from '#shared/analysis/sideslip-crosswind.ts';
import { stabilityMap } from '#shared/analysis/stability-map.ts';
import { bilinearSystem, rootLocus } from '#shared/analysis/sweeps.ts';
import { frequencyResponse, transferFunction } from '#shared/analysis/transfer-functions.ts';
import { prepareAircraft, stallTasMps } from '#shared/model/aircraft.ts';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { densityAt } from '#shared/model/atmosphere.ts';
import { ModelError } from '#shared/model/errors.ts';
import { NumericsError } from '#shared/numerics/errors.ts';
import { airframeDocument } from '../../support/airframe-arbitrary.ts';

const SEED = 2323;
/** 300 in the ordinary test run, 10,000 with DEEP=1 (npm run test:deep). */
const RUNS = process.env.DEEP === '1' ? 10_000 : 300;

/** The result of an analysis, or null for a named reason; anything else that is thrown fails the test. */
function named<T>(compute: () => T): T | null {
  try {
    return compute();
  } catch (error) {
    if (error instanceof ModelError || error instanceof NumericsError) {
      expect(error.code).toMatch(/^[a-z-]+$/u);
      expect(error.message.length).toBeGreaterThan(5);
      return null;
    }
    throw error;
  }
}

/** Where a NaN stands in a result, save under the allowed members; null when there is none. */
function findNaN(value: unknown, path: string, allowed: ReadonlySet<string>): string | null {
  if (typeof value === 'number') return Number.isNaN(value) ? path : null;
  if (value instanceof Float64Array) {
    const at = value.findIndex(Number.isNaN);
    return at < 0 ? null : `${path}[${at}]`;
  }
  if (typeof value !== 'object' || value === null) return null;
  for (const [key, child] of Object.entries(value)) {
    const found = allowed.has(key) ? null : findNaN(child, `${path}.${key}`, allowed);
    if (found !== null) return found;
  }
  return null;
}

function expectNoNaN(value: unknown, path: string, allowed: ReadonlySet<string> = new Set()): void {
  expect(findNaN(value, path, allowed)).toBeNull();
}

function everyAnalysis(airframe: Airframe, share: number, heightM: number): void {
  const aircraft = prepareAircraft(airframe);
  const tasMps = share * stallTasMps(aircraft, densityAt(heightM));
  const condition = { tasMps, heightM };
  for (const category of ['A', 'B', 'C'] as const) {
    const analysis = named(() => analyseLateral(aircraft, condition, { category }));
    expectNoNaN(analysis, 'lateral');
    if (!analysis) continue;
    expect(analysis.criteria).toHaveLength(10);
    for (const input of ['aileron', 'rudder'] as const) {
      for (let state = 0; state < 4; state++) {
        const h = named(() => transferFunction(analysis.system.A, analysis.system.B[input], state, 4));
        if (h)
          expectNoNaN(
            named(() => frequencyResponse(h, 0.01, 20, 10)),
            'frequency',
          );
      }
    }
    if (category !== 'C') continue;
    for (const input of ['aileron', 'side-gust'] as const) {
      const signal = { shape: 'doublet', amplitude: 0.02, startS: 0.5, durationS: 0.5 } as const;
      expectNoNaN(
        named(() => timeResponse(analysis.system, { input, signal, endS: 3, points: 13 })),
        'response',
      );
    }
  }
  if (aircraft.yawDamper)
    expectNoNaN(
      named(() => analyseLateral(aircraft, condition, { yawDamper: true })),
      'damped',
    );
  expectNoNaN(
    named(() => rootLocus(aircraft, condition, 'Cn_beta', [-0.1, 0, 0.1, 0.2])),
    'locus',
  );
  const map = named(() =>
    stabilityMap(
      bilinearSystem(aircraft, condition, 'Cl_beta', 'Cn_beta'),
      [-0.3, 0, 0.1],
      [-0.1, 0.1, 0.3],
      'III',
      'C',
    ),
  );
  expectNoNaN(map, 'map', new Set(['dutchZeta', 'dutchOmega']));
  expectNoNaN(
    named(() => crosswindLimit(aircraft, tasMps, heightM)),
    'crosswind',
  );
  expectNoNaN(
    named(() => steadySideslips(aircraft, tasMps, heightM, [-0.2, 0, 0.1, 0.3])),
    'sideslips',
  );
  if (aircraft.engines.length > 0) {
    const critical = named(() => criticalEngine(aircraft, { heightM }));
    expectNoNaN(critical, 'critical');
    const failed = critical?.index ?? 0;
    for (const bank of [{ exactlyRad: 0 }, { exactlyRad: 0.08 }, { upToRad: 0.15 }]) {
      const result = named(() => minimumControlSpeed(aircraft, { heightM, failed: [failed], bank }));
      expectNoNaN(result, 'speed');
      if (result?.found) expect(result.tasMps).toBeGreaterThan(0);
    }
    expectNoNaN(
      named(() => controlSpeedFactors(airframe, { heightM })),
      'factors',
    );
    expectNoNaN(
      named(() => climbRates(aircraft, tasMps, heightM, failed)),
      'climb',
    );
    expectNoNaN(
      named(() => rudderAuthority(aircraft, heightM, [failed], [0.5 * tasMps, tasMps, 3 * tasMps])),
      'authority',
    );
  }
  const job = named(() => createStaticDispersion(airframe, { condition, seed: 3, draws: 3 }));
  if (job) named(() => job.advance(3));
}

describe('random airframes', () => {
  it(
    `run every analysis with a result or a named reason (${RUNS} airframes, seed ${SEED})`,
    { timeout: RUNS * 1000 },
    () => {
      fc.assert(
        fc.property(
          airframeDocument,
          fc.double({ min: 0.6, max: 5, noNaN: true }),
          fc.double({ min: 0, max: 12_000, noNaN: true }),
          (document, share, heightM) => {
            const parsed = parseAirframe(document);
            expect(parsed, JSON.stringify(parsed)).toMatchObject({ ok: true });
            if (!parsed.ok) return;
            everyAnalysis(parsed.airframe, share, heightM);
          },
        ),
        { seed: SEED, numRuns: RUNS },
      );
    },
  );
});
