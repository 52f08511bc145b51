import { Router, type Request } from 'express';
import { z } from 'zod';
import {
  createAirframeSchema,
  duplicateAirframeSchema,
  MAX_SHEET_BYTES,
  MAX_SKIN_BYTES,
  releaseSchema,
  saveDraftSchema,
  setTagsSchema,
  startDraftSchema,
  valueHistoryQuerySchema,
} from '#shared/contracts/airframe-editing.ts';
import { revisionNumberSchema, slugSchema } from '#shared/contracts/paging.ts';
import { EXPORT_FORMATS } from '../services/airframes/airframe-files.ts';
import type { Services } from '../services/create-services.ts';
import { wantedVersion } from '../services/versions.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf } from './session.middleware.ts';
import { attachment, fileBody, uploadOf } from './uploads.ts';

const exportSchema = z.enum(EXPORT_FORMATS);
const slugIn = (request: Request): string => parse(slugSchema, request.params['slug']);
const revisionIn = (request: Request): number => parse(revisionNumberSchema, request.params['revision']);

/** Everything on airframes beyond reading lists and revisions. */
export function airframeEditingRouter({ airframeEditing }: Pick<Services, 'airframeEditing'>): Router {
  const router = Router();
  const { drafts, release, detail, files, skins } = airframeEditing;

  router.post('/', async (request, response) => {
    const body = parse(createAirframeSchema, request.body);
    response.status(201).json(await drafts.create(actorOf(response), body, callerOf(request)));
  });

  router.put('/read-sheet', fileBody(MAX_SHEET_BYTES), async (request, response) => {
    response.json(await files.readSheet(actorOf(response), uploadOf(request)));
  });

  router.get('/:slug', async (request, response) => {
    response.json(await detail.detail(actorOf(response), slugIn(request)));
  });

  router.get('/:slug/history', async (request, response) => {
    const { field } = parse(valueHistoryQuerySchema, request.query);
    response.json(await detail.history(actorOf(response), slugIn(request), field));
  });

  router.post('/:slug/duplicate', async (request, response) => {
    const body = parse(duplicateAirframeSchema, request.body);
    response.status(201).json(await drafts.duplicate(actorOf(response), slugIn(request), body, callerOf(request)));
  });

  router.put('/:slug/tags', async (request, response) => {
    const body = parse(setTagsSchema, request.body);
    response.json(await release.setTags(actorOf(response), slugIn(request), body, callerOf(request)));
  });

  router.post('/:slug/drafts', async (request, response) => {
    const body = parse(startDraftSchema, request.body);
    response.status(201).json(await drafts.start(actorOf(response), slugIn(request), body, callerOf(request)));
  });

  router.get('/:slug/drafts/:revision', async (request, response) => {
    const draft = await drafts.read(actorOf(response), slugIn(request), revisionIn(request));
    response.set('etag', `"${draft.version}"`).json(draft);
  });

  router.put('/:slug/drafts/:revision', async (request, response) => {
    const actor = actorOf(response);
    const version = wantedVersion(request.get('if-match'));
    const body = parse(saveDraftSchema, request.body);
    const draft = await drafts.save(actor, slugIn(request), revisionIn(request), version, body, callerOf(request));
    response.set('etag', `"${draft.version}"`).json(draft);
  });

  router.delete('/:slug/drafts/:revision', async (request, response) => {
    await drafts.discard(actorOf(response), slugIn(request), revisionIn(request), callerOf(request));
    response.status(204).end();
  });

  router.post('/:slug/revisions/:revision/release', async (request, response) => {
    const body = parse(releaseSchema, request.body);
    const match = request.get('if-match');
    const version = match === undefined ? null : wantedVersion(match);
    const actor = actorOf(response);
    response.json(await release.release(actor, slugIn(request), revisionIn(request), body, version, callerOf(request)));
  });

  router.post('/:slug/revisions/:revision/retire', async (request, response) => {
    response.json(await release.retire(actorOf(response), slugIn(request), revisionIn(request), callerOf(request)));
  });

  router.get('/:slug/revisions/:revision/export.:format', async (request, response) => {
    const format = parse(exportSchema, request.params['format']);
    const file = await files.export(actorOf(response), slugIn(request), revisionIn(request), format);
    response.set({ 'content-type': file.type, 'content-disposition': attachment(file.fileName) }).send(file.bytes);
  });

  router.get('/:slug/skin', async (request, response) => {
    const skin = await skins.read(actorOf(response), slugIn(request));
    response.set({
      'content-type': 'model/gltf-binary',
      'cache-control': 'private, no-cache',
      etag: `"${skin.sha256.slice(0, 32)}"`,
      'content-disposition': attachment(skin.fileName),
    });
    if (request.fresh) response.status(304).end();
    else response.send(skin.bytes);
  });

  router.put('/:slug/skin', fileBody(MAX_SKIN_BYTES), async (request, response) => {
    response.json(await skins.replace(actorOf(response), slugIn(request), uploadOf(request), callerOf(request)));
  });

  router.delete('/:slug/skin', async (request, response) => {
    await skins.remove(actorOf(response), slugIn(request), callerOf(request));
    response.status(204).end();
  });

  return router;
}
