import type { changeAssignmentSchema } from '#shared/contracts/assignments.ts';
import type { z } from 'zod';
import type { AssignmentTerms } from '../../data/repositories/assignments.repository.ts';
import { fieldProblem } from './field-problem.ts';
import { instantOf, inZoneWords, WallTimeRefusal } from './wall-time.ts';

type TermsBody = z.output<typeof changeAssignmentSchema>;

/** The instant of a wall time in a body; a problem of its field otherwise. */
export function instantIn(field: string, wall: string, zone: string): { at: Date; twice: boolean } {
  try {
    return instantOf(wall, zone);
  } catch (error) {
    if (!(error instanceof WallTimeRefusal)) throw error;
    throw fieldProblem(error.rule === 'zone' ? '/zone' : field, error.rule, error.message, error.remedy);
  }
}

/** Said when a due time comes twice because clocks go back that night. */
export const twiceWords = (at: Date, zone: string): string =>
  `Clocks go back that night and show this time twice; the second one counts, ${at.toISOString().slice(11, 16)} UTC (${inZoneWords(at, zone)}).`;

/**
 * What a body says, with its times as instants.
 * @param earliestDue the due time must lie after it; null when an unchanged due time may have passed
 */
export function termsOf(
  body: TermsBody,
  now: Date,
  keep: { opensAt: Date; dueAt: Date } | null,
): { terms: AssignmentTerms; remark: string } {
  const { zone } = body;
  const due = instantIn('/due', body.due, zone);
  const opensAt = body.opens === undefined ? (keep?.opensAt ?? now) : instantIn('/opens', body.opens, zone).at;
  if (due.at <= now && due.at.getTime() !== keep?.dueAt.getTime()) {
    throw fieldProblem('/due', 'in-the-past', 'the due time lies in the past', 'Choose a later one.');
  }
  if (opensAt >= due.at) {
    throw fieldProblem('/opens', 'before-due', 'it opens after it is due', 'Open it before the due time.');
  }
  if (body.passRule === 'two-in-a-row' && body.tries === 1) {
    throw fieldProblem('/tries', 'enough', 'one try cannot be met twice in a row', 'Allow at least two tries.');
  }
  return {
    terms: {
      title: body.title,
      words: body.words,
      opensAt,
      dueAt: due.at,
      zone,
      tries: body.tries,
      passRule: body.passRule,
      practice: body.practice,
      byMail: body.byMail,
      calendar: body.calendar,
      reminderDays: body.reminderDays,
      tellAuthor: body.tellAuthor,
    },
    remark: due.twice ? twiceWords(due.at, zone) : '',
  };
}
