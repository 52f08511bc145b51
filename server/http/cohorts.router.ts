import { Router, type Request } from 'express';
import { z } from 'zod';
import { cohortBodySchema, cohortMembersSchema, cohortQuerySchema } from '#shared/contracts/cohorts.ts';
import { searchShape } from '#shared/contracts/paging.ts';
import type { CohortsService } from '../services/cohorts/cohorts.service.ts';
import { notFound } from '../services/problem-error.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf } from './session.middleware.ts';

function idIn(request: Request, name: string, what: string): string {
  const parsed = z.uuid().safeParse(request.params[name]);
  if (!parsed.success) throw notFound(what);
  return parsed.data;
}
const searchQuerySchema = z.strictObject(searchShape);

export function cohortsRouter(cohorts: CohortsService): Router {
  const router = Router();

  router.get('/', async (request, response) => {
    response.json(await cohorts.list(actorOf(response), parse(cohortQuerySchema, request.query)));
  });

  router.post('/', async (request, response) => {
    const { name } = parse(cohortBodySchema, request.body);
    response.status(201).json(await cohorts.create(actorOf(response), name, callerOf(request)));
  });

  router.get('/:id', async (request, response) => {
    response.json(await cohorts.read(actorOf(response), idIn(request, 'id', 'cohort')));
  });

  router.put('/:id', async (request, response) => {
    const { name } = parse(cohortBodySchema, request.body);
    response.json(await cohorts.rename(actorOf(response), idIn(request, 'id', 'cohort'), name, callerOf(request)));
  });

  router.get('/:id/candidates', async (request, response) => {
    const { search } = parse(searchQuerySchema, request.query);
    response.json(await cohorts.candidates(actorOf(response), idIn(request, 'id', 'cohort'), search));
  });

  router.post('/:id/members', async (request, response) => {
    const { people } = parse(cohortMembersSchema, request.body);
    const id = idIn(request, 'id', 'cohort');
    response.json(await cohorts.addMembers(actorOf(response), id, people, callerOf(request)));
  });

  router.delete('/:id/members/:person', async (request, response) => {
    const person = idIn(request, 'person', 'member');
    const id = idIn(request, 'id', 'cohort');
    await cohorts.removeMember(actorOf(response), id, person, callerOf(request));
    response.status(204).end();
  });

  router.post('/:id/archive', async (request, response) => {
    const id = idIn(request, 'id', 'cohort');
    response.json(await cohorts.setArchived(actorOf(response), id, true, callerOf(request)));
  });

  router.delete('/:id/archive', async (request, response) => {
    const id = idIn(request, 'id', 'cohort');
    await cohorts.setArchived(actorOf(response), id, false, callerOf(request));
    response.status(204).end();
  });

  return router;
}
