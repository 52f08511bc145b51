import { Router, type Request } from 'express';
import { z } from 'zod';
import { savePlaylistSchema, playlistListQuerySchema, type Playlist } from '#shared/contracts/playlists.ts';
import { notFound } from '../services/problem-error.ts';
import type { PlaylistsService } from '../services/playlists/playlists.service.ts';
import { wantedVersion } from '../services/versions.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf } from './session.middleware.ts';

/** An identifier of the wrong form names nothing: the same answer as for one that is not there. */
function idIn(request: Request): string {
  const parsed = z.uuid().safeParse(request.params['id']);
  if (!parsed.success) throw notFound('playlist');
  return parsed.data;
}

const tagOf = (playlist: Playlist): string => `"${playlist.version}"`;

export function playlistsRouter(playlists: PlaylistsService): Router {
  const router = Router();

  router.post('/', async (request, response) => {
    const playlist = await playlists.create(
      actorOf(response),
      parse(savePlaylistSchema, request.body),
      callerOf(request),
    );
    response.status(201).set('etag', tagOf(playlist)).json(playlist);
  });

  router.get('/', async (request, response) => {
    response.json(await playlists.list(actorOf(response), parse(playlistListQuerySchema, request.query)));
  });

  router.get('/:id', async (request, response) => {
    const playlist = await playlists.read(actorOf(response), idIn(request));
    response.set('etag', tagOf(playlist)).json(playlist);
  });

  router.put('/:id', async (request, response) => {
    const version = wantedVersion(request.get('if-match'));
    const body = parse(savePlaylistSchema, request.body);
    const playlist = await playlists.save(actorOf(response), idIn(request), version, body, callerOf(request));
    response.set('etag', tagOf(playlist)).json(playlist);
  });

  router.delete('/:id', async (request, response) => {
    await playlists.remove(actorOf(response), idIn(request), callerOf(request));
    response.status(204).end();
  });

  return router;
}
