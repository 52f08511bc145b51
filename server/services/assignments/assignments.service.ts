import { randomUUID } from 'node:crypto';
import type {
  addPeopleSchema,
  Assignment,
  changeAssignmentSchema,
  extendSchema,
  newAssignmentSchema,
  NoticePreview,
} from '#shared/contracts/assignments.ts';
import type { z } from 'zod';
import type { Database, Repositories } from '../../data/database.ts';
import type { AssignmentRecord } from '../../data/repositories/assignments.repository.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import { inWords, versionText } from '../versions.ts';
import { chosenPeople } from './chosen-people.ts';
import { fieldProblem } from './field-problem.ts';
import { noticeText, type Notices } from './notices.ts';
import type { ReadAssignments } from './read-assignments.ts';
import { instantIn, termsOf } from './terms.ts';

type NewBody = z.output<typeof newAssignmentSchema>;
const minutes = (at: Date): string => at.toISOString().slice(0, 16);
/** The occasion of an automatic reminder; the query for due reminders spells it alike. */
export const dueOccasion = (dueAt: Date): string => `due ${minutes(dueAt)}`;

export interface AssignmentsSetup {
  database: Database;
  notices: Notices;
  reads: ReadAssignments;
  now: () => Date;
}

/** Setting, changing, extending and closing assignments. Every deed, its notices and its audit entry stand or fall together. */
export function createAssignmentsService({ database, notices, reads, now }: AssignmentsSetup) {
  const entry = (
    actor: Actor,
    caller: Caller,
    at: Date,
    deed: string,
    id: string,
    detail: Record<string, unknown>,
  ) => ({
    organisationId: actor.organisationId,
    at,
    actorId: actor.personId,
    deed: `assignment.${deed}`,
    subjectKind: 'assignment',
    subjectId: id,
    detail,
    address: caller.address,
  });

  const locked = async (on: Repositories, actor: Actor, id: string): Promise<AssignmentRecord> => {
    const record = await on.assignments.find(actor.organisationId, id, true);
    if (record === null) throw notFound('assignment');
    return record;
  };
  const lockedOpen = async (on: Repositories, actor: Actor, id: string): Promise<AssignmentRecord> => {
    const record = await locked(on, actor, id);
    if (record.closedAt !== null) throw new ProblemError('conflict', `It was closed on ${inWords(record.closedAt)}.`);
    return record;
  };

  /** Scenarios of a body at their latest published revisions, and a title where none is given. */
  const chosenScenarios = async (on: Repositories, actor: Actor, body: NewBody) => {
    let slugs: readonly string[] = body.scenarios;
    let name = '';
    if (body.playlist !== undefined) {
      if (slugs.length > 0) {
        throw fieldProblem('/playlist', 'either', 'scenarios and a playlist are both chosen', 'Choose one of the two.');
      }
      const playlist = await on.playlists.find(actor.organisationId, body.playlist);
      if (playlist === null) {
        throw fieldProblem('/playlist', 'exists', 'there is no such playlist', 'Choose one of the list.');
      }
      slugs = playlist.items.map(({ slug }) => slug);
      name = playlist.name;
    }
    if (slugs.length === 0) throw fieldProblem('/scenarios', 'some', 'no scenario is chosen', 'Choose at least one.');
    const known = new Map((await on.playlists.choose(actor.organisationId, slugs)).map((found) => [found.slug, found]));
    const chosen = [...new Set(slugs)].map((slug, i) => {
      const found = known.get(slug);
      if (found?.revisionId) return { scenarioId: found.scenarioId, revisionId: found.revisionId, title: found.title };
      throw fieldProblem(
        body.playlist === undefined ? `/scenarios/${i}` : '/playlist',
        'published',
        `"${found?.title ?? slug}" is not published`,
        'Choose published scenarios, or publish this one first.',
      );
    });
    return {
      chosen,
      title:
        body.title ||
        name ||
        chosen
          .map(({ title }) => title)
          .join(', ')
          .slice(0, 200),
    };
  };

  /** The record with its people and scenarios, for notices. */
  const whole = async (on: Repositories, actor: Actor, id: string) => {
    const [record, people, scenarios] = await Promise.all([
      on.assignments.find(actor.organisationId, id),
      on.assignments.people([id]),
      on.assignments.scenarios([id]),
    ]);
    if (record === null) throw notFound('assignment');
    return { record, people: people.filter((person) => person.excusedAt === null), scenarios, everyone: people };
  };

  return {
    async create(actor: Actor, body: NewBody, caller: Caller): Promise<Assignment> {
      requireDeed(actor, 'assignment.edit');
      const at = now();
      const { terms } = termsOf(body, at, null);
      const id = randomUUID();
      const { organisationId, personId } = actor;
      await database.transaction(async (on) => {
        const { chosen, title } = await chosenScenarios(on, actor, body);
        const people = await chosenPeople(on, actor, body);
        await on.assignments.insert({ id, organisationId, by: personId, at }, { ...terms, title }, chosen);
        await on.assignments.addPeople(id, terms.dueAt, people, at);
        const made = await whole(on, actor, id);
        await notices.give(on, 'set', made.record, organisationId, made.people, made.scenarios, at, () => 'set');
        const detail = { title, people: people.length, due: terms.dueAt.toISOString() };
        await on.audit.append(entry(actor, caller, at, 'set', id, detail));
      });
      return reads.read(actor, id);
    },

    /** What `create` would do with this body, without doing it. */
    async preview(actor: Actor, body: NewBody): Promise<NoticePreview> {
      requireDeed(actor, 'assignment.edit');
      const { terms, remark } = termsOf(body, now(), null);
      return database.transaction(async (on) => {
        const { chosen, title } = await chosenScenarios(on, actor, body);
        const people = await chosenPeople(on, actor, body);
        const trainees = await on.assignments.flyingPeople(actor.organisationId);
        const profile = await on.people.findProfile(actor.organisationId, actor.personId);
        const first = trainees.find(({ id }) => id === people[0]?.id);
        const message = noticeText(
          'set',
          { ...terms, title, author: profile?.person.displayName ?? '', closedFor: null },
          { displayName: first?.displayName ?? '', dueAt: terms.dueAt, extraTries: 0, zone: null },
          chosen.map((scenario) => ({ title: scenario.title, airframeName: 'as published' })),
          { address: notices.address(), caution: profile?.organisation.settings.caution ?? '' },
        );
        const { opensAt, dueAt } = terms;
        return {
          ...message,
          dueAt: dueAt.toISOString(),
          opensAt: opensAt.toISOString(),
          remark,
          people: people.length,
        };
      });
    },

    async change(
      actor: Actor,
      id: string,
      version: string,
      body: z.output<typeof changeAssignmentSchema>,
      caller: Caller,
    ): Promise<Assignment> {
      requireDeed(actor, 'assignment.edit');
      const at = now();
      await database.transaction(async (on) => {
        const before = await lockedOpen(on, actor, id);
        if (versionText(before.id, before.version) !== version) {
          throw new ProblemError(
            'changed-meanwhile',
            'This assignment was changed after you opened it. Open it again.',
          );
        }
        const { terms } = termsOf(body, at, before);
        await on.assignments.change(id, before.version, { ...terms, title: terms.title || before.title }, at);
        await on.assignments.moveDue(id, terms.dueAt);
        const { people: toRaise } = await whole(on, actor, id);
        await on.assignments.raiseSequence(
          id,
          toRaise.map(({ personId }) => personId),
        );
        const { record, people, scenarios } = await whole(on, actor, id);
        await notices.give(on, 'changed', record, actor.organisationId, people, scenarios, at, (person) =>
          String(person.sequence),
        );
        await on.audit.append(entry(actor, caller, at, 'changed', id, { before, after: terms }));
      });
      return reads.read(actor, id);
    },

    async addPeople(
      actor: Actor,
      id: string,
      body: z.output<typeof addPeopleSchema>,
      caller: Caller,
    ): Promise<Assignment> {
      requireDeed(actor, 'assignment.edit');
      const at = now();
      await database.transaction(async (on) => {
        const before = await lockedOpen(on, actor, id);
        const here = new Set((await whole(on, actor, id)).people.map(({ personId }) => personId));
        const fresh = (await chosenPeople(on, actor, body)).filter((person) => !here.has(person.id));
        await on.assignments.addPeople(id, before.dueAt, fresh, at);
        const { record, people, scenarios } = await whole(on, actor, id);
        const added = people.filter((person) => !here.has(person.personId));
        await notices.give(on, 'set', record, actor.organisationId, added, scenarios, at, (person) =>
          person.sequence === 0 ? 'set' : `set ${person.sequence}`,
        );
        await on.audit.append(
          entry(actor, caller, at, 'people-added', id, { people: fresh.map((person) => person.id) }),
        );
      });
      return reads.read(actor, id);
    },

    /** Takes people off an assignment; their tries stay in the record. */
    async excuse(actor: Actor, id: string, personIds: readonly string[], caller: Caller): Promise<Assignment> {
      requireDeed(actor, 'assignment.edit');
      const at = now();
      await database.transaction(async (on) => {
        await lockedOpen(on, actor, id);
        if ((await on.assignments.excuse(id, personIds, at)) === 0) throw notFound('person');
        const { record, everyone, scenarios } = await whole(on, actor, id);
        const gone = everyone.filter(({ personId }) => personIds.includes(personId));
        await notices.give(on, 'cancelled', record, actor.organisationId, gone, scenarios, at, (person) =>
          String(person.sequence),
        );
        await on.audit.append(entry(actor, caller, at, 'people-excused', id, { people: personIds }));
      });
      return reads.read(actor, id);
    },

    async extend(actor: Actor, id: string, body: z.output<typeof extendSchema>, caller: Caller): Promise<Assignment> {
      requireDeed(actor, 'assignment.edit');
      const at = now();
      const due = instantIn('/due', body.due, body.zone).at;
      if (due <= at) throw fieldProblem('/due', 'in-the-past', 'the new time lies in the past', 'Choose a later one.');
      await database.transaction(async (on) => {
        await lockedOpen(on, actor, id);
        const here = new Map((await whole(on, actor, id)).people.map((person) => [person.personId, person]));
        for (const [i, personId] of body.people.entries()) {
          const person = here.get(personId);
          if (person === undefined) {
            throw fieldProblem(
              `/people/${i}`,
              'assigned',
              'it is not set for this person',
              'Choose people it is set for.',
            );
          }
          if (due < person.dueAt) {
            throw fieldProblem(
              '/due',
              'later',
              `${person.displayName} has until ${inWords(person.dueAt)} already`,
              'Choose a later time.',
            );
          }
          await on.assignments.extend({
            id: randomUUID(),
            assignmentId: id,
            personId,
            dueAt: due,
            extraTries: body.extraTries,
            reason: body.reason,
            by: actor.personId,
            at,
          });
        }
        const { record, people, scenarios } = await whole(on, actor, id);
        const extended = people.filter(({ personId }) => body.people.includes(personId));
        await notices.give(on, 'changed', record, actor.organisationId, extended, scenarios, at, (person) =>
          String(person.sequence),
        );
        const { people: personIds, extraTries, reason } = body;
        const detail = { people: personIds, due: due.toISOString(), extraTries, reason };
        await on.audit.append(entry(actor, caller, at, 'extended', id, detail));
      });
      return reads.read(actor, id);
    },

    /** Reminds by hand; once a minute at most for each person, however often the button is pressed. */
    async remind(
      actor: Actor,
      id: string,
      personIds: readonly string[],
      caller: Caller,
    ): Promise<{ reminded: number }> {
      requireDeed(actor, 'assignment.edit');
      const at = now();
      return database.transaction(async (on) => {
        await lockedOpen(on, actor, id);
        const { record, people, scenarios } = await whole(on, actor, id);
        const wanted = people.filter(({ personId }) => personIds.includes(personId));
        const reminded = await notices.give(
          on,
          'reminder',
          record,
          actor.organisationId,
          wanted,
          scenarios,
          at,
          () => `by hand ${minutes(at)}`,
        );
        await on.audit.append(entry(actor, caller, at, 'reminded', id, { people: personIds, reminded }));
        return { reminded };
      });
    },

    async close(actor: Actor, id: string, reason: string, caller: Caller): Promise<Assignment> {
      requireDeed(actor, 'assignment.edit');
      const at = now();
      await database.transaction(async (on) => {
        await lockedOpen(on, actor, id);
        await on.assignments.close(id, at, reason);
        const { people: here } = await whole(on, actor, id);
        await on.assignments.raiseSequence(
          id,
          here.map(({ personId }) => personId),
        );
        const { record, people, scenarios } = await whole(on, actor, id);
        // Who has passed or whose date is over keeps the calendar as it is.
        const standing = await reads.standings(on, record, at);
        const waiting = people.filter(
          ({ personId, dueAt }) => dueAt > at && standing.get(personId)?.standing !== 'passed',
        );
        await notices.give(on, 'cancelled', record, actor.organisationId, waiting, scenarios, at, (person) =>
          String(person.sequence),
        );
        await on.audit.append(entry(actor, caller, at, 'closed', id, { reason }));
      });
      return reads.read(actor, id);
    },

    /** Gives the reminders that are due; called by the clock. Two servers at once give none twice. */
    async giveDueReminders(): Promise<number> {
      const at = now();
      let given = 0;
      for (const { organisationId, assignmentId, personId } of await database.assignments.remindersDue(at)) {
        given += await database.transaction(async (on) => {
          const record = await on.assignments.find(organisationId, assignmentId, true);
          if (record === null || record.closedAt !== null) return 0;
          const standing = (await reads.standings(on, record, at)).get(personId);
          const people = await on.assignments.people([assignmentId], personId);
          const scenarios = await on.assignments.scenarios([assignmentId]);
          const mailing = standing?.standing === 'passed' ? { ...record, byMail: false } : record;
          return notices.give(on, 'reminder', mailing, organisationId, people, scenarios, at, (person) =>
            dueOccasion(person.dueAt),
          );
        });
      }
      return given;
    },
  };
}
export type AssignmentsService = ReturnType<typeof createAssignmentsService>;
