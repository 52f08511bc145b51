import { Router } from 'express';
import type { Health } from '#shared/contracts/health.ts';
import { PROGRAM_VERSION } from '../config/program-version.ts';

export function healthRouter(database: { ping(): Promise<void> }): Router {
  const router = Router();
  router.get('/', async (_request, response) => {
    const ready = await database.ping().then(
      () => true,
      () => false,
    );
    const health: Health = { ok: ready, version: PROGRAM_VERSION, database: ready ? 'ready' : 'unreachable' };
    response.status(ready ? 200 : 503).json(health);
  });
  return router;
}
