import { PROBLEM_STATUS, type Problem, type ProblemCode } from '#shared/contracts/problem.ts';

export type ProblemExtras = Pick<Problem, 'errors' | 'chunk' | 'missing' | 'retryAfterS'>;

/** A refusal that the caller is told about: stable code, a sentence, structured details. */
export class ProblemError extends Error {
  readonly code: ProblemCode;
  readonly extras: ProblemExtras;

  constructor(code: ProblemCode, detail: string, extras: ProblemExtras = {}) {
    super(detail);
    this.name = 'ProblemError';
    this.code = code;
    this.extras = extras;
  }

  get status(): number {
    return PROBLEM_STATUS[this.code];
  }
}

/** The same answer for what does not exist, belongs to another organisation, or is not for this reader. */
export function notFound(what: string): ProblemError {
  return new ProblemError('not-found', `There is no such ${what}.`);
}
