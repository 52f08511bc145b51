import { releaseAnswerSchema, type AirframeUse, type ReleaseAnswer } from '#shared/contracts/airframe-editing.ts';
import type { AirframeStatus } from '#shared/contracts/airframes.ts';
import type { EntityManager } from 'typeorm';
import { z } from 'zod';
import { AirframeRevisionEntity } from '../entities/airframe-revision.entity.ts';
import { AirframeTagEntity } from '../entities/airframe-tag.entity.ts';
import { AirframeEntity } from '../entities/airframe.entity.ts';
import { copiesOf } from './airframe-copies.ts';
import { refreshListing } from './airframe-listing.ts';
import { insertTags } from './airframes.repository.ts';

/** A revision without its document. */
export interface RevisionRecord {
  id: string;
  revision: number;
  status: AirframeStatus;
  name: string;
  note: string;
  createdBy: string | null;
  createdAt: Date;
  releasedBy: string | null;
  releasedAt: Date | null;
  retiredAt: Date | null;
  changedBy: string | null;
  changedAt: Date;
  version: number;
  answers: ReleaseAnswer[];
}
export interface RevisionWithDocument extends RevisionRecord {
  document: unknown;
}
export interface AirframeRecord {
  id: string;
  slug: string;
}

const LINE_COLUMNS = ['id', 'number', 'status', 'name', 'note', 'createdAt', 'releasedAt', 'retiredAt', 'changedAt'];
const answersColumn = (value: unknown): ReleaseAnswer[] => z.array(releaseAnswerSchema).parse(value ?? []);

const usesSchema = z.array(
  z.object({
    kind: z.enum(['scenario', 'study']),
    id: z.string(),
    title: z.string(),
    // Numbers of a union come as text.
    revision: z.union([z.null(), z.coerce.number().int()]),
    status: z.string(),
    airframeRevision: z.coerce.number().int(),
  }),
);

function revisionRecord(row: AirframeRevisionEntity): RevisionRecord {
  return {
    id: row.id,
    revision: row.number,
    status: row.status,
    name: row.name,
    note: row.note,
    createdBy: row.createdBy?.displayName ?? null,
    createdAt: row.createdAt,
    releasedBy: row.releasedBy?.displayName ?? null,
    releasedAt: row.releasedAt,
    retiredAt: row.retiredAt,
    changedBy: row.changedBy?.displayName ?? null,
    changedAt: row.changedAt,
    version: row.version,
    answers: answersColumn(row.releaseAnswers),
  };
}

