/** Minimum control speed figures: against bank, height, mass, centre of gravity and lever, the factor table, climb, and rudder authority. */
import { stallTasMps, type Aircraft } from '../model/aircraft.ts';
import { casFromTas } from '../model/airspeeds.ts';
import { densityAt } from '../model/atmosphere.ts';
import { climbRates } from './climb.ts';
import { controlSpeedCurve, controlSpeedFactors, controlSpeedOverCg, withKinks } from './control-speed-factors.ts';
import { criticalEngine } from './critical-engine.ts';
import { minimumControlSpeed, type ControlSpeed, type NoControlSpeed } from './minimum-control-speed.ts';
import { rudderAuthority } from './rudder-authority.ts';
import { DEG, FT, KT } from '../units/constants.ts';
import {
  prepareSubject,
  stallKt,
  type BenchCondition,
  type BenchSubject,
  type PreparedSubject,
} from './bench-condition.ts';

export interface EngineOutRequest {
  kind: 'engine-out';
  condition: BenchCondition;
  subjects: readonly BenchSubject[];
  /** Names of failed engines; empty takes the critical one. */
  failed: readonly string[];
  lever: number;
  feathered: boolean;
}
export interface SpeedCurve {
  at: number[];
  kt: (number | null)[];
  binds: string[];
}
export interface EngineOutOfSubject {
  label: string;
  failed: string;
  critical: string;
  /** Why there is none, in words; null when found. */
  reason: string | null;
  bestKt: number | null;
  bestTasKt: number | null;
  binds: string;
  bankDeg: number;
  betaDeg: number;
  aileronDeg: number;
  rudderDeg: number;
  zeroSideslipBankDeg: number | null;
  stallKt: number;
  belowStall: boolean;
  wingsLevelKt: number | null;
  bank: SpeedCurve;
  height: SpeedCurve;
  mass: SpeedCurve;
  /** At per cent of the mean chord aft of the present loading. */
  cg: SpeedCurve;
  lever: SpeedCurve;
  authority: {
    kt: number[];
    availableDeg: number[];
    withoutRatioDeg: number[];
    levelDeg: (number | null)[];
    bankedDeg: (number | null)[];
  };
}
export interface EngineOutPicture {
  subjects: EngineOutOfSubject[];
  problems: string[];
  factors: { name: string; change: string; deltaKt: number | null }[];
  perDegreeKt: number | null;
  climb: { name: string; ftMin: number | null; gradientPct: number | null }[];
}

/**
 * Minimum control speed of up to four revisions against bank, height, mass, centre of gravity and lever; factors and climb of the first.
 *
 * @param request  Condition, revisions, failed engines by name (none: the critical one), lever 0 … 1, feathered or windmilling.
 * @returns        What the figures show, in kt and degrees; a revision that cannot be computed is named in `problems`.
 * @throws         Nothing that the model names: those become problems.
 * @sign           Bank positive toward the live engine; rudder positive trailing edge left.
 * @source         Flight model, static limits.
 */
export function engineOutPicture(request: EngineOutRequest): EngineOutPicture {
  const { condition } = request;
  const picture: EngineOutPicture = { subjects: [], problems: [], factors: [], perDegreeKt: null, climb: [] };
  request.subjects.forEach((subject, i) => {
    try {
      const ready = prepareSubject(subject, condition, i === 0);
      if (ready.aircraft.engines.length === 0) {
        picture.problems.push(`${subject.label}: no engines in the data, so no engine can fail`);
        return;
      }
      const failed = failedOf(ready.aircraft, request);
      picture.subjects.push(engineOutOf(ready, request, failed));
      if (i === 0) addTables(picture, ready, request, failed);
    } catch (error) {
      picture.problems.push(`${subject.label}: ${error instanceof Error ? error.message : 'could not be computed'}`);
    }
  });
  return picture;
}

/**
 * The failed engines of a request by index.
 *
 * @param aircraft  Prepared aircraft.
 * @param request   Names of failed engines (none: the critical one), condition, lever and feathering.
 * @returns         Indices.
 * @throws {ModelError} bad-argument when the aircraft has no engines.
 * @sign            none
 * @source          `criticalEngine`.
 */
export function failedOf(
  aircraft: Aircraft,
  request: Pick<EngineOutRequest, 'failed' | 'condition' | 'lever' | 'feathered'>,
): number[] {
  const named = request.failed.map((name) => aircraft.engines.findIndex((e) => e.name === name)).filter((i) => i >= 0);
  return named.length > 0
    ? named
    : [
        criticalEngine(aircraft, {
          heightM: request.condition.heightM,
          lever: request.lever,
          feathered: request.feathered,
        }).index,
      ];
}

/** How far the centre of gravity is moved either way; share of the mean chord (ours). */
const CG_REACH = 0.1;

