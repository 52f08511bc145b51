import type { Airframe } from '../model/airframe-schema.ts';
import { prepareAircraft } from '../model/aircraft.ts';
import type { AircraftOptions } from '../model/aircraft.ts';
import { ModelError } from '../model/errors.ts';
import { buildSmallDisturbance } from '../model/small-disturbance.ts';
import type { LateralCondition } from '../model/small-disturbance.ts';
import { NumericsError } from '../numerics/errors.ts';
import { drawAirframe, uncertainFields } from './airframe-sampling.ts';
import type { UncertainField } from './airframe-sampling.ts';
import { criticalEngine } from './critical-engine.ts';
import { minimumControlSpeed } from './minimum-control-speed.ts';
import { lateralModes } from './modes.ts';
import { crosswindLimit } from './sideslip-crosswind.ts';

/** What is computed for each draw; SI. */
export type DispersedQuantity =
  | 'dutch-roll-damping'
  | 'dutch-roll-frequency'
  | 'roll-time-constant'
  | 'spiral-root'
  | 'minimum-control-speed'
  | 'crosswind';

export const DISPERSED_QUANTITIES: readonly DispersedQuantity[] = [
  'dutch-roll-damping',
  'dutch-roll-frequency',
  'roll-time-constant',
  'spiral-root',
  'minimum-control-speed',
  'crosswind',
];

export interface DispersionRequest extends AircraftOptions {
  condition: LateralCondition;
  seed: number;
  draws: number;
}

export interface QuantitySpread {
  quantity: DispersedQuantity;
  /** Value with nothing drawn; NaN where there is none. */
  nominal: number;
  /** One per draw that gave a value, in the order of the draws. */
  values: Float64Array;
  mean: number;
  standardDeviation: number;
  p5: number;
  p50: number;
  p95: number;
  /** Draws without a value, by reason. */
  without: Readonly<Record<string, number>>;
}

export interface StaticDispersion {
  seed: number;
  draws: number;
  fields: UncertainField[];
  spreads: QuantitySpread[];
}

/** Work in pieces: a caller that shows progress runs some draws at a time and can stop between. */
export interface DispersionJob {
  readonly fields: UncertainField[];
  readonly draws: number;
  /** Draws done so far. */
  readonly done: number;
  /** Runs up to `count` further draws; returns whether all are done. */
  advance(count: number): boolean;
  /** The spreads of what has been drawn so far. */
  result(): StaticDispersion;
}

const LARGEST_DRAWS = 1_000_000;

/**
 * The spread of modes, minimum control speed and crosswind over the stated uncertainties, as a job in pieces.
 *
 * Each draw is an airframe of its own (`drawAirframe`); the failed engine is the nominal airframe's critical one. The same
 * seed gives the same draws, whatever the pieces.
 *
 * @param airframe  Parsed airframe.
 * @param request   Condition, configuration, loading, seed, number of draws.
 * @returns         The job, nothing drawn yet.
 * @throws {ModelError} unknown-configuration, unknown-loading, bad-argument when no uncertainty is stated or the number of
 *                   draws is not 1 … 1,000,000.
 * @sign            none
 * @source          Flight model, airframe data (uncertainty_pct is 2σ, normal, cut at 3σ).
 */
export function createStaticDispersion(airframe: Airframe, request: DispersionRequest): DispersionJob {
  const { condition, seed, draws, ...options } = request;
  if (!Number.isInteger(draws) || draws < 1 || draws > LARGEST_DRAWS) {
    throw new ModelError('bad-argument', `${draws} draws are outside 1 … ${LARGEST_DRAWS}`, 'draws');
  }
  const fields = uncertainFields(airframe);
  if (fields.length === 0) {
    throw new ModelError('bad-argument', 'no uncertainty is stated in the sources of this airframe', '/sources');
  }
  const nominalAircraft = prepareAircraft(airframe, options);
  const failed =
    nominalAircraft.engines.length > 0 ? criticalEngine(nominalAircraft, { heightM: condition.heightM }).index : null;
  const nominal = quantitiesOf(airframe, options, condition, failed);
  const collected = DISPERSED_QUANTITIES.map(() => ({ values: [] as number[], without: {} as Record<string, number> }));
  let done = 0;

  return {
    fields,
    draws,
    get done() {
      return done;
    },
    advance(count) {
      for (const end = Math.min(draws, done + count); done < end; done++) {
        const outcomes = drawOutcomes(airframe, fields, seed, done, options, condition, failed);
        outcomes.forEach((outcome, i) => {
          const { values, without } = collected[i];
          if (typeof outcome === 'number') values.push(outcome);
          else without[outcome] = (without[outcome] ?? 0) + 1;
        });
      }
      return done >= draws;
    },
    result() {
      const spreads = DISPERSED_QUANTITIES.map((quantity, i) =>
        spreadOf(quantity, nominal[i], collected[i].values, collected[i].without),
      );
      return { seed, draws: done, fields, spreads };
    },
  };
}

