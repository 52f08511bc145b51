import { raw, Router } from 'express';
import { z } from 'zod';
import {
  attemptListQuerySchema,
  completeAttemptBodySchema,
  hash16Schema,
  MAX_CHUNK_BYTES,
  startAttemptBodySchema,
} from '#shared/contracts/attempts.ts';
import { CHUNK_HASH_HEADER } from '#shared/contracts/wire-names.ts';
import type { Services } from '../services/create-services.ts';
import { notFound, ProblemError } from '../services/problem-error.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf } from './session.middleware.ts';

const indexSchema = z.coerce.number().int().min(0).max(1_000_000);
/** A body just above the limit still arrives, so that the refusal can name the chunk. */
const LARGEST_BODY = MAX_CHUNK_BYTES + 1024;

/** An identifier of the wrong form names nothing: the same answer as for one that is not there. */
function idOf(value: unknown): string {
  const parsed = z.uuid().safeParse(value);
  if (!parsed.success) throw notFound('attempt');
  return parsed.data;
}

export function attemptsRouter(attempts: Services['attempts']): Router {
  const router = Router();

  router.post('/', async (request, response) => {
    response.status(201).json(await attempts.start(actorOf(response), parse(startAttemptBodySchema, request.body)));
  });

  router.get('/', async (request, response) => {
    response.json(await attempts.list(actorOf(response), parse(attemptListQuerySchema, request.query)));
  });

  router.get('/:id', async (request, response) => {
    response.json(await attempts.detail(actorOf(response), idOf(request.params['id'])));
  });

  router.get('/:id/chunks', async (request, response) => {
    response.json(await attempts.chunks(actorOf(response), idOf(request.params['id'])));
  });

  router.put(
    '/:id/chunks/:index',
    raw({ type: 'application/octet-stream', limit: LARGEST_BODY }),
    async (request, response) => {
      const bytes: unknown = request.body;
      if (!Buffer.isBuffer(bytes))
        throw new ProblemError('unsupported-media-type', 'A chunk is sent as application/octet-stream.');
      const upload = {
        index: parse(indexSchema, request.params['index']),
        hash: parse(hash16Schema, request.get(CHUNK_HASH_HEADER)),
        bytes,
      };
      response.json(await attempts.storeChunk(actorOf(response), idOf(request.params['id']), upload));
    },
  );

  router.post('/:id/complete', async (request, response) => {
    const body = parse(completeAttemptBodySchema, request.body);
    response.json(await attempts.complete(actorOf(response), idOf(request.params['id']), body, callerOf(request)));
  });

  return router;
}
