import {
  studyStateSchema,
  type PinnedRevision,
  type StudyListQuery,
  type StudyState,
} from '#shared/contracts/studies.ts';
import { type EntityManager, In } from 'typeorm';
import { StudyAirframeEntity } from '../entities/study-airframe.entity.ts';
import { StudyEntity } from '../entities/study.entity.ts';
import { anywhere } from './like-pattern.ts';
import { type Rows, offsetOf, sortOrder } from './paging.ts';

export interface StudyRecord {
  id: string;
  name: string;
  note: string;
  state: StudyState;
  version: number;
  author: string | null;
  createdAt: Date;
  changedBy: string | null;
  changedAt: Date;
  airframes: PinnedRevision[];
}
export interface StudyContent {
  name: string;
  note: string;
  state: StudyState;
  /** Ids of pinned airframe revisions, the one looked at first. */
  revisionIds: readonly string[];
}

const SORT_COLUMNS: Record<string, string> = { name: 's.name', updatedAt: 's.changedAt' };

export function createStudiesRepository(manager: EntityManager) {
  const pinsOf = async (studyIds: string[]): Promise<Map<string, PinnedRevision[]>> => {
    const pins = new Map<string, PinnedRevision[]>(studyIds.map((id) => [id, []]));
    if (studyIds.length === 0) return pins;
    const rows = await manager
      .createQueryBuilder(StudyAirframeEntity, 'p')
      .innerJoin('p.airframeRevision', 'f')
      .innerJoin('f.airframe', 'a')
      .select(['p.studyId', 'p.position', 'f.id', 'f.number', 'f.name', 'f.status', 'a.id', 'a.slug'])
      .where({ studyId: In(studyIds) })
      .orderBy('p.position', 'ASC')
      .getMany();
    for (const { studyId, airframeRevision } of rows) {
      if (airframeRevision?.airframe === undefined) continue;
      const { number, name, status, airframe } = airframeRevision;
      pins.get(studyId)?.push({ slug: airframe.slug, revision: number, name, status });
    }
    return pins;
  };

  const query = (organisationId: string) =>
    manager
      .createQueryBuilder(StudyEntity, 's')
      .leftJoin('s.author', 'author')
      .leftJoin('s.changedBy', 'changer')
      .select('s')
      .addSelect(['author.id', 'author.displayName', 'changer.id', 'changer.displayName'])
      .where('s.organisationId = :organisationId', { organisationId });

  const recordOf = (row: StudyEntity, airframes: PinnedRevision[]): StudyRecord => ({
    id: row.id,
    name: row.name,
    note: row.note,
    state: studyStateSchema.parse(row.state),
    version: row.version,
    author: row.author?.displayName ?? null,
    createdAt: row.createdAt,
    changedBy: row.changedBy?.displayName ?? null,
    changedAt: row.changedAt,
    airframes,
  });

  const insertPins = async (studyId: string, revisionIds: readonly string[]): Promise<void> => {
    await manager.insert(
      StudyAirframeEntity,
      revisionIds.map((airframeRevisionId, position) => ({ studyId, position, airframeRevisionId })),
    );
  };

  return {
    async list(organisationId: string, asked: StudyListQuery): Promise<Rows<StudyRecord>> {
      const builder = query(organisationId);
      if (asked.search !== '')
        builder.andWhere('(s.name LIKE :text OR s.note LIKE :text)', { text: anywhere(asked.search) });
      if (asked.airframe !== undefined) {
        builder.andWhere(
          `EXISTS (SELECT 1 FROM study_airframe p INNER JOIN airframe_revision f ON f.id = p.airframe_revision_id
            INNER JOIN airframe a ON a.id = f.airframe_id WHERE p.study_id = s.id AND a.slug = :slug)`,
          { slug: asked.airframe },
        );
      }
      const order = sortOrder(asked.sort);
      builder.orderBy(SORT_COLUMNS[order.key] ?? 's.changedAt', order.direction).addOrderBy('s.id', 'ASC');
      const total = await builder.getCount();
      const rows = await builder.offset(offsetOf(asked)).limit(asked.pageSize).getMany();
      const pins = await pinsOf(rows.map((row) => row.id));
      return { items: rows.map((row) => recordOf(row, pins.get(row.id) ?? [])), total };
    },

    async find(organisationId: string, id: string): Promise<StudyRecord | null> {
      const row = await query(organisationId).andWhere('s.id = :id', { id }).getOne();
      return row === null ? null : recordOf(row, (await pinsOf([id])).get(id) ?? []);
    },

    async insert(study: StudyContent & { id: string; organisationId: string }, by: string, at: Date): Promise<void> {
      const { revisionIds, ...columns } = study;
      await manager.insert(StudyEntity, {
        ...columns,
        version: 1,
        authorId: by,
        createdAt: at,
        changedById: by,
        changedAt: at,
      });
      await insertPins(study.id, revisionIds);
    },

    /** Saves a study whose version is still the one given; false when it is not. */
    async save(study: StudyContent & { id: string; version: number }, by: string, at: Date): Promise<boolean> {
      const { id, version, name, note, state } = study;
      const done = await manager
        .createQueryBuilder()
        .update(StudyEntity)
        .set({ name, note, state, version: version + 1, changedById: by, changedAt: at })
        .where('id = :id AND version = :version', { id, version })
        .execute();
      if (done.affected !== 1) return false;
      await manager.delete(StudyAirframeEntity, { studyId: id });
      await insertPins(id, study.revisionIds);
      return true;
    },

    async remove(organisationId: string, id: string): Promise<void> {
      await manager.delete(StudyEntity, { id, organisationId });
    },
  };
}

export type StudiesRepository = ReturnType<typeof createStudiesRepository>;
