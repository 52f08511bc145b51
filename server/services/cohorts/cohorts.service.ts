import { randomUUID } from 'node:crypto';
import type { Cohort, CohortQuery, CohortSummary } from '#shared/contracts/cohorts.ts';
import type { Page } from '#shared/contracts/paging.ts';
import type { Database, Repositories } from '../../data/database.ts';
import { isDuplicateKey } from '../../data/duplicate-key.ts';
import type { CohortRecord } from '../../data/repositories/cohorts.repository.ts';
import { type Actor, requireDeed } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';

const summary = ({ createdAt, archivedAt, ...cohort }: CohortRecord): CohortSummary => ({
  ...cohort,
  createdAt: createdAt.toISOString(),
  archivedAt: archivedAt?.toISOString() ?? null,
});

export function createCohortsService({ database, now }: { database: Database; now: () => Date }) {
  const audit = async (
    on: Repositories,
    actor: Actor,
    caller: Caller,
    deed: string,
    id: string,
    detail: Record<string, unknown>,
  ): Promise<void> => {
    await on.audit.append({
      organisationId: actor.organisationId,
      at: now(),
      actorId: actor.personId,
      deed: `cohort.${deed}`,
      subjectKind: 'cohort',
      subjectId: id,
      detail,
      address: caller.address,
    });
  };

  const held = async (on: Repositories, actor: Actor, id: string): Promise<CohortRecord> => {
    const cohort = await on.cohorts.find(actor.organisationId, id, true);
    if (cohort === null) throw notFound('cohort');
    return cohort;
  };
  const heldCurrent = async (on: Repositories, actor: Actor, id: string): Promise<CohortRecord> => {
    const cohort = await held(on, actor, id);
    if (cohort.archivedAt === null) return cohort;
    throw new ProblemError('conflict', `Cohort ${cohort.name} is archived. Restore it first.`);
  };

  const read = async (actor: Actor, id: string): Promise<Cohort> => {
    const cohort = await database.cohorts.find(actor.organisationId, id);
    if (cohort === null) throw notFound('cohort');
    const people = await database.cohorts.members(id);
    return {
      ...summary(cohort),
      people: people.map(({ joinedAt, ...person }) => ({ ...person, joinedAt: joinedAt.toISOString() })),
    };
  };

  const named = async <T>(work: () => Promise<T>): Promise<T> => {
    try {
      return await work();
    } catch (error) {
      if (!isDuplicateKey(error)) throw error;
      const message = 'There is a cohort of this name already';
      const remedy = 'Give another name; archived cohorts keep theirs.';
      throw new ProblemError('validation', `${message}.`, {
        errors: [{ field: '/name', rule: 'unique', message, remedy }],
      });
    }
  };

  return {
    async list(actor: Actor, query: CohortQuery): Promise<Page<CohortSummary>> {
      requireDeed(actor, 'cohort.edit');
      const { items, total } = await database.cohorts.list(actor.organisationId, query);
      return { items: items.map(summary), page: query.page, pageSize: query.pageSize, total };
    },

    async read(actor: Actor, id: string): Promise<Cohort> {
      requireDeed(actor, 'cohort.edit');
      return read(actor, id);
    },

    async candidates(actor: Actor, id: string, search: string) {
      requireDeed(actor, 'cohort.edit');
      if ((await database.cohorts.find(actor.organisationId, id)) === null) throw notFound('cohort');
      return database.cohorts.candidates(actor.organisationId, id, search);
    },

    async create(actor: Actor, name: string, caller: Caller): Promise<Cohort> {
      requireDeed(actor, 'cohort.edit');
      const id = randomUUID();
      const { organisationId } = actor;
      await named(() =>
        database.transaction(async (on) => {
          await on.organisations.insertCohort({ id, organisationId, name, memberIds: [], at: now() });
          await audit(on, actor, caller, 'made', id, { name });
        }),
      );
      return read(actor, id);
    },

    /** Open assignments name the cohort as it was when they were set; they keep that name. */
    async rename(actor: Actor, id: string, name: string, caller: Caller): Promise<Cohort> {
      requireDeed(actor, 'cohort.edit');
      await named(() =>
        database.transaction(async (on) => {
          const { name: before } = await heldCurrent(on, actor, id);
          if (before === name) return;
          await on.cohorts.rename(id, name);
          await audit(on, actor, caller, 'renamed', id, { before, after: name });
        }),
      );
      return read(actor, id);
    },

    async addMembers(actor: Actor, id: string, people: readonly string[], caller: Caller): Promise<Cohort> {
      requireDeed(actor, 'cohort.edit');
      await database.transaction(async (on) => {
        await heldCurrent(on, actor, id);
        for (const [i, personId] of people.entries()) {
          const status = await on.people.status(actor.organisationId, personId);
          if (status === 'active' || status === 'invited') continue;
          const message = status === null ? 'There is no such person' : 'This person is deactivated';
          throw new ProblemError('validation', `${message}.`, {
            errors: [{ field: `/people/${i}`, rule: 'exists', message, remedy: 'Choose people of the list.' }],
          });
        }
        const added = await on.cohorts.add(actor.organisationId, id, people, now());
        if (added.length > 0) await audit(on, actor, caller, 'people-added', id, { people: added });
      });
      return read(actor, id);
    },

    /** What is assigned to the person stays; taking it off is a deed on the assignment. */
    async removeMember(actor: Actor, id: string, personId: string, caller: Caller): Promise<Cohort> {
      requireDeed(actor, 'cohort.edit');
      await database.transaction(async (on) => {
        await heldCurrent(on, actor, id);
        if (!(await on.cohorts.remove(id, personId))) throw notFound('member');
        await audit(on, actor, caller, 'person-removed', id, { person: personId });
      });
      return read(actor, id);
    },

    async setArchived(actor: Actor, id: string, archived: boolean, caller: Caller): Promise<Cohort> {
      requireDeed(actor, 'cohort.edit');
      await database.transaction(async (on) => {
        const cohort = await held(on, actor, id);
        if ((cohort.archivedAt !== null) === archived) return;
        await on.cohorts.setArchived(id, archived ? now() : null);
        await audit(on, actor, caller, archived ? 'archived' : 'restored', id, { name: cohort.name });
      });
      return read(actor, id);
    },
  };
}
export type CohortsService = ReturnType<typeof createCohortsService>;
