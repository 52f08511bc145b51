import type { RouteLocationNormalized, RouteLocationRaw } from 'vue-router';
import type { Role } from '#shared/contracts/session.ts';
import type { SessionState } from '../stores/session.store.ts';
import { homeFor } from './areas.ts';

/** What a guard needs to know about the session. */
export interface GuardSession {
  state: SessionState;
  roles: readonly Role[];
}

/** A return address is only ever a path of this site. */
export function safeReturn(value: unknown): string | null {
  if (typeof value !== 'string' || !value.startsWith('/') || value.startsWith('//') || value.includes('\\'))
    return null;
  return value.startsWith('/sign-in') || value === '/' ? null : value;
}

/** Where to go instead, or true to go on. Roles are shown by the page itself, so that the address stays. */
export function decide(
  to: Pick<RouteLocationNormalized, 'meta' | 'fullPath' | 'path' | 'query' | 'name'>,
  session: GuardSession,
): RouteLocationRaw | true {
  if (session.state === 'signed-in') {
    if (to.path === '/') return homeFor(session.roles);
    if (to.name === 'sign-in') return safeReturn(to.query['return']) ?? homeFor(session.roles);
    return true;
  }
  if (to.meta.open) return true;
  const back = safeReturn(to.fullPath);
  return { name: 'sign-in', query: back === null ? {} : { return: back } };
}

/** True when the person may see the page. Pages without a list are for everyone signed in. */
export function mayOpen(wanted: readonly Role[] | undefined, roles: readonly Role[]): boolean {
  return wanted === undefined || wanted.some((role) => roles.includes(role));
}
