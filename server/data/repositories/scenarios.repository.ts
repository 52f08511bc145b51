import type { ScenarioListQuery, ScenarioStatus, ScenarioSummary } from '#shared/contracts/scenarios.ts';
import { type EntityManager, In } from 'typeorm';
import { AttemptEntity } from '../entities/attempt.entity.ts';
import { ScenarioRevisionEntity } from '../entities/scenario-revision.entity.ts';
import { ScenarioEntity } from '../entities/scenario.entity.ts';
import { lanesColumn, verdictColumn } from './json-columns.ts';
import { anywhere } from './like-pattern.ts';
import { type Rows, offsetOf, sortOrder } from './paging.ts';

export interface ScenarioRevisionRecord {
  id: string;
  scenarioId: string;
  slug: string;
  revision: number;
  status: ScenarioStatus;
  note: string;
  createdBy: string | null;
  createdAt: Date;
  publishedAt: Date | null;
  document: unknown;
  airframe: { slug: string; revision: number; revisionId: string; document: unknown };
}

export interface NewScenarioRevision {
  id: string;
  organisationId: string;
  scenarioId: string;
  number: number;
  status: ScenarioStatus;
  title: string;
  summary: string;
  purpose: string;
  durationS: number;
  criterionCount: number;
  lanes: ScenarioSummary['lanes'];
  document: unknown;
  airframeRevisionId: string;
  note: string;
  authorId: string | null;
  at: Date;
}

const SORT_COLUMNS: Record<string, string> = { title: 'r.title', updatedAt: 'r.changedAt', duration: 'r.durationS' };

