import type { Request, RequestHandler } from 'express';
import type { TokenArea } from '#shared/contracts/tokens.ts';
import { ProblemError } from '../services/problem-error.ts';
import { type AccessTokensService, requireScope } from '../services/tokens/access-tokens.service.ts';
import type { SessionsService } from '../services/sessions/sessions.service.ts';
import { requireSession, setActor } from './session.middleware.ts';

const READING = new Set(['GET', 'HEAD', 'OPTIONS']);

/** Token of an Authorization header; undefined without one. */
export function bearerOf(request: Request): string | undefined {
  const header = request.get('authorization');
  return header === undefined ? undefined : (/^Bearer +(\S+)$/i.exec(header)?.[1] ?? '');
}

/** Only a signed-in browser: a token is refused, whatever its scopes. */
export function onlySession(sessions: SessionsService): RequestHandler {
  const session = requireSession(sessions);
  return (request, response, next) => {
    if (bearerOf(request) !== undefined)
      throw new ProblemError('forbidden', 'Tokens do not reach this. Sign in with a browser.');
    return session(request, response, next);
  };
}

/** A signed-in browser, or a program whose token has the scope of the area. */
export function sessionOrToken(
  sessions: SessionsService,
  tokens: AccessTokensService,
  area: TokenArea,
): RequestHandler {
  const session = requireSession(sessions);
  return async (request, response, next) => {
    const token = bearerOf(request);
    if (token === undefined) {
      await session(request, response, next);
      return;
    }
    const { actor, scopes } = await tokens.authenticate(token);
    requireScope(scopes, area, !READING.has(request.method));
    setActor(response, actor);
    next();
  };
}
