import type { PassRule, Standing, Tries } from '#shared/contracts/assignments.ts';
import type {
  AssignedPersonRecord,
  AssignedScenarioRecord,
  AssignmentRecord,
  TryRecord,
} from '../../data/repositories/assignments.repository.ts';

/** Whether a try counts as met: a standing sign-off decides over the computed result; null while it is flown. */
export function metIn(flown: Pick<TryRecord, 'signed' | 'passed'>): boolean | null {
  if (flown.signed !== null) return flown.signed === 'met';
  return flown.passed === null ? null : flown.passed !== 0;
}

/** When the rule was fulfilled, by the end of the flight that fulfilled it; null when it is not. */
export function passedAt(rule: PassRule, tries: readonly TryRecord[]): Date | null {
  const counted = tries.filter((flown) => !flown.setAside && flown.completedAt !== null);
  let before = false;
  for (const flown of counted) {
    const met = metIn(flown) === true;
    const enough = rule === 'sign-off' ? flown.signed === 'met' : rule === 'one' ? met : met && before;
    if (enough) return flown.completedAt;
    before = met;
  }
  return null;
}

/** Tries that are used: what was set aside is given back. */
export const usedTries = (tries: readonly TryRecord[]): number => tries.filter((flown) => !flown.setAside).length;

export function allowedTries(assignment: Pick<AssignmentRecord, 'tries'>, extra: number): number | null {
  return assignment.tries === null ? null : assignment.tries + extra;
}

export interface PersonStanding {
  standing: Standing;
  passedLate: boolean;
  scenarios: Tries[];
  lastFlown: { attemptId: string; at: Date; met: boolean | null } | null;
  used: number;
  allowed: number | null;
}

/** Where a person stands with an assignment at a moment. */
export function standingOf(
  assignment: AssignmentRecord,
  person: AssignedPersonRecord,
  scenarios: readonly AssignedScenarioRecord[],
  tries: readonly TryRecord[],
  now: Date,
): PersonStanding {
  const allowed = allowedTries(assignment, person.extraTries);
  const passes: (Date | null)[] = [];
  const shown = scenarios.map((scenario): Tries => {
    const own = tries.filter((flown) => flown.scenarioId === scenario.scenarioId);
    const passed = passedAt(assignment.passRule, own);
    passes.push(passed);
    return {
      slug: scenario.slug,
      title: scenario.title,
      revision: scenario.revision,
      tries: own
        .filter((flown) => !flown.setAside)
        .map((flown) => ({
          attemptId: flown.attemptId,
          met: metIn(flown),
          verdict: flown.verdict,
          at: (flown.completedAt ?? flown.startedAt).toISOString(),
          signed: flown.signed !== null,
        })),
      allowed,
      passedAt: passed?.toISOString() ?? null,
    };
  });
  const last = tries
    .filter((flown) => !flown.setAside)
    .reduce<TryRecord | null>((l, flown) => (l === null || flown.startedAt >= l.startedAt ? flown : l), null);
  const passed = passes.every((at) => at !== null);
  const standing = passed ? 'passed' : now > person.dueAt ? 'late' : last === null ? 'to-fly' : 'flown';
  return {
    standing,
    passedLate: passed && passes.some((at) => at !== null && at > person.dueAt),
    scenarios: shown,
    lastFlown:
      last === null ? null : { attemptId: last.attemptId, at: last.completedAt ?? last.startedAt, met: metIn(last) },
    used: usedTries(tries),
    allowed: allowed === null ? null : allowed * scenarios.length,
  };
}

/** "Cohort 26-A, 12 people" or names. */
export function toWords(people: readonly AssignedPersonRecord[]): string {
  const here = people.filter((person) => person.excusedAt === null);
  const cohorts = new Map<string, number>();
  const alone: string[] = [];
  for (const person of here) {
    if (person.cohort === null) alone.push(person.displayName);
    else cohorts.set(person.cohort, (cohorts.get(person.cohort) ?? 0) + 1);
  }
  const parts = [...cohorts].map(([name, count]) => `Cohort ${name}, ${count} ${count === 1 ? 'person' : 'people'}`);
  if (alone.length > 3) parts.push(`${alone.length} people`);
  else parts.push(...alone);
  return parts.length === 0 ? 'nobody any more' : parts.join('; ');
}
