/** The description of the interface against the routers themselves and against the OpenAPI 3.1 schema. */
import { Validator } from '@seriousme/openapi-schema-validator';
import type { Router } from 'express';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { z } from 'zod';
import { problemSchema } from '#shared/contracts/problem.ts';
import { apiMounts } from '../../../server/http/api-mounts.ts';
import { createCookies } from '../../../server/http/cookies.ts';
import { AREAS } from '../../../server/http/description/areas.ts';
import { openApiDocument } from '../../../server/http/description/openapi.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.close());

const layerSchema = z.object({
  route: z.object({ path: z.string(), methods: z.record(z.string(), z.boolean()) }).optional(),
});
/** Method and path of every route of a router, as Express keeps them. */
function routesOf(prefix: string, router: Router): string[] {
  return z
    .array(layerSchema)
    .parse(router.stack)
    .flatMap(({ route }) =>
      route === undefined
        ? []
        : Object.keys(route.methods).map((method) => `${method} ${`${prefix}${route.path}`.replace(/(?<=.)\/$/u, '')}`),
    );
}
const described = AREAS.flatMap(({ operations }) => operations);
const documentSchema = z.object({
  openapi: z.literal('3.1.0'),
  paths: z.record(
    z.string(),
    z.record(
      z.string(),
      z.object({
        operationId: z.string(),
        summary: z.string(),
        parameters: z.array(z.object({ name: z.string(), in: z.string(), required: z.boolean() })),
      }),
    ),
  ),
});

describe('the description', () => {
  it('names every route there is, and no other', () => {
    const mounts = apiMounts({
      services: server.services,
      cookies: createCookies(false),
      publicOrigins: [],
      behindProxy: false,
    });
    const routes = mounts.flatMap(({ path, router }) => routesOf(path, router));
    expect(new Set(routes).size).toBe(routes.length);
    expect(described.map(({ method, path }) => `${method} ${path}`).sort()).toEqual([...routes].sort());
  });

  it('is a valid OpenAPI 3.1 document with one name for each operation and every part of a path declared', async () => {
    const document = openApiDocument();
    const result = await new Validator().validate(JSON.parse(JSON.stringify(document)) as Record<string, unknown>); // JSON
    expect(result.errors).toBeUndefined();
    expect(result.valid).toBe(true);
    const { paths } = documentSchema.parse(document);
    const operations = Object.entries(paths).flatMap(([path, methods]) =>
      Object.values(methods).map((operation) => ({ path, ...operation })),
    );
    expect(operations).toHaveLength(described.length);
    expect(new Set(operations.map((o) => o.operationId)).size).toBe(operations.length);
    for (const { path, parameters } of operations) {
      const inPath = parameters.filter((p) => p.in === 'path').map((p) => p.name);
      expect(
        [...path.matchAll(/\{(\w+)\}/gu)].map(([, name]) => name),
        path,
      ).toEqual(inPath);
    }
  });

  it('is served to whoever asks, and not again to who has it', async () => {
    const nobody = await server.client();
    const answer = await nobody('GET', '/api/openapi.json');
    expect(answer.status).toBe(200);
    expect(documentSchema.parse(answer.body).openapi).toBe('3.1.0');
    const again = await nobody('GET', '/api/openapi.json', {
      // what a browser sends; undici would ask past every cache
      headers: { 'if-none-match': answer.headers.get('etag') ?? '', 'cache-control': 'max-age=0' },
    });
    expect(again.status).toBe(304);
  });
});

describe('every list', () => {
  const lists = described.filter(
    ({ method, query, path, answer }) =>
      method === 'get' &&
      !path.includes(':') &&
      answer.schema instanceof z.ZodObject &&
      'pageSize' in answer.schema.shape &&
      query instanceof z.ZodObject &&
      'pageSize' in query.shape,
  );
  const who = { 'm.okafor': 'instructor', 'a.reyes': 'engineer', 's.virtanen': 'administrator' };
  const clients = new Map<string, Client>();
  const allowed = async (path: string): Promise<Client> => {
    for (const mailbox of Object.keys(who)) {
      const client = clients.get(mailbox) ?? (await server.client(mailbox));
      clients.set(mailbox, client);
      if ((await client('GET', `/api${path}`)).status === 200) return client;
    }
    throw new Error(`Nobody may read ${path}.`);
  };

  it('is among those that page', () => {
    expect(lists.map(({ path }) => path)).toEqual(
      expect.arrayContaining(['/airframes', '/scenarios', '/attempts', '/people', '/audit', '/outbox', '/studies']),
    );
  });

  it.each(lists.map(({ path }) => path))('%s pages alike and names the member it refuses', async (path) => {
    const client = await allowed(path);
    const page = await client('GET', `/api${path}?page=2&pageSize=3`);
    expect(page.status).toBe(200);
    expect(page.body).toMatchObject({ page: 2, pageSize: 3 });
    for (const [query, field] of [
      ['pageSize=101', 'pageSize'],
      ['pageSize=0', 'pageSize'],
      ['page=first', 'page'],
      ['colour=red', 'colour'],
    ] as const) {
      const refused = await client('GET', `/api${path}?${query}`);
      expect(refused.status, query).toBe(422);
      expect(refused.headers.get('content-type')).toMatch(/^application\/problem\+json/);
      const problem = problemSchema.parse(refused.body);
      expect(
        problem.errors?.some((e) => `${e.field} ${e.message}`.includes(field)),
        query,
      ).toBe(true);
    }
  });
});
