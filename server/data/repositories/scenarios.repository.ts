import {
  type ScenarioListQuery,
  type ScenarioStatus,
  type ScenarioSummary,
  scenarioStatusSchema,
} from '#shared/contracts/scenarios.ts';
import { type EntityManager, In } from 'typeorm';
import { z } from 'zod';
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

/** Read at every brief, flight and class: plain statements, because building them anew costs more than sending them. */
const FIND_NEWEST = `
  SELECT MAX(r.number) AS number FROM scenario_revision r INNER JOIN scenario s ON s.id = r.scenario_id
  WHERE s.organisation_id = ? AND s.slug = ? AND r.status = 'published'`;
const FIND_REVISION = `
  SELECT r.id, r.scenario_id AS scenarioId, s.slug, r.number AS revision, r.status, r.note,
    author.display_name AS createdBy, r.created_at AS createdAt, r.published_at AS publishedAt, r.document,
    a.slug AS airframeSlug, f.number AS airframeNumber, f.id AS airframeRevisionId, f.document AS airframeDocument
  FROM scenario_revision r
    INNER JOIN scenario s ON s.id = r.scenario_id
    INNER JOIN airframe_revision f ON f.id = r.airframe_revision_id
    INNER JOIN airframe a ON a.id = f.airframe_id
    LEFT JOIN person author ON author.id = r.created_by
  WHERE s.organisation_id = ? AND s.slug = ? AND r.number = ?`;

const newestSchema = z.object({ number: z.number().nullable() });
/** A JSON column of a plain statement: its text. */
const documentSchema = z.unknown().transform((text): unknown => (typeof text === 'string' ? JSON.parse(text) : text));
const revisionRowSchema = z.object({
  id: z.string(),
  scenarioId: z.string(),
  slug: z.string(),
  revision: z.number(),
  status: scenarioStatusSchema,
  note: z.string(),
  createdBy: z.string().nullable(),
  createdAt: z.date(),
  publishedAt: z.date().nullable(),
  document: documentSchema,
  airframeSlug: z.string(),
  airframeNumber: z.number(),
  airframeRevisionId: z.string(),
  airframeDocument: documentSchema,
});

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
      const rows = z.array(newestSchema).parse(await manager.query(FIND_NEWEST, [organisationId, slug]));
      return rows.at(0)?.number ?? null;
    },

    async findRevision(organisationId: string, slug: string, number: number): Promise<ScenarioRevisionRecord | null> {
      const found: unknown = await manager.query(FIND_REVISION, [organisationId, slug, number]);
      const row = z.array(revisionRowSchema).parse(found).at(0);
      if (row === undefined) return null;
      const { airframeSlug, airframeNumber, airframeRevisionId, airframeDocument, ...revision } = row;
      return {
        ...revision,
        airframe: {
          slug: airframeSlug,
          revision: airframeNumber,
          revisionId: airframeRevisionId,
          document: airframeDocument,
        },
      };
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
