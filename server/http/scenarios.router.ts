import { Router } from 'express';
import { revisionNumberSchema, slugSchema } from '#shared/contracts/paging.ts';
import { scenarioListQuerySchema } from '#shared/contracts/scenarios.ts';
import type { ScenariosService } from '../services/library/scenarios.service.ts';
import { parse } from './parse.ts';
import { actorOf } from './session.middleware.ts';

export function scenariosRouter(scenarios: ScenariosService): Router {
  const router = Router();

  router.get('/', async (request, response) => {
    response.json(await scenarios.list(actorOf(response), parse(scenarioListQuerySchema, request.query)));
  });

  router.get('/:slug', async (request, response) => {
    response.json(await scenarios.revision(actorOf(response), parse(slugSchema, request.params['slug']), null));
  });

  router.get('/:slug/revisions/:revision', async (request, response) => {
    const slug = parse(slugSchema, request.params['slug']);
    const revision = parse(revisionNumberSchema, request.params['revision']);
    response.json(await scenarios.revision(actorOf(response), slug, revision));
  });

  return router;
}
