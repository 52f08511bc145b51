import type {
  Assignment,
  AssignmentListQuery,
  AssignmentSummary,
  LateRow,
  OwnAssignment,
  Targets,
} from '#shared/contracts/assignments.ts';
import type { Page } from '#shared/contracts/paging.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type {
  AssignedPersonRecord,
  AssignedScenarioRecord,
  AssignmentRecord,
  TryRecord,
} from '../../data/repositories/assignments.repository.ts';
import type { PageRequest } from '../../data/repositories/paging.ts';
import { csvText } from '../../reports/csv-text.ts';
import { may, requireDeed, type Actor } from '../permissions.ts';
import { notFound } from '../problem-error.ts';
import { versionText } from '../versions.ts';
import { calendarOf } from './notices.ts';
import { standingOf, toWords, type PersonStanding } from './standing.ts';

const DAY_MS = 24 * 3600 * 1000;

interface Parts {
  scenarios: AssignedScenarioRecord[];
  people: AssignedPersonRecord[];
  tries: TryRecord[];
}
const grouped = <T extends { assignmentId: string }>(rows: readonly T[]): Map<string, T[]> => {
  const groups = new Map<string, T[]>();
  for (const row of rows) {
    const group = groups.get(row.assignmentId);
    if (group) group.push(row);
    else groups.set(row.assignmentId, [row]);
  }
  return groups;
};

