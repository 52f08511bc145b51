import { randomBytes, timingSafeEqual } from 'node:crypto';
import type { RequestHandler } from 'express';
import { CSRF_COOKIE, CSRF_HEADER } from '#shared/contracts/wire-names.ts';
import { originAllowed } from '../config/origins.ts';
import { ProblemError } from '../services/problem-error.ts';
import { bearerOf } from './bearer.ts';
import { cookieOf, type Cookies } from './cookies.ts';

const TOKEN_BYTES = 24;
const READING = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Data-changing requests must come from a page of this server and carry the token of its cookie in a header
 * (double submit). The cookie is given out with the first answer. Programs with a token need neither, where tokens reach.
 */
export function csrfProtection(
  cookies: Cookies,
  publicOrigins: readonly string[],
  openToTokens: ReadonlySet<string>,
): RequestHandler {
  return (request, response, next) => {
    // No page of another server can make a browser send an Authorization header, and cookies do not count beside one.
    if (bearerOf(request) !== undefined && openToTokens.has(firstPart(request.path))) {
      next();
      return;
    }
    const held = cookieOf(request, CSRF_COOKIE);
    if (READING.has(request.method)) {
      if (held === undefined) cookies.setCsrf(response, randomBytes(TOKEN_BYTES).toString('base64url'));
      next();
      return;
    }
    if (!originAllowed(request.headers, publicOrigins)) {
      throw new ProblemError('origin-refused', 'The request came from a page of another server.');
    }
    const given = request.get(CSRF_HEADER);
    if (held === undefined || given === undefined || !sameText(held, given)) {
      throw new ProblemError('csrf-refused', 'The request lacks this page’s token; reload the page and try again.');
    }
    next();
  };
}

const firstPart = (path: string): string => `/${path.split('/')[1] ?? ''}`;

function sameText(a: string, b: string): boolean {
  const left = Buffer.from(a);
  const right = Buffer.from(b);
  return left.length === right.length && timingSafeEqual(left, right);
}
