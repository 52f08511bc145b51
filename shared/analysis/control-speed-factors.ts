import type { Airframe } from '../model/airframe-schema.ts';
import { prepareAircraft } from '../model/aircraft.ts';
import type { Aircraft, AircraftOptions } from '../model/aircraft.ts';
import { DEG, FT } from '../units/constants.ts';
import { criticalEngine } from './critical-engine.ts';
import { minimumControlSpeed } from './minimum-control-speed.ts';
import type { ControlSpeed, ControlSpeedRequest, NoControlSpeed } from './minimum-control-speed.ts';

export type ControlSpeedFactor =
  'height' | 'mass' | 'centre of gravity' | 'bank' | 'lever' | 'feathered' | 'configuration' | 'engine';

export interface FactorRow {
  factor: ControlSpeedFactor;
  /** What is changed, with its size. */
  change: string;
  result: ControlSpeed | NoControlSpeed;
  /** Change of the calibrated minimum control speed; m/s; positive raises it; null where one of the two is missing. */
  deltaMps: number | null;
}

export interface FactorTable {
  base: ControlSpeed | NoControlSpeed;
  failed: string;
  rows: FactorRow[];
  /** Mean fall per degree of bank from wings level to 5°; m/s per degree; null where one of the two is missing. */
  perDegreeMps: number | null;
}

/** Sizes of the changes (ours): enough to see the sign, small enough to stay on the data. */
export const FACTOR_SIZES = {
  heightM: 5000 * FT,
  massShare: -0.1,
  cgAftOfChord: 0.05,
  lever: 0.75,
  bankRad: 5 * DEG,
} as const;

export interface FactorRequest extends AircraftOptions {
  heightM: number;
  /** Indices of the failed engines; default the critical one. */
  failed?: readonly number[];
  lever?: number;
  feathered?: boolean;
}

/**
 * What each factor does to the static minimum control speed, one change at a time.
 *
 * Base: best bank up to 5°, the given height, configuration, loading and lever. Mass keeps the derivatives' rows; the
 * centre of gravity moves by 5 % of the mean chord with the model's own shift.
 *
 * @param airframe  Parsed airframe with at least one engine.
 * @param request   Base condition.
 * @returns         Base and rows, each with sign and size.
 * @throws {ModelError} unknown-engine, unknown-configuration, unknown-loading, bad-argument.
 * @sign            A positive change raises the speed.
 * @source          Flight model, minimum control speed; the sizes are ours.
 */
export function controlSpeedFactors(airframe: Airframe, request: FactorRequest): FactorTable {
  const { heightM, lever = 1, feathered = false, ...options } = request;
  const aircraft = prepareAircraft(airframe, options);
  const shared = { heightM, lever, feathered };
  const failed = request.failed ?? [criticalEngine(aircraft, shared).index];
  const solve = (subject: Aircraft, changes: Partial<ControlSpeedRequest> = {}) =>
    minimumControlSpeed(subject, { ...shared, failed, ...changes });
  const base = solve(aircraft);
  const rows: FactorRow[] = [];
  const add = (factor: ControlSpeedFactor, change: string, result: ControlSpeed | NoControlSpeed) => {
    const deltaMps = base.found && result.found ? result.casMps - base.casMps : null;
    rows.push({ factor, change, result, deltaMps });
  };

  add('height', '5,000 ft higher', solve(aircraft, { heightM: heightM + FACTOR_SIZES.heightM }));
  add('mass', '10 % less mass', solve({ ...aircraft, massKg: aircraft.massKg * (1 + FACTOR_SIZES.massShare) }));
  add(
    'centre of gravity',
    '5 % of the mean chord aft',
    solve(prepareAircraft(withCgAft(airframe, options), { ...options, loading: AFT })),
  );
  const level = solve(aircraft, { bank: { exactlyRad: 0 } });
  add('bank', 'wings level', level);
  add('lever', `lever ${FACTOR_SIZES.lever}`, solve(aircraft, { lever: FACTOR_SIZES.lever }));
  if (failed.some((index) => aircraft.engines[index].kind === 'propeller')) {
    add('feathered', feathered ? 'windmilling' : 'feathered', solve(aircraft, { feathered: !feathered }));
  }
  for (const { name } of airframe.configurations) {
    if (name === aircraft.configuration) continue;
    add('configuration', name, solve(prepareAircraft(airframe, { ...options, configuration: name })));
  }
  aircraft.engines.forEach(({ name }, index) => {
    if (failed.length === 1 && index === failed[0]) return;
    add('engine', `${name} failed`, solve(aircraft, { failed: [index] }));
  });
  const banked = solve(aircraft, { bank: { exactlyRad: FACTOR_SIZES.bankRad } });
  const perDegreeMps =
    level.found && banked.found ? (level.casMps - banked.casMps) / (FACTOR_SIZES.bankRad / DEG) : null;
  return { base, failed: failed.map((index) => aircraft.engines[index].name).join(', '), rows, perDegreeMps };
}