export function createScenariosRepository(manager: EntityManager) {
  /** How often the reader flew each scenario, and the verdict of the last completed attempt. */
  const ownAttempts = async (personId: string, scenarioIds: string[]) => {
    const own = new Map<string, NonNullable<ScenarioSummary['attempts']>>();
    if (scenarioIds.length === 0) return own;
    const rows = await manager
      .createQueryBuilder(AttemptEntity, 't')
      .leftJoinAndMapOne('t.result', 'attempt_result', 'result', 'result.attempt_id = t.id AND result.counts = 1')
      .select(['t.id', 't.scenarioId', 't.number', 'result.id', 'result.verdict'])
      .where('t.personId = :personId', { personId })
      .andWhere({ scenarioId: In(scenarioIds) })
      .orderBy('t.number', 'ASC')
      .getMany();
    for (const row of rows) {
      const last = row.result ? verdictColumn(row.result.verdict) : null;
      const before = own.get(row.scenarioId);
      own.set(row.scenarioId, {
        mine: (before?.mine ?? 0) + 1,
        lastVerdict: row.result ? last : (before?.lastVerdict ?? null),
      });
    }
    return own;
  };

  return {
    /** One row a scenario: its newest revision of the status asked for. */
    async list(organisationId: string, readerId: string, query: ScenarioListQuery): Promise<Rows<ScenarioSummary>> {
      const builder = manager
        .createQueryBuilder(ScenarioRevisionEntity, 'r')
        .innerJoin('r.scenario', 's')
        .innerJoin('r.airframeRevision', 'f')
        .innerJoin('f.airframe', 'a')
        .select(['r.id', 'r.scenarioId', 'r.number', 'r.status', 'r.title', 'r.summary', 'r.purpose', 'r.durationS'])
        .addSelect(['r.criterionCount', 'r.lanes', 'r.changedAt', 's.id', 's.slug', 'f.id', 'f.number', 'f.name'])
        .addSelect(['a.id', 'a.slug'])
        .where('r.organisationId = :organisationId', { organisationId })
        .andWhere('r.status = :status', { status: query.status })
        .andWhere(
          `r.number = (SELECT MAX(newer.number) FROM scenario_revision newer
            WHERE newer.scenario_id = r.scenario_id AND newer.status = :status)`,
        );
      if (query.status === 'archived')
        builder.andWhere(
          `NOT EXISTS (SELECT 1 FROM scenario_revision open
            WHERE open.scenario_id = r.scenario_id AND open.status = 'published')`,
        );
      if (query.airframe !== undefined) builder.andWhere('a.slug = :airframe', { airframe: query.airframe });
      if (query.search !== '') {
        builder.andWhere('(r.title LIKE :text OR r.summary LIKE :text OR r.purpose LIKE :text OR s.slug LIKE :text)', {
          text: anywhere(query.search),
        });
      }
      const order = sortOrder(query.sort);
      builder.orderBy(SORT_COLUMNS[order.key] ?? 'r.title', order.direction).addOrderBy('s.slug', 'ASC');
      const total = await builder.getCount();
      const rows = await builder.offset(offsetOf(query)).limit(query.pageSize).getMany();
      const own = await ownAttempts(
        readerId,
        rows.map((row) => row.scenarioId),
      );
      const items = rows.map((row) => ({
        slug: row.scenario?.slug ?? '',
        title: row.title,
        summary: row.summary,
        purpose: row.purpose,
        airframeSlug: row.airframeRevision?.airframe?.slug ?? '',
        airframeRevision: row.airframeRevision?.number ?? 0,
        airframeName: row.airframeRevision?.name ?? '',
        revision: row.number,
        status: row.status,
        durationS: row.durationS,
        criteria: row.criterionCount,
        lanes: lanesColumn(row.lanes),
        updatedAt: row.changedAt.toISOString(),
        attempts: own.get(row.scenarioId) ?? null,
      }));
      return { items, total };
    },

    async latestPublishedNumber(organisationId: string, slug: string): Promise<number | null> {
      const row = await manager
        .createQueryBuilder(ScenarioRevisionEntity, 'r')
        .innerJoin('r.scenario', 's')
        .select(['r.id', 'r.number'])
        .where('r.organisationId = :organisationId AND s.organisationId = :organisationId', { organisationId })
        .andWhere(`s.slug = :slug AND r.status = 'published'`, { slug })
        .orderBy('r.number', 'DESC')
        .limit(1)
        .getOne();
      return row?.number ?? null;
    },

    async findRevision(organisationId: string, slug: string, number: number): Promise<ScenarioRevisionRecord | null> {
      const row = await manager
        .createQueryBuilder(ScenarioRevisionEntity, 'r')
        .innerJoinAndSelect('r.scenario', 's')
        .innerJoinAndSelect('r.airframeRevision', 'f')
        .innerJoinAndSelect('f.airframe', 'a')
        .leftJoin('r.createdBy', 'author')
        .addSelect(['author.id', 'author.displayName'])
        .where('r.organisationId = :organisationId AND s.organisationId = :organisationId', { organisationId })
        .andWhere('s.slug = :slug AND r.number = :number', { slug, number })
        .getOne();
      return row === null ? null : scenarioRevisionRecord(row);
    },

    async insert(scenario: { id: string; organisationId: string; slug: string; at: Date }): Promise<void> {
      const { id, organisationId, slug, at } = scenario;
      await manager.insert(ScenarioEntity, { id, organisationId, slug, createdAt: at });
    },

    async insertRevision({ at, authorId, ...columns }: NewScenarioRevision): Promise<void> {
      const published = columns.status === 'draft' ? null : at;
      await manager.save(ScenarioRevisionEntity, {
        ...columns,
        createdById: authorId,
        createdAt: at,
        publishedById: published === null ? null : authorId,
        publishedAt: published,
        archivedAt: null,
        changedAt: at,
      });
    },
  };
}

/** A record of a row that was read with its scenario and its pinned airframe. */
export function scenarioRevisionRecord(row: ScenarioRevisionEntity): ScenarioRevisionRecord {
  const { scenario, airframeRevision } = row;
  if (scenario === undefined || airframeRevision?.airframe === undefined) {
    throw new Error(`Scenario revision ${row.id} was read without its scenario or airframe.`);
  }
  return {
    id: row.id,
    scenarioId: row.scenarioId,
    slug: scenario.slug,
    revision: row.number,
    status: row.status,
    note: row.note,
    createdBy: row.createdBy?.displayName ?? null,
    createdAt: row.createdAt,
    publishedAt: row.publishedAt,
    document: row.document,
    airframe: {
      slug: airframeRevision.airframe.slug,
      revision: airframeRevision.number,
      revisionId: airframeRevision.id,
      document: airframeRevision.document,
    },
  };
}

export type ScenariosRepository = ReturnType<typeof createScenariosRepository>;
