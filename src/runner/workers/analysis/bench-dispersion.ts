/** Dispersion of one result over the stated uncertainties: seeded draws, in portions so that progress shows and cancel works. */
import { drawAirframe, uncertainFields } from '#shared/analysis/airframe-sampling.ts';
import { criticalEngine } from '#shared/analysis/critical-engine.ts';
import { lateralModes } from '#shared/analysis/modes.ts';
import { crosswindLimit } from '#shared/analysis/sideslip-crosswind.ts';
import { minimumControlSpeed } from '#shared/analysis/minimum-control-speed.ts';
import { DEG, KT } from '#shared/units/constants.ts';
import {
  prepareSubject,
  shiftedAirframe,
  type BenchCondition,
  type BenchSubject,
  type PreparedSubject,
} from './bench-condition.ts';

export const DISPERSION_QUANTITIES = [
  'dutch-zeta',
  'dutch-omega',
  'roll-tau',
  'spiral-root',
  'vmc-level',
  'vmc-best',
  'crosswind',
] as const;
export type DispersionQuantity = (typeof DISPERSION_QUANTITIES)[number];

export interface DispersionRequest {
  kind: 'dispersion';
  condition: BenchCondition;
  subject: BenchSubject;
  quantity: DispersionQuantity;
  seed: number;
  /** Draws from (inclusive) to (exclusive). */
  from: number;
  to: number;
}
export interface DispersionPortion {
  from: number;
  values: number[];
  /** Draws that gave no value, e.g. no minimum control speed in range. */
  without: number;
  /** How many members of the data have a stated uncertainty. */
  fields: number;
}

export function dispersionPortion(request: DispersionRequest): DispersionPortion {
  const { condition, subject } = request;
  const base = shiftedAirframe(subject.airframe, condition.shifts);
  const fields = uncertainFields(base);
  const still = { ...condition, shifts: {} };
  const values: number[] = [];
  let without = 0;
  const nominal = prepareSubject({ label: subject.label, airframe: base }, still, false);
  const failed =
    nominal.aircraft.engines.length > 0 ? criticalEngine(nominal.aircraft, { heightM: condition.heightM }).index : -1;
  for (let draw = request.from; draw < request.to; draw++) {
    let value: number | null = null;
    try {
      const airframe = drawAirframe(base, fields, request.seed, draw);
      value = valueOf(prepareSubject({ label: subject.label, airframe }, still, false), request, failed);
    } catch {
      // A drawn airframe outside what can be trimmed counts as one without a value.
      value = null;
    }
    if (value === null || !Number.isFinite(value)) without++;
    else values.push(value);
  }
  return { from: request.from, values, without, fields: fields.length };
}

function valueOf(ready: PreparedSubject, request: DispersionRequest, failed: number): number | null {
  const { heightM, tasMps } = request.condition;
  switch (request.quantity) {
    case 'crosswind':
      return crosswindLimit(ready.aircraft, tasMps, heightM).withinData.crosswindMps / KT;
    case 'vmc-level':
    case 'vmc-best': {
      if (failed < 0) return null;
      const bank = request.quantity === 'vmc-level' ? { exactlyRad: 0 } : { upToRad: 5 * DEG };
      const speed = minimumControlSpeed(ready.aircraft, { heightM, failed: [failed], bank });
      return speed.found ? speed.casMps / KT : null;
    }
    default: {
      const { modes } = lateralModes(ready.system.A);
      if (request.quantity === 'roll-tau') return modes.find((m) => m.kind === 'roll')?.tauS ?? null;
      if (request.quantity === 'spiral-root') return modes.find((m) => m.kind === 'spiral')?.re ?? null;
      const dutch = modes.find((m) => m.kind === 'dutch-roll');
      return (request.quantity === 'dutch-zeta' ? dutch?.zeta : dutch?.wn) ?? null;
    }
  }
}
