/** Who may do what. The only such table; use cases ask it, HTTP and sockets only pass the actor on. */
import type { Role } from '#shared/contracts/session.ts';
import { ProblemError } from './problem-error.ts';

/** A signed-in person as every use case sees them. */
export interface Actor {
  personId: string;
  organisationId: string;
  sessionId: string;
  roles: readonly Role[];
}

const ALLOWED = {
  'airframe.read': ['engineer', 'instructor'],
  'airframe.edit': ['engineer'],
  'study.read': ['engineer', 'instructor'],
  'study.edit': ['engineer'],
  'scenario.read-published': ['trainee', 'instructor', 'engineer', 'administrator'],
  'scenario.read-draft': ['instructor'],
  'scenario.edit': ['instructor'],
  'attempt.fly': ['trainee', 'instructor'],
  'attempt.read-own': ['trainee', 'instructor', 'engineer', 'administrator'],
  'attempt.read-others': ['instructor', 'administrator'],
  'attempt.remark': ['instructor'],
  'attempt.sign-off': ['instructor'],
} as const satisfies Record<string, readonly Role[]>;

export type Deed = keyof typeof ALLOWED;
export const DEEDS = Object.keys(ALLOWED) as Deed[]; // keys of a const object

export function rolesAllowed(deed: Deed): readonly Role[] {
  return ALLOWED[deed];
}

export function may(actor: Actor, deed: Deed): boolean {
  const allowed = rolesAllowed(deed);
  return actor.roles.some((role) => allowed.includes(role));
}

/** @throws {ProblemError} forbidden */
export function requireDeed(actor: Actor, deed: Deed): void {
  if (!may(actor, deed)) throw new ProblemError('forbidden', 'Your role does not allow this.');
}
