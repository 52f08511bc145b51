import type { z } from 'zod';
import type { ProblemCode } from '#shared/contracts/problem.ts';
import type { Deed } from '../../services/permissions.ts';

export type Method = 'get' | 'post' | 'put' | 'delete';

/** What an operation answers when it succeeds. */
export interface OperationAnswer {
  status: 200 | 201 | 202 | 204;
  /** Of a JSON answer. */
  schema?: z.ZodType;
  /** Media type of an answer that is not JSON. */
  type?: string;
  /** The answer names the version that an edit wants in If-Match. */
  etag?: boolean;
}

/** One route, described with the schemas that its router parses with. */
export interface Operation {
  method: Method;
  /** As mounted below /api, with `:name` for parts that vary. */
  path: string;
  /** What it does, as a heading. */
  summary: string;
  /** Who may; absent for whoever is signed in. A list: any of them. */
  deed?: Deed | readonly Deed[];
  /** Needs no session: the request carries what it needs, such as a password, a link or a guest's pass. */
  anyone?: boolean;
  query?: z.ZodType;
  body?: z.ZodType;
  /** Media type of a body that is a file. */
  file?: string;
  answer: OperationAnswer;
  /** Whether the version that was read must come in If-Match, or may. */
  version?: 'needed' | 'possible';
  /** Refusals besides those that follow from the other members. */
  refusals?: readonly ProblemCode[];
}

export interface Area {
  /** First part of the paths; also the first part of the scopes of tokens. */
  area: string;
  title: string;
  operations: readonly Operation[];
}

export const NO_CONTENT: OperationAnswer = { status: 204 };
export const ok = (schema: z.ZodType, etag = false): OperationAnswer => ({ status: 200, schema, etag });
export const made = (schema: z.ZodType, etag = false): OperationAnswer => ({ status: 201, schema, etag });
export const fileOf = (type: string): OperationAnswer => ({ status: 200, type });
