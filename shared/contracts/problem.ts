/** The one shape of every refusal (problem details, RFC 9457) and its stable codes. */
import { z } from 'zod';

/** Code → HTTP status. The code is what programs test; the texts are for people and may change. */
export const PROBLEM_STATUS = {
  'bad-request': 400,
  unauthenticated: 401,
  'wrong-credentials': 401,
  'session-expired': 401,
  forbidden: 403,
  deactivated: 403,
  'csrf-refused': 403,
  'origin-refused': 403,
  'not-found': 404,
  'method-not-allowed': 405,
  conflict: 409,
  'chunks-missing': 409,
  'attempt-closed': 409,
  /** Someone else saved since the version named in If-Match was read. */
  'changed-meanwhile': 412,
  'too-large': 413,
  'unsupported-media-type': 415,
  validation: 422,
  'chunk-refused': 422,
  /** The deed needs an If-Match header with the version that was read. */
  'version-needed': 428,
  throttled: 429,
  internal: 500,
  unavailable: 503,
} as const;

export type ProblemCode = keyof typeof PROBLEM_STATUS;
export const PROBLEM_CODES = Object.keys(PROBLEM_STATUS) as [ProblemCode, ...ProblemCode[]]; // keys of a const object

export const fieldErrorSchema = z.object({
  /** JSON Pointer into the body, or the name of the query member. */
  field: z.string(),
  rule: z.string(),
  message: z.string(),
  remedy: z.string(),
});
export type FieldError = z.infer<typeof fieldErrorSchema>;

/** Why a chunk was refused. `expected` is the number of the chunk wanted next, where that is the reason. */
export const chunkRefusalSchema = z.object({
  index: z.number().int().min(0),
  reason: z.enum([
    'predecessor-missing',
    'chain-broken',
    'different-content',
    'unreadable',
    'wrong-number',
    'too-large',
    'too-long',
    'ahead-of-clock',
    'after-last',
    'not-allowed',
  ]),
  expected: z.number().int().min(0).nullable(),
});
export type ChunkRefusal = z.infer<typeof chunkRefusalSchema>;

export const problemSchema = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  code: z.enum(PROBLEM_CODES),
  detail: z.string(),
  /** Id of the request in the server's log. */
  instance: z.string().optional(),
  errors: z.array(fieldErrorSchema).optional(),
  /** With `chunk-refused`. */
  chunk: chunkRefusalSchema.optional(),
  /** With `chunks-missing`: numbers of the chunks the server does not hold. */
  missing: z.array(z.number().int().min(0)).optional(),
  /** With `throttled`: seconds to wait. */
  retryAfterS: z.number().int().min(0).optional(),
});
export type Problem = z.infer<typeof problemSchema>;
