import { randomUUID } from 'node:crypto';
import type { NewAddress, OpenSession, ProfileBody } from '#shared/contracts/account.ts';
import type { Database, Repositories } from '../../data/database.ts';
import { isDuplicateKey } from '../../data/duplicate-key.ts';
import type { AccountLinkRecord } from '../../data/repositories/account-links.repository.ts';
import { emailKey } from '../../data/repositories/people.repository.ts';
import { type Actor, requireDeed } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Passwords } from '../sessions/passwords.ts';
import type { SessionNotices } from '../sessions/session-notices.ts';
import { type Caller, SESSION_IDLE_S } from '../sessions/sessions.service.ts';
import { usableLink } from './account-links.ts';
import { addressChangedText, addressText } from './account-messages.ts';
import { linkHash, newLinkToken } from './people.service.ts';

export const ADDRESS_HOURS = 24;
const HOUR_MS = 3600 * 1000;

const fieldProblem = (field: string, rule: string, message: string, remedy: string): ProblemError =>
  new ProblemError('validation', `${message}.`, { errors: [{ field, rule, message, remedy }] });

/** What a person changes of their own, and the sessions open in a person's name. */
export function createProfileService(setup: {
  database: Database;
  passwords: Passwords;
  notices: SessionNotices;
  address: () => string;
  now: () => Date;
}) {
  const { database, passwords, notices, address, now } = setup;

  const entry = (
    organisationId: string,
    actorId: string,
    caller: Caller,
    deed: string,
    personId: string,
    detail: Record<string, unknown> = {},
  ) => ({
    organisationId,
    at: now(),
    actorId,
    deed,
    subjectKind: 'person',
    subjectId: personId,
    detail,
    address: caller.address,
  });

  const openOf = async (personId: string, here: string): Promise<OpenSession[]> => {
    const at = now();
    const rows = await database.sessions.openOf(personId, at, new Date(at.getTime() - SESSION_IDLE_S * 1000));
    return rows.map(({ id, agent, address: from, createdAt, lastUsedAt }) => ({
      id,
      agent,
      address: from,
      openedAt: createdAt.toISOString(),
      lastUsedAt: lastUsedAt.toISOString(),
      here: id === here,
    }));
  };

  const end = async (actor: Actor, personId: string, sessionId: string, caller: Caller): Promise<void> => {
    await database.transaction(async (on) => {
      const session = await on.sessions.find(sessionId);
      const belongs = session?.personId === personId && session.organisationId === actor.organisationId;
      if (!belongs || session.revokedAt !== null) throw notFound('session');
      await on.sessions.revoke(sessionId, 'signed-out', now());
      await on.audit.append({
        ...entry(actor.organisationId, actor.personId, caller, 'session.ended', sessionId, { person: personId }),
        subjectKind: 'session',
      });
    });
    notices.announce({ sessionId, personId, reason: 'signed-out' });
  };

  const mail = async (
    on: Repositories,
    to: { organisationId: string; email: string; name: string },
    message: { subject: string; text: string },
  ): Promise<void> => {
    await on.outbox.insert({
      id: randomUUID(),
      ...to,
      ...message,
      calendarMethod: null,
      calendar: null,
      createdAt: now(),
    });
  };

  return {
    ownSessions: (actor: Actor): Promise<OpenSession[]> => openOf(actor.personId, actor.sessionId),

    endOwnSession: (actor: Actor, sessionId: string, caller: Caller): Promise<void> =>
      end(actor, actor.personId, sessionId, caller),

    async sessionsOf(actor: Actor, personId: string): Promise<OpenSession[]> {
      requireDeed(actor, 'people.look-after');
      if (!(await database.people.exists(actor.organisationId, personId))) throw notFound('person');
      return openOf(personId, actor.sessionId);
    },

    async endSessionOf(actor: Actor, personId: string, sessionId: string, caller: Caller): Promise<void> {
      requireDeed(actor, 'people.look-after');
      await end(actor, personId, sessionId, caller);
    },

    async saveProfile(actor: Actor, body: ProfileBody, caller: Caller): Promise<void> {
      if (body.timeZone !== null && !isZone(body.timeZone)) {
        throw fieldProblem('/timeZone', 'zone', 'This is not a time zone', 'Choose one of the list.');
      }
      await database.transaction(async (on) => {
        await on.people.lock(actor.organisationId, actor.personId);
        const found = await on.people.findProfile(actor.organisationId, actor.personId);
        if (found === null) throw notFound('person');
        const { displayName, units, timeZone } = found.person;
        const before = { displayName, units, timeZone };
        const changed = (Object.keys(before) as (keyof typeof before)[]).filter((name) => before[name] !== body[name]); // keys of a literal
        if (changed.length === 0) return;
        await on.people.setProfile(actor.personId, body);
        const detail = Object.fromEntries(changed.map((name) => [name, { before: before[name], after: body[name] }]));
        await on.audit.append(
          entry(actor.organisationId, actor.personId, caller, 'person.profile-changed', actor.personId, detail),
        );
      });
    },

    /**
     * Sends a link to the new address; nothing changes before it is opened. The answer does not tell whether the
     * address belongs to somebody else: then its owner gets no message.
     */
    async askNewAddress(actor: Actor, { email, password }: NewAddress, caller: Caller): Promise<void> {
      const hash = await database.people.passwordHash(actor.personId);
      if (!(await passwords.matches(password, hash))) {
        throw fieldProblem('/password', 'is your password', 'The password is wrong', 'Type the one you sign in with.');
      }
      const at = now();
      const { organisationId, personId } = actor;
      await database.transaction(async (on) => {
        const profile = await on.people.findProfile(organisationId, personId);
        if (profile === null) throw notFound('person');
        const { displayName: name, email: own } = profile.person;
        if (own === email) {
          throw fieldProblem('/email', 'new', 'This is your address already', 'Give the new one.');
        }
        const holder = await on.people.findForSignIn(email);
        await on.audit.append(entry(organisationId, personId, caller, 'person.address-asked', personId, { email }));
        if (holder !== null && holder.id !== personId) return;
        const { token, tokenHash } = newLinkToken();
        const expiresAt = new Date(at.getTime() + ADDRESS_HOURS * HOUR_MS);
        await on.accountLinks.replace({ tokenHash, kind: 'address', personId, at, expiresAt, newEmail: email });
        const message = addressText({ name, link: `${address()}/welcome/${token}`, hours: ADDRESS_HOURS });
        await mail(on, { organisationId, email, name }, message);
      });
    },

    /** Takes the link of a change of address; the address before gets a word of it. */
    async confirmAddress(token: string, caller: Caller): Promise<void> {
      const tokenHash = linkHash(token);
      const taken = () =>
        new ProblemError(
          'conflict',
          'This address belongs to somebody else by now. Choose another on your profile page.',
        );
      try {
        await database.transaction(async (on) => {
          const link: AccountLinkRecord = usableLink(await on.accountLinks.find(tokenHash, true), now());
          if (link.kind !== 'address' || link.newEmail === null) {
            throw new ProblemError('conflict', 'This link sets a password; open it again and choose one.');
          }
          const { personId, organisationId, email: before, newEmail: after, displayName: name } = link;
          const holder = await on.people.findForSignIn(after);
          if (holder !== null && holder.id !== personId) throw taken();
          await on.accountLinks.endAllOf(personId, now());
          await on.people.setEmail(personId, after);
          await on.audit.append(
            entry(organisationId, personId, caller, 'person.address-changed', personId, { before, after }),
          );
          if (emailKey(before) === emailKey(after)) return;
          await mail(on, { organisationId, email: before, name }, addressChangedText({ name, after }));
        });
      } catch (error) {
        if (isDuplicateKey(error)) throw taken();
        throw error;
      }
    },
  };
}
export type ProfileService = ReturnType<typeof createProfileService>;

function isZone(name: string): boolean {
  try {
    new Intl.DateTimeFormat('en-GB', { timeZone: name });
    return true;
  } catch (error) {
    if (error instanceof RangeError) return false;
    throw error;
  }
}
