/** Who may do what. The only such table; use cases ask it, HTTP and sockets only pass the actor on. */
import type { ClassClientEvents } from '#shared/contracts/class-socket.ts';
import type { Role } from '#shared/contracts/session.ts';
import type { MemberRole } from '#shared/scenario/class-log.ts';
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
  /** The whole file, talking point included. */
  'scenario.export': ['instructor', 'engineer'],
  'attempt.fly': ['trainee', 'instructor'],
  'attempt.read-own': ['trainee', 'instructor', 'engineer', 'administrator'],
  'attempt.read-others': ['instructor', 'administrator'],
  'attempt.remark': ['instructor'],
  'attempt.sign-off': ['instructor'],
  'class.run': ['instructor'],
  'class.join': ['trainee', 'instructor', 'engineer', 'administrator'],
  'class.read': ['instructor', 'administrator'],
  'playlist.read': ['instructor'],
  'playlist.edit': ['instructor'],
  'assignment.read-own': ['trainee', 'instructor', 'engineer', 'administrator'],
  'assignment.read': ['instructor', 'administrator'],
  'assignment.edit': ['instructor'],
  'record.read-own': ['trainee', 'instructor', 'engineer', 'administrator'],
  'record.read': ['instructor', 'administrator'],
  'record.correct': ['instructor'],
  'record.rule': ['administrator'],
  'people.look-after': ['administrator'],
  'cohort.edit': ['instructor', 'administrator'],
  'system.read': ['administrator'],
  'outbox.read': ['administrator'],
  'organisation.edit': ['administrator'],
  'audit.read': ['administrator'],
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

/** What a member of a class may send over the socket. Whose turn it is, the class itself knows. */
const CLASS_EVENTS = {
  'class:enter': ['instructor', 'trainee', 'guest'],
  'class:leave': ['instructor', 'trainee', 'guest'],
  'class:entries': ['instructor', 'trainee', 'guest'],
  'class:control': ['instructor'],
  'board:follow': ['instructor'],
  'run:take': ['instructor', 'trainee', 'guest'],
  'run:chunk': ['instructor', 'trainee', 'guest'],
  'run:catch-up': ['instructor', 'trainee', 'guest'],
  'run:complete': ['instructor', 'trainee', 'guest'],
  'run:differs': ['instructor', 'trainee', 'guest'],
  'run:stands': ['instructor', 'trainee', 'guest'],
  'run:inputs': ['instructor', 'trainee', 'guest'],
  'run:telemetry': ['trainee', 'guest', 'instructor'],
  'view:move': ['instructor'],
  'member:tell': ['instructor', 'trainee', 'guest'],
} as const satisfies Record<keyof ClassClientEvents, readonly MemberRole[]>;

/** @throws {ProblemError} forbidden */
export function requireClassEvent(role: MemberRole, event: keyof ClassClientEvents): void {
  const allowed: readonly MemberRole[] = CLASS_EVENTS[event];
  if (!allowed.includes(role)) throw new ProblemError('forbidden', 'Your role in this class does not allow this.');
}
