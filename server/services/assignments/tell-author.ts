import type { Repositories } from '../../data/database.ts';
import type { AttemptDetailRecord, ResultRecord } from '../../data/repositories/attempts.repository.ts';
import type { Notices } from './notices.ts';

/** Tells the author of an assignment, where that is wished, that somebody has flown it. */
export function createTellAuthor(notices: Notices) {
  return async (on: Repositories, detail: AttemptDetailRecord, result: ResultRecord, at: Date): Promise<void> => {
    const set = await on.assignments.ofAttempt(detail.id);
    if (set === null) return;
    const assignment = await on.assignments.find(set.organisationId, set.assignmentId);
    if (assignment === null) return;
    const flown = {
      attemptId: detail.id,
      personName: detail.person.displayName,
      title: detail.scenarioTitle,
      passed: result.passed,
    };
    await notices.flown(on, assignment, set.organisationId, flown, at);
  };
}
