import { classEntrySchema, type ClassEntry } from '#shared/scenario/class-log.ts';
import type { ClassListQuery } from '#shared/contracts/classes.ts';
import { In, type EntityManager, MoreThan } from 'typeorm';
import { ClassAttemptEntity } from '../entities/class-attempt.entity.ts';
import { ClassEntryEntity } from '../entities/class-entry.entity.ts';
import { ClassMemberEntity } from '../entities/class-member.entity.ts';
import { LiveClassEntity } from '../entities/live-class.entity.ts';
import { anywhere } from './like-pattern.ts';
import { offsetOf, sortOrder, type Rows } from './paging.ts';

export interface LiveClassRecord {
  id: string;
  organisationId: string;
  instructorId: string;
  title: string;
  joinCode: string | null;
  guests: boolean;
  lastSeq: number;
  refused: number;
  openedAt: Date;
  endedAt: Date | null;
}

export interface ClassMemberRecord {
  id: string;
  classId: string;
  personId: string | null;
  name: string;
}

export interface ClassAttemptRecord {
  attemptId: string;
  classId: string;
  run: number;
  memberId: string;
  demonstration: boolean;
}

export interface ClassListRow extends LiveClassRecord {
  instructor: string;
}

const SORT_COLUMNS: Record<string, string> = { openedAt: 'c.openedAt', title: 'c.title' };

function classRecord(row: LiveClassEntity): LiveClassRecord {
  const { id, organisationId, instructorId, title, joinCode, guests, lastSeq, refused, openedAt, endedAt } = row;
  return { id, organisationId, instructorId, title, joinCode, guests, lastSeq, refused, openedAt, endedAt };
}
const memberRecord = ({ id, classId, personId, name }: ClassMemberEntity): ClassMemberRecord => ({
  id,
  classId,
  personId,
  name,
});
const attemptRecord = ({
  attemptId,
  classId,
  run,
  memberId,
  demonstration,
}: ClassAttemptEntity): ClassAttemptRecord => ({
  attemptId,
  classId,
  run,
  memberId,
  demonstration,
});

