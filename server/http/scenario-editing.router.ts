import { Router, type Request } from 'express';
import { revisionNumberSchema, slugSchema } from '#shared/contracts/paging.ts';
import {
  createScenarioSchema,
  duplicateScenarioSchema,
  publishScenarioSchema,
  saveScenarioDraftSchema,
  startScenarioDraftSchema,
} from '#shared/contracts/scenario-editing.ts';
import type { Services } from '../services/create-services.ts';
import { wantedVersion } from '../services/versions.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf } from './session.middleware.ts';

const slugIn = (request: Request): string => parse(slugSchema, request.params['slug']);
const revisionIn = (request: Request): number => parse(revisionNumberSchema, request.params['revision']);

/** Writing scenarios: everything beyond reading published ones. */
export function scenarioEditingRouter({ scenarioEditing }: Pick<Services, 'scenarioEditing'>): Router {
  const router = Router();
  const { drafts, publishing } = scenarioEditing;

  router.post('/', async (request, response) => {
    const body = parse(createScenarioSchema, request.body);
    response.status(201).json(await drafts.create(actorOf(response), body, callerOf(request)));
  });

  router.get('/:slug/detail', async (request, response) => {
    response.json(await publishing.detail(actorOf(response), slugIn(request)));
  });

  router.get('/:slug/revisions/:revision/file', async (request, response) => {
    response.json(await publishing.file(actorOf(response), slugIn(request), revisionIn(request)));
  });

  router.post('/:slug/duplicate', async (request, response) => {
    const body = parse(duplicateScenarioSchema, request.body);
    response.status(201).json(await drafts.duplicate(actorOf(response), slugIn(request), body, callerOf(request)));
  });

  router.post('/:slug/drafts', async (request, response) => {
    const body = parse(startScenarioDraftSchema, request.body);
    response.status(201).json(await drafts.start(actorOf(response), slugIn(request), body, callerOf(request)));
  });

  router.get('/:slug/drafts/:revision', async (request, response) => {
    const draft = await drafts.read(actorOf(response), slugIn(request), revisionIn(request));
    response.set('etag', `"${draft.version}"`).json(draft);
  });

  router.put('/:slug/drafts/:revision', async (request, response) => {
    const version = wantedVersion(request.get('if-match'));
    const body = parse(saveScenarioDraftSchema, request.body);
    const actor = actorOf(response);
    const draft = await drafts.save(actor, slugIn(request), revisionIn(request), version, body, callerOf(request));
    response.set('etag', `"${draft.version}"`).json(draft);
  });

  router.delete('/:slug/drafts/:revision', async (request, response) => {
    await drafts.discard(actorOf(response), slugIn(request), revisionIn(request), callerOf(request));
    response.status(204).end();
  });

  router.post('/:slug/revisions/:revision/publish', async (request, response) => {
    const body = parse(publishScenarioSchema, request.body);
    const match = request.get('if-match');
    const version = match === undefined ? null : wantedVersion(match);
    const actor = actorOf(response);
    response.json(
      await publishing.publish(actor, slugIn(request), revisionIn(request), body, version, callerOf(request)),
    );
  });

  router.post('/:slug/archive', async (request, response) => {
    response.json(await publishing.archive(actorOf(response), slugIn(request), callerOf(request)));
  });

  router.post('/:slug/restore', async (request, response) => {
    response.json(await publishing.restore(actorOf(response), slugIn(request), callerOf(request)));
  });

  return router;
}
