import type { AssignmentSummary } from '#shared/contracts/assignments.ts';
import { calendarDay, inReaderZone, startOfDay } from '../../stores/reader-zone.ts';

const DAY_MS = 86_400_000;
const MOST_DAYS = 42;

export interface AxisDay {
  /** Share of the axis at which the day begins, 0 to 1. */
  at: number;
  text: string;
  weekend: boolean;
  today: boolean;
}
export interface TimeAxis {
  days: AxisDay[];
  /** Share of a day. */
  day: number;
  now: number;
  /** "June 2026". */
  title: string;
  place: (iso: string) => number;
}

const monthYear = inReaderZone({ month: 'long', year: 'numeric' });

/** An axis of whole days, in the reader's zone, over what is open and today; at most six weeks, today always on it. */
export function timeAxis(items: readonly Pick<AssignmentSummary, 'opensAt' | 'dueAt'>[], now: Date): TimeAxis {
  const today = calendarDay(now);
  const todayStarts = startOfDay(today);
  const times = items.flatMap(({ opensAt, dueAt }) => [new Date(opensAt).getTime(), new Date(dueAt).getTime()]);
  const earliest = Math.max(Math.min(...times, todayStarts - 2 * DAY_MS), todayStarts - 14 * DAY_MS);
  const latest = Math.max(...times, todayStarts + 10 * DAY_MS);
  const first = calendarDay(new Date(earliest));
  const from = startOfDay(first);
  const wanted = Math.ceil((latest - from) / DAY_MS) + 1;
  const count = Math.min(MOST_DAYS, Math.max(14, wanted));
  const span = startOfDay(first + count * DAY_MS) - from;
  const place = (iso: string): number => Math.min(1, Math.max(0, (new Date(iso).getTime() - from) / span));
  const every = count > 21 ? 2 : 1;
  const days = Array.from({ length: count }, (_, i) => {
    const day = first + i * DAY_MS;
    const date = new Date(day); // UTC midnight of the calendar day: its UTC parts are the day's
    return {
      at: (startOfDay(day) - from) / span,
      text: i % every === 0 || day === today ? String(date.getUTCDate()) : '',
      weekend: date.getUTCDay() === 0 || date.getUTCDay() === 6,
      today: day === today,
    };
  });
  return { days, day: 1 / count, now: place(now.toISOString()), title: monthYear(now), place };
}

/** Parts of a bar from opening to due time by how many people stand where. */
export function barParts(item: AssignmentSummary): { kind: 'passed' | 'flown' | 'to-fly' | 'late'; share: number }[] {
  const { passed, flown, toFly, late } = item.counts;
  const sum = Math.max(1, passed + flown + toFly + late);
  return (
    [
      { kind: 'passed', share: passed / sum },
      { kind: 'flown', share: flown / sum },
      { kind: 'to-fly', share: toFly / sum },
      { kind: 'late', share: late / sum },
    ] as const
  ).filter(({ share }) => share > 0);
}
