import { Router } from 'express';
import { signInBodySchema } from '#shared/contracts/session.ts';
import { ACCESS_COOKIE, REFRESH_COOKIE } from '#shared/contracts/wire-names.ts';
import { ProblemError } from '../services/problem-error.ts';
import type { SessionsService } from '../services/sessions/sessions.service.ts';
import { cookieOf, type Cookies } from './cookies.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf, requireSession } from './session.middleware.ts';
import { signInThrottles } from './throttle.ts';

export function sessionRouter(sessions: SessionsService, cookies: Cookies): Router {
  const router = Router();

  router.post('/', ...signInThrottles(), async (request, response) => {
    const opened = await sessions.signIn(parse(signInBodySchema, request.body), callerOf(request));
    cookies.set(response, opened);
    response.json(opened.me);
  });

  router.get('/', requireSession(sessions), async (_request, response) => {
    response.json(await sessions.profile(actorOf(response)));
  });

  router.post('/refresh', async (request, response) => {
    try {
      const opened = await sessions.refresh(cookieOf(request, REFRESH_COOKIE), callerOf(request));
      cookies.set(response, opened);
      response.json(opened.me);
    } catch (error) {
      if (error instanceof ProblemError) cookies.clear(response);
      throw error;
    }
  });

  router.delete('/', async (request, response) => {
    const tokens = { access: cookieOf(request, ACCESS_COOKIE), refresh: cookieOf(request, REFRESH_COOKIE) };
    await sessions.signOut(tokens, callerOf(request));
    cookies.clear(response);
    response.status(204).end();
  });

  router.delete('/everywhere', requireSession(sessions), async (request, response) => {
    await sessions.signOutEverywhere(actorOf(response), callerOf(request));
    cookies.clear(response);
    response.status(204).end();
  });

  return router;
}
