import { Router } from 'express';
import { airframeListQuerySchema } from '#shared/contracts/airframes.ts';
import { revisionNumberSchema, slugSchema } from '#shared/contracts/paging.ts';
import type { AirframesService } from '../services/library/airframes.service.ts';
import { parse } from './parse.ts';
import { actorOf } from './session.middleware.ts';

export function airframesRouter(airframes: AirframesService): Router {
  const router = Router();

  router.get('/', async (request, response) => {
    response.json(await airframes.list(actorOf(response), parse(airframeListQuerySchema, request.query)));
  });

  router.get('/:slug/revisions/:revision', async (request, response) => {
    const slug = parse(slugSchema, request.params['slug']);
    const revision = parse(revisionNumberSchema, request.params['revision']);
    response.json(await airframes.revision(actorOf(response), slug, revision));
  });

  return router;
}
