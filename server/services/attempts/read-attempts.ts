import type { AttemptChunks, AttemptDetail, AttemptListQuery, AttemptSummary } from '#shared/contracts/attempts.ts';
import type { Page } from '#shared/contracts/paging.ts';
import type { Database } from '../../data/database.ts';
import { shownStatus, type AttemptDetailRecord } from '../../data/repositories/attempts.repository.ts';
import { may, requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import { attemptResult } from './complete-attempt.ts';
import { storedAirframe, scenarioFor } from './attempt-data.ts';
import { flownIn } from './flown-in-class.ts';

/** A flight that has been silent for this long is shown as abandoned; it may still be delivered. */
const QUIET_AFTER_MS = 2 * 3600 * 1000;

export function createReadAttempts({ database, now }: { database: Database; now: () => Date }) {
  const quietSince = (): Date => new Date(now().getTime() - QUIET_AFTER_MS);

  const readable = async (actor: Actor, id: string): Promise<AttemptDetailRecord> => {
    requireDeed(actor, 'attempt.read-own');
    const detail = await database.attempts.findDetail(actor.organisationId, id);
    const allowed = detail !== null && (detail.personId === actor.personId || may(actor, 'attempt.read-others'));
    if (!allowed) throw notFound('attempt');
    return detail;
  };

  return {
    async list(actor: Actor, query: AttemptListQuery): Promise<Page<AttemptSummary>> {
      requireDeed(actor, 'attempt.read-own');
      const personId = query.person ?? actor.personId;
      if (personId !== actor.personId) {
        requireDeed(actor, 'attempt.read-others');
        if (!(await database.people.exists(actor.organisationId, personId))) throw notFound('person');
      }
      const filter = { organisationId: actor.organisationId, personId, quietSince: quietSince() };
      const rows = await database.attempts.list(filter, query);
      return { ...rows, page: query.page, pageSize: query.pageSize };
    },

    async detail(actor: Actor, id: string): Promise<AttemptDetail> {
      const detail = await readable(actor, id);
      const { result } = detail;
      return {
        id: detail.id,
        scenarioSlug: detail.scenario.slug,
        scenarioTitle: detail.scenarioTitle,
        scenarioRevision: detail.scenario.revision,
        airframeName: detail.airframeName,
        number: detail.number,
        startedAt: detail.startedAt.toISOString(),
        status: shownStatus(detail, quietSince()),
        ended: result?.ended ?? null,
        durationS: result?.durationS ?? null,
        passed: result?.passed ?? null,
        verdict: result?.verdict ?? null,
        worst: result?.worst ?? null,
        strip: result?.strip ?? null,
        person: detail.person,
        seed: detail.seed,
        drawn: detail.drawn,
        chunkKey: detail.chunkKey,
        modelVersion: detail.modelVersion,
        storedChunks: await database.chunks.count(id),
        completedAt: detail.completedAt?.toISOString() ?? null,
        scenario: scenarioFor(actor, detail.scenario.document),
        airframe: {
          slug: detail.scenario.airframe.slug,
          revision: detail.scenario.airframe.revision,
          airframe: storedAirframe(detail.scenario.airframe.document),
        },
        result: result === null ? null : attemptResult(result),
        liveClass: await flownIn(database, id),
      };
    },

    async chunks(actor: Actor, id: string): Promise<AttemptChunks> {
      await readable(actor, id);
      const chunks = await database.chunks.all(id);
      if (chunks.length === 0) {
        const removedAt = await database.retention.removedAt(id);
        if (removedAt !== null) {
          const day = removedAt.toISOString().slice(0, 10);
          throw new ProblemError('conflict', `The retention rule removed this recording on ${day}; its result stays.`);
        }
      }
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
  };
}
