/** What a criterion on each measure starts with: the measure's own unit and direction, and a limit of the usual size. */
import { MEASURE_TABLE } from '#shared/scenario/measures/measure-table.ts';
import type { MeasureName } from '#shared/scenario/scenario-schema.ts';
import type { Json } from '../airframe-editing/draft-document.ts';

/** In the unit of the measure; ours, to be changed by the author. */
const USUAL: Partial<Record<MeasureName, number>> = {
  'heading-deviation': 15,
  'track-deviation': 6,
  'track-offset': 30,
  bank: 20,
  'bank-dead-side': 5,
  sideslip: 10,
  'yaw-rate': 8,
  'roll-rate': 15,
  ball: 1,
  'height-loss': 100,
  'speed-loss': 10,
  'speed-deviation': 10,
  'first-correct-pedal': 2,
  'wrong-pedal-time': 0.5,
  'yaw-arrested': 5,
  'pedal-force': 667,
  'rudder-saturation-time': 3,
  'lever-reduced': 3,
  'nose-lowered': 4,
  'speed-regained': 20,
  'feathered-within': 15,
  'climb-rate': 100,
  'touchdown-crab': 5,
  'touchdown-drift': 3,
  'touchdown-bank': 6,
  'touchdown-offset': 8,
  'touchdown-sink': 400,
  'stall-warning-time': 0.5,
  expression: 90,
};

/** A new criterion on a measure, from the first event when there is one. */
export function freshCriterion(measure: MeasureName, taken: ReadonlySet<string>, from: string): Json {
  const { label, unit, direction } = MEASURE_TABLE[measure];
  let id: string = measure;
  for (let n = 2; taken.has(id); n += 1) id = `${measure}-${n}`;
  return {
    id,
    title: label,
    measure,
    from,
    limit: { [direction]: USUAL[measure] ?? 0, unit: measure === 'expression' ? 'kt' : unit },
    required: true,
    ...(measure === 'expression' && { expression: 'ias' }),
    ...(measure === 'speed-regained' && { value: 80, unit: 'kt' }),
  };
}
