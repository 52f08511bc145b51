import { drawAirframe, uncertainFields } from '#shared/analysis/airframe-sampling.ts';
import type { BenchCondition } from '#shared/analysis/bench-condition.ts';
import { prepareSubject } from '#shared/analysis/bench-condition.ts';
import { minimumControlSpeed, type ControlSpeedRequest } from '#shared/analysis/minimum-control-speed.ts';
import { crosswindLimit } from '#shared/analysis/sideslip-crosswind.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { DEG, KT } from '#shared/units/constants.ts';

export type ControlCase = Required<Pick<ControlSpeedRequest, 'heightM' | 'failed' | 'lever' | 'feathered'>>;

export interface LimitSpreads {
  /** 2σ, kt; null where nothing is uncertain or too few draws gave a value. */
  level: number | null;
  banked: number | null;
  crosswind: number | null;
  /** How many values of the data are uncertain. */
  fields: number;
}

/** Draws of every uncertain value behind the ±2σ of a printed limit, and their seed. */
export const SPREAD_DRAWS = 60;
const SEED = 7;
/** Below this share of draws with a value a spread would mislead. */
const LEAST_SHARE = 0.8;

/** ±2σ of the printed limits over seeded draws of the data. */
export function limitSpreads(airframe: Airframe, condition: BenchCondition, control: ControlCase | null): LimitSpreads {
  const fields = uncertainFields(airframe);
  if (fields.length === 0) return { level: null, banked: null, crosswind: null, fields: 0 };
  const values = { level: [] as number[], banked: [] as number[], crosswind: [] as number[] };
  const still = { ...condition, shifts: {} };
  for (let draw = 0; draw < SPREAD_DRAWS; draw++) {
    try {
      const drawn = drawAirframe(airframe, fields, SEED, draw);
      const { aircraft } = prepareSubject({ label: '', airframe: drawn }, still, false);
      if (control !== null) {
        for (const [name, deg] of [
          ['level', 0],
          ['banked', 5],
        ] as const) {
          const speed = minimumControlSpeed(aircraft, { ...control, bank: { exactlyRad: deg * DEG } });
          if (speed.found) values[name].push(speed.casMps / KT);
        }
      }
      values.crosswind.push(crosswindLimit(aircraft, condition.tasMps, condition.heightM).withinData.crosswindMps / KT);
    } catch {
      // A drawn airframe that cannot be trimmed here gives no value.
    }
  }
  return {
    level: twoSigma(values.level),
    banked: twoSigma(values.banked),
    crosswind: twoSigma(values.crosswind),
    fields: fields.length,
  };
}

function twoSigma(values: readonly number[]): number | null {
  if (values.length < SPREAD_DRAWS * LEAST_SHARE) return null;
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  const variance = values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1);
  return 2 * Math.sqrt(variance);
}