const speedKt = (result: ControlSpeed | NoControlSpeed): number | null => (result.found ? result.casMps / KT : null);
const bindsOf = (result: ControlSpeed | NoControlSpeed): string => (result.found ? result.limitedBy : result.message);

function curve(points: readonly { at: number; result: ControlSpeed | NoControlSpeed }[], unit: number): SpeedCurve {
  return {
    at: points.map((p) => p.at / unit),
    kt: points.map((p) => speedKt(p.result)),
    binds: points.map((p) => bindsOf(p.result)),
  };
}

function engineOutOf(ready: PreparedSubject, request: EngineOutRequest, failed: number[]): EngineOutOfSubject {
  const { aircraft } = ready;
  const { heightM } = request.condition;
  const base = { heightM, failed, lever: request.lever, feathered: request.feathered };
  const best = minimumControlSpeed(aircraft, base);
  const level = minimumControlSpeed(aircraft, { ...base, bank: { exactlyRad: 0 } });
  const span = (from: number, to: number, n: number): number[] =>
    Array.from({ length: n }, (_, i) => from + ((to - from) * i) / (n - 1));
  const overBank = (banks: number[]) => controlSpeedCurve(aircraft, base, 'bank', banks);
  const stall = stallTasMps(aircraft, densityAt(heightM));
  const authority = rudderAuthority(aircraft, heightM, failed, span(0.8 * stall, 3.4 * stall, 41), request.lever);
  return {
    label: ready.label,
    failed: failed.map((i) => aircraft.engines[i]?.name ?? '').join(', '),
    critical: criticalEngine(aircraft, { heightM, lever: request.lever }).name,
    reason: best.found ? null : best.message,
    bestKt: speedKt(best),
    bestTasKt: best.found ? best.tasMps / KT : null,
    binds: bindsOf(best),
    bankDeg: best.found ? best.phiRad / DEG : NaN,
    betaDeg: best.found ? best.betaRad / DEG : NaN,
    aileronDeg: best.found ? best.aileronRad / DEG : NaN,
    rudderDeg: best.found ? best.rudderRad / DEG : NaN,
    zeroSideslipBankDeg: best.found && best.zeroSideslipBankRad !== null ? best.zeroSideslipBankRad / DEG : null,
    stallKt: stallKt(aircraft, heightM),
    belowStall: best.found && best.belowStall,
    wingsLevelKt: speedKt(level),
    bank: curve(
      withKinks(overBank(span(-6 * DEG, 12 * DEG, 37)), (at) => overBank([at])[0]),
      DEG,
    ),
    height: curve(controlSpeedCurve(aircraft, base, 'height', span(0, 15000 * FT, 11)), FT),
    mass: curve(controlSpeedCurve(aircraft, base, 'mass', span(0.75 * aircraft.massKg, 1.15 * aircraft.massKg, 9)), 1),
    cg: curve(
      controlSpeedOverCg(
        ready.airframe,
        { configuration: aircraft.configuration, loading: aircraft.loading },
        base,
        span(-CG_REACH, CG_REACH, 9),
      ),
      0.01,
    ),
    lever: curve(controlSpeedCurve(aircraft, base, 'lever', span(0.3, 1, 8)), 0.01),
    authority: {
      kt: authority.map((p) => casFromTas(p.tasMps, heightM) / KT),
      availableDeg: authority.map((p) => p.availableRad / DEG),
      withoutRatioDeg: authority.map((p) => p.withoutRatioRad / DEG),
      levelDeg: authority.map((p) => (p.neededLevelRad === null ? null : p.neededLevelRad / DEG)),
      bankedDeg: authority.map((p) => (p.neededZeroSideslipRad === null ? null : p.neededZeroSideslipRad / DEG)),
    },
  };
}

function addTables(
  picture: EngineOutPicture,
  ready: PreparedSubject,
  request: EngineOutRequest,
  failed: number[],
): void {
  const { heightM, tasMps } = request.condition;
  const table = controlSpeedFactors(ready.airframe, {
    configuration: ready.aircraft.configuration,
    loading: ready.aircraft.loading,
    heightM,
    failed,
    lever: request.lever,
    feathered: request.feathered,
  });
  picture.factors = table.rows.map((row) => ({
    name: row.factor,
    change: row.change,
    deltaKt: row.deltaMps === null ? null : row.deltaMps / KT,
  }));
  picture.perDegreeKt = table.perDegreeMps === null ? null : table.perDegreeMps / KT;
  const rates = climbRates(ready.aircraft, tasMps, heightM, failed[0] ?? 0);
  picture.climb = [
    { name: 'all engines', point: rates.allEngines },
    { name: 'one windmilling', point: rates.windmilling },
    { name: 'one feathered', point: rates.feathered },
  ].map(({ name, point }) => ({
    name,
    ftMin: point ? point.rateMps / (FT / 60) : null,
    gradientPct: point ? (100 * point.rateMps) / tasMps : null,
  }));
}
