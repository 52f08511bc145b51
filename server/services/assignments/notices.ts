import { randomUUID } from 'node:crypto';
import type { Repositories } from '../../data/database.ts';
import type {
  AssignedPersonRecord,
  AssignedScenarioRecord,
  AssignmentRecord,
  NoticeKind,
} from '../../data/repositories/assignments.repository.ts';
import { dueDateCalendar } from '../../reports/calendar.ts';
import { cautionLines } from '../caution.ts';
import { inZoneWords } from './wall-time.ts';

const RULE_WORDS = {
  one: 'every required criterion met in one attempt',
  'two-in-a-row': 'met in two attempts in a row',
  'sign-off': 'signed off by an instructor',
} as const;

/** A message for the mail queue. */
export interface NoticeMail {
  organisationId: string;
  person: { id: string; displayName: string; email: string };
  subject: string;
  text: string;
  calendar: { method: 'REQUEST' | 'CANCEL'; content: string } | null;
}
/** Puts a message into the mail queue on the connection of the running transaction: with it or not at all. */
export type QueueMail = (on: Repositories, mail: NoticeMail) => Promise<void>;

export interface NoticesSetup {
  queueMail: QueueMail;
  /** Address under which people reach this product. */
  address: () => string;
}

const SUBJECTS: Record<Exclude<NoticeKind, 'flown'>, (title: string) => string> = {
  set: (title) => `Set for you: ${title}`,
  changed: (title) => `Changed: ${title}`,
  cancelled: (title) => `No longer set: ${title}`,
  reminder: (title) => `Due soon: ${title}`,
};

/** Subject and text of a notice. */
export function noticeText(
  kind: Exclude<NoticeKind, 'flown'>,
  assignment: Pick<
    AssignmentRecord,
    'title' | 'words' | 'opensAt' | 'zone' | 'tries' | 'passRule' | 'practice' | 'author' | 'closedFor'
  >,
  person: Pick<AssignedPersonRecord, 'displayName' | 'dueAt' | 'extraTries' | 'zone'>,
  scenarios: readonly Pick<AssignedScenarioRecord, 'title' | 'airframeName'>[],
  { address, caution }: { address: string; caution: string },
): { subject: string; text: string } {
  // By the clock of the reader's profile, else by the one it was set with.
  const zone = person.zone ?? assignment.zone;
  const lines = [`${person.displayName},`, ''];
  if (kind === 'cancelled') {
    lines.push(`${assignment.author} has taken this off your list: ${assignment.title}.`);
    if (assignment.closedFor) lines.push(assignment.closedFor);
    lines.push('', 'What you have flown stays in your record.');
  } else {
    lines.push(
      kind === 'reminder'
        ? `This is due on ${inZoneWords(person.dueAt, zone)}:`
        : kind === 'changed'
          ? `${assignment.author} has changed what is set for you:`
          : `${assignment.author} has set this for you:`,
      '',
    );
    for (const { title, airframeName } of scenarios) lines.push(`  ${title} (${airframeName})`);
    const tries = assignment.tries === null ? 'as many as you want' : String(assignment.tries + person.extraTries);
    lines.push(
      '',
      `Opens   ${inZoneWords(assignment.opensAt, zone)}`,
      `Due     ${inZoneWords(person.dueAt, zone)}`,
      `Tries   ${tries}`,
      `Passed  when ${RULE_WORDS[assignment.passRule]}`,
    );
    if (!assignment.practice) lines.push('Practice outside these tries is not open for it.');
    if (assignment.words !== '') lines.push('', assignment.words);
    lines.push('', `${address}/my-flights`);
  }
  lines.push('', ...cautionLines(caution));
  return { subject: SUBJECTS[kind](assignment.title), text: lines.join('\n') };
}

/** The calendar entry of one person's due date; its sequence number rises with every change of it. */
export function calendarOf(
  kind: 'set' | 'cancel',
  assignment: AssignmentRecord,
  person: AssignedPersonRecord,
  scenarios: readonly AssignedScenarioRecord[],
  { address, caution }: { address: string; caution: string },
  at: Date,
): string {
  return dueDateCalendar(
    {
      uid: `${assignment.id}.${person.personId}@sidewash`,
      sequence: person.sequence,
      title: `Due: ${assignment.title}`,
      description: [...scenarios.map(({ title }) => title), assignment.words, ...cautionLines(caution)]
        .filter(Boolean)
        .join('\n'),
      dueAt: person.dueAt,
      stampedAt: at,
      organiser: { name: assignment.author, email: assignment.authorEmail },
      attendee: { name: person.displayName, email: person.email },
      address: `${address}/my-flights`,
    },
    kind,
  );
}

/** Gives notices within a transaction: each occasion once, whoever tries again. */
export function createNotices({ queueMail, address }: NoticesSetup) {
  return {
    address,
    async give(
      on: Repositories,
      kind: Exclude<NoticeKind, 'flown'>,
      assignment: AssignmentRecord,
      organisationId: string,
      people: readonly AssignedPersonRecord[],
      scenarios: readonly AssignedScenarioRecord[],
      at: Date,
      occasionOf: (person: AssignedPersonRecord) => string,
    ): Promise<number> {
      const { caution } = await on.organisations.settings(organisationId);
      const around = { address: address(), caution };
      let given = 0;
      for (const person of people) {
        if (!person.active) continue;
        const { personId } = person;
        const occasion = occasionOf(person);
        const fresh = await on.assignments.noteNotice({
          id: randomUUID(),
          assignmentId: assignment.id,
          personId,
          kind,
          occasion,
          at,
        });
        if (!fresh) continue;
        given++;
        if (!assignment.byMail) continue;
        const method = kind === 'cancelled' ? 'CANCEL' : 'REQUEST';
        const content = calendarOf(kind === 'cancelled' ? 'cancel' : 'set', assignment, person, scenarios, around, at);
        await queueMail(on, {
          organisationId,
          person: { id: personId, displayName: person.displayName, email: person.email },
          ...noticeText(kind, assignment, person, scenarios, around),
          calendar: assignment.calendar && kind !== 'reminder' ? { method, content } : null,
        });
      }
      return given;
    },

    /** Tells the author that somebody has flown it; once an attempt. */
    async flown(
      on: Repositories,
      assignment: AssignmentRecord,
      organisationId: string,
      flown: {
        attemptId: string;
        personName: string;
        title: string;
        passed: boolean;
      },
      at: Date,
    ): Promise<void> {
      if (!assignment.tellAuthor) return;
      const fresh = await on.assignments.noteNotice({
        id: randomUUID(),
        assignmentId: assignment.id,
        personId: assignment.authorId,
        kind: 'flown',
        occasion: flown.attemptId,
        at,
      });
      if (!fresh) return;
      const { caution } = await on.organisations.settings(organisationId);
      const result = flown.passed ? 'met every required criterion' : 'did not meet every required criterion';
      await queueMail(on, {
        organisationId,
        person: { id: assignment.authorId, displayName: assignment.author, email: assignment.authorEmail },
        subject: `Flown: ${flown.title}, ${flown.personName}`,
        text: [
          `${flown.personName} has flown ${flown.title} and ${result}.`,
          '',
          `${address()}/attempts/${flown.attemptId}`,
          '',
          ...cautionLines(caution),
        ].join('\n'),
        calendar: null,
      });
    },
  };
}
export type Notices = ReturnType<typeof createNotices>;
