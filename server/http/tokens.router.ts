import { Router } from 'express';
import { z } from 'zod';
import { newTokenSchema } from '#shared/contracts/tokens.ts';
import { notFound } from '../services/problem-error.ts';
import type { AccessTokensService } from '../services/tokens/access-tokens.service.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf } from './session.middleware.ts';

/** The person's own tokens for programs. */
export function tokensRouter(tokens: AccessTokensService): Router {
  const router = Router();

  router.get('/', async (_request, response) => {
    response.json(await tokens.list(actorOf(response)));
  });

  router.post('/', async (request, response) => {
    response
      .status(201)
      .json(await tokens.make(actorOf(response), parse(newTokenSchema, request.body), callerOf(request)));
  });

  router.delete('/:id', async (request, response) => {
    const id = z.uuid().safeParse(request.params['id']);
    if (!id.success) throw notFound('token');
    await tokens.revoke(actorOf(response), id.data, callerOf(request));
    response.status(204).end();
  });

  return router;
}
