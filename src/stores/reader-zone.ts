import { shallowRef } from 'vue';

/** Chosen on the profile page; null: the zone of this device. Screens that show times follow it at once. */
const chosen = shallowRef<string | null>(null);
const formats = new Map<string, Intl.DateTimeFormat>();

export function setReaderZone(zone: string | null): void {
  chosen.value = zone;
}

/** The zone of this device by its name. */
export const deviceZone = (): string => Intl.DateTimeFormat().resolvedOptions().timeZone;

/** The zone in which the reader reads times, by its name. */
export const readerZone = (): string => chosen.value ?? deviceZone();

/** Formats times in the reader's zone, in British order. */
export function inReaderZone(options: Intl.DateTimeFormatOptions): (date: Date) => string {
  const name = JSON.stringify(options);
  return (date) => {
    const timeZone = readerZone();
    const key = `${timeZone} ${name}`;
    const format = formats.get(key) ?? new Intl.DateTimeFormat('en-GB', { ...options, timeZone });
    formats.set(key, format);
    return format.format(date);
  };
}

const dayText = inReaderZone({ year: 'numeric', month: '2-digit', day: '2-digit' });

/** The calendar day of an instant in the reader's zone, as the UTC midnight of that day in milliseconds. */
export function calendarDay(date: Date): number {
  const [day, month, year] = dayText(date).split('/').map(Number);
  return Date.UTC(year ?? Number.NaN, (month ?? Number.NaN) - 1, day);
}

const clockText = inReaderZone({ hour: '2-digit', minute: '2-digit', hourCycle: 'h23' });
const MINUTE_MS = 60_000;

/** What clocks of the zone show at an instant, less UTC, in milliseconds. */
function offsetAt(ms: number): number {
  const date = new Date(ms);
  const [hour = 0, minute = 0] = clockText(date).split(':').map(Number);
  return calendarDay(date) + (hour * 60 + minute) * MINUTE_MS - Math.floor(ms / MINUTE_MS) * MINUTE_MS;
}

/** The instant at which a calendar day (as {@link calendarDay} gives it) begins in the reader's zone. */
export function startOfDay(day: number): number {
  const guess = day - offsetAt(day);
  return day - offsetAt(guess);
}