/** Lists of assignments and where people stand. */
export function createReadAssignments(setup: { database: Database; address: () => string; now: () => Date }) {
  const { database, address, now } = setup;

  const partsOf = async (on: Repositories, records: readonly AssignmentRecord[], personId: string | null = null) => {
    const ids = records.map(({ id }) => id);
    const [scenarios, people, tries] = await Promise.all([
      on.assignments.scenarios(ids),
      on.assignments.people(ids, personId),
      on.assignments.tries(ids, personId),
    ]);
    const [s, p, t] = [grouped(scenarios), grouped(people), grouped(tries)];
    return (id: string): Parts => ({ scenarios: s.get(id) ?? [], people: p.get(id) ?? [], tries: t.get(id) ?? [] });
  };

  const standingsOf = (record: AssignmentRecord, { scenarios, people, tries }: Parts, at: Date) => {
    const own = new Map<string, TryRecord[]>();
    for (const flown of tries) {
      const list = own.get(flown.personId);
      if (list) list.push(flown);
      else own.set(flown.personId, [flown]);
    }
    return new Map(
      people.map((person): [string, PersonStanding] => [
        person.personId,
        standingOf(record, person, scenarios, own.get(person.personId) ?? [], at),
      ]),
    );
  };

  const summaryOf = (record: AssignmentRecord, parts: Parts, at: Date): AssignmentSummary => {
    const standings = standingsOf(record, parts, at);
    const counts = { passed: 0, flown: 0, toFly: 0, late: 0 };
    const here = parts.people.filter((person) => person.excusedAt === null);
    for (const { personId } of here) {
      const standing = standings.get(personId)?.standing ?? 'to-fly';
      counts[standing === 'to-fly' ? 'toFly' : standing] += 1;
    }
    return {
      id: record.id,
      title: record.title,
      scenarios: parts.scenarios.map(({ slug, title, revision, airframeName }) => ({
        slug,
        title,
        revision,
        airframeName,
      })),
      to: toWords(parts.people),
      people: here.length,
      opensAt: record.opensAt.toISOString(),
      dueAt: record.dueAt.toISOString(),
      zone: record.zone,
      closedAt: record.closedAt?.toISOString() ?? null,
      author: record.author,
      counts,
    };
  };

  /** Late ones first, then those due within a day, of all open assignments. */
  const lateRows = async (actor: Actor): Promise<LateRow[]> => {
    const at = now();
    const records = await database.assignments.open(actor.organisationId);
    const [parts, reminders] = await Promise.all([
      partsOf(database, records),
      database.assignments.notices(
        records.map(({ id }) => id),
        'reminder',
      ),
    ]);
    const reminded = new Map<string, string[]>();
    for (const { assignmentId, personId, at: when } of reminders) {
      const key = `${assignmentId} ${personId}`;
      reminded.set(key, [...(reminded.get(key) ?? []), when.toISOString()]);
    }
    const rows: LateRow[] = [];
    for (const record of records) {
      const part = parts(record.id);
      const standings = standingsOf(record, part, at);
      for (const person of part.people) {
        const standing = standings.get(person.personId);
        if (standing === undefined || standing.standing === 'passed' || person.excusedAt !== null || !person.active) {
          continue;
        }
        if (person.dueAt.getTime() > at.getTime() + DAY_MS || record.opensAt > at) continue;
        const { lastFlown } = standing;
        rows.push({
          assignmentId: record.id,
          title: record.title,
          person: { id: person.personId, displayName: person.displayName },
          dueAt: person.dueAt.toISOString(),
          late: standing.standing === 'late',
          attempts: standing.used,
          allowed: standing.allowed,
          lastFlown: lastFlown && { ...lastFlown, at: lastFlown.at.toISOString() },
          reminded: reminded.get(`${record.id} ${person.personId}`) ?? [],
        });
      }
    }
    return rows.sort(
      (a, b) => a.dueAt.localeCompare(b.dueAt) || a.person.displayName.localeCompare(b.person.displayName),
    );
  };

  const listed = async (actor: Actor, query: AssignmentListQuery) => {
    const { items, total } = await database.assignments.list(actor.organisationId, query);
    const parts = await partsOf(database, items);
    const at = now();
    return { items: items.map((record) => summaryOf(record, parts(record.id), at)), total };
  };

  return {
    async list(actor: Actor, query: AssignmentListQuery): Promise<Page<AssignmentSummary>> {
      requireDeed(actor, 'assignment.read');
      return { ...(await listed(actor, query)), page: query.page, pageSize: query.pageSize };
    },

    async late(actor: Actor, { page, pageSize }: PageRequest): Promise<Page<LateRow>> {
      requireDeed(actor, 'assignment.read');
      const rows = await lateRows(actor);
      return { items: rows.slice((page - 1) * pageSize, page * pageSize), total: rows.length, page, pageSize };
    },

    /** Where everyone of an assignment stands, on the connection of a transaction. */
    async standings(on: Repositories, record: AssignmentRecord, at: Date): Promise<Map<string, PersonStanding>> {
      return standingsOf(record, (await partsOf(on, [record]))(record.id), at);
    },

    async read(actor: Actor, id: string): Promise<Assignment> {
      requireDeed(actor, 'assignment.read');
      const record = await database.assignments.find(actor.organisationId, id);
      if (record === null) throw notFound('assignment');
      const at = now();
      const [parts, extensions, reminders] = await Promise.all([
        partsOf(database, [record]),
        database.assignments.extensions(id),
        database.assignments.notices([id], 'reminder'),
      ]);
      const part = parts(id);
      const standings = standingsOf(record, part, at);
      return {
        ...summaryOf(record, part, at),
        words: record.words,
        tries: record.tries,
        passRule: record.passRule,
        practice: record.practice,
        byMail: record.byMail,
        calendar: record.calendar,
        reminderDays: record.reminderDays,
        tellAuthor: record.tellAuthor,
        closedFor: record.closedFor,
        createdAt: record.createdAt.toISOString(),
        version: versionText(record.id, record.version),
        mayEdit: may(actor, 'assignment.edit') && record.closedAt === null,
        members: part.people.map((person) => {
          const standing = standings.get(person.personId);
          return {
            person: { id: person.personId, displayName: person.displayName },
            active: person.active,
            cohort: person.cohort,
            dueAt: person.dueAt.toISOString(),
            extended: extensions.some(({ personId }) => personId === person.personId),
            excusedAt: person.excusedAt?.toISOString() ?? null,
            standing: standing?.standing ?? 'to-fly',
            passedLate: standing?.passedLate ?? false,
            scenarios: standing?.scenarios ?? [],
            reminded: reminders
              .filter(({ personId }) => personId === person.personId)
              .map(({ at: when }) => when.toISOString()),
          };
        }),
        extensions: extensions.map(({ person, dueAt, extraTries, reason, by, at: when }) => ({
          person,
          dueAt: dueAt.toISOString(),
          extraTries,
          reason,
          by,
          at: when.toISOString(),
        })),
      };
    },

    /** What is set for the reader: open ones by due date, then closed ones. */
    async own(actor: Actor): Promise<OwnAssignment[]> {
      requireDeed(actor, 'assignment.read-own');
      const records = await database.assignments.ofPerson(actor.organisationId, actor.personId);
      const parts = await partsOf(database, records, actor.personId);
      const at = now();
      return records.flatMap((record) => {
        const part = parts(record.id);
        const [person] = part.people;
        if (person === undefined) return [];
        const { standing, passedLate, scenarios } = standingOf(record, person, part.scenarios, part.tries, at);
        return [
          {
            id: record.id,
            title: record.title,
            words: record.words,
            author: record.author,
            opensAt: record.opensAt.toISOString(),
            dueAt: person.dueAt.toISOString(),
            closedAt: record.closedAt?.toISOString() ?? null,
            passRule: record.passRule,
            practice: record.practice,
            standing,
            passedLate,
            scenarios,
          },
        ];
      });
    },

    /** The reader's calendar entry of an assignment. */
    async calendar(actor: Actor, id: string): Promise<string> {
      requireDeed(actor, 'assignment.read-own');
      const record = await database.assignments.find(actor.organisationId, id);
      const [person] = record === null ? [] : await database.assignments.people([id], actor.personId);
      if (record === null || person === undefined) throw notFound('assignment');
      const over = record.closedAt !== null || person.excusedAt !== null;
      const scenarios = await database.assignments.scenarios([id]);
      const { caution } = await database.organisations.settings(actor.organisationId);
      const around = { address: address(), caution };
      return calendarOf(over ? 'cancel' : 'set', record, person, scenarios, around, now());
    },

    async targets(actor: Actor): Promise<Targets> {
      requireDeed(actor, 'assignment.edit');
      const [rows, people] = await Promise.all([
        database.assignments.cohorts(actor.organisationId, false),
        database.assignments.flyingPeople(actor.organisationId),
      ]);
      const trainees = new Set(people.map(({ id }) => id));
      const cohorts = new Map<string, Targets['cohorts'][number]>();
      for (const { id, name, personId } of rows) {
        const cohort = cohorts.get(id) ?? { id, name, members: [] };
        cohorts.set(id, cohort);
        if (personId !== null && trainees.has(personId)) cohort.members.push(personId);
      }
      return {
        cohorts: [...cohorts.values()],
        people: people.map(({ id, displayName, active }) => ({ id, displayName, active })),
      };
    },

    /** All assignments of a state as a table. */
    async table(actor: Actor, query: AssignmentListQuery): Promise<string> {
      requireDeed(actor, 'assignment.read');
      const { items } = await listed(actor, { ...query, page: 1, pageSize: 10_000 });
      const head = [
        'Assignment',
        'Scenarios',
        'To',
        'Opens (UTC)',
        'Due (UTC)',
        'People',
        'Passed',
        'Flown',
        'To fly',
        'Late',
        'Set by',
      ];
      return csvText([
        head,
        ...items.map((item) => [
          item.title,
          item.scenarios.map(({ title, revision }) => `${title} r${revision}`).join('; '),
          item.to,
          item.opensAt,
          item.dueAt,
          item.people,
          item.counts.passed,
          item.counts.flown,
          item.counts.toFly,
          item.counts.late,
          item.author,
        ]),
      ]);
    },
  };
}
export type ReadAssignments = ReturnType<typeof createReadAssignments>;
