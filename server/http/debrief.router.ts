import { Router } from 'express';
import { z } from 'zod';
import { newRemarkSchema, newSignOffSchema, receivedRemarksQuerySchema } from '#shared/contracts/debrief.ts';
import type { Services } from '../services/create-services.ts';
import { notFound } from '../services/problem-error.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf } from './session.middleware.ts';

/** An identifier of the wrong form names nothing: the same answer as for one that is not there. */
function idOf(value: unknown, what: string): string {
  const parsed = z.uuid().safeParse(value);
  if (!parsed.success) throw notFound(what);
  return parsed.data;
}

/** Remarks and signatures of attempts; mounted beside the attempts. */
export function debriefRouter(debrief: Services['debrief']): Router {
  const router = Router();

  router.get('/:id/debrief', async (request, response) => {
    response.json(await debrief.read(actorOf(response), idOf(request.params['id'], 'attempt')));
  });

  router.post('/:id/remarks', async (request, response) => {
    const body = parse(newRemarkSchema, request.body);
    response.status(201).json(await debrief.remark(actorOf(response), idOf(request.params['id'], 'attempt'), body));
  });

  router.post('/:id/remarks/:remark/withdraw', async (request, response) => {
    const id = idOf(request.params['id'], 'attempt');
    response.json(await debrief.withdraw(actorOf(response), id, idOf(request.params['remark'], 'remark')));
  });

  router.post('/:id/sign-offs', async (request, response) => {
    const id = idOf(request.params['id'], 'attempt');
    const body = parse(newSignOffSchema, request.body);
    response.status(201).json(await debrief.sign(actorOf(response), id, body, callerOf(request)));
  });

  router.get('/:id/sheet.pdf', async (request, response) => {
    const { file, name } = await debrief.print(actorOf(response), idOf(request.params['id'], 'attempt'));
    response.type('application/pdf').set('content-disposition', `inline; filename="${name}"`).send(file);
  });

  return router;
}

/** Remarks that the reader received. */
export function remarksRouter(debrief: Services['debrief']): Router {
  const router = Router();
  router.get('/', async (request, response) => {
    response.json(await debrief.received(actorOf(response), parse(receivedRemarksQuerySchema, request.query)));
  });
  return router;
}
