import type { Request, RequestHandler, Response } from 'express';
import { ACCESS_COOKIE } from '#shared/contracts/wire-names.ts';
import type { Actor } from '../services/permissions.ts';
import { ProblemError } from '../services/problem-error.ts';
import type { Caller, SessionsService } from '../services/sessions/sessions.service.ts';
import { cookieOf } from './cookies.ts';

const ACTOR = Symbol('actor');

/** Finds out who asks; everything behind it has an actor. */
export function requireSession(sessions: SessionsService): RequestHandler {
  return async (request, response, next) => {
    const actor = await sessions.authenticate(cookieOf(request, ACCESS_COOKIE));
    setActor(response, actor);
    next();
  };
}

/** What comes later in the chain acts for this person. */
export function setActor(response: Response, actor: Actor): void {
  Reflect.set(response.locals, ACTOR, actor);
}

/** The actor that `requireSession` found. */
export function actorOf(response: Response): Actor {
  const actor: unknown = Reflect.get(response.locals, ACTOR);
  if (typeof actor !== 'object' || actor === null) throw new ProblemError('unauthenticated', 'Sign in first.');
  return actor as Actor; // set by requireSession under a private symbol
}

export function callerOf(request: Request): Caller {
  return { address: request.ip ?? null, agent: request.get('user-agent') ?? null };
}
