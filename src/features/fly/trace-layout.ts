/** Which rows of traces are drawn, with the limits that the scenario's criteria put on them. */
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import type { TraceRow } from '../../components/charts/trace-grid.ts';
import { CHANNELS, type ChannelId } from '../../runner/channels.ts';

type Criterion = Pick<Scenario['criteria'][number], 'measure' | 'limit'>;

interface Limits {
  max?: number;
  min?: number;
}

/** Measures of magnitudes, by the channel they limit. */
const BOTH_SIDES: Partial<Record<string, ChannelId>> = {
  sideslip: 'sideslip',
  bank: 'bank',
  'heading-deviation': 'heading',
  ball: 'ball',
};

const tighter = (a: number | undefined, b: number, pick: (x: number, y: number) => number): number =>
  a === undefined ? b : pick(a, b);

/** Limits of one channel; `deadSide` +1 when the left side is dead. */
export function limitsOf(channel: ChannelId, criteria: readonly Criterion[], deadSide: -1 | 0 | 1): Limits {
  const limits: Limits = {};
  for (const { measure, limit } of criteria) {
    const max = 'max' in limit ? limit.max : 'within' in limit ? limit.within[1] : undefined;
    if (max === undefined) continue;
    if (BOTH_SIDES[measure] === channel) {
      limits.max = tighter(limits.max, max, Math.min);
      limits.min = tighter(limits.min, -max, Math.max);
    }
    if (measure === 'bank-dead-side' && channel === 'bank' && deadSide !== 0) {
      if (deadSide > 0) limits.min = tighter(limits.min, -max, Math.max);
      else limits.max = tighter(limits.max, max, Math.min);
    }
  }
  return limits;
}

/** A limit is drawn with room for the hatch beyond it. */
export function traceRows(
  channels: readonly ChannelId[],
  criteria: readonly Criterion[],
  deadSide: -1 | 0 | 1,
): TraceRow[] {
  return channels.map((id) => {
    const { name, unit, digits, low, high } = CHANNELS[id];
    const limits = limitsOf(id, criteria, deadSide);
    const row: TraceRow = { id, name, unit, digits, low, high };
    if (limits.max !== undefined) Object.assign(row, { max: limits.max, high: Math.max(high, limits.max * 1.4) });
    if (limits.min !== undefined) Object.assign(row, { min: limits.min, low: Math.min(low, limits.min * 1.4) });
    return row;
  });
}
