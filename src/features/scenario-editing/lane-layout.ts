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
  /** Id of the event after which it comes; its delay can be dragged. */
  after: string | null;
  delayS: number;
}

export const SNAP_S = 0.1;
/** Longest time that a file may hold; s. */
const LONGEST_S = 3600;

export const snapped = (timeS: number, longestS: number): number =>
  Number(Math.max(0, Math.min(longestS, Math.round(timeS / SNAP_S) * SNAP_S)).toFixed(2));

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
    return {
      index,
      id,
      lane,
      kind: textOf(event['kind']),
      timeS: own ?? seen.get(id) ?? null,
      timed: own !== null,
      after: typeof at['after'] === 'string' ? at['after'] : null,
      delayS: numberOf(at['delay_s']) ?? 0,
    };
  });
}

/** Member and new value when an event is moved by some seconds from where it was; null when it waits for a condition. */
export function movedBy(
  event: Pick<PlacedEvent, 'timed' | 'timeS' | 'after' | 'delayS'>,
  seconds: number,
  durationS: number,
): { member: 'time_s' | 'delay_s'; value: number } | null {
  if (event.timed && event.timeS !== null)
    return { member: 'time_s', value: snapped(event.timeS + seconds, durationS) };
  if (event.after !== null) return { member: 'delay_s', value: snapped(event.delayS + seconds, LONGEST_S) };
  return null;
}

/** Seconds between labelled ticks, so that labels have room. */
export function tickStep(durationS: number, widthPx: number): number {
  const perSecond = widthPx / Math.max(1, durationS);
  return [1, 2, 5, 10, 20, 30, 60, 120, 300, 600].find((step) => step * perSecond >= 56) ?? 600;
}

const LETTER_PX = 7.4;
const FLAG_PX = 44;
const MOST_ROWS = 4;

/** Row of each label within its lane, so that labels of neighbours do not cover each other; labels in any order. */
export function labelRows(labels: readonly { x: number; letters: number }[]): number[] {
  const ends: number[] = [];
  const rows = new Array<number>(labels.length).fill(0);
  const order = labels.map((_label, i) => i).sort((a, b) => labels[a].x - labels[b].x || a - b);
  for (const i of order) {
    const { x, letters } = labels[i];
    const free = ends.findIndex((end) => end <= x);
    const row = free >= 0 ? free : Math.min(ends.length, MOST_ROWS - 1);
    rows[i] = row;
    ends[row] = Math.max(ends[row] ?? 0, x + FLAG_PX + letters * LETTER_PX);
  }
  return rows;
}
