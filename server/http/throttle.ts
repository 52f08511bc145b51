import type { Request, Response } from 'express';
import { ipKeyGenerator, rateLimit } from 'express-rate-limit';
import { ProblemError } from '../services/problem-error.ts';
import { actorOf } from './session.middleware.ts';

const WINDOW_MS = 15 * 60 * 1000;

/** Failed sign-ins allowed in a quarter of an hour: for one account from anywhere, and for one address over all accounts. */
export const SIGN_IN_LIMITS = { account: 10, address: 60 } as const;

/** Requests in a quarter of an hour from one address: looks at links (failed ones count), and messages asked for. */
const LINK_LIMIT = 30;
const RESET_LIMIT = 10;

function limiter(
  limit: number,
  keyGenerator: (request: Request, response: Response) => string,
  what = 'failed sign-ins',
  all = false,
) {
  return rateLimit({
    windowMs: WINDOW_MS,
    limit,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    skipSuccessfulRequests: !all,
    keyGenerator,
    handler: (request, _response, next) => {
      const limited: unknown = Reflect.get(request, 'rateLimit');
      const resetAt: unknown =
        typeof limited === 'object' && limited !== null ? Reflect.get(limited, 'resetTime') : null;
      const seconds =
        resetAt instanceof Date ? Math.max(1, Math.ceil((resetAt.getTime() - Date.now()) / 1000)) : WINDOW_MS / 1000;
      next(
        new ProblemError('throttled', `Too many ${what}. Try again in ${Math.ceil(seconds / 60)} minutes.`, {
          retryAfterS: seconds,
        }),
      );
    },
  });
}

function accountOf(request: Request): string {
  const body: unknown = request.body;
  const email: unknown = typeof body === 'object' && body !== null ? Reflect.get(body, 'email') : null;
  return typeof email === 'string'
    ? `account:${email.normalize('NFKC').trim().toLowerCase().slice(0, 254)}`
    : 'account:';
}

/** Limits of the sign-in route. Counts live in this process. */
export function signInThrottles() {
  return [
    limiter(SIGN_IN_LIMITS.address, (request) => `address:${ipKeyGenerator(request.ip ?? '')}`),
    limiter(SIGN_IN_LIMITS.account, accountOf),
  ];
}

/** Failed tries of the own password by someone signed in, counted for each person. */
export const ownPasswordThrottle = () =>
  limiter(SIGN_IN_LIMITS.account, (_request, response) => `person:${actorOf(response).personId}`, 'wrong passwords');

const addressOf = (request: Request): string => `address:${ipKeyGenerator(request.ip ?? '')}`;
export const linkThrottle = () => limiter(LINK_LIMIT, addressOf, 'links that do not work');
export const resetThrottle = () => limiter(RESET_LIMIT, addressOf, 'messages asked for', true);
export const setUpThrottle = () => limiter(LINK_LIMIT, addressOf, 'wrong codes');
