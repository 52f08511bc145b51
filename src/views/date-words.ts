/** Dates for reading, in the person's own zone, British order. */
const DAY_MS = 86_400_000;
const dayMonth = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'short' });
const dayMonthYear = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'short', year: 'numeric' });
const clock = new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit' });

function startOfDay(date: Date): number {
  return new Date(date.getFullYear(), date.getMonth(), date.getDate()).getTime();
}

/** "today, 14:02", "yesterday, 09:15", "3 Jun", or with the year when it is another. */
export function whenWords(iso: string, now: Date = new Date()): string {
  const date = new Date(iso);
  const days = Math.round((startOfDay(now) - startOfDay(date)) / DAY_MS);
  if (days === 0) return `today, ${clock.format(date)}`;
  if (days === 1) return `yesterday, ${clock.format(date)}`;
  return date.getFullYear() === now.getFullYear() ? dayMonth.format(date) : dayMonthYear.format(date);
}

/** "12 May 2026". */
export function shortDate(iso: string): string {
  return dayMonthYear.format(new Date(iso));
}
