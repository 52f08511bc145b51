/** Times on the wall and the instants they name, in any time zone and across its clock changes. */

const MINUTE_MS = 60_000;
const HOUR_MS = 60 * MINUTE_MS;

/** What is wrong with a wall time in its zone. */
export class WallTimeRefusal extends Error {
  readonly rule: 'zone' | 'date' | 'clock-change';
  readonly remedy: string;
  constructor(rule: WallTimeRefusal['rule'], message: string, remedy: string) {
    super(message);
    this.name = 'WallTimeRefusal';
    this.rule = rule;
    this.remedy = remedy;
  }
}

const formats = new Map<string, Intl.DateTimeFormat>();
function formatOf(zone: string): Intl.DateTimeFormat {
  let format = formats.get(zone);
  if (format === undefined) {
    try {
      format = new Intl.DateTimeFormat('en-GB', {
        timeZone: zone,
        year: 'numeric',
        month: '2-digit',
        day: '2-digit',
        hour: '2-digit',
        minute: '2-digit',
        hourCycle: 'h23',
      });
    } catch (error) {
      if (!(error instanceof RangeError)) throw error;
      throw new WallTimeRefusal('zone', `"${zone}" is not a time zone`, 'Name one such as Europe/Oslo, or UTC.');
    }
    formats.set(zone, format);
  }
  return format;
}

/** "2026-06-05T17:00" as clocks of the zone show this instant. */
export function wallTime(at: Date, zone: string): string {
  const parts = new Map(
    formatOf(zone)
      .formatToParts(at)
      .map(({ type, value }) => [type, value]),
  );
  const part = (type: Intl.DateTimeFormatPartTypes): string => parts.get(type) ?? '';
  return `${part('year')}-${part('month')}-${part('day')}T${part('hour')}:${part('minute')}`;
}

/**
 * The instant at which clocks of a zone show a wall time. A time that comes twice, because clocks go back, is taken at
 * its second coming, so that nobody loses an hour; `twice` says so.
 *
 * @throws {WallTimeRefusal} for an unknown zone, a day that no month has, and a time that clocks skip
 */
export function instantOf(wall: string, zone: string): { at: Date; twice: boolean } {
  const asUtc = new Date(`${wall}:00Z`);
  if (Number.isNaN(asUtc.getTime()) || asUtc.toISOString().slice(0, 16) !== wall) {
    throw new WallTimeRefusal('date', `"${wall}" is not a date and time`, 'Choose a day that exists.');
  }
  const found = new Set<number>();
  // Offsets in force a day before and after are all that can apply; a change lies between them.
  for (const around of [-24, 0, 24]) {
    const probe = new Date(asUtc.getTime() + around * HOUR_MS);
    const offset =
      new Date(`${wallTime(probe, zone)}:00Z`).getTime() - Math.floor(probe.getTime() / MINUTE_MS) * MINUTE_MS;
    const candidate = new Date(asUtc.getTime() - offset);
    if (wallTime(candidate, zone) === wall) found.add(candidate.getTime());
  }
  if (found.size === 0) {
    throw new WallTimeRefusal(
      'clock-change',
      `clocks in ${zone} go forward that night and never show ${wall.slice(11)} on ${wall.slice(0, 10)}`,
      'Choose an hour earlier or later.',
    );
  }
  return { at: new Date(Math.max(...found)), twice: found.size > 1 };
}

/** "Friday 5 June 2026, 17:00 (Europe/Oslo)". */
export function inZoneWords(at: Date, zone: string): string {
  const words = new Intl.DateTimeFormat('en-GB', {
    timeZone: zone,
    weekday: 'long',
    day: 'numeric',
    month: 'long',
    year: 'numeric',
    hour: '2-digit',
    minute: '2-digit',
    hourCycle: 'h23',
  })
    .format(at)
    .replace(' at ', ', ');
  return `${words} (${zone})`;
}
