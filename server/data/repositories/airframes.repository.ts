import {
  airframeStatusSchema,
  ENGINE_KINDS,
  type AirframeListQuery,
  type AirframeStatus,
  type AirframeSummary,
} from '#shared/contracts/airframes.ts';
import type { EntityManager } from 'typeorm';
import { z } from 'zod';
import { AirframeRevisionEntity } from '../entities/airframe-revision.entity.ts';
import { AirframeTagEntity } from '../entities/airframe-tag.entity.ts';
import { AirframeEntity } from '../entities/airframe.entity.ts';
import { comparisonKey, copiesOf } from './airframe-copies.ts';
import { refreshListing } from './airframe-listing.ts';
import { anywhere } from './like-pattern.ts';
import { type Rows, offsetOf, sortOrder } from './paging.ts';

export interface AirframeRevisionRecord {
  id: string;
  slug: string;
  revision: number;
  status: AirframeStatus;
  note: string;
  createdBy: string | null;
  createdAt: Date;
  releasedAt: Date | null;
  document: unknown;
}

export interface NewAirframeRevision {
  id: string;
  organisationId: string;
  airframeId: string;
  number: number;
  status: AirframeStatus;
  document: unknown;
  note: string;
  authorId: string | null;
  at: Date;
}

const SORT_COLUMNS: Record<string, string> = {
  name: 'name',
  class: 'airplane_class',
  revision: 'number',
  updatedAt: 'changed_at',
};

const countSchema = z.tuple([z.object({ total: z.coerce.number().int() })]);
const listRowsSchema = z.array(
  z.object({
    slug: z.string(),
    name: z.string(),
    class: z.string(),
    engines: z.number().int(),
    engineKind: z.enum(ENGINE_KINDS),
    revision: z.number().int(),
    status: airframeStatusSchema,
    updatedAt: z.date().transform((at) => at.toISOString()),
    tags: z.string().transform((tags) => (tags === '' ? [] : tags.split('\n'))),
  }),
);

/** Plain SQL: the list is read by everyone all the time, and what a query builder adds would be half its cost. */
function listCondition(organisationId: string, query: AirframeListQuery): { where: string; values: unknown[] } {
  const parts = ['organisation_id = ? AND listed_as = ?'];
  const values: unknown[] = [organisationId, query.status ?? 'any'];
  const and = (condition: string, ...given: unknown[]): void => {
    parts.push(condition);
    values.push(...given);
  };
  if (query.class !== undefined) and('airplane_class IN (?)', query.class === 'II-L' ? ['II', 'II-L'] : [query.class]);
  if (query.engineKind !== undefined) and('engine_kind = ?', query.engineKind);
  if (query.tag !== undefined) and('tag_keys LIKE ?', anywhere(`\n${comparisonKey(query.tag)}\n`));
  if (query.search !== '') and('search_key LIKE ?', anywhere(comparisonKey(query.search)));
  return { where: parts.join(' AND '), values };
}

export function createAirframesRepository(manager: EntityManager) {
  return {
    /** One row an airframe: its latest revision, or the latest of the wanted status. */
    async list(organisationId: string, query: AirframeListQuery): Promise<Rows<AirframeSummary>> {
      const { where, values } = listCondition(organisationId, query);
      const { key, direction } = sortOrder(query.sort);
      const from = `FROM airframe_listing WHERE ${where}`;
      const [counted, found] = await Promise.all([
        manager.query<unknown>(`SELECT COUNT(*) AS total ${from}`, values),
        manager.query<unknown>(
          `SELECT slug, name, airplane_class AS class, engine_count AS engines, engine_kind AS engineKind, number AS revision,
             status, tags, changed_at AS updatedAt ${from}
           ORDER BY ${SORT_COLUMNS[key] ?? 'name'} ${direction}, airframe_id ${direction} LIMIT ? OFFSET ?`,
          [...values, query.pageSize, offsetOf(query)],
        ),
      ]);
      return { items: listRowsSchema.parse(found), total: countSchema.parse(counted)[0].total };
    },

    async findRevision(organisationId: string, slug: string, number: number): Promise<AirframeRevisionRecord | null> {
      const row = await manager
        .createQueryBuilder(AirframeRevisionEntity, 'r')
        .innerJoinAndSelect('r.airframe', 'a')
        .leftJoin('r.createdBy', 'author')
        .addSelect(['author.id', 'author.displayName'])
        .where('r.organisationId = :organisationId AND a.organisationId = :organisationId', { organisationId })
        .andWhere('a.slug = :slug AND r.number = :number', { slug, number })
        .getOne();
      if (row === null) return null;
      return {
        id: row.id,
        slug,
        revision: row.number,
        status: row.status,
        note: row.note,
        createdBy: row.createdBy?.displayName ?? null,
        createdAt: row.createdAt,
        releasedAt: row.releasedAt,
        document: row.document,
      };
    },

    async insert(airframe: {
      id: string;
      organisationId: string;
      slug: string;
      tags: string[];
      at: Date;
    }): Promise<void> {
      const { id, organisationId, slug, tags, at } = airframe;
      await manager.insert(AirframeEntity, { id, organisationId, slug, createdAt: at });
      await insertTags(manager, id, tags);
    },

    async insertRevision({ at, authorId, document, ...columns }: NewAirframeRevision): Promise<void> {
      const released = columns.status === 'draft' ? null : at;
      await manager.insert(AirframeRevisionEntity, {
        ...columns,
        ...copiesOf(document),
        document: document as object, // a JSON document; the column keeps any
        createdById: authorId,
        createdAt: at,
        releasedById: released === null ? null : authorId,
        releasedAt: released,
        retiredAt: null,
        version: 1,
        changedById: authorId,
        changedAt: at,
      });
      await refreshListing(manager, columns.airframeId);
    },
  };
}

/** Adds tags; one that the database takes for another (case, accents) is kept once, as first given. */
export async function insertTags(manager: EntityManager, airframeId: string, tags: readonly string[]): Promise<void> {
  if (tags.length === 0) return;
  await manager
    .createQueryBuilder()
    .insert()
    .into(AirframeTagEntity)
    .values(tags.map((tag) => ({ airframeId, tag })))
    .orIgnore()
    .execute();
}

export type AirframesRepository = ReturnType<typeof createAirframesRepository>;
