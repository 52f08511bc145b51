import { Router, type Request } from 'express';
import { z } from 'zod';
import {
  addPeopleSchema,
  assignmentListQuerySchema,
  changeAssignmentSchema,
  closeAssignmentSchema,
  excuseSchema,
  extendSchema,
  lateQuerySchema,
  newAssignmentSchema,
  remindSchema,
  type Assignment,
} from '#shared/contracts/assignments.ts';
import type { Services } from '../services/create-services.ts';
import { notFound } from '../services/problem-error.ts';
import { wantedVersion } from '../services/versions.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf } from './session.middleware.ts';

/** An identifier of the wrong form names nothing: the same answer as for one that is not there. */
function idIn(request: Request): string {
  const parsed = z.uuid().safeParse(request.params['id']);
  if (!parsed.success) throw notFound('assignment');
  return parsed.data;
}
const tagOf = (assignment: Assignment): string => `"${assignment.version}"`;

export function assignmentsRouter(assignments: Services['assignments']): Router {
  const router = Router();

  router.get('/', async (request, response) => {
    response.json(await assignments.list(actorOf(response), parse(assignmentListQuerySchema, request.query)));
  });
  router.post('/', async (request, response) => {
    const body = parse(newAssignmentSchema, request.body);
    const made = await assignments.create(actorOf(response), body, callerOf(request));
    response.status(201).set('etag', tagOf(made)).json(made);
  });
  router.post('/preview', async (request, response) => {
    response.json(await assignments.preview(actorOf(response), parse(newAssignmentSchema, request.body)));
  });
  router.get('/mine', async (_request, response) => {
    response.json(await assignments.own(actorOf(response)));
  });
  router.get('/late', async (request, response) => {
    response.json(await assignments.late(actorOf(response), parse(lateQuerySchema, request.query)));
  });
  router.get('/targets', async (_request, response) => {
    response.json(await assignments.targets(actorOf(response)));
  });
  router.get('/table.csv', async (request, response) => {
    const text = await assignments.table(actorOf(response), parse(assignmentListQuerySchema, request.query));
    response.attachment('assignments.csv').type('text/csv; charset=utf-8').send(text);
  });

  router.get('/:id', async (request, response) => {
    const found = await assignments.read(actorOf(response), idIn(request));
    response.set('etag', tagOf(found)).json(found);
  });
  router.put('/:id', async (request, response) => {
    const version = wantedVersion(request.get('if-match'));
    const body = parse(changeAssignmentSchema, request.body);
    const changed = await assignments.change(actorOf(response), idIn(request), version, body, callerOf(request));
    response.set('etag', tagOf(changed)).json(changed);
  });
  router.post('/:id/people', async (request, response) => {
    const body = parse(addPeopleSchema, request.body);
    response.json(await assignments.addPeople(actorOf(response), idIn(request), body, callerOf(request)));
  });
  router.post('/:id/excuse', async (request, response) => {
    const { people } = parse(excuseSchema, request.body);
    response.json(await assignments.excuse(actorOf(response), idIn(request), people, callerOf(request)));
  });
  router.post('/:id/extensions', async (request, response) => {
    const body = parse(extendSchema, request.body);
    response.json(await assignments.extend(actorOf(response), idIn(request), body, callerOf(request)));
  });
  router.post('/:id/reminders', async (request, response) => {
    const { people } = parse(remindSchema, request.body);
    response.json(await assignments.remind(actorOf(response), idIn(request), people, callerOf(request)));
  });
  router.post('/:id/close', async (request, response) => {
    const { reason } = parse(closeAssignmentSchema, request.body);
    response.json(await assignments.close(actorOf(response), idIn(request), reason, callerOf(request)));
  });
  router.get('/:id/calendar.ics', async (request, response) => {
    const text = await assignments.calendar(actorOf(response), idIn(request));
    response.attachment('due.ics').type('text/calendar; charset=utf-8').send(text);
  });
  return router;
}
