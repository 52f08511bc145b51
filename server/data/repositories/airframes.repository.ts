import type { AirframeListQuery, AirframeStatus, AirframeSummary } from '#shared/contracts/airframes.ts';
import { type EntityManager, In } from 'typeorm';
import { AirframeRevisionEntity } from '../entities/airframe-revision.entity.ts';
import { AirframeTagEntity } from '../entities/airframe-tag.entity.ts';
import { AirframeEntity } from '../entities/airframe.entity.ts';
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
  name: string;
  airplaneClass: string;
  engineCount: number;
  document: unknown;
  note: string;
  authorId: string | null;
  at: Date;
}

const SORT_COLUMNS: Record<string, string> = {
  name: 'r.name',
  class: 'r.airplaneClass',
  revision: 'r.number',
  updatedAt: 'r.changedAt',
};

export function createAirframesRepository(manager: EntityManager) {
  const tagsOf = async (airframeIds: string[]): Promise<Map<string, string[]>> => {
    const tags = new Map<string, string[]>(airframeIds.map((id) => [id, []]));
    if (airframeIds.length === 0) return tags;
    const rows = await manager.find(AirframeTagEntity, {
      where: { airframeId: In(airframeIds) },
      order: { tag: 'ASC' },
    });
    for (const row of rows) tags.get(row.airframeId)?.push(row.tag);
    return tags;
  };

  return {
    /** One row an airframe: its latest revision, or the latest of the wanted status. */
    async list(organisationId: string, query: AirframeListQuery): Promise<Rows<AirframeSummary>> {
      const newest = query.status === undefined ? '' : ' AND newer.status = :status';
      const builder = manager
        .createQueryBuilder(AirframeRevisionEntity, 'r')
        .innerJoin('r.airframe', 'a')
        .select(['r.id', 'r.airframeId', 'r.number', 'r.status', 'r.name', 'r.airplaneClass', 'r.engineCount'])
        .addSelect(['r.changedAt', 'a.id', 'a.slug'])
        .where('r.organisationId = :organisationId', { organisationId })
        .andWhere(
          `r.number = (SELECT MAX(newer.number) FROM airframe_revision newer WHERE newer.airframe_id = r.airframe_id${newest})`,
          { status: query.status },
        );
      if (query.tag !== undefined) {
        builder.andWhere('EXISTS (SELECT 1 FROM airframe_tag t WHERE t.airframe_id = a.id AND t.tag = :tag)', {
          tag: query.tag,
        });
      }
      if (query.search !== '') {
        builder.andWhere(
          '(r.name LIKE :text OR a.slug LIKE :text OR EXISTS (SELECT 1 FROM airframe_tag t WHERE t.airframe_id = a.id AND t.tag LIKE :text))',
          { text: anywhere(query.search) },
        );
      }
      const order = sortOrder(query.sort);
      builder.orderBy(SORT_COLUMNS[order.key] ?? 'r.name', order.direction).addOrderBy('a.slug', 'ASC');
      const total = await builder.getCount();
      const rows = await builder.offset(offsetOf(query)).limit(query.pageSize).getMany();
      const tags = await tagsOf(rows.map((row) => row.airframeId));
      const items = rows.map((row) => ({
        slug: row.airframe?.slug ?? '',
        name: row.name,
        class: row.airplaneClass,
        engines: row.engineCount,
        revision: row.number,
        status: row.status,
        tags: tags.get(row.airframeId) ?? [],
        updatedAt: row.changedAt.toISOString(),
      }));
      return { items, total };
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
      if (tags.length > 0)
        await manager.insert(
          AirframeTagEntity,
          tags.map((tag) => ({ airframeId: id, tag })),
        );
    },

    async insertRevision({ at, authorId, document, ...columns }: NewAirframeRevision): Promise<void> {
      const released = columns.status === 'draft' ? null : at;
      await manager.save(AirframeRevisionEntity, {
        ...columns,
        document,
        createdById: authorId,
        createdAt: at,
        releasedById: released === null ? null : authorId,
        releasedAt: released,
        retiredAt: null,
        changedAt: at,
      });
    },
  };
}

export type AirframesRepository = ReturnType<typeof createAirframesRepository>;
