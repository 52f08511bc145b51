import { randomUUID } from 'node:crypto';
import type { ChangePassword, Link, TakeLink } from '#shared/contracts/administration.ts';
import type { Database } from '../../data/database.ts';
import type { AccountLinkRecord } from '../../data/repositories/account-links.repository.ts';
import type { Actor } from '../permissions.ts';
import { ProblemError } from '../problem-error.ts';
import type { Passwords } from '../sessions/passwords.ts';
import type { SessionNotices } from '../sessions/session-notices.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import { resetText } from './account-messages.ts';
import { linkHash, newLinkToken } from './people.service.ts';

export const RESET_HOURS = 2;
const HOUR_MS = 3600 * 1000;

const REMEDIES = {
  invitation: 'Ask your administrator to send the invitation again.',
  reset: 'Ask for a new one on the sign-in page.',
  address: 'Change the address again on your profile page.',
} as const;

/** @throws {ProblemError} with what to do about a link that cannot be used */
export function usableLink(link: AccountLinkRecord | null, at: Date): AccountLinkRecord {
  if (link === null) throw new ProblemError('not-found', 'This link is not known. Copy it whole from the message.');
  const remedy = REMEDIES[link.kind];
  if (link.usedAt !== null) throw new ProblemError('conflict', `This link has been used or replaced. ${remedy}`);
  if (link.expiresAt <= at) throw new ProblemError('conflict', `This link has run out. ${remedy}`);
  if (link.status === 'deactivated') {
    throw new ProblemError('deactivated', 'This account is deactivated; ask your administrator.');
  }
  return link;
}

/** What a person does with links from messages, and with the own password. */
export function createAccountLinks(setup: {
  database: Database;
  passwords: Passwords;
  notices: SessionNotices;
  address: () => string;
  now: () => Date;
}) {
  const { database, passwords, notices, address, now } = setup;

  return {
    async look(token: string): Promise<Link> {
      const link = usableLink(await database.accountLinks.find(linkHash(token), false), now());
      const { kind, displayName, email, newEmail, organisation } = link;
      return { kind, displayName, email: newEmail ?? email, organisation };
    },

    /** Sets the password; the link is used up and all sessions end. */
    async take({ token, password }: TakeLink, caller: Caller): Promise<void> {
      setsPassword(usableLink(await database.accountLinks.find(linkHash(token), false), now()));
      const passwordHash = await passwords.hash(password);
      const personId = await database.transaction(async (on) => {
        const link = setsPassword(usableLink(await on.accountLinks.find(linkHash(token), true), now()));
        await on.accountLinks.endAllOf(link.personId, now());
        await on.people.setPassword(link.personId, passwordHash, 'active');
        await on.sessions.revokeAllOf(link.personId, 'password-changed', now());
        await on.audit.append({
          organisationId: link.organisationId,
          at: now(),
          actorId: link.personId,
          deed: link.kind === 'invitation' ? 'person.joined' : 'person.password-reset',
          subjectKind: 'person',
          subjectId: link.personId,
          detail: {},
          address: caller.address,
        });
        return link.personId;
      });
      notices.announce({ sessionId: null, personId, reason: 'signed-out-everywhere' });
    },

    /** Queues a message when the address belongs to an active person; says nothing either way. */
    async askReset(email: string, caller: Caller): Promise<void> {
      const found = await database.people.findForSignIn(email);
      if (found === null || found.status !== 'active') return;
      const at = now();
      await database.transaction(async (on) => {
        const profile = await on.people.findProfile(found.organisationId, found.id);
        if (profile === null) return;
        const { token, tokenHash } = newLinkToken();
        const expiresAt = new Date(at.getTime() + RESET_HOURS * HOUR_MS);
        await on.accountLinks.replace({ tokenHash, kind: 'reset', personId: found.id, at, expiresAt });
        const { displayName: name, email: own } = profile.person;
        const { subject, text } = resetText({ name, link: `${address()}/welcome/${token}`, hours: RESET_HOURS });
        const { organisationId } = found;
        const mail = { id: randomUUID(), organisationId, email: own, name, subject, text };
        await on.outbox.insert({ ...mail, calendarMethod: null, calendar: null, createdAt: at });
        await on.audit.append({
          organisationId,
          at,
          actorId: null,
          deed: 'person.reset-asked',
          subjectKind: 'person',
          subjectId: found.id,
          detail: {},
          address: caller.address,
        });
      });
    },

    /** Changes the own password and ends every other session. */
    async changePassword(actor: Actor, { current, password }: ChangePassword, caller: Caller): Promise<void> {
      const hash = await database.people.passwordHash(actor.personId);
      if (!(await passwords.matches(current, hash))) {
        const field = { field: '/current', rule: 'is your password', remedy: 'Type the password you sign in with' };
        const message = 'The current password is wrong';
        throw new ProblemError('validation', `${message}.`, { errors: [{ ...field, message }] });
      }
      const passwordHash = await passwords.hash(password);
      await database.transaction(async (on) => {
        await on.people.setPassword(actor.personId, passwordHash, 'active');
        await on.accountLinks.endAllOf(actor.personId, now());
        await on.sessions.revokeOthers(actor.personId, actor.sessionId, 'password-changed', now());
        await on.audit.append({
          organisationId: actor.organisationId,
          at: now(),
          actorId: actor.personId,
          deed: 'person.password-changed',
          subjectKind: 'person',
          subjectId: actor.personId,
          detail: {},
          address: caller.address,
        });
      });
    },
  };
}
function setsPassword(link: AccountLinkRecord): AccountLinkRecord {
  if (link.kind !== 'address') return link;
  throw new ProblemError('conflict', 'This link confirms an address and sets no password. Open it again.');
}
export type AccountLinks = ReturnType<typeof createAccountLinks>;
