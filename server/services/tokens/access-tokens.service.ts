import { createHash, randomBytes, randomUUID } from 'node:crypto';
import {
  MOST_TOKENS,
  TOKEN_PREFIX,
  type AccessToken,
  type MadeToken,
  type NewToken,
  type TokenArea,
  type TokenScope,
} from '#shared/contracts/tokens.ts';
import type { Database } from '../../data/database.ts';
import type { AccessTokenRecord } from '../../data/repositories/access-tokens.repository.ts';
import type { Actor } from '../permissions.ts';
import { ProblemError, notFound } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';

const TOKEN_BYTES = 30;
const SHOWN_CHARACTERS = 10;
const DAY_MS = 24 * 3600 * 1000;
/** Uses closer together than this are not written down one by one. */
const TOUCH_AFTER_MS = 60_000;

const hashOf = (token: string): string => createHash('sha256').update(token).digest('hex');
const refused = (detail: string) => new ProblemError('unauthenticated', detail);

/** The actor of a program, and what its token may reach. */
export interface TokenActor {
  actor: Actor;
  scopes: readonly TokenScope[];
}

function shown(record: AccessTokenRecord, at: Date): AccessToken {
  const { id, name, beginning, scopes, createdAt, expiresAt, lastUsedAt, revokedAt } = record;
  return {
    id,
    name,
    beginning,
    scopes,
    createdAt: createdAt.toISOString(),
    expiresAt: expiresAt.toISOString(),
    lastUsedAt: lastUsedAt?.toISOString() ?? null,
    state: revokedAt !== null ? 'revoked' : expiresAt <= at ? 'expired' : 'valid',
  };
}

/** Tokens of a person for programs. The person's roles go on deciding; scopes only narrow. */
export function createAccessTokensService({ database, now }: { database: Database; now: () => Date }) {
  const entry = (actor: Actor, deed: string, id: string, detail: Record<string, unknown>, caller: Caller) => ({
    organisationId: actor.organisationId,
    at: now(),
    actorId: actor.personId,
    deed,
    subjectKind: 'token',
    subjectId: id,
    detail,
    address: caller.address,
  });

  return {
    async list(actor: Actor): Promise<{ items: AccessToken[] }> {
      const at = now();
      return { items: (await database.accessTokens.listOf(actor.personId)).map((record) => shown(record, at)) };
    },

    async make(actor: Actor, wanted: NewToken, caller: Caller): Promise<MadeToken> {
      const at = now();
      const token = `${TOKEN_PREFIX}${randomBytes(TOKEN_BYTES).toString('base64url')}`;
      const scopes = [...new Set(wanted.scopes)].sort();
      const record = {
        id: randomUUID(),
        name: wanted.name,
        beginning: token.slice(0, SHOWN_CHARACTERS),
        scopes,
        expiresAt: new Date(at.getTime() + wanted.days * DAY_MS),
      };
      await database.transaction(async (on) => {
        if ((await on.accessTokens.countValid(actor.personId, at)) >= MOST_TOKENS) {
          throw new ProblemError('conflict', `You have ${MOST_TOKENS} tokens that hold. Revoke one first.`);
        }
        await on.accessTokens.insert({ ...record, personId: actor.personId, tokenHash: hashOf(token), at });
        const detail = { name: record.name, scopes, expiresAt: record.expiresAt.toISOString() };
        await on.audit.append(entry(actor, 'token.made', record.id, detail, caller));
      });
      return { ...shown({ ...record, createdAt: at, lastUsedAt: null, revokedAt: null }, at), token };
    },

    async revoke(actor: Actor, id: string, caller: Caller): Promise<void> {
      await database.transaction(async (on) => {
        if (!(await on.accessTokens.revoke(actor.personId, id, now()))) throw notFound('token');
        await on.audit.append(entry(actor, 'token.revoked', id, {}, caller));
      });
    },

    /** Who a program acts for; read afresh, so that a revoked token or a lost role counts at once. */
    async authenticate(token: string): Promise<TokenActor> {
      const at = now();
      const owner = token.startsWith(TOKEN_PREFIX) ? await database.accessTokens.findOwner(hashOf(token)) : null;
      if (owner === null) throw refused('This token is not known. Make one under Account.');
      if (owner.revokedAt !== null) throw refused('This token was revoked. Make another under Account.');
      if (owner.expiresAt <= at) throw refused('This token has expired. Make another under Account.');
      if (owner.status !== 'active') throw refused('The account of this token is deactivated.');
      const { personId, organisationId, roles, scopes } = owner;
      if (owner.lastUsedAt === null || at.getTime() - owner.lastUsedAt.getTime() > TOUCH_AFTER_MS)
        await database.accessTokens.touch(owner.id, at);
      return { actor: { personId, organisationId, sessionId: owner.id, roles }, scopes };
    },
  };
}
export type AccessTokensService = ReturnType<typeof createAccessTokensService>;

/** @throws {ProblemError} forbidden, naming the scope that is wanted */
export function requireScope(scopes: readonly TokenScope[], area: TokenArea, writes: boolean): void {
  const wanted: TokenScope = writes ? `${area}:write` : `${area}:read`;
  if (scopes.includes(wanted) || (!writes && scopes.includes(`${area}:write`))) return;
  throw new ProblemError('forbidden', `This token lacks the scope ${wanted}.`);
}
