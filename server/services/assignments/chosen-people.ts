import type { addPeopleSchema } from '#shared/contracts/assignments.ts';
import type { z } from 'zod';
import type { Repositories } from '../../data/database.ts';
import type { Actor } from '../permissions.ts';
import { fieldProblem } from './field-problem.ts';

type PeopleBody = Pick<z.output<typeof addPeopleSchema>, 'people' | 'cohorts' | 'without'>;

/**
 * The people that a body names, cohorts taken as they are at this moment. Nobody is assigned to twice: who is named and
 * in a cohort counts with the cohort.
 */
export async function chosenPeople(
  on: Repositories,
  actor: Actor,
  body: PeopleBody,
): Promise<{ id: string; cohort: string | null }[]> {
  const rows = await on.assignments.cohorts(actor.organisationId, true);
  const trainees = new Map(
    (await on.assignments.flyingPeople(actor.organisationId)).map((person) => [person.id, person]),
  );
  const without = new Set(body.without);
  const chosen = new Map<string, string | null>();
  body.cohorts.forEach((cohortId, i) => {
    const members = rows.filter((row) => row.id === cohortId);
    if (members.length === 0) {
      throw fieldProblem(`/cohorts/${i}`, 'exists', 'there is no such cohort', 'Choose a cohort of the list.');
    }
    const present = members.filter(({ personId }) => personId !== null && trainees.has(personId));
    if (present.length === 0) {
      throw fieldProblem(
        `/cohorts/${i}`,
        'empty',
        `cohort ${members[0].name} has no active trainee any more`,
        'Choose people, or add members to the cohort first.',
      );
    }
    for (const { personId, name } of present) {
      if (personId !== null && !without.has(personId)) chosen.set(personId, name);
    }
  });
  body.people.forEach((personId, i) => {
    const person = trainees.get(personId);
    if (person === undefined) {
      throw fieldProblem(`/people/${i}`, 'trainee', 'this is not a trainee of yours', 'Choose people of the list.');
    }
    if (!person.active) {
      throw fieldProblem(
        `/people/${i}`,
        'active',
        `${person.displayName} is deactivated`,
        'Leave this person out, or have an administrator activate the account.',
      );
    }
    if (!chosen.has(personId)) chosen.set(personId, null);
  });
  if (chosen.size === 0) {
    throw fieldProblem('/people', 'somebody', 'nobody is chosen', 'Choose a cohort or at least one person.');
  }
  return [...chosen].map(([id, cohort]) => ({ id, cohort }));
}
