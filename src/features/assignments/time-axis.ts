import type { AssignmentSummary } from '#shared/contracts/assignments.ts';

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

const monthYear = new Intl.DateTimeFormat('en-GB', { month: 'long', year: 'numeric' });
const startOfDay = (date: Date): Date => new Date(date.getFullYear(), date.getMonth(), date.getDate());
const plusDays = (date: Date, days: number): Date =>
  new Date(date.getFullYear(), date.getMonth(), date.getDate() + days);

/** An axis of whole days, in the reader's zone, over what is open and today; at most six weeks, today always on it. */
export function timeAxis(items: readonly Pick<AssignmentSummary, 'opensAt' | 'dueAt'>[], now: Date): TimeAxis {
  const today = startOfDay(now);
  const times = items.flatMap(({ opensAt, dueAt }) => [new Date(opensAt).getTime(), new Date(dueAt).getTime()]);
  const earliest = Math.max(Math.min(...times, today.getTime() - 2 * DAY_MS), today.getTime() - 14 * DAY_MS);
  const latest = Math.max(...times, today.getTime() + 10 * DAY_MS);
  const first = startOfDay(new Date(earliest));
  const wanted = Math.ceil((latest - first.getTime()) / DAY_MS) + 1;
  const count = Math.min(MOST_DAYS, Math.max(14, wanted));
  const from = first.getTime();
  const span = plusDays(first, count).getTime() - from;
  const place = (iso: string): number => Math.min(1, Math.max(0, (new Date(iso).getTime() - from) / span));
  const every = count > 21 ? 2 : 1;
  const days = Array.from({ length: count }, (_, i) => {
    const date = plusDays(first, i);
    const isToday = date.getTime() === today.getTime();
    return {
      at: (date.getTime() - from) / span,
      text: i % every === 0 || isToday ? String(date.getDate()) : '',
      weekend: date.getDay() === 0 || date.getDay() === 6,
      today: isToday,
    };
  });
  return { days, day: 1 / count, now: place(now.toISOString()), title: monthYear.format(now), place };
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
