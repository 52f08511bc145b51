import { randomBytes, randomInt, randomUUID } from 'node:crypto';
import type { StartAttemptBody, StartedAttempt } from '#shared/contracts/attempts.ts';
import { MODEL_VERSION } from '#shared/scenario/run-types.ts';
import { drawValues } from '#shared/scenario/variation.ts';
import type { Database } from '../../data/database.ts';
import type { AttemptDetailRecord } from '../../data/repositories/attempts.repository.ts';
import { assignedRevision, countTry, requirePractice } from '../assignments/count-try.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import { scenarioFor, storedAirframe, storedScenario } from './attempt-data.ts';

const SEED_LIMIT = 2 ** 32;
const CHUNK_KEY_BYTES = 8;

function startedAttempt(actor: Actor, detail: AttemptDetailRecord): StartedAttempt {
  return {
    id: detail.id,
    number: detail.number,
    seed: detail.seed,
    drawn: detail.drawn,
    startedAt: detail.startedAt.toISOString(),
    chunkKey: detail.chunkKey,
    modelVersion: detail.modelVersion,
    scenarioSlug: detail.scenario.slug,
    scenarioRevision: detail.scenario.revision,
    scenario: scenarioFor(actor, detail.scenario.document),
    airframe: {
      slug: detail.scenario.airframe.slug,
      revision: detail.scenario.airframe.revision,
      airframe: storedAirframe(detail.scenario.airframe.document),
    },
  };
}

/**
 * Starts an attempt: counts the try, draws what varies from a seed of its own, issues the key of the chunk chain.
 * A repeated request with the same start key answers with the same attempt.
 */
export function createStartAttempt({ database, now }: { database: Database; now: () => Date }) {
  return async (actor: Actor, body: StartAttemptBody): Promise<StartedAttempt> => {
    requireDeed(actor, 'attempt.fly');
    const { organisationId, personId } = actor;
    const detailOf = async (id: string): Promise<StartedAttempt> => {
      const detail = await database.attempts.findDetail(organisationId, id);
      if (detail === null) throw notFound('attempt');
      return startedAttempt(actor, detail);
    };
    if (body.startKey !== undefined) {
      const before = await database.attempts.findByStartKey(personId, body.startKey);
      if (before !== null) return detailOf(before);
    }
    const set =
      body.assignmentId === undefined
        ? null
        : await assignedRevision(database, actor, body.assignmentId, body.scenarioSlug);
    const number =
      set ?? body.revision ?? (await database.scenarios.latestPublishedNumber(organisationId, body.scenarioSlug));
    const revision =
      number === null ? null : await database.scenarios.findRevision(organisationId, body.scenarioSlug, number);
    if (revision === null || revision.status === 'draft') throw notFound('scenario');
    if (revision.status === 'archived' && set === null) {
      throw new ProblemError('conflict', 'This scenario is archived; choose a published one.');
    }
    const scenario = storedScenario(revision.document);
    const seed = randomInt(SEED_LIMIT);
    const id = randomUUID();
    const at = now();
    const given = await database.transaction(async (on) => {
      await on.people.lock(organisationId, personId);
      // Another request with the same key may have been first.
      const before = body.startKey === undefined ? null : await on.attempts.findByStartKey(personId, body.startKey);
      if (before !== null) return before;
      if (body.assignmentId === undefined) await requirePractice(on, actor, revision.scenarioId);
      await on.attempts.insert({
        id,
        organisationId,
        personId,
        scenarioId: revision.scenarioId,
        scenarioRevisionId: revision.id,
        number: await on.attempts.nextNumber(personId, revision.scenarioId),
        startKey: body.startKey ?? null,
        seed,
        drawn: drawValues(scenario, seed),
        chunkKey: randomBytes(CHUNK_KEY_BYTES).toString('hex'),
        modelVersion: MODEL_VERSION,
        startedAt: at,
      });
      if (body.assignmentId !== undefined) {
        await countTry(on, actor, body.assignmentId, { id, scenarioId: revision.scenarioId }, at);
      }
      return id;
    });
    return detailOf(given);
  };
}
