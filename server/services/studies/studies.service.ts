import { randomUUID } from 'node:crypto';
import type { z } from 'zod';
import type { Page } from '#shared/contracts/paging.ts';
import type {
  createStudySchema,
  saveStudySchema,
  Study,
  StudyListQuery,
  StudySummary,
} from '#shared/contracts/studies.ts';
import { isDuplicateKey } from '../../data/duplicate-key.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type { StudyRecord } from '../../data/repositories/studies.repository.ts';
import { may, requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import { inWords, versionText } from '../versions.ts';
import { pinnedRevisions } from './pinned-revisions.ts';

type StudyBody = z.output<typeof saveStudySchema>;
type NewStudyBody = z.output<typeof createStudySchema>;

function summaryOf(record: StudyRecord): StudySummary {
  return {
    id: record.id,
    name: record.name,
    note: record.note,
    airframes: record.airframes,
    author: record.author,
    createdAt: record.createdAt.toISOString(),
    updatedAt: record.changedAt.toISOString(),
    changedBy: record.changedBy,
  };
}

/** Saved studies of the Analysis screen, open to all engineers and instructors of an organisation. */
export function createStudiesService({ database, now }: { database: Database; now: () => Date }) {
  const studyOf = (actor: Actor, record: StudyRecord): Study => ({
    ...summaryOf(record),
    state: record.state,
    version: versionText(record.id, record.version),
    mayEdit: may(actor, 'study.edit'),
  });

  const found = async (on: Repositories, actor: Actor, id: string): Promise<StudyRecord> => {
    const record = await on.studies.find(actor.organisationId, id);
    if (record === null) throw notFound('study');
    return record;
  };

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
    deed: `study.${deed}`,
    subjectKind: 'study',
    subjectId: id,
    detail,
    address: caller.address,
  });

  return {
    async list(actor: Actor, query: StudyListQuery): Promise<Page<StudySummary>> {
      requireDeed(actor, 'study.read');
      const { items, total } = await database.studies.list(actor.organisationId, query);
      return { items: items.map(summaryOf), total, page: query.page, pageSize: query.pageSize };
    },

    async read(actor: Actor, id: string): Promise<Study> {
      requireDeed(actor, 'study.read');
      return studyOf(actor, await found(database, actor, id));
    },

    /** With the id of a removed study it stands at its old address again. */
    async create(actor: Actor, { id: wanted, ...body }: NewStudyBody, caller: Caller): Promise<Study> {
      requireDeed(actor, 'study.edit');
      const at = now();
      const id = wanted ?? randomUUID();
      const work = database.transaction(async (on) => {
        const { pinned, state } = await pinnedRevisions(on, actor, body.state);
        const { organisationId, personId } = actor;
        const revisionIds = pinned.map(({ revision }) => revision.id);
        await on.studies.insert({ id, organisationId, ...body, state, revisionIds }, personId, at);
        await on.audit.append(entry(actor, caller, at, wanted ? 'restored' : 'created', id, { name: body.name }));
        return studyOf(actor, await found(on, actor, id));
      });
      return work.catch((error: unknown) => {
        if (isDuplicateKey(error)) throw new ProblemError('conflict', 'This study is there already.');
        throw error;
      });
    },

    /** Saves over the version that was read; a study that someone else saved since is left as it is. */
    async save(actor: Actor, id: string, version: string, body: StudyBody, caller: Caller): Promise<Study> {
      requireDeed(actor, 'study.edit');
      const at = now();
      return database.transaction(async (on) => {
        const before = await found(on, actor, id);
        const { pinned, state } = await pinnedRevisions(on, actor, body.state);
        const content = {
          name: body.name,
          note: body.note,
          state,
          revisionIds: pinned.map(({ revision }) => revision.id),
        };
        const current = versionText(before.id, before.version) === version;
        const saved =
          current && (await on.studies.save({ id, version: before.version, ...content }, actor.personId, at));
        if (!saved) {
          throw new ProblemError(
            'changed-meanwhile',
            `${before.changedBy ?? 'Someone'} saved this study on ${inWords(before.changedAt)}, after you opened it. ` +
              'That version stands and yours was not saved: save it under another name, or open the study again.',
          );
        }
        await on.audit.append(entry(actor, caller, at, 'saved', id, { name: body.name, version: before.version + 1 }));
        return studyOf(actor, await found(on, actor, id));
      });
    },

    async remove(actor: Actor, id: string, caller: Caller): Promise<void> {
      requireDeed(actor, 'study.edit');
      const at = now();
      await database.transaction(async (on) => {
        const { name, state } = await found(on, actor, id);
        await on.studies.remove(actor.organisationId, id);
        await on.audit.append(entry(actor, caller, at, 'removed', id, { name, state }));
      });
    },
  };
}
export type StudiesService = ReturnType<typeof createStudiesService>;
