/** Where each event stands on the time line. */
import { LANES, type Lane } from '#shared/scenario/scenario-schema.ts';
import type { Json } from '../airframe-editing/draft-document.ts';

export interface PlacedEvent {
  index: number;
  id: string;
  lane: Lane;
  kind: string;
  /** Seconds; where the preview saw it happen for an event that waits; null when unknown. */
  timeS: number | null;
  /** Has a time of its own, which can be dragged. */
  timed: boolean;
}

export const SNAP_S = 0.1;

export const snapped = (timeS: number, durationS: number): number =>
  Number(Math.max(0, Math.min(durationS, Math.round(timeS / SNAP_S) * SNAP_S)).toFixed(2));

type Member = Readonly<Record<string, Json>>;
export const isMember = (value: Json | undefined): value is Member =>
  typeof value === 'object' && value !== null && !Array.isArray(value);
export const textOf = (value: Json | undefined): string => (typeof value === 'string' ? value : '');
export const numberOf = (value: Json | undefined): number | null =>
  typeof value === 'number' && Number.isFinite(value) ? value : null;

/** Events as drawn; `seen` gives the time at which the preview saw an event happen. */
export function placeEvents(events: readonly Json[], seen: ReadonlyMap<string, number>): PlacedEvent[] {
  return events.filter(isMember).map((event, index) => {
    const at = isMember(event['at']) ? event['at'] : {};
    const own = numberOf(at['time_s']);
    const id = textOf(event['id']);
    const lane = LANES.find((one) => one === event['lane']) ?? 'notes';
    return { index, id, lane, kind: textOf(event['kind']), timeS: own ?? seen.get(id) ?? null, timed: own !== null };
  });
}

/** Seconds between labelled ticks, so that labels have room. */
export function tickStep(durationS: number, widthPx: number): number {
  const perSecond = widthPx / Math.max(1, durationS);
  return [1, 2, 5, 10, 20, 30, 60, 120, 300, 600].find((step) => step * perSecond >= 56) ?? 600;
}
