import { Router, type Request } from 'express';
import { z } from 'zod';
import {
  askResetSchema,
  auditQuerySchema,
  changePasswordSchema,
  linkBodySchema,
  outboxQuerySchema,
  peopleQuerySchema,
  rolesBodySchema,
  rosterSchema,
  takeLinkSchema,
} from '#shared/contracts/administration.ts';
import { editionOf } from '#shared/contracts/edition.ts';
import { organisationBodySchema } from '#shared/contracts/session.ts';
import type { AuditService } from '../services/audit/audit.service.ts';
import type { OutboxService } from '../services/mail/outbox.service.ts';
import type { AccountLinks } from '../services/people/account-links.ts';
import type { PeopleService } from '../services/people/people.service.ts';
import { notFound } from '../services/problem-error.ts';
import type { SessionsService } from '../services/sessions/sessions.service.ts';
import { possibleVersion } from '../services/versions.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf, requireSession } from './session.middleware.ts';
import { linkThrottle, ownPasswordThrottle, resetThrottle } from './throttle.ts';

function idIn(request: Request, what: string): string {
  const parsed = z.uuid().safeParse(request.params['id']);
  if (!parsed.success) throw notFound(what);
  return parsed.data;
}

/** People, their invitations, roles and sessions. */
export function peopleRouter(people: PeopleService): Router {
  const router = Router();

  router.get('/', async (request, response) => {
    response.json(await people.list(actorOf(response), parse(peopleQuerySchema, request.query)));
  });

  router.get('/:id', async (request, response) => {
    response.json(await people.read(actorOf(response), idIn(request, 'person')));
  });

  router.post('/roster', async (request, response) => {
    const roster = parse(rosterSchema, request.body);
    response.json(await people.roster(actorOf(response), roster, callerOf(request)));
  });

  router.post('/:id/invitation', async (request, response) => {
    await people.inviteAgain(actorOf(response), idIn(request, 'person'), callerOf(request));
    response.status(204).end();
  });

  router.put('/:id/roles', async (request, response) => {
    const { roles } = parse(rolesBodySchema, request.body);
    const version = possibleVersion(request.get('if-match'));
    await people.setRoles(actorOf(response), idIn(request, 'person'), roles, callerOf(request), version);
    response.status(204).end();
  });

  router.post('/:id/deactivation', async (request, response) => {
    await people.deactivate(actorOf(response), idIn(request, 'person'), callerOf(request));
    response.status(204).end();
  });

  router.delete('/:id/deactivation', async (request, response) => {
    await people.restore(actorOf(response), idIn(request, 'person'), callerOf(request));
    response.status(204).end();
  });

  router.post('/:id/sign-out', async (request, response) => {
    await people.signOut(actorOf(response), idIn(request, 'person'), callerOf(request));
    response.status(204).end();
  });

  return router;
}

export function organisationRouter(people: PeopleService): Router {
  const router = Router();

  router.get('/', async (_request, response) => {
    const organisation = await people.organisation(actorOf(response));
    response.set('etag', `"${editionOf(organisation)}"`).json(organisation);
  });

  router.put('/', async (request, response) => {
    const body = parse(organisationBodySchema, request.body);
    const version = possibleVersion(request.get('if-match'));
    await people.saveOrganisation(actorOf(response), body, callerOf(request), version);
    response.status(204).end();
  });

  return router;
}

export function outboxRouter(outbox: OutboxService): Router {
  const router = Router();

  router.get('/', async (request, response) => {
    response.json(await outbox.list(actorOf(response), parse(outboxQuerySchema, request.query)));
  });

  router.post('/:id/again', async (request, response) => {
    await outbox.again(actorOf(response), idIn(request, 'message'), callerOf(request));
    response.status(204).end();
  });

  return router;
}

/** The trail as pages and its check, below /audit. */
export function auditRouter(audit: AuditService): Router {
  const router = Router();

  router.get('/', async (request, response) => {
    response.json(await audit.list(actorOf(response), parse(auditQuerySchema, request.query)));
  });

  router.post('/check', async (_request, response) => {
    response.json(await audit.check(actorOf(response)));
  });

  return router;
}

/** The trail as a file, at /audit.csv. */
export function auditFileRouter(audit: AuditService): Router {
  const router = Router();

  router.get('/', async (request, response) => {
    const lines = audit.csv(actorOf(response), parse(auditQuerySchema, request.query));
    const first = await lines.next(); // a refusal comes before any byte
    response.type('text/csv; charset=utf-8').attachment('audit-trail.csv');
    response.write(`\ufeff${first.value ?? ''}`);
    for await (const line of lines) {
      if (response.destroyed) return;
      response.write(line);
    }
    response.end();
  });

  return router;
}

/** Links from messages and the own password, below /session. */
export function accountRouter(links: AccountLinks, sessions: SessionsService): Router {
  const router = Router();

  router.post('/link/look', linkThrottle(), async (request, response) => {
    response.json(await links.look(parse(linkBodySchema, request.body).token));
  });

  router.post('/link/take', linkThrottle(), async (request, response) => {
    await links.take(parse(takeLinkSchema, request.body), callerOf(request));
    response.status(204).end();
  });

  router.post('/reset', resetThrottle(), async (request, response) => {
    await links.askReset(parse(askResetSchema, request.body).email, callerOf(request));
    response.status(204).end();
  });

  router.put('/password', requireSession(sessions), ownPasswordThrottle(), async (request, response) => {
    await links.changePassword(actorOf(response), parse(changePasswordSchema, request.body), callerOf(request));
    response.status(204).end();
  });

  return router;
}