/** A number, or the reason why there is none. */
type Outcome = number | string;

function drawOutcomes(
  airframe: Airframe,
  fields: readonly UncertainField[],
  seed: number,
  draw: number,
  options: AircraftOptions,
  condition: LateralCondition,
  failed: number | null,
): Outcome[] {
  try {
    return quantitiesOf(drawAirframe(airframe, fields, seed, draw), options, condition, failed);
  } catch (error) {
    if (!(error instanceof ModelError) && !(error instanceof NumericsError)) throw error;
    const reason = error.code;
    return DISPERSED_QUANTITIES.map(() => reason);
  }
}

function quantitiesOf(
  airframe: Airframe,
  options: AircraftOptions,
  condition: LateralCondition,
  failed: number | null,
): Outcome[] {
  const aircraft = prepareAircraft(airframe, options);
  const { modes } = lateralModes(buildSmallDisturbance(aircraft, condition).A);
  const of = (kind: string) => modes.find((mode) => mode.kind === kind);
  const dutch = of('dutch-roll');
  const speed =
    failed === null ? null : minimumControlSpeed(aircraft, { heightM: condition.heightM, failed: [failed] });
  return [
    dutch?.zeta ?? 'no-dutch-roll-oscillation',
    dutch?.wn ?? 'no-dutch-roll-oscillation',
    of('roll')?.tauS ?? 'oscillatory-roll-spiral',
    of('spiral')?.re ?? 'oscillatory-roll-spiral',
    speed === null ? 'no-engine' : speed.found ? speed.casMps : speed.reason,
    crosswindOf(() => crosswindLimit(aircraft, condition.tasMps, condition.heightM).controlPower.crosswindMps),
  ];
}

function crosswindOf(compute: () => number): Outcome {
  try {
    return compute();
  } catch (error) {
    if (error instanceof ModelError) return error.code;
    throw error;
  }
}

function spreadOf(
  quantity: DispersedQuantity,
  nominal: Outcome,
  values: readonly number[],
  without: Readonly<Record<string, number>>,
): QuantitySpread {
  const n = values.length;
  const sorted = Float64Array.from(values).sort();
  const mean = n > 0 ? values.reduce((sum, value) => sum + value, 0) / n : NaN;
  const square = values.reduce((sum, value) => sum + (value - mean) * (value - mean), 0);
  return {
    quantity,
    nominal: typeof nominal === 'number' ? nominal : NaN,
    values: Float64Array.from(values),
    mean,
    standardDeviation: n > 1 ? Math.sqrt(square / (n - 1)) : NaN,
    p5: quantile(sorted, 0.05),
    p50: quantile(sorted, 0.5),
    p95: quantile(sorted, 0.95),
    without,
  };
}

/**
 * Value below which a share of the sorted values lies, linear between neighbours; NaN for no values.
 *
 * @param sorted  Ascending values.
 * @param share   0 … 1.
 * @returns       The quantile; unit of the values.
 * @throws        Nothing.
 * @sign          none
 * @source        R. Hyndman, Y. Fan, "Sample quantiles in statistical packages", Am. Stat. 50 (1996), definition 7.
 */
export function quantile(sorted: Float64Array, share: number): number {
  if (sorted.length === 0) return NaN;
  const at = (sorted.length - 1) * share;
  const below = Math.floor(at);
  const above = Math.min(below + 1, sorted.length - 1);
  return sorted[below] + (at - below) * (sorted[above] - sorted[below]);
}
