import type { ErrorRequestHandler, RequestHandler } from 'express';
import { PROBLEM_STATUS, type Problem, type ProblemCode } from '#shared/contracts/problem.ts';
import { PROBLEM_MEDIA_TYPE, REQUEST_ID_HEADER } from '#shared/contracts/wire-names.ts';
import type { Logger } from '../config/log.ts';
import { ProblemError, type ProblemExtras } from '../services/problem-error.ts';

const TITLES: Partial<Record<ProblemCode, string>> = {
  'not-found': 'Not found',
  forbidden: 'Not allowed',
  validation: 'Not accepted',
  unauthenticated: 'Not signed in',
  'session-expired': 'Session ended',
  'wrong-credentials': 'Not signed in',
  throttled: 'Too many requests',
  internal: 'Server error',
};

export function problemOf(code: ProblemCode, detail: string, extras: ProblemExtras = {}, instance?: string): Problem {
  const title = TITLES[code] ?? code.replaceAll('-', ' ').replace(/^./u, (letter) => letter.toUpperCase());
  return {
    type: `about:blank#${code}`,
    title,
    status: PROBLEM_STATUS[code],
    code,
    detail,
    ...(instance ? { instance } : {}),
    ...extras,
  };
}

/** What Express and its parsers throw, as problems; null for what is not theirs. */
function fromParsers(error: unknown): ProblemError | null {
  if (typeof error !== 'object' || error === null) return null;
  const type: unknown = Reflect.get(error, 'type');
  const status: unknown = Reflect.get(error, 'status');
  if (type === 'entity.too.large') return new ProblemError('too-large', 'The request is larger than is accepted.');
  if (type === 'entity.parse.failed') return new ProblemError('bad-request', 'The body is not valid JSON.');
  if (type === 'charset.unsupported' || type === 'encoding.unsupported') {
    return new ProblemError('unsupported-media-type', 'The encoding of the body is not supported; send UTF-8.');
  }
  if (error instanceof URIError || status === 400)
    return new ProblemError('bad-request', 'The request cannot be read.');
  return null;
}

/** The one place where failures become answers. What nobody recognises is logged in full and revealed to no one. */
export function errorMapper(log: Logger): ErrorRequestHandler {
  return (error: unknown, request, response, next) => {
    if (response.headersSent) {
      next(error);
      return;
    }
    const known = error instanceof ProblemError ? error : fromParsers(error);
    const instance = response.get(REQUEST_ID_HEADER);
    if (known === null)
      log.error({ err: error, method: request.method, path: request.path, requestId: instance }, 'unexpected failure');
    const problem = known
      ? problemOf(known.code, known.message, known.extras, instance)
      : problemOf(
          'internal',
          'Something failed on the server. It is in the log under the number of this request.',
          {},
          instance,
        );
    if (problem.retryAfterS !== undefined) response.set('retry-after', String(problem.retryAfterS));
    response.status(problem.status).type(PROBLEM_MEDIA_TYPE).send(JSON.stringify(problem));
  };
}

/** Answer for an address below /api that no router knows. */
export const unknownRoute: RequestHandler = () => {
  throw new ProblemError('not-found', 'There is nothing at this address.');
};
