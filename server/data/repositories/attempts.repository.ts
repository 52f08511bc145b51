import type { AttemptListQuery, AttemptResult, AttemptStatus, AttemptSummary } from '#shared/contracts/attempts.ts';
import { Brackets, type EntityManager, In, IsNull, Not } from 'typeorm';
import { AttemptResultEntity } from '../entities/attempt-result.entity.ts';
import { AttemptEntity } from '../entities/attempt.entity.ts';
import { criteriaColumn, drawnColumn, endedColumn, stripColumn, verdictColumn, worstColumn } from './json-columns.ts';
import { type Rows, offsetOf, sortOrder } from './paging.ts';
import { type ScenarioRevisionRecord, scenarioRevisionRecord } from './scenarios.repository.ts';

export interface NewAttempt {
  id: string;
  organisationId: string;
  /** Of a guest of a class: the membership, which is no person's id. */
  personId: string;
  /** True when `personId` is a guest's. */
  guest?: boolean;
  scenarioId: string;
  scenarioRevisionId: string;
  number: number;
  startKey: string | null;
  seed: number;
  drawn: Record<string, Record<string, number>>;
  chunkKey: string;
  modelVersion: string;
  startedAt: Date;
}

export interface AttemptRecord extends NewAttempt {
  status: 'flying' | 'complete';
  lastChunkAt: Date | null;
  completedAt: Date | null;
}

export interface ResultRecord extends AttemptResult {
  verdict: AttemptSummary['verdict'];
  worst: AttemptSummary['worst'];
  strip: AttemptSummary['strip'];
  firstPedalS: number | null;
}

export interface AttemptDetailRecord extends AttemptRecord {
  person: { id: string; displayName: string };
  airframeName: string;
  scenarioTitle: string;
  scenario: ScenarioRevisionRecord;
  result: ResultRecord | null;
}

export interface AttemptFilter {
  organisationId: string;
  personId: string;
  /** A flight without a sign of life since then counts as abandoned. */
  quietSince: Date;
}

const SORT_COLUMNS: Record<string, string> = {
  startedAt: 't.startedAt',
  scenario: 'r.title',
  duration: 'result.durationS',
};

const RESULT_JOIN = 'result.attempt_id = t.id AND result.counts = 1';

/** What a reader is told: a flight that has been quiet for long counts as abandoned, yet may still be delivered. */
export function shownStatus(
  row: Pick<AttemptRecord, 'status' | 'startedAt' | 'lastChunkAt'>,
  quietSince: Date,
): AttemptStatus {
  if (row.status === 'complete') return 'complete';
  return (row.lastChunkAt ?? row.startedAt) < quietSince ? 'abandoned' : 'flying';
}

function attemptRecord(row: AttemptEntity): AttemptRecord {
  return {
    id: row.id,
    organisationId: row.organisationId,
    personId: row.personId ?? row.guestId ?? '',
    guest: row.personId === null,
    scenarioId: row.scenarioId,
    scenarioRevisionId: row.scenarioRevisionId,
    number: row.number,
    startKey: row.startKey,
    seed: row.seed,
    drawn: drawnColumn(row.drawn),
    chunkKey: row.chunkKey,
    modelVersion: row.modelVersion,
    status: row.status,
    startedAt: row.startedAt,
    lastChunkAt: row.lastChunkAt,
    completedAt: row.completedAt,
  };
}

function resultRecord(row: AttemptResultEntity): ResultRecord {
  return {
    ended: endedColumn(row.ended),
    durationS: row.durationS,
    criteria: criteriaColumn(row.criteria),
    passed: row.passed,
    verdict: verdictColumn(row.verdict),
    worst: worstColumn(row.worst),
    strip: stripColumn(row.strip),
    firstPedalS: row.firstPedalS,
    stateHash: row.stateHash,
    statesAgree: row.statesAgree,
    firstDifferenceTick: row.firstDifferenceTick,
    rewinds: row.rewinds,
    modelVersion: row.modelVersion,
    computedAt: row.computedAt.toISOString(),
  };
}

