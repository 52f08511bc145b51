/** Dates for reading, in the person's own zone, British order. */
import { calendarDay, inReaderZone } from '../stores/reader-zone.ts';

const DAY_MS = 86_400_000;
const dayMonth = inReaderZone({ day: 'numeric', month: 'short' });
const dayMonthYear = inReaderZone({ day: 'numeric', month: 'short', year: 'numeric' });
const clock = inReaderZone({ hour: '2-digit', minute: '2-digit' });

/** "today, 14:02", "yesterday, 09:15", "3 Jun", or with the year when it is another. */
export function whenWords(iso: string, now: Date = new Date()): string {
  const date = new Date(iso);
  const days = Math.round((calendarDay(now) - calendarDay(date)) / DAY_MS);
  if (days === 0) return `today, ${clock(date)}`;
  if (days === 1) return `yesterday, ${clock(date)}`;
  return sameYear(date, now) ? dayMonth(date) : dayMonthYear(date);
}

/** "12 May 2026". */
export function shortDate(iso: string): string {
  return dayMonthYear(new Date(iso));
}

function sameYear(a: Date, b: Date): boolean {
  return new Date(calendarDay(a)).getUTCFullYear() === new Date(calendarDay(b)).getUTCFullYear();
}