const AFT = 'centre of gravity aft';

/** The airframe with one loading: the present one with the centre of gravity further aft by a share of the mean chord. */
function withCgAft(airframe: Airframe, options: AircraftOptions, share: number = FACTOR_SIZES.cgAftOfChord): Airframe {
  const present = airframe.loadings?.find((loading) => loading.name === options.loading);
  const aft = share * airframe.geometry.meanChord_m;
  const loading = present
    ? { ...present, name: AFT, cgAft_m: present.cgAft_m + aft }
    : { name: AFT, mass_kg: airframe.mass.mass_kg, cgAft_m: aft };
  return { ...airframe, loadings: [loading] };
}

/** Minimum control speeds against one quantity, for charts. */
export interface ControlSpeedCurvePoint {
  /** The quantity: bank in rad, height in m, mass in kg, lever 0 … 1. */
  at: number;
  result: ControlSpeed | NoControlSpeed;
}

/**
 * The static minimum control speed along one quantity: bank (each held exactly), height, mass or lever.
 *
 * @param aircraft  Prepared aircraft.
 * @param request   Base request with the failed engines.
 * @param quantity  Which quantity runs.
 * @param values    Its values; bank in rad toward the live engine, height in m, mass in kg, lever 0 … 1.
 * @returns         A point per value.
 * @throws {ModelError} unknown-engine, bad-argument.
 * @sign            Bank positive toward the live engine.
 * @source          `minimumControlSpeed`.
 */
export function controlSpeedCurve(
  aircraft: Aircraft,
  request: ControlSpeedRequest,
  quantity: 'bank' | 'height' | 'mass' | 'lever',
  values: ArrayLike<number>,
): ControlSpeedCurvePoint[] {
  return Array.from(values, (at) => {
    switch (quantity) {
      case 'bank':
        return { at, result: minimumControlSpeed(aircraft, { ...request, bank: { exactlyRad: at } }) };
      case 'height':
        return { at, result: minimumControlSpeed(aircraft, { ...request, heightM: at }) };
      case 'mass':
        return { at, result: minimumControlSpeed({ ...aircraft, massKg: at }, request) };
      case 'lever':
        return { at, result: minimumControlSpeed(aircraft, { ...request, lever: at }) };
    }
  });
}

/**
 * The static minimum control speed against the centre of gravity, moved from the present loading.
 *
 * @param airframe  Parsed airframe.
 * @param options   Configuration and loading.
 * @param request   Base request with the failed engines.
 * @param shares    How far aft, as shares of the mean chord; negative is forward.
 * @returns         A point per share.
 * @throws {ModelError} unknown-engine, unknown-configuration, unknown-loading, bad-argument.
 * @sign            Aft positive.
 * @source          `minimumControlSpeed` with the model's own shift of the centre of gravity.
 */
export function controlSpeedOverCg(
  airframe: Airframe,
  options: AircraftOptions,
  request: ControlSpeedRequest,
  shares: ArrayLike<number>,
): ControlSpeedCurvePoint[] {
  return Array.from(shares, (at) => {
    const aircraft = prepareAircraft(withCgAft(airframe, options, at), { ...options, loading: AFT });
    return { at, result: minimumControlSpeed(aircraft, request) };
  });
}

/** Halvings with which the place is looked for where another limit begins to bind. */
const KINK_HALVINGS = 6;

/**
 * A curve with two more points at each place where the binding limit changes (or where the speed ends), so that its kinks
 * are drawn as kinks.
 *
 * @param points  Points in order.
 * @param solve   The same function that gave them.
 * @returns       The points with the added ones, in order; a change is enclosed in 1/64 of its step.
 * @throws        What `solve` throws.
 * @sign          none
 * @source        Derived here: halving.
 */
export function withKinks(
  points: readonly ControlSpeedCurvePoint[],
  solve: (at: number) => ControlSpeedCurvePoint,
): ControlSpeedCurvePoint[] {
  const kind = ({ result }: ControlSpeedCurvePoint): string => (result.found ? result.limitedBy : result.reason);
  return points.flatMap((point, i) => {
    const next = points[i + 1] as ControlSpeedCurvePoint | undefined; // past the end
    if (next === undefined || kind(next) === kind(point)) return [point];
    let [low, high] = [point, next];
    for (let k = 0; k < KINK_HALVINGS; k++) {
      const middle = solve(0.5 * (low.at + high.at));
      if (kind(middle) === kind(low)) low = middle;
      else high = middle;
    }
    return [point, ...(low === point ? [] : [low]), ...(high === next ? [] : [high])];
  });
}
