import type {
  ClassAttempt,
  ClassDetail,
  ClassListQuery,
  ClassLog,
  ClassRunSummary,
  ClassScenario,
  ClassSummary,
} from '#shared/contracts/classes.ts';
import type { AttemptChunks } from '#shared/contracts/attempts.ts';
import type { Page } from '#shared/contracts/paging.ts';
import type { ClassEntry } from '#shared/scenario/class-log.ts';
import { branchesOf, memberOf, runsOf, type ClassRun, type ClassState } from '#shared/scenario/class-state.ts';
import type { Database } from '../../data/database.ts';
import { shownStatus, type AttemptRecord, type ResultRecord } from '../../data/repositories/attempts.repository.ts';
import type { ClassAttemptRecord, ClassListRow } from '../../data/repositories/classes.repository.ts';
import { addressPicture } from '../../reports/address-picture.ts';
import { attemptResult } from '../attempts/complete-attempt.ts';
import { may, requireDeed, type Actor } from '../permissions.ts';
import { notFound } from '../problem-error.ts';
import type { ClassAttempts } from './class-attempts.ts';
import type { ClassLogStore, KnownClass } from './class-log-store.ts';
import type { ClassScenarios } from './class-scenarios.ts';
import type { GuestPass } from './guest-passes.ts';

/** Who asks for something of a class: a signed-in person, or a guest of it. */
export type ClassReader = { actor: Actor } | { guest: GuestPass };

const QUIET_AFTER_MS = 2 * 3600 * 1000;
export const joinPath = (code: string): string => `/join/${code}`;

export interface PagesSetup {
  database: Database;
  log: ClassLogStore;
  attempts: ClassAttempts;
  scenarios: ClassScenarios;
  now: () => Date;
}

