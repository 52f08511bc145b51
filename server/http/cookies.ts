import type { CookieOptions, Request, Response } from 'express';
import { ACCESS_COOKIE, CSRF_COOKIE, GUEST_COOKIE, REFRESH_COOKIE } from '#shared/contracts/wire-names.ts';
import { ACCESS_TOKEN_S } from '../services/sessions/access-tokens.ts';
import { GUEST_PASS_S } from '../services/classes/guest-passes.ts';
import { SESSION_IDLE_S } from '../services/sessions/sessions.service.ts';

const REFRESH_PATH = '/api/session';

/** Value of a cookie as text; undefined when absent or of another kind. */
export function cookieOf(request: Request, name: string): string | undefined {
  const cookies: unknown = request.cookies;
  if (typeof cookies !== 'object' || cookies === null || !Object.hasOwn(cookies, name)) return undefined;
  const value: unknown = Reflect.get(cookies, name);
  return typeof value === 'string' && value !== '' ? value : undefined;
}

export function createCookies(secure: boolean) {
  const access: CookieOptions = { httpOnly: true, secure, sameSite: 'lax', path: '/' };
  const refresh: CookieOptions = { httpOnly: true, secure, sameSite: 'strict', path: REFRESH_PATH };
  const csrf: CookieOptions = { httpOnly: false, secure, sameSite: 'strict', path: '/' };
  return {
    set(response: Response, tokens: { accessToken: string; refreshToken: string }): void {
      response.cookie(ACCESS_COOKIE, tokens.accessToken, { ...access, maxAge: ACCESS_TOKEN_S * 1000 });
      response.cookie(REFRESH_COOKIE, tokens.refreshToken, { ...refresh, maxAge: SESSION_IDLE_S * 1000 });
    },
    clear(response: Response): void {
      response.clearCookie(ACCESS_COOKIE, access);
      response.clearCookie(REFRESH_COOKIE, refresh);
    },
    setGuest(response: Response, token: string): void {
      response.cookie(GUEST_COOKIE, token, { ...access, maxAge: GUEST_PASS_S * 1000 });
    },
    setCsrf(response: Response, token: string): void {
      response.cookie(CSRF_COOKIE, token, csrf);
    },
  };
}
export type Cookies = ReturnType<typeof createCookies>;
