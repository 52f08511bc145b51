import { Router, type Request } from 'express';
import { z } from 'zod';
import { newAddressSchema, profileBodySchema } from '#shared/contracts/account.ts';
import { linkBodySchema } from '#shared/contracts/administration.ts';
import type { Services } from '../services/create-services.ts';
import { notFound } from '../services/problem-error.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf, requireSession } from './session.middleware.ts';
import { linkThrottle, ownPasswordThrottle, resetThrottle } from './throttle.ts';

function idIn(request: Request, name: string, what: string): string {
  const parsed = z.uuid().safeParse(request.params[name]);
  if (!parsed.success) throw notFound(what);
  return parsed.data;
}

/** The own sessions, profile and address, below /session. */
export function accountSessionsRouter({ sessions, profile }: Pick<Services, 'sessions' | 'profile'>): Router {
  const router = Router();
  const signedIn = requireSession(sessions);

  router.get('/open', signedIn, async (_request, response) => {
    response.json(await profile.ownSessions(actorOf(response)));
  });

  router.delete('/open/:id', signedIn, async (request, response) => {
    await profile.endOwnSession(actorOf(response), idIn(request, 'id', 'session'), callerOf(request));
    response.status(204).end();
  });

  router.put('/profile', signedIn, async (request, response) => {
    const actor = actorOf(response);
    await profile.saveProfile(actor, parse(profileBodySchema, request.body), callerOf(request));
    response.json(await sessions.profile(actor));
  });

  router.post('/address', signedIn, resetThrottle(), ownPasswordThrottle(), async (request, response) => {
    await profile.askNewAddress(actorOf(response), parse(newAddressSchema, request.body), callerOf(request));
    response.status(204).end();
  });

  router.post('/link/confirm', linkThrottle(), async (request, response) => {
    await profile.confirmAddress(parse(linkBodySchema, request.body).token, callerOf(request));
    response.status(204).end();
  });

  return router;
}

/** The sessions of one person for an administrator, below /people. */
export function personSessionsRouter(profile: Services['profile']): Router {
  const router = Router();

  router.get('/:id/sessions', async (request, response) => {
    response.json(await profile.sessionsOf(actorOf(response), idIn(request, 'id', 'person')));
  });

  router.delete('/:id/sessions/:session', async (request, response) => {
    const person = idIn(request, 'id', 'person');
    await profile.endSessionOf(actorOf(response), person, idIn(request, 'session', 'session'), callerOf(request));
    response.status(204).end();
  });

  return router;
}
