import { Router, type Request } from 'express';
import { setUpBodySchema } from '#shared/contracts/set-up.ts';
import type { SetUp } from '../services/set-up/set-up.service.ts';
import { parse } from './parse.ts';
import { callerOf } from './session.middleware.ts';
import { setUpThrottle } from './throttle.ts';

const LOOPBACK = /^(?:127\.\d+\.\d+\.\d+|::1|::ffff:127\.\d+\.\d+\.\d+)$/;
const LOCAL_NAMES = new Set(['localhost', '127.0.0.1', '[::1]']);

/**
 * True when the request comes from a browser on this machine, straight: no proxy in between, and asked for by a local
 * name, so that a page of another site whose name leads here does not count.
 */
function fromThisMachine(request: Request, behindProxy: boolean): boolean {
  const { host = '', forwarded, 'x-forwarded-for': forwardedFor } = request.headers;
  if (behindProxy || forwarded !== undefined || forwardedFor !== undefined) return false;
  return LOOPBACK.test(request.socket.remoteAddress ?? '') && LOCAL_NAMES.has(host.replace(/:\d+$/, ''));
}

/** The first set-up, open to whoever sits at the server or knows the code it printed. */
export function setUpRouter(setUp: SetUp, behindProxy: boolean): Router {
  const router = Router();

  router.get('/', async (request, response) => {
    response.json(await setUp.state(fromThisMachine(request, behindProxy)));
  });

  router.post('/', setUpThrottle(), async (request, response) => {
    const body = parse(setUpBodySchema, request.body);
    await setUp.run(body, fromThisMachine(request, behindProxy), callerOf(request));
    response.status(204).end();
  });

  return router;
}
