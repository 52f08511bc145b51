import { createHash, randomBytes, randomUUID } from 'node:crypto';
import type { Me, SignInBody } from '#shared/contracts/session.ts';
import { PROGRAM_VERSION } from '../../config/program-version.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type { SessionRecord } from '../../data/repositories/sessions.repository.ts';
import type { Actor } from '../permissions.ts';
import { ProblemError } from '../problem-error.ts';
import type { AccessTokens } from './access-tokens.ts';
import type { Passwords } from './passwords.ts';
import type { Revocation, SessionNotices } from './session-notices.ts';

/** A session ends after this time however often it is refreshed, and after this time without a refresh. */
export const SESSION_LONGEST_S = 30 * 24 * 3600;
export const SESSION_IDLE_S = 7 * 24 * 3600;
/** Parallel tabs may refresh with the same token within this time; later it is theft and ends the session. */
export const REUSE_GRACE_S = 10;
const KEEP_ENDED_S = 30 * 24 * 3600;
const TOKEN_BYTES = 32;
const MAX_AGENT_LENGTH = 255;

/** Where a request came from, for the session list and the audit trail. */
export interface Caller {
  address: string | null;
  agent: string | null;
}

export interface OpenedSession {
  me: Me;
  accessToken: string;
  refreshToken: string;
}

export interface SessionsSetup {
  database: Database;
  passwords: Passwords;
  accessTokens: AccessTokens;
  notices: SessionNotices;
  now: () => Date;
}

const hashOf = (token: string): string => createHash('sha256').update(token).digest('hex');
const later = (date: Date, seconds: number): Date => new Date(date.getTime() + seconds * 1000);
const expired = () => new ProblemError('session-expired', 'The session has ended; sign in again.');
const deactivated = () => new ProblemError('deactivated', 'This account is deactivated; ask your administrator.');

