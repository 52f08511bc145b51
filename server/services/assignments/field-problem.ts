import { ProblemError } from '../problem-error.ts';

/** A validation problem of one field, in the shape of all of them. */
export function fieldProblem(field: string, rule: string, message: string, remedy: string): ProblemError {
  return new ProblemError('validation', `${message.charAt(0).toUpperCase()}${message.slice(1)}.`, {
    errors: [{ field, rule, message, remedy }],
  });
}
