/** The description of the interface (OpenAPI 3.1), and the own tokens for programs. */
import { z } from 'zod';
import { madeTokenSchema, tokenListSchema, type NewToken } from '#shared/contracts/tokens.ts';
import { api } from './http-client.ts';

/** A JSON Schema is read with care where it is shown; here it is any object. */
const jsonSchema = z.record(z.string(), z.unknown());
const contentSchema = z.record(z.string(), z.object({ schema: jsonSchema }));
const operationSchema = z.object({
  operationId: z.string(),
  tags: z.tuple([z.string()]),
  summary: z.string(),
  description: z.string(),
  security: z.array(z.record(z.string(), z.array(z.string()))),
  parameters: z.array(
    z.object({
      name: z.string(),
      in: z.enum(['path', 'query', 'header']),
      required: z.boolean(),
      description: z.string().optional(),
      schema: jsonSchema,
    }),
  ),
  requestBody: z.object({ content: contentSchema }).optional(),
  responses: z.record(z.string(), z.object({ description: z.string(), content: contentSchema.optional() })),
});
const documentSchema = z.object({
  openapi: z.string(),
  info: z.object({ title: z.string(), version: z.string(), description: z.string() }),
  tags: z.array(z.object({ name: z.string() })),
  paths: z.record(z.string(), z.record(z.string(), operationSchema)),
});
export type InterfaceOperation = z.infer<typeof operationSchema> & { method: string; path: string };
export interface InterfaceDocument {
  version: string;
  description: string;
  areas: { name: string; operations: InterfaceOperation[] }[];
}

export const INTERFACE_ADDRESS = '/api/openapi.json';

export async function getInterface(signal?: AbortSignal): Promise<InterfaceDocument> {
  const document = await api.get(INTERFACE_ADDRESS, documentSchema, { signal });
  const operations = Object.entries(document.paths).flatMap(([path, methods]) =>
    Object.entries(methods).map(([method, operation]) => ({ ...operation, method: method.toUpperCase(), path })),
  );
  return {
    version: document.info.version,
    description: document.info.description,
    areas: document.tags.map(({ name }) => ({
      name,
      operations: operations.filter(({ tags }) => tags[0] === name),
    })),
  };
}

export const listTokens = (signal?: AbortSignal) => api.get('/api/tokens', tokenListSchema, { signal });
export const makeToken = (body: NewToken) => api.post('/api/tokens', body, madeTokenSchema);
export const revokeToken = (id: string): Promise<undefined> => api.delete(`/api/tokens/${encodeURIComponent(id)}`);
