import ical, { ICalCalendarMethod, ICalEventStatus } from 'ical-generator';

/** An assignment as its due date appears in a calendar. Times are UTC. */
export interface DueDate {
  /** Stable identifier; the same through all changes. */
  uid: string;
  /** Raised with every change, so that a calendar takes the newer one. */
  sequence: number;
  title: string;
  description: string;
  dueAt: Date;
  /** Time of this notice. */
  stampedAt: Date;
  organiser: { name: string; email: string };
  attendee: { name: string; email: string };
  address: string;
}

/**
 * iCalendar text (RFC 5545) of a due date.
 * @param kind `set` for a new or changed date, `cancel` to take it off the calendar.
 */
export function dueDateCalendar(due: DueDate, kind: 'set' | 'cancel'): string {
  const calendar = ical({
    prodId: { company: 'Sidewash', product: 'Sidewash', language: 'EN' },
    method: kind === 'cancel' ? ICalCalendarMethod.CANCEL : ICalCalendarMethod.REQUEST,
  });
  calendar.createEvent({
    id: due.uid,
    sequence: due.sequence,
    stamp: due.stampedAt,
    start: new Date(due.dueAt.getTime() - 15 * 60_000),
    end: due.dueAt,
    summary: due.title,
    description: due.description,
    url: due.address,
    status: kind === 'cancel' ? ICalEventStatus.CANCELLED : ICalEventStatus.CONFIRMED,
    organizer: { name: due.organiser.name, email: due.organiser.email },
    attendees: [{ name: due.attendee.name, email: due.attendee.email, rsvp: false }],
  });
  return calendar.toString();
}
