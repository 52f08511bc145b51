/** Due dates for reading, in the reader's own zone. */
import { calendarDay, inReaderZone, readerZone } from '../../stores/reader-zone.ts';

const DAY_MS = 86_400_000;
const MINUTE_MS = 60_000;
const weekday = inReaderZone({ weekday: 'short', day: 'numeric' });
const dayMonth = inReaderZone({ day: 'numeric', month: 'short' });
const full = inReaderZone({ weekday: 'long', day: 'numeric', month: 'long', hour: '2-digit', minute: '2-digit' });
const clock = inReaderZone({ hour: '2-digit', minute: '2-digit' });

/** The reader's zone by its name. */
export const ownZone = readerZone;

/** Whole days on the calendar from now to then, whatever the clocks do between. */
export const calendarDays = (then: Date, now: Date): number =>
  Math.round((calendarDay(then) - calendarDay(now)) / DAY_MS);

const counted = (n: number, what: string): string => `${n} ${what}${n === 1 ? '' : 's'}`;

/** "tomorrow", "4 days", "2 weeks"; after it "2 days late". */
export function untilWords(iso: string, now: Date = new Date()): string {
  const then = new Date(iso);
  const days = calendarDays(then, now);
  if (then < now) {
    if (days === 0) {
      const minutes = Math.max(1, Math.floor((now.getTime() - then.getTime()) / MINUTE_MS));
      return minutes < 60 ? `${minutes} min late` : `${counted(Math.floor(minutes / 60), 'hour')} late`;
    }
    return `${counted(-days, 'day')} late`;
  }
  if (days === 0) return `today, ${clock(then)}`;
  if (days === 1) return `tomorrow, ${clock(then)}`;
  return days < 14 ? counted(days, 'day') : counted(Math.round(days / 7), 'week');
}

/** "Fri 5" within a fortnight, "12 Jul" beyond. */
export function dayWords(iso: string, now: Date = new Date()): string {
  const then = new Date(iso);
  return Math.abs(calendarDays(then, now)) < 14 ? weekday(then) : dayMonth(then);
}

/** "Friday 5 June at 17:00". */
export const dueWords = (iso: string): string => full(new Date(iso));

/** What date and time fields show of an instant: the clock of a zone. */
export function fieldsOf(iso: string, zone: string): { day: string; time: string } {
  const parts = new Map(
    new Intl.DateTimeFormat('en-GB', {
      timeZone: zone,
      year: 'numeric',
      month: '2-digit',
      day: '2-digit',
      hour: '2-digit',
      minute: '2-digit',
      hourCycle: 'h23',
    })
      .formatToParts(new Date(iso))
      .map(({ type, value }) => [type, value]),
  );
  const part = (type: Intl.DateTimeFormatPartTypes): string => parts.get(type) ?? '';
  return { day: `${part('year')}-${part('month')}-${part('day')}`, time: `${part('hour')}:${part('minute')}` };
}
