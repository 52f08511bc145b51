import type { Repositories } from '../../data/database.ts';
import type { Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import { allowedTries, passedAt, usedTries } from './standing.ts';
import { inZoneWords } from './wall-time.ts';

/** The pinned revision that an assignment sets of a scenario, for a person to whom it is set. */
export async function assignedRevision(
  on: Repositories,
  actor: Actor,
  assignmentId: string,
  slug: string,
): Promise<number> {
  const assignment = await on.assignments.find(actor.organisationId, assignmentId);
  const [person] = assignment === null ? [] : await on.assignments.people([assignmentId], actor.personId);
  if (assignment === null || person === undefined || person.excusedAt !== null) throw notFound('assignment');
  const scenario = (await on.assignments.scenarios([assignmentId])).find((entry) => entry.slug === slug);
  if (scenario === undefined) throw new ProblemError('conflict', 'This assignment does not set that scenario.');
  return scenario.revision;
}

/**
 * Counts a try of an assignment for an attempt that starts now. Ask with the person's row locked, after the attempt is
 * inserted.
 *
 * @throws {ProblemError} conflict: not open yet, closed, or every try is used
 */
export async function countTry(
  on: Repositories,
  actor: Actor,
  assignmentId: string,
  attempt: { id: string; scenarioId: string },
  at: Date,
): Promise<void> {
  const assignment = await on.assignments.find(actor.organisationId, assignmentId);
  const [person] = await on.assignments.people([assignmentId], actor.personId);
  if (assignment === null || person === undefined || person.excusedAt !== null) throw notFound('assignment');
  if (assignment.closedAt !== null) {
    throw new ProblemError('conflict', 'This assignment is closed; fly the scenario as practice instead.');
  }
  if (at < assignment.opensAt) {
    throw new ProblemError('conflict', `This assignment opens on ${inZoneWords(assignment.opensAt, assignment.zone)}.`);
  }
  const tries = (await on.assignments.tries([assignmentId], actor.personId)).filter(
    (flown) => flown.scenarioId === attempt.scenarioId,
  );
  const allowed = allowedTries(assignment, person.extraTries);
  if (allowed !== null && usedTries(tries) >= allowed) {
    const used = allowed === 1 ? 'The one try is used' : `All ${allowed} tries are used`;
    throw new ProblemError('conflict', `${used}; ask your instructor for another.`);
  }
  await on.assignments.countTry({
    attemptId: attempt.id,
    assignmentId,
    personId: actor.personId,
    scenarioId: attempt.scenarioId,
    tryNumber: tries.length + 1,
  });
}

/** @throws {ProblemError} conflict, when an assignment of this scenario allows no practice and is not passed yet */
export async function requirePractice(on: Repositories, actor: Actor, scenarioId: string): Promise<void> {
  const strict = await on.assignments.withoutPractice(actor.organisationId, actor.personId, scenarioId);
  if (strict.length === 0) return;
  const tries = await on.assignments.tries(
    strict.map(({ id }) => id),
    actor.personId,
  );
  const open = strict.find((assignment) => {
    const own = tries.filter((flown) => flown.assignmentId === assignment.id && flown.scenarioId === scenarioId);
    return passedAt(assignment.passRule, own) === null;
  });
  if (open === undefined) return;
  throw new ProblemError(
    'conflict',
    `"${open.title}" sets this scenario without practice: fly it from My flights, where it counts as a try.`,
  );
}
