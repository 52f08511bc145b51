import { createHash } from 'node:crypto';
import { Router } from 'express';
import { openApiDocument } from './openapi.ts';

/** The description of the interface at /api/openapi.json, for whoever asks. */
export function openApiRouter(): Router {
  const text = JSON.stringify(openApiDocument());
  const tag = `"${createHash('sha256').update(text).digest('hex').slice(0, 32)}"`;
  const router = Router();
  router.get('/', (_request, response) => {
    response.set({ etag: tag, 'cache-control': 'no-cache' }).type('application/json').send(text);
  });
  return router;
}
