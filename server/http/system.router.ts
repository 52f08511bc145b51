import { Router } from 'express';
import type { Services } from '../services/create-services.ts';
import { actorOf } from './session.middleware.ts';

/** Storage, mail, versions and health for the administrator. */
export function systemRouter(system: Services['system']): Router {
  const router = Router();
  router.get('/', async (_request, response) => {
    response.json(await system.state(actorOf(response)));
  });
  return router;
}
