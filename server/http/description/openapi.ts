/** The OpenAPI 3.1 document of the interface, made of the schemas that the routers parse with. */
import { z } from 'zod';
import { PROBLEM_STATUS, problemSchema, type ProblemCode } from '#shared/contracts/problem.ts';
import { IDEMPOTENCY_HEADER, TOKEN_AREAS, idempotencyKeySchema } from '#shared/contracts/tokens.ts';
import { PROBLEM_MEDIA_TYPE } from '#shared/contracts/wire-names.ts';
import { PROGRAM_VERSION } from '../../config/program-version.ts';
import { rolesAllowed } from '../../services/permissions.ts';
import { AREAS } from './areas.ts';
import type { Area, Operation } from './operation.ts';

type Json = null | boolean | number | string | readonly Json[] | { readonly [name: string]: Json | undefined };
type JsonObject = Readonly<Record<string, Json | undefined>>;

const SAFETY =
  'Not an approved training device, not for operational use. The approved flight manual and licensed instruction govern.';
const REASONS: Readonly<Partial<Record<ProblemCode, string>>> = {
  unauthenticated: 'Not signed in, or the token does not hold',
  forbidden: 'The role or the scopes do not allow it',
  'not-found': 'There is nothing at this address',
  validation: 'A field is refused; each with rule, message and remedy',
  'changed-meanwhile': 'Someone saved since the version in If-Match was read',
  'version-needed': 'If-Match is missing',
  conflict: 'It cannot be done in the present state; the detail says why',
  throttled: 'Too many requests; Retry-After says when to come again',
  'too-large': 'The body is larger than is accepted',
};

/** JSON Schema of a zod schema. What has no JSON form, such as a rule between members, stays out: the server still checks it. */
export function schemaOf(schema: z.ZodType, io: 'input' | 'output'): JsonObject {
  const { $schema: _dialect, ...rest } = z.toJSONSchema(schema, {
    io,
    unrepresentable: 'any',
    target: 'draft-2020-12',
  });
  return JSON.parse(JSON.stringify(rest)) as JsonObject; // made by JSON.stringify
}

export const openApiPath = (path: string): string => path.replaceAll(/:(\w+)/gu, '{$1}');
const parameterNames = (path: string): string[] => [...path.matchAll(/:(\w+)/gu)].map(([, name = '']) => name);
export function operationId({ method, path }: Pick<Operation, 'method' | 'path'>): string {
  const words = path.split(/[^A-Za-z0-9]+/u).filter((word) => word !== '');
  return [method, ...words].map((word, i) => (i === 0 ? word : word.replace(/^./u, (c) => c.toUpperCase()))).join('');
}

function parametersOf({ path, query, version, method, anyone }: Operation, tokens: boolean): Json[] {
  const inPath = parameterNames(path).map((name) => ({
    name,
    in: 'path',
    required: true,
    schema:
      name === 'revision' || name === 'index'
        ? { type: 'integer', minimum: name === 'index' ? 0 : 1 }
        : { type: 'string' },
  }));
  const { properties = {}, required = [] } =
    query === undefined ? {} : (schemaOf(query, 'input') as { properties?: JsonObject; required?: string[] }); // an object schema
  const inQuery = Object.entries(properties).map(([name, schema]) => ({
    name,
    in: 'query',
    required: required.includes(name),
    schema,
  }));
  const headers: Json[] = [];
  if (version !== undefined)
    headers.push({
      name: 'If-Match',
      in: 'header',
      required: version === 'needed',
      description: 'The ETag that was read with what is changed.',
      schema: { type: 'string' },
    });
  if (method === 'post' && anyone !== true && (tokens || path === '/tokens'))
    headers.push({
      name: IDEMPOTENCY_HEADER,
      in: 'header',
      required: false,
      description: 'The same key with the same request within a day is carried out once and answered twice.',
      schema: schemaOf(idempotencyKeySchema, 'input'),
    });
  return [...inPath, ...inQuery, ...headers];
}

function refusalsOf(operation: Operation): ProblemCode[] {
  const codes = new Set<ProblemCode>(operation.refusals ?? []);
  if (operation.anyone !== true) codes.add('unauthenticated');
  if (operation.deed !== undefined) codes.add('forbidden');
  if (operation.path.includes(':')) codes.add('not-found');
  if (operation.query !== undefined || operation.body !== undefined) codes.add('validation');
  if (operation.body !== undefined || operation.file !== undefined) codes.add('too-large');
  if (operation.version !== undefined) codes.add('changed-meanwhile');
  if (operation.version === 'needed') codes.add('version-needed');
  return [...codes].sort((a, b) => PROBLEM_STATUS[a] - PROBLEM_STATUS[b]);
}