/** What editing airframes needs; callers have found the airframe within the actor's organisation first. */
export function createAirframeEditingRepository(manager: EntityManager) {
  const revisionsOf = (airframeId: string) =>
    manager
      .createQueryBuilder(AirframeRevisionEntity, 'r')
      .leftJoin('r.createdBy', 'author')
      .leftJoin('r.releasedBy', 'releaser')
      .leftJoin('r.changedBy', 'changer')
      .select(LINE_COLUMNS.map((column) => `r.${column}`))
      .addSelect(['r.releaseAnswers', 'r.version', 'author.id', 'author.displayName'])
      .addSelect(['releaser.id', 'releaser.displayName', 'changer.id', 'changer.displayName'])
      .where('r.airframeId = :airframeId', { airframeId });

  return {
    async find(organisationId: string, slug: string): Promise<AirframeRecord | null> {
      const row = await manager.findOne(AirframeEntity, { where: { organisationId, slug } });
      return row === null ? null : { id: row.id, slug: row.slug };
    },

    /** Locks the airframe to the end of the transaction: its revisions are then numbered and changed by one only. */
    async lock(organisationId: string, slug: string): Promise<AirframeRecord | null> {
      const row = await manager.findOne(AirframeEntity, {
        where: { organisationId, slug },
        lock: { mode: 'pessimistic_write' },
      });
      return row === null ? null : { id: row.id, slug: row.slug };
    },

    /** Slugs that begin with `slug`, to find a free one. */
    async slugsLike(organisationId: string, slug: string): Promise<Set<string>> {
      const rows = await manager
        .createQueryBuilder(AirframeEntity, 'a')
        .select(['a.id', 'a.slug'])
        .where('a.organisationId = :organisationId AND a.slug LIKE :start', { organisationId, start: `${slug}%` })
        .getMany();
      return new Set(rows.map((row) => row.slug));
    },

    async lines(airframeId: string): Promise<RevisionRecord[]> {
      return (await revisionsOf(airframeId).orderBy('r.number', 'DESC').getMany()).map(revisionRecord);
    },

    async revision(airframeId: string, number: number): Promise<RevisionWithDocument | null> {
      const row = await revisionsOf(airframeId)
        .addSelect('r.document')
        .andWhere('r.number = :number', { number })
        .getOne();
      return row === null ? null : { ...revisionRecord(row), document: row.document };
    },

    /** All revisions with their documents, oldest first. */
    async documents(airframeId: string): Promise<RevisionWithDocument[]> {
      const rows = await revisionsOf(airframeId).addSelect('r.document').orderBy('r.number', 'ASC').getMany();
      return rows.map((row) => ({ ...revisionRecord(row), document: row.document }));
    },

    async highestNumber(airframeId: string): Promise<number> {
      return (await manager.maximum(AirframeRevisionEntity, 'number', { airframeId })) ?? 0;
    },

    async tags(airframeId: string): Promise<string[]> {
      const rows = await manager.find(AirframeTagEntity, { where: { airframeId }, order: { tag: 'ASC' } });
      return rows.map((row) => row.tag);
    },

    async setTags(airframeId: string, tags: readonly string[]): Promise<void> {
      const held = await manager.exists(AirframeTagEntity, { where: { airframeId } });
      if (held) await manager.delete(AirframeTagEntity, { airframeId });
      await insertTags(manager, airframeId, tags);
      await refreshListing(manager, airframeId);
    },

    /** Every scenario revision and study that pins a revision of the airframe; one revision only where given. */
    async uses(airframeId: string, revisionId: string | null = null): Promise<AirframeUse[]> {
      const only = revisionId === null ? '' : ' AND f.id = ?';
      const values = revisionId === null ? [airframeId] : [airframeId, revisionId];
      const found: unknown = await manager.query(
        `SELECT 'scenario' AS kind, s.slug AS id, v.title, v.number AS revision, v.status, f.number AS airframeRevision
           FROM airframe_revision f
           INNER JOIN scenario_revision v ON v.airframe_revision_id = f.id
           INNER JOIN scenario s ON s.id = v.scenario_id
           WHERE f.airframe_id = ?${only}
         UNION
         SELECT 'study', CAST(s.id AS CHAR), s.name, NULL, 'saved', f.number
           FROM airframe_revision f
           INNER JOIN study_airframe p ON p.airframe_revision_id = f.id
           INNER JOIN study s ON s.id = p.study_id
           WHERE f.airframe_id = ?${only}
         ORDER BY airframeRevision DESC, kind, title, revision DESC`,
        [...values, ...values],
      );
      return usesSchema.parse(found);
    },

    /** Saves a draft whose version is still the one given; false when it is not, or is no draft any more. */
    async saveDraft(
      draft: { id: string; airframeId: string; version: number; document: unknown; note: string },
      by: string,
      at: Date,
    ): Promise<boolean> {
      const done = await manager
        .createQueryBuilder()
        .update(AirframeRevisionEntity)
        .set({
          ...copiesOf(draft.document),
          document: draft.document as object, // a JSON document; the column keeps any
          note: draft.note,
          version: draft.version + 1,
          changedById: by,
          changedAt: at,
        })
        .where(`id = :id AND version = :version AND status = 'draft'`, { id: draft.id, version: draft.version })
        .execute();
      if (done.affected !== 1) return false;
      await refreshListing(manager, draft.airframeId);
      return true;
    },

    async release(
      revision: { id: string; airframeId: string; note: string; answers: ReleaseAnswer[] },
      by: string,
      at: Date,
    ): Promise<void> {
      await manager.update(
        AirframeRevisionEntity,
        { id: revision.id },
        {
          status: 'released',
          note: revision.note,
          releaseAnswers: revision.answers,
          releasedById: by,
          releasedAt: at,
          changedAt: at,
        },
      );
      await refreshListing(manager, revision.airframeId);
    },

    async retire(revision: { id: string; airframeId: string }, at: Date): Promise<void> {
      await manager.update(
        AirframeRevisionEntity,
        { id: revision.id },
        { status: 'retired', retiredAt: at, changedAt: at },
      );
      await refreshListing(manager, revision.airframeId);
    },

    /** Removes a draft, and with the last revision the airframe itself. */
    async removeDraft(revision: { id: string; airframeId: string }): Promise<{ airframeRemoved: boolean }> {
      await manager.delete(AirframeRevisionEntity, { id: revision.id });
      if (await manager.exists(AirframeRevisionEntity, { where: { airframeId: revision.airframeId } })) {
        await refreshListing(manager, revision.airframeId);
        return { airframeRemoved: false };
      }
      await manager.delete(AirframeEntity, { id: revision.airframeId });
      return { airframeRemoved: true };
    },
  };
}

export type AirframeEditingRepository = ReturnType<typeof createAirframeEditingRepository>;