export function createSessionsService({ database, passwords, accessTokens, notices, now }: SessionsSetup) {
  const profile = async (organisationId: string, personId: string): Promise<Me> => {
    const found = await database.people.findProfile(organisationId, personId);
    if (found === null) throw expired();
    const { id, displayName, email, units, timeZone } = found.person;
    const { organisation, roles } = found;
    return { person: { id, displayName, email, units, timeZone }, organisation, roles, version: PROGRAM_VERSION };
  };

  const newToken = async (on: Repositories, sessionId: string, at: Date): Promise<string> => {
    const token = randomBytes(TOKEN_BYTES).toString('base64url');
    await on.sessions.insertToken(hashOf(token), sessionId, at);
    return token;
  };

  const endedBy = (session: SessionRecord, at: Date): ProblemError | null => {
    if (session.revokedAt !== null || session.expiresAt <= at) return expired();
    return session.status === 'active' ? null : deactivated();
  };

  const sessionEntry = (
    session: { id: string; personId: string; organisationId: string },
    deed: string,
    caller: Caller,
  ) => ({
    organisationId: session.organisationId,
    at: now(),
    actorId: session.personId,
    deed,
    subjectKind: 'session',
    subjectId: session.id,
    detail: {},
    address: caller.address,
  });

  return {
    profile: (actor: Actor): Promise<Me> => profile(actor.organisationId, actor.personId),

    /**
     * Opens a session. Unknown address and wrong password give the same answer after the same work; only who knows the
     * password learns that the account is deactivated.
     */
    async signIn({ email, password }: SignInBody, caller: Caller): Promise<OpenedSession> {
      const person = await database.people.findForSignIn(email);
      const matches = await passwords.matches(password, person?.passwordHash ?? null);
      if (person === null || !matches) {
        throw new ProblemError('wrong-credentials', 'E-mail address and password do not match.');
      }
      if (person.status !== 'active') throw deactivated();
      const id = randomUUID();
      const at = now();
      const { organisationId, id: personId } = person;
      const refreshToken = await database.transaction(async (on) => {
        await on.sessions.insert({
          id,
          personId,
          at,
          expiresAt: later(at, SESSION_LONGEST_S),
          address: caller.address,
          agent: caller.agent?.slice(0, MAX_AGENT_LENGTH) ?? null,
        });
        await on.audit.append(sessionEntry({ id, personId, organisationId }, 'session.opened', caller));
        return newToken(on, id, at);
      });
      return {
        me: await profile(organisationId, personId),
        accessToken: accessTokens.sign(personId, id),
        refreshToken,
      };
    },

    /** Who a request comes from; read afresh, so that a revoked session or a lost role counts at once. */
    async authenticate(accessToken: string | undefined): Promise<Actor> {
      if (accessToken === undefined) throw new ProblemError('unauthenticated', 'Sign in first.');
      const check = accessTokens.check(accessToken);
      if (check.state === 'expired') throw expired();
      if (check.state !== 'valid') throw new ProblemError('unauthenticated', 'Sign in first.');
      const session = await database.sessions.find(check.sessionId);
      if (session === null || session.personId !== check.personId) throw expired();
      const ended = endedBy(session, now());
      if (ended !== null) throw ended;
      const { personId, organisationId, roles } = session;
      return { personId, organisationId, sessionId: session.id, roles };
    },

    /** Exchanges a refresh token for the next one. */
    async refresh(refreshToken: string | undefined, caller: Caller): Promise<OpenedSession> {
      if (refreshToken === undefined) throw new ProblemError('unauthenticated', 'Sign in first.');
      const tokenHash = hashOf(refreshToken);
      const at = now();
      const outcome = await database.transaction(async (on) => {
        const token = await on.sessions.takeToken(tokenHash);
        if (token === null) return expired();
        const { session } = token;
        const ended = endedBy(session, at);
        if (ended !== null) return ended;
        if (later(token.issuedAt, SESSION_IDLE_S) <= at) return expired();
        if (token.usedAt !== null && later(token.usedAt, REUSE_GRACE_S) < at) {
          await on.sessions.revoke(session.id, 'token-reused', at);
          await on.audit.append(sessionEntry(session, 'session.token-reused', caller));
          return { session, next: null };
        }
        await on.sessions.markTokenUsed(tokenHash, at);
        await on.sessions.touch(session.id, at);
        return { session, next: await newToken(on, session.id, at) };
      });
      if (outcome instanceof ProblemError) throw outcome;
      const { session, next } = outcome;
      if (next === null) {
        notices.announce({ sessionId: session.id, personId: session.personId, reason: 'token-reused' });
        throw expired();
      }
      return {
        me: await profile(session.organisationId, session.personId),
        accessToken: accessTokens.sign(session.personId, session.id),
        refreshToken: next,
      };
    },

    /** Ends the session that either token names. Signing out twice is no error. */
    async signOut(tokens: { access: string | undefined; refresh: string | undefined }, caller: Caller): Promise<void> {
      const check = tokens.access === undefined ? null : accessTokens.check(tokens.access);
      const id =
        check?.state === 'valid'
          ? check.sessionId
          : tokens.refresh === undefined
            ? null
            : await database.sessions.idOfToken(hashOf(tokens.refresh));
      const session = id === null ? null : await database.sessions.find(id);
      if (session === null || session.revokedAt !== null) return;
      await database.transaction(async (on) => {
        await on.sessions.revoke(session.id, 'signed-out', now());
        await on.audit.append(sessionEntry(session, 'session.closed', caller));
      });
      notices.announce({ sessionId: session.id, personId: session.personId, reason: 'signed-out' });
    },

    /** Ends every session of the actor, this one included. */
    async signOutEverywhere(actor: Actor, caller: Caller): Promise<void> {
      await database.transaction(async (on) => {
        await on.sessions.revokeAllOf(actor.personId, 'signed-out-everywhere', now());
        await on.audit.append(sessionEntry({ ...actor, id: actor.sessionId }, 'session.closed-everywhere', caller));
      });
      notices.announce({ sessionId: null, personId: actor.personId, reason: 'signed-out-everywhere' });
    },

    onRevoked: (listener: (revocation: Revocation) => void): (() => void) => notices.listen(listener),

    /** Removes what ended long ago. */
    async tidy(): Promise<void> {
      await database.sessions.removeEndedBefore(later(now(), -KEEP_ENDED_S));
    },
  };
}

export type SessionsService = ReturnType<typeof createSessionsService>;