function responsesOf(operation: Operation): JsonObject {
  const { status, schema, type, etag } = operation.answer;
  const content = schema
    ? { 'application/json': { schema: schemaOf(schema, 'output') } }
    : type
      ? { [type]: { schema: { type: 'string', contentMediaType: type } } }
      : undefined;
  const headers = etag
    ? { ETag: { description: 'The version, for If-Match.', schema: { type: 'string' } } }
    : undefined;
  const out: Record<string, Json | undefined> = {
    [status]: { description: status === 204 ? 'Done' : 'The answer', headers, content },
  };
  for (const [code, codes] of groupByStatus(refusalsOf(operation)))
    out[code] = {
      description: codes.map((one) => `${one}: ${REASONS[one] ?? 'see the detail'}`).join('. '),
      content: { [PROBLEM_MEDIA_TYPE]: { schema: { $ref: '#/components/schemas/Problem' } } },
    };
  return out;
}

function groupByStatus(codes: readonly ProblemCode[]): Map<number, ProblemCode[]> {
  const out = new Map<number, ProblemCode[]>();
  for (const code of codes) out.set(PROBLEM_STATUS[code], [...(out.get(PROBLEM_STATUS[code]) ?? []), code]);
  return out;
}

function securityOf(operation: Operation, area: Area, tokens: boolean): Json[] {
  if (operation.anyone === true) return [];
  const browser = operation.method === 'get' ? { session: [] } : { session: [], csrf: [] };
  if (!tokens) return [browser];
  const scope = `${area.area}:${operation.method === 'get' ? 'read' : 'write'}`;
  return [{ token: [scope] }, browser];
}

function operationOf(operation: Operation, area: Area): JsonObject {
  const tokens = TOKEN_AREAS.some((one) => one === area.area);
  const deeds = operation.deed === undefined ? [] : [operation.deed].flat();
  const roles = [...new Set(deeds.flatMap((deed) => rolesAllowed(deed)))];
  return {
    operationId: operationId(operation),
    tags: [area.title],
    summary: operation.summary,
    description:
      operation.anyone === true
        ? 'Needs no session.'
        : roles.length > 0
          ? `Roles: ${roles.join(', ')}.`
          : 'Whoever is signed in.',
    security: securityOf(operation, area, tokens),
    parameters: parametersOf(operation, tokens),
    requestBody: operation.body
      ? { required: true, content: { 'application/json': { schema: schemaOf(operation.body, 'input') } } }
      : operation.file
        ? {
            required: true,
            content: { [operation.file]: { schema: { type: 'string', contentMediaType: operation.file } } },
          }
        : undefined,
    responses: responsesOf(operation),
  };
}

/** The document; made once, when the server starts. */
export function openApiDocument(areas: readonly Area[] = AREAS): JsonObject {
  const paths: Record<string, Record<string, Json | undefined>> = {};
  for (const area of areas)
    for (const operation of area.operations)
      (paths[openApiPath(operation.path)] ??= {})[operation.method] = operationOf(operation, area);
  const document: JsonObject = {
    openapi: '3.1.0',
    info: {
      title: 'Sidewash',
      version: PROGRAM_VERSION,
      description: `${SAFETY} Lists page by "page" and "pageSize"; every refusal is a problem document (RFC 9457). Times are ISO 8601 in UTC.`,
      license: { name: 'MIT', identifier: 'MIT' },
    },
    jsonSchemaDialect: 'https://json-schema.org/draft/2020-12/schema',
    servers: [{ url: '/api' }],
    tags: areas.map(({ title }) => ({ name: title })),
    paths,
    components: {
      schemas: { Problem: schemaOf(problemSchema, 'output') },
      securitySchemes: {
        token: { type: 'http', scheme: 'bearer', description: 'A personal access token, made under Account.' },
        session: { type: 'apiKey', in: 'cookie', name: 'sidewash_access' },
        csrf: { type: 'apiKey', in: 'header', name: 'x-sidewash-csrf' },
      },
    },
  };
  return JSON.parse(JSON.stringify(document)) as JsonObject; // leaves out what is undefined
}
