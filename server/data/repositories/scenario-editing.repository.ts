import type { ScenarioStatus, ScenarioSummary } from '#shared/contracts/scenarios.ts';
import type { EntityManager } from 'typeorm';
import { AirframeRevisionEntity } from '../entities/airframe-revision.entity.ts';
import { ScenarioRevisionEntity } from '../entities/scenario-revision.entity.ts';
import { ScenarioEntity } from '../entities/scenario.entity.ts';

export interface ScenarioLineRecord {
  id: string;
  revision: number;
  status: ScenarioStatus;
  title: string;
  note: string;
  airframe: { slug: string; revision: number; revisionId: string };
  createdBy: string | null;
  createdAt: Date;
  publishedBy: string | null;
  publishedAt: Date | null;
  archivedAt: Date | null;
  changedBy: string | null;
  changedAt: Date;
  version: number;
}
export interface ScenarioLineWithDocument extends ScenarioLineRecord {
  document: unknown;
}

/** Copies of a draft's document that lists show. */
export interface ScenarioCopies {
  title: string;
  summary: string;
  purpose: string;
  durationS: number;
  criterionCount: number;
  lanes: ScenarioSummary['lanes'];
}

export interface PinnedRevision {
  id: string;
  slug: string;
  revision: number;
  status: 'draft' | 'released' | 'retired';
  document: unknown;
}

function lineRecord(row: ScenarioRevisionEntity): ScenarioLineRecord {
  const pin = row.airframeRevision;
  return {
    id: row.id,
    revision: row.number,
    status: row.status,
    title: row.title,
    note: row.note,
    airframe: { slug: pin?.airframe?.slug ?? '', revision: pin?.number ?? 0, revisionId: row.airframeRevisionId },
    createdBy: row.createdBy?.displayName ?? null,
    createdAt: row.createdAt,
    publishedBy: row.publishedBy?.displayName ?? null,
    publishedAt: row.publishedAt,
    archivedAt: row.archivedAt,
    changedBy: row.changedBy?.displayName ?? null,
    changedAt: row.changedAt,
    version: row.version,
  };
}