/** Lists of classes, and a class with its runs, attempts and log. */
export function createClassPages({ database, log, attempts, scenarios, now }: PagesSetup) {
  /** The class with the reader's membership; nobody else learns that it exists. */
  async function open(
    reader: ClassReader,
    id: string,
  ): Promise<{ known: KnownClass; member: string | null; all: boolean }> {
    if ('guest' in reader) {
      if (reader.guest.classId !== id) throw notFound('class');
      const known = await log.read(id);
      const standing = memberOf(known.state, reader.guest.memberId)?.standing;
      if (standing !== 'in') throw notFound('class');
      return { known, member: reader.guest.memberId, all: false };
    }
    const { actor } = reader;
    requireDeed(actor, 'class.join');
    const known = await log.read(id);
    if (known.record.organisationId !== actor.organisationId) throw notFound('class');
    const row = await database.classes.memberOfPerson(id, actor.personId);
    const all = may(actor, 'class.read');
    if (row === null && !all) throw notFound('class');
    return { known, member: row?.id ?? null, all };
  }

  function summary(
    row: ClassListRow,
    state: ClassState,
    flown: readonly ClassAttemptRecord[],
    member: string | null,
  ): ClassSummary {
    return {
      id: row.id,
      title: row.title,
      status: row.endedAt === null ? 'open' : 'ended',
      instructor: row.instructor,
      openedAt: row.openedAt.toISOString(),
      endedAt: row.endedAt?.toISOString() ?? null,
      scenarios: state.playlist.map(({ title }) => title),
      people: state.members.filter(({ role, seat }) => role !== 'instructor' && seat > 0).length,
      runs: state.run?.run ?? 0,
      attempts: flown.length,
      member,
    };
  }

  function attemptOf(
    record: ClassAttemptRecord,
    attempt: AttemptRecord,
    state: ClassState,
    result: ResultRecord | null,
    storedChunks: number,
  ): ClassAttempt {
    const member = memberOf(state, record.memberId);
    return {
      id: record.attemptId,
      run: record.run,
      member: record.memberId,
      name: member?.name ?? '',
      role: member?.role ?? 'trainee',
      seat: member?.seat ?? 0,
      demonstration: record.demonstration,
      status: shownStatus(attempt, new Date(now().getTime() - QUIET_AFTER_MS)),
      startedAt: attempt.startedAt.toISOString(),
      storedChunks,
      chunkKey: attempt.chunkKey,
      result: result === null ? null : attemptResult(result),
      strip: result?.strip ?? null,
    };
  }

  function runSummary(run: ClassRun, state: ClassState, flown: ClassAttempt[]): ClassRunSummary {
    const { slug, revision, title } = state.playlist[run.index];
    return {
      run: run.run,
      mode: run.mode,
      index: run.index,
      scenarioSlug: slug,
      scenarioRevision: revision,
      title,
      seed: run.seed,
      drawn: run.drawn,
      startedAt: new Date(run.startMs).toISOString(),
      overAtTick: run.overAt,
      branches: branchesOf(run),
      attempts: flown.filter((attempt) => attempt.run === run.run).sort((a, b) => a.seat - b.seat),
    };
  }

  return {
    async list(actor: Actor, query: ClassListQuery): Promise<Page<ClassSummary>> {
      requireDeed(actor, 'class.join');
      const all = may(actor, 'class.read');
      const { items, total } = await database.classes.list(actor.organisationId, all ? null : actor.personId, query);
      const flown = await database.classes.attemptsOf(items.map(({ id }) => id));
      const summaries = [];
      for (const row of items) {
        const { state } = await log.read(row.id);
        const member = await database.classes.memberOfPerson(row.id, actor.personId);
        const own = flown.filter(({ classId }) => classId === row.id);
        summaries.push(summary(row, state, own, member?.id ?? null));
      }
      return { items: summaries, total, page: query.page, pageSize: query.pageSize };
    },

    async detail(reader: ClassReader, id: string): Promise<ClassDetail> {
      const { known, member, all } = await open(reader, id);
      const { record, state, entries } = known;
      const profile = await database.people.findProfile(record.organisationId, record.instructorId);
      const records = await database.classes.attemptsOf([id]);
      const seen = all ? records : records.filter((one) => one.memberId === member || one.demonstration);
      const ids = seen.map(({ attemptId }) => attemptId);
      const byId = new Map((await database.attempts.findAll(record.organisationId, ids)).map((one) => [one.id, one]));
      const results = await database.attempts.resultsOf(ids);
      const counts = await database.chunks.counts(ids);
      const flown = seen.flatMap((one) => {
        const attempt = byId.get(one.attemptId);
        if (!attempt) return [];
        return [attemptOf(one, attempt, state, results.get(one.attemptId) ?? null, counts.get(one.attemptId) ?? 0)];
      });
      const runs = all && member !== null;
      return {
        ...summary({ ...record, instructor: profile?.person.displayName ?? '' }, state, records, member),
        mode: state.mode,
        guests: record.guests,
        seats: state.seats,
        joinCode: runs ? record.joinCode : null,
        joinPath: runs && record.joinCode !== null ? joinPath(record.joinCode) : null,
        runsFlown: runsOf(entries).map((run) => runSummary(run, state, flown)),
        refused: all ? record.refused : null,
      };
    },

    /** The log; a member without the right to read others' gets it without the text of messages to others. */
    async entries(reader: ClassReader, id: string): Promise<ClassLog> {
      const { known, member, all } = await open(reader, id);
      return { entries: known.entries.map((entry) => redacted(entry, all ? 'all' : member)) };
    },

    async scenario(reader: ClassReader, id: string, index: number): Promise<ClassScenario> {
      const { known } = await open(reader, id);
      return scenarios.read(known.record.organisationId, known.state.playlist[index]);
    },

    /** Chunks of an attempt of the class: one's own, the demonstration's, or anybody's for instructors. */
    async chunks(reader: ClassReader, id: string, attemptId: string): Promise<AttemptChunks> {
      const { member, all } = await open(reader, id);
      const record = await attempts.ofClass(id, attemptId);
      if (!all && record.memberId !== member && !record.demonstration) throw notFound('attempt');
      const chunks = await database.chunks.all(attemptId);
      return {
        chunks: chunks.map(({ index, startTick, tickCount, hash, bytes }) => ({
          index,
          startTick,
          tickCount,
          hash,
          bytesBase64: bytes.toString('base64'),
        })),
      };
    },

    /** The address that joins, as a code to hold a telephone to. */
    async joinPicture(actor: Actor, id: string, origin: string): Promise<string> {
      requireDeed(actor, 'class.run');
      const { known } = await open({ actor }, id);
      const { joinCode } = known.record;
      if (joinCode === null) throw notFound('join code: the class has ended');
      return addressPicture(`${origin}${joinPath(joinCode)}`);
    },
  };
}
export type ClassPages = ReturnType<typeof createClassPages>;

/** An entry as a reader may see it: a message to another has no text. `all` sees everything. */
export function redacted(entry: ClassEntry, reader: string | null): ClassEntry {
  const open =
    entry.kind !== 'message' || entry.to === null || reader === 'all' || entry.to === reader || entry.by === reader;
  return open ? entry : { ...entry, text: '' };
}
