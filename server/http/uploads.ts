import { raw, type Request, type RequestHandler } from 'express';
import { z } from 'zod';
import { ProblemError } from '../services/problem-error.ts';
import { parse } from './parse.ts';

/** A file as the body of the request: any type but JSON and forms, up to a limit; a little more still arrives to be told. */
export const fileBody = (limit: number): RequestHandler =>
  raw({ type: (request) => !/json|form|text\/html/.test(request.headers['content-type'] ?? ''), limit: limit + 1024 });

const nameSchema = z.strictObject({
  name: z
    .string()
    .trim()
    .max(200)
    // A name is shown and stored, never used as a path; directories in front of it are nobody's business.
    .transform((name) => name.replace(/^.*[\\/]/, '').replace(/\p{Control}/gu, '') || 'file')
    .default('file'),
});

/** Bytes and name of the file that a request carries. */
export function uploadOf(request: Request): { fileName: string; bytes: Buffer } {
  const bytes: unknown = request.body;
  if (!Buffer.isBuffer(bytes))
    throw new ProblemError('unsupported-media-type', 'A file is sent as application/octet-stream.');
  return { fileName: parse(nameSchema, request.query).name, bytes };
}

/** Header that names a download; other letters than ASCII in the form of RFC 6266. */
export function attachment(fileName: string): string {
  const plain = fileName.replace(/[^\w.-]+/g, '-');
  return `attachment; filename="${plain}"; filename*=UTF-8''${encodeURIComponent(fileName)}`;
}