/** What writing scenarios needs; callers have found the scenario within the actor's organisation first. */
export function createScenarioEditingRepository(manager: EntityManager) {
  const revisionsOf = (scenarioId: string) =>
    manager
      .createQueryBuilder(ScenarioRevisionEntity, 'r')
      .innerJoin('r.airframeRevision', 'f')
      .innerJoin('f.airframe', 'a')
      .leftJoin('r.createdBy', 'author')
      .leftJoin('r.publishedBy', 'publisher')
      .leftJoin('r.changedBy', 'changer')
      .select(['r.id', 'r.number', 'r.status', 'r.title', 'r.note', 'r.airframeRevisionId', 'r.createdAt'])
      .addSelect(['r.publishedAt', 'r.archivedAt', 'r.changedAt', 'r.version', 'f.id', 'f.number', 'a.id', 'a.slug'])
      .addSelect(['author.id', 'author.displayName', 'publisher.id', 'publisher.displayName'])
      .addSelect(['changer.id', 'changer.displayName'])
      .where('r.scenarioId = :scenarioId', { scenarioId });
  const pins = (organisationId: string, slug: string) =>
    manager
      .createQueryBuilder(AirframeRevisionEntity, 'f')
      .innerJoinAndSelect('f.airframe', 'a')
      .where('a.organisationId = :organisationId AND a.slug = :slug', { organisationId, slug });
  const pinRecord = (row: AirframeRevisionEntity | null): PinnedRevision | null =>
    row === null
      ? null
      : {
          id: row.id,
          slug: row.airframe?.slug ?? '',
          revision: row.number,
          status: row.status,
          document: row.document,
        };

  return {
    async find(organisationId: string, slug: string): Promise<{ id: string; slug: string } | null> {
      const row = await manager.findOne(ScenarioEntity, { where: { organisationId, slug } });
      return row === null ? null : { id: row.id, slug: row.slug };
    },

    /** Locks the scenario to the end of the transaction: its revisions are then numbered and changed by one only. */
    async lock(organisationId: string, slug: string): Promise<{ id: string; slug: string } | null> {
      const row = await manager.findOne(ScenarioEntity, {
        where: { organisationId, slug },
        lock: { mode: 'pessimistic_write' },
      });
      return row === null ? null : { id: row.id, slug: row.slug };
    },

    async slugsLike(organisationId: string, slug: string): Promise<Set<string>> {
      const rows = await manager
        .createQueryBuilder(ScenarioEntity, 's')
        .select(['s.id', 's.slug'])
        .where('s.organisationId = :organisationId AND s.slug LIKE :start', { organisationId, start: `${slug}%` })
        .getMany();
      return new Set(rows.map((row) => row.slug));
    },

    async lines(scenarioId: string): Promise<ScenarioLineRecord[]> {
      return (await revisionsOf(scenarioId).orderBy('r.number', 'DESC').getMany()).map(lineRecord);
    },

    async revision(scenarioId: string, number: number): Promise<ScenarioLineWithDocument | null> {
      const row = await revisionsOf(scenarioId)
        .addSelect('r.document')
        .andWhere('r.number = :number', { number })
        .getOne();
      return row === null ? null : { ...lineRecord(row), document: row.document };
    },

    async highestNumber(scenarioId: string): Promise<number> {
      return (await manager.maximum(ScenarioRevisionEntity, 'number', { scenarioId })) ?? 0;
    },

    /** The airframe revision of a pin, whatever its state. */
    async pinned(organisationId: string, slug: string, revision: number): Promise<PinnedRevision | null> {
      return pinRecord(await pins(organisationId, slug).andWhere('f.number = :revision', { revision }).getOne());
    },

    async newestReleased(organisationId: string, slug: string): Promise<PinnedRevision | null> {
      const newest = pins(organisationId, slug).andWhere(`f.status = 'released'`).orderBy('f.number', 'DESC').limit(1);
      return pinRecord(await newest.getOne());
    },

    /** False when the draft was saved or published since `version`. */
    async saveDraft(
      draft: ScenarioCopies & {
        id: string;
        version: number;
        document: unknown;
        note: string;
        airframeRevisionId: string;
      },
      by: string,
      at: Date,
    ): Promise<boolean> {
      const { id, version, lanes, document, ...columns } = draft;
      const done = await manager
        .createQueryBuilder()
        .update(ScenarioRevisionEntity)
        .set({
          ...columns,
          lanes: lanes as object, // a JSON document; the column keeps any
          document: document as object, // the same
          version: version + 1,
          changedById: by,
          changedAt: at,
        })
        .where(`id = :id AND version = :version AND status = 'draft'`, { id, version })
        .execute();
      return done.affected === 1;
    },

    async publish(id: string, note: string, by: string, at: Date): Promise<void> {
      await manager.update(
        ScenarioRevisionEntity,
        { id, status: 'draft' },
        { status: 'published', note, publishedById: by, publishedAt: at, changedAt: at },
      );
    },

    /** Archives every published revision; returns how many. */
    async archive(scenarioId: string, at: Date): Promise<number> {
      const done = await manager.update(
        ScenarioRevisionEntity,
        { scenarioId, status: 'published' },
        { status: 'archived', archivedAt: at, changedAt: at },
      );
      return done.affected ?? 0;
    },

    /** Publishes again what was archived last; returns how many revisions. */
    async restore(scenarioId: string, at: Date): Promise<number> {
      const done = await manager.update(
        ScenarioRevisionEntity,
        { scenarioId, status: 'archived' },
        { status: 'published', archivedAt: null, changedAt: at },
      );
      return done.affected ?? 0;
    },

    /** Removes a draft, and the scenario with its last revision. */
    async removeDraft(id: string, scenarioId: string): Promise<void> {
      await manager.delete(ScenarioRevisionEntity, { id, status: 'draft' });
      if (await manager.exists(ScenarioRevisionEntity, { where: { scenarioId } })) return;
      await manager.delete(ScenarioEntity, { id: scenarioId });
    },
  };
}
export type ScenarioEditingRepository = ReturnType<typeof createScenarioEditingRepository>;
