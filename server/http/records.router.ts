import { Router, type Response } from 'express';
import { z } from 'zod';
import { editionOf } from '#shared/contracts/edition.ts';
import {
  cellQuerySchema,
  distributionQuerySchema,
  endpointEdited,
  matrixQuerySchema,
  newCorrectionSchema,
  recordFilterSchema,
  saveEndpointSchema,
  saveRetentionSchema,
} from '#shared/contracts/records.ts';
import type { Services } from '../services/create-services.ts';
import { notFound } from '../services/problem-error.ts';
import { possibleVersion } from '../services/versions.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf } from './session.middleware.ts';

/** An identifier of the wrong form names nothing: the same answer as for one that is not there. */
function idOf(value: unknown, what: string): string {
  const parsed = z.uuid().safeParse(value);
  if (!parsed.success) throw notFound(what);
  return parsed.data;
}

/** Sends a file in pieces. An error before the first piece becomes a plain refusal, a later one breaks the connection off. */
async function sendFile(response: Response, name: string, type: string, work: () => Promise<void>): Promise<void> {
  response.attachment(name).type(type);
  try {
    await work();
  } catch (error) {
    if (response.headersSent) {
      response.destroy();
      return;
    }
    response.removeHeader('content-disposition');
    throw error;
  }
}

export function recordsRouter(records: Services['records']): Router {
  const router = Router();

  router.get('/matrix', async (request, response) => {
    response.json(await records.matrix(actorOf(response), parse(matrixQuerySchema, request.query)));
  });
  router.get('/totals', async (request, response) => {
    response.json(await records.totals(actorOf(response), parse(matrixQuerySchema, request.query)));
  });
  router.get('/choices', async (_request, response) => {
    response.json(await records.choices(actorOf(response)));
  });
  router.get('/cell', async (request, response) => {
    const { person, scenario } = parse(cellQuerySchema, request.query);
    response.json(await records.cell(actorOf(response), person, scenario));
  });
  router.get('/distribution', async (request, response) => {
    response.json(await records.distribution(actorOf(response), parse(distributionQuerySchema, request.query)));
  });
  router.post('/attempts/:id/corrections', async (request, response) => {
    const id = idOf(request.params['id'], 'attempt');
    const body = parse(newCorrectionSchema, request.body);
    response.status(201).json(await records.correct(actorOf(response), id, body, callerOf(request)));
  });

  router.get('/table.csv', async (request, response) => {
    const filter = parse(recordFilterSchema, request.query);
    await sendFile(response, 'records.csv', 'text/csv; charset=utf-8', () =>
      records.csv(actorOf(response), filter, response, callerOf(request)),
    );
  });
  router.get('/table.xlsx', async (request, response) => {
    const filter = parse(recordFilterSchema, request.query);
    const type = 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet';
    await sendFile(response, 'records.xlsx', type, () =>
      records.workbook(actorOf(response), filter, response, callerOf(request)),
    );
  });
  router.get('/statements.json', async (request, response) => {
    const filter = parse(recordFilterSchema, request.query);
    await sendFile(response, 'statements.json', 'application/json', () =>
      records.statements(actorOf(response), filter, response, callerOf(request)),
    );
  });
  router.get('/people/:id/transcript.pdf', async (request, response) => {
    const { file, name } = await records.transcript(actorOf(response), idOf(request.params['id'], 'record'));
    response.type('application/pdf').set('content-disposition', `inline; filename="${name}"`).send(file);
  });
  router.get('/mine/data.json', async (_request, response) => {
    await sendFile(response, 'my-data.json', 'application/json', () => records.ownData(actorOf(response), response));
  });

  router.get('/endpoint', async (_request, response) => {
    const endpoint = await records.endpoint(actorOf(response));
    response.set('etag', `"${editionOf(endpointEdited(endpoint))}"`).json(endpoint);
  });
  router.put('/endpoint', async (request, response) => {
    const body = parse(saveEndpointSchema, request.body);
    const version = possibleVersion(request.get('if-match'));
    const saved = await records.saveEndpoint(actorOf(response), body, callerOf(request), version);
    response.set('etag', `"${editionOf(endpointEdited(saved))}"`).json(saved);
  });
  router.post('/endpoint/push', async (request, response) => {
    response.status(202).json(await records.pushAll(actorOf(response), callerOf(request)));
  });
  router.get('/retention', async (_request, response) => {
    const rule = await records.retention(actorOf(response));
    response.set('etag', `"${editionOf(rule)}"`).json(rule);
  });
  router.post('/retention/effect', async (request, response) => {
    response.json(await records.effect(actorOf(response), parse(saveRetentionSchema, request.body)));
  });
  router.put('/retention', async (request, response) => {
    const body = parse(saveRetentionSchema, request.body);
    const version = possibleVersion(request.get('if-match'));
    const rule = await records.setRetention(actorOf(response), body, callerOf(request), version);
    response.set('etag', `"${editionOf(rule)}"`).json(rule);
  });
  return router;
}