export function createClassesRepository(manager: EntityManager) {
  return {
    async insert(record: LiveClassRecord & { openKey: string | null }): Promise<void> {
      await manager.insert(LiveClassEntity, record);
    },

    /** A class of any organisation: the caller checks whose it is. */
    async find(id: string): Promise<LiveClassRecord | null> {
      const row = await manager.findOne(LiveClassEntity, { where: { id } });
      return row === null ? null : classRecord(row);
    },

    async findByCode(
      joinCode: string,
    ): Promise<(LiveClassRecord & { organisation: string; instructor: string }) | null> {
      const row = await manager.findOne(LiveClassEntity, {
        where: { joinCode },
        relations: { organisation: true, instructor: true },
      });
      if (row === null) return null;
      return {
        ...classRecord(row),
        organisation: row.organisation?.name ?? '',
        instructor: row.instructor?.displayName ?? '',
      };
    },

    async findByOpenKey(instructorId: string, openKey: string): Promise<LiveClassRecord | null> {
      const row = await manager.findOne(LiveClassEntity, { where: { instructorId, openKey } });
      return row === null ? null : classRecord(row);
    },

    /** Locked to the end of the transaction: entries of a class take turns. */
    async lock(id: string): Promise<LiveClassRecord | null> {
      const row = await manager.findOne(LiveClassEntity, { where: { id }, lock: { mode: 'pessimistic_write' } });
      return row === null ? null : classRecord(row);
    },

    async setLastSeq(id: string, lastSeq: number): Promise<void> {
      await manager.update(LiveClassEntity, { id }, { lastSeq });
    },

    async markEnded(id: string, at: Date): Promise<void> {
      await manager.update(LiveClassEntity, { id }, { endedAt: at, joinCode: null });
    },

    async addRefused(id: string, count: number): Promise<void> {
      await manager.increment(LiveClassEntity, { id }, 'refused', count);
    },

    /** Number of the last entry of each of some classes. */
    async lastSeqs(ids: readonly string[]): Promise<Map<string, number>> {
      if (ids.length === 0) return new Map();
      const rows = await manager.find(LiveClassEntity, {
        select: { id: true, lastSeq: true },
        where: { id: In([...ids]) },
      });
      return new Map(rows.map(({ id, lastSeq }) => [id, lastSeq]));
    },

    /** Open classes in which nothing was appended since a time. */
    async quietSince(time: Date): Promise<string[]> {
      const rows = await manager
        .createQueryBuilder(LiveClassEntity, 'c')
        .select(['c.id'])
        .where('c.endedAt IS NULL AND c.openedAt < :time', { time })
        .andWhere('NOT EXISTS (SELECT 1 FROM class_entry e WHERE e.class_id = c.id AND e.at >= :time)')
        .limit(20)
        .getMany();
      return rows.map(({ id }) => id);
    },

    async entries(classId: string, since = 0): Promise<ClassEntry[]> {
      const rows = await manager.find(ClassEntryEntity, {
        select: { seq: true, body: true },
        where: { classId, seq: MoreThan(since) },
        order: { seq: 'ASC' },
      });
      return rows.map(({ body }) => classEntrySchema.parse(body));
    },

    /** Number of the first entry that a press led to; null when it led to none. */
    async seqOfKey(classId: string, deedKey: string): Promise<number | null> {
      const row = await manager.findOne(ClassEntryEntity, { select: { seq: true }, where: { classId, deedKey } });
      return row?.seq ?? null;
    },

    async insertEntries(classId: string, entries: readonly ClassEntry[], deedKey: string | null): Promise<void> {
      await manager.insert(
        ClassEntryEntity,
        entries.map((entry, i) => ({
          classId,
          seq: entry.seq,
          at: new Date(entry.atMs),
          kind: entry.kind,
          byMember: entry.by,
          deedKey: i === 0 ? deedKey : null,
          body: { ...entry },
        })),
      );
    },

    async insertMembers(members: readonly ClassMemberRecord[], at: Date): Promise<void> {
      if (members.length > 0)
        await manager.insert(
          ClassMemberEntity,
          members.map((one) => ({ ...one, createdAt: at })),
        );
    },

    async findMember(classId: string, id: string): Promise<ClassMemberRecord | null> {
      const row = await manager.findOne(ClassMemberEntity, { where: { id, classId } });
      return row === null ? null : memberRecord(row);
    },

    /** Locked to the end of the transaction. */
    async lockMember(classId: string, id: string): Promise<ClassMemberRecord | null> {
      const row = await manager.findOne(ClassMemberEntity, {
        where: { id, classId },
        lock: { mode: 'pessimistic_write' },
      });
      return row === null ? null : memberRecord(row);
    },

    async memberOfPerson(classId: string, personId: string): Promise<ClassMemberRecord | null> {
      const row = await manager.findOne(ClassMemberEntity, { where: { classId, personId } });
      return row === null ? null : memberRecord(row);
    },

    async insertAttempt(record: ClassAttemptRecord): Promise<void> {
      await manager.insert(ClassAttemptEntity, record);
    },

    async findAttempt(attemptId: string): Promise<ClassAttemptRecord | null> {
      const row = await manager.findOne(ClassAttemptEntity, { where: { attemptId } });
      return row === null ? null : attemptRecord(row);
    },

    async attemptOf(classId: string, run: number, memberId: string): Promise<ClassAttemptRecord | null> {
      const row = await manager.findOne(ClassAttemptEntity, { where: { classId, run, memberId } });
      return row === null ? null : attemptRecord(row);
    },

    async attemptsOf(classIds: readonly string[]): Promise<ClassAttemptRecord[]> {
      if (classIds.length === 0) return [];
      const rows = await manager.find(ClassAttemptEntity, { where: { classId: In([...classIds]) } });
      return rows.map(attemptRecord);
    },

    /** Attempts of classes that still fly and have been silent since a time. */
    async silentAttempts(quietSince: Date): Promise<ClassAttemptRecord[]> {
      const rows = await manager
        .createQueryBuilder(ClassAttemptEntity, 'a')
        .innerJoin('a.attempt', 't')
        .where(`t.status = 'flying' AND COALESCE(t.lastChunkAt, t.startedAt) < :quietSince`, { quietSince })
        .orderBy('t.startedAt', 'ASC')
        .limit(1000)
        .getMany();
      return rows.map(attemptRecord);
    },

    /** Classes of an organisation; `personId` limits them to those in which the person is a member. */
    async list(organisationId: string, personId: string | null, query: ClassListQuery): Promise<Rows<ClassListRow>> {
      const builder = manager
        .createQueryBuilder(LiveClassEntity, 'c')
        .innerJoin('c.instructor', 'p')
        .addSelect(['p.id', 'p.displayName'])
        .where('c.organisationId = :organisationId', { organisationId });
      if (query.search !== '') builder.andWhere('c.title LIKE :title', { title: anywhere(query.search) });
      if (query.status !== undefined) builder.andWhere(`c.endedAt IS ${query.status === 'open' ? '' : 'NOT '}NULL`);
      if (personId !== null) {
        builder.andWhere('EXISTS (SELECT 1 FROM class_member m WHERE m.class_id = c.id AND m.person_id = :personId)', {
          personId,
        });
      }
      const order = sortOrder(query.sort);
      builder.orderBy(SORT_COLUMNS[order.key] ?? 'c.openedAt', order.direction).addOrderBy('c.id', 'ASC');
      const total = await builder.getCount();
      const rows = await builder.offset(offsetOf(query)).limit(query.pageSize).getMany();
      return {
        items: rows.map((row) => ({ ...classRecord(row), instructor: row.instructor?.displayName ?? '' })),
        total,
      };
    },
  };
}
export type ClassesRepository = ReturnType<typeof createClassesRepository>;