export function createAttemptsRepository(manager: EntityManager) {
  return {
    async list(filter: AttemptFilter, query: AttemptListQuery): Promise<Rows<AttemptSummary>> {
      const builder = manager
        .createQueryBuilder(AttemptEntity, 't')
        .innerJoin('t.scenario', 's')
        .innerJoin('t.scenarioRevision', 'r')
        .innerJoin('r.airframeRevision', 'f')
        .leftJoinAndMapOne('t.result', AttemptResultEntity, 'result', RESULT_JOIN)
        .select(['t.id', 't.number', 't.status', 't.startedAt', 't.lastChunkAt', 's.id', 's.slug', 'r.id', 'r.number'])
        .addSelect(['r.title', 'f.id', 'f.name', 'result.id', 'result.ended', 'result.durationS', 'result.passed'])
        .addSelect(['result.verdict', 'result.worst', 'result.strip'])
        .where('t.organisationId = :organisationId AND t.personId = :personId', {
          organisationId: filter.organisationId,
          personId: filter.personId,
        });
      if (query.scenario !== undefined) builder.andWhere('s.slug = :slug', { slug: query.scenario });
      if (query.status === 'complete') builder.andWhere(`t.status = 'complete'`);
      else if (query.status !== undefined) {
        const sign = query.status === 'flying' ? '>=' : '<';
        builder.andWhere(
          new Brackets((part) =>
            part
              .where(`t.status = 'flying'`)
              .andWhere(`COALESCE(t.lastChunkAt, t.startedAt) ${sign} :quietSince`, { quietSince: filter.quietSince }),
          ),
        );
      }
      const order = sortOrder(query.sort);
      builder.orderBy(SORT_COLUMNS[order.key] ?? 't.startedAt', order.direction).addOrderBy('t.id', 'ASC');
      const total = await builder.getCount();
      const rows = await builder.offset(offsetOf(query)).limit(query.pageSize).getMany();
      const items = rows.map((row): AttemptSummary => {
        const { result } = row;
        return {
          id: row.id,
          scenarioSlug: row.scenario?.slug ?? '',
          scenarioTitle: row.scenarioRevision?.title ?? '',
          scenarioRevision: row.scenarioRevision?.number ?? 0,
          airframeName: row.scenarioRevision?.airframeRevision?.name ?? '',
          number: row.number,
          startedAt: row.startedAt.toISOString(),
          status: shownStatus(row, filter.quietSince),
          ended: result ? endedColumn(result.ended) : null,
          durationS: result ? result.durationS : null,
          passed: result ? result.passed : null,
          verdict: result ? verdictColumn(result.verdict) : null,
          worst: result ? worstColumn(result.worst) : null,
          strip: result ? stripColumn(result.strip) : null,
        };
      });
      return { items, total };
    },

    async find(organisationId: string, id: string): Promise<AttemptRecord | null> {
      const row = await manager.findOne(AttemptEntity, { where: { id, organisationId } });
      return row === null ? null : attemptRecord(row);
    },

    /** As {@link find}, locked to the end of the transaction: chunks and completion of an attempt take turns. */
    async lock(organisationId: string, id: string): Promise<AttemptRecord | null> {
      const row = await manager.findOne(AttemptEntity, {
        where: { id, organisationId },
        lock: { mode: 'pessimistic_write' },
      });
      return row === null ? null : attemptRecord(row);
    },

    async findDetail(organisationId: string, id: string): Promise<AttemptDetailRecord | null> {
      const row = await manager
        .createQueryBuilder(AttemptEntity, 't')
        .leftJoin('t.person', 'p')
        .addSelect(['p.id', 'p.displayName'])
        .leftJoin('t.guest', 'g')
        .addSelect(['g.id', 'g.name'])
        .innerJoinAndSelect('t.scenarioRevision', 'r')
        .innerJoinAndSelect('r.scenario', 's')
        .innerJoinAndSelect('r.airframeRevision', 'f')
        .innerJoinAndSelect('f.airframe', 'a')
        .leftJoinAndMapOne('t.result', AttemptResultEntity, 'result', RESULT_JOIN)
        .where('t.id = :id AND t.organisationId = :organisationId', { id, organisationId })
        .getOne();
      if (row === null) return null;
      const { guest, scenarioRevision } = row;
      const person = row.person ?? (guest ? { id: guest.id, displayName: `${guest.name} (guest)` } : undefined);
      if (person === undefined || scenarioRevision?.airframeRevision === undefined) {
        throw new Error(`Attempt ${id} was read without its person or scenario.`);
      }
      return {
        ...attemptRecord(row),
        person: { id: person.id, displayName: person.displayName },
        airframeName: scenarioRevision.airframeRevision.name,
        scenarioTitle: scenarioRevision.title,
        scenario: scenarioRevisionRecord(scenarioRevision),
        result: row.result ? resultRecord(row.result) : null,
      };
    },

    async findByStartKey(personId: string, startKey: string): Promise<string | null> {
      const row = await manager.findOne(AttemptEntity, { select: { id: true }, where: { personId, startKey } });
      return row?.id ?? null;
    },

    /** Ask with the person's row locked. */
    async nextNumber(personId: string, scenarioId: string): Promise<number> {
      const last = await manager.maximum(AttemptEntity, 'number', { personId, scenarioId });
      return (last ?? 0) + 1;
    },

    async insert(attempt: NewAttempt): Promise<void> {
      const { guest = false, personId, ...columns } = attempt;
      const who = guest ? { personId: null, guestId: personId } : { personId, guestId: null };
      await manager.insert(AttemptEntity, {
        ...columns,
        ...who,
        status: 'flying',
        lastChunkAt: null,
        completedAt: null,
      });
    },

    /** Locks some attempts; returns those that are complete. */
    async lockAll(ids: readonly string[]): Promise<string[]> {
      const rows = await manager.find(AttemptEntity, {
        select: { id: true, status: true },
        where: { id: In([...ids]) },
        order: { id: 'ASC' },
        lock: { mode: 'pessimistic_write' },
      });
      return rows.filter(({ status }) => status === 'complete').map(({ id }) => id);
    },

    async markChunksReceived(ids: readonly string[], at: Date): Promise<void> {
      await manager.update(AttemptEntity, { id: In([...ids]) }, { lastChunkAt: at });
    },

    async markChunkReceived(id: string, at: Date): Promise<void> {
      await manager.update(AttemptEntity, { id }, { lastChunkAt: at });
    },

    async markComplete(id: string, at: Date): Promise<void> {
      await manager.update(
        AttemptEntity,
        { id, completedAt: IsNull(), status: Not('complete') },
        {
          status: 'complete',
          completedAt: at,
        },
      );
    },

    async insertResult(id: string, attemptId: string, counts: boolean, result: ResultRecord): Promise<void> {
      const { computedAt, ...columns } = result;
      await manager.save(AttemptResultEntity, { id, attemptId, counts, ...columns, computedAt: new Date(computedAt) });
    },

    /** Results that count, of some attempts. */
    async resultsOf(attemptIds: readonly string[]): Promise<Map<string, ResultRecord>> {
      if (attemptIds.length === 0) return new Map();
      const rows = await manager.find(AttemptResultEntity, { where: { attemptId: In([...attemptIds]), counts: true } });
      return new Map(rows.map((row) => [row.attemptId, resultRecord(row)]));
    },

    async findAll(organisationId: string, ids: readonly string[]): Promise<AttemptRecord[]> {
      if (ids.length === 0) return [];
      const rows = await manager.find(AttemptEntity, { where: { organisationId, id: In([...ids]) } });
      return rows.map(attemptRecord);
    },

    async findResult(attemptId: string): Promise<ResultRecord | null> {
      const row = await manager.findOne(AttemptResultEntity, { where: { attemptId, counts: true } });
      return row === null ? null : resultRecord(row);
    },
  };
}

export type AttemptsRepository = ReturnType<typeof createAttemptsRepository>;
