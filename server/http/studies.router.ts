import { Router, type Request } from 'express';
import { z } from 'zod';
import { createStudySchema, saveStudySchema, studyListQuerySchema, type Study } from '#shared/contracts/studies.ts';
import { notFound } from '../services/problem-error.ts';
import type { StudiesService } from '../services/studies/studies.service.ts';
import { wantedVersion } from '../services/versions.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf } from './session.middleware.ts';

/** An identifier of the wrong form names nothing: the same answer as for one that is not there. */
function idIn(request: Request): string {
  const parsed = z.uuid().safeParse(request.params['id']);
  if (!parsed.success) throw notFound('study');
  return parsed.data;
}

const tagOf = (study: Study): string => `"${study.version}"`;

export function studiesRouter(studies: StudiesService): Router {
  const router = Router();

  router.post('/', async (request, response) => {
    const study = await studies.create(actorOf(response), parse(createStudySchema, request.body), callerOf(request));
    response.status(201).set('etag', tagOf(study)).json(study);
  });

  router.get('/', async (request, response) => {
    response.json(await studies.list(actorOf(response), parse(studyListQuerySchema, request.query)));
  });

  router.get('/:id', async (request, response) => {
    const study = await studies.read(actorOf(response), idIn(request));
    response.set('etag', tagOf(study)).json(study);
  });

  router.put('/:id', async (request, response) => {
    const version = wantedVersion(request.get('if-match'));
    const body = parse(saveStudySchema, request.body);
    const study = await studies.save(actorOf(response), idIn(request), version, body, callerOf(request));
    response.set('etag', tagOf(study)).json(study);
  });

  router.delete('/:id', async (request, response) => {
    await studies.remove(actorOf(response), idIn(request), callerOf(request));
    response.status(204).end();
  });

  return router;
}
