import { personStateSchema } from '#shared/contracts/administration.ts';
import type { Role } from '#shared/contracts/session.ts';
import { type EntityManager, IsNull, LessThan, MoreThan, Not } from 'typeorm';
import { z } from 'zod';
import { RefreshTokenEntity } from '../entities/refresh-token.entity.ts';
import { SessionEntity } from '../entities/session.entity.ts';
import { type PersonStatus, rolesOf } from './people.repository.ts';

export interface NewSession {
  id: string;
  personId: string;
  at: Date;
  expiresAt: Date;
  address: string | null;
  agent: string | null;
}

/** Who a session belongs to and whether it still holds. */
export interface SessionRecord {
  id: string;
  personId: string;
  organisationId: string;
  status: PersonStatus;
  roles: Role[];
  expiresAt: Date;
  revokedAt: Date | null;
}

export interface RefreshTokenRecord {
  issuedAt: Date;
  usedAt: Date | null;
  session: SessionRecord;
}

const sessionRowSchema = z.object({
  id: z.string(),
  personId: z.string(),
  organisationId: z.string(),
  status: personStateSchema,
  roles: z.string().nullable(),
  expiresAt: z.date(),
  revokedAt: z.date().nullable(),
});

/** Every request asks this: one plain statement, because building it anew costs more than sending it. */
const FIND_SESSION = `
  SELECT s.id, s.person_id AS personId, p.organisation_id AS organisationId, p.status,
    (SELECT GROUP_CONCAT(r.role) FROM person_role r WHERE r.person_id = p.id) AS roles,
    s.expires_at AS expiresAt, s.revoked_at AS revokedAt
  FROM session s INNER JOIN person p ON p.id = s.person_id WHERE s.id = ?`;

/** A session that could still be used, for its owner's list. */
export interface OpenSessionRecord {
  id: string;
  agent: string | null;
  address: string | null;
  createdAt: Date;
  lastUsedAt: Date;
}

export function createSessionsRepository(manager: EntityManager) {
  const findSession = async (id: string): Promise<SessionRecord | null> => {
    const rows = z.array(sessionRowSchema).parse(await manager.query(FIND_SESSION, [id]));
    const row = rows.at(0);
    if (row === undefined) return null;
    return { ...row, roles: rolesOf(row.roles?.split(',').map((role) => ({ role }))) };
  };

  return {
    find: findSession,

    async insert({ at, ...session }: NewSession): Promise<void> {
      await manager.insert(SessionEntity, {
        ...session,
        createdAt: at,
        lastUsedAt: at,
        revokedAt: null,
        revokedFor: null,
      });
    },

    async insertToken(tokenHash: string, sessionId: string, at: Date): Promise<void> {
      await manager.insert(RefreshTokenEntity, { tokenHash, sessionId, issuedAt: at, usedAt: null });
    },

    /** Locks the token's row, so that two uses at the same time come one after the other. */
    async takeToken(tokenHash: string): Promise<RefreshTokenRecord | null> {
      const token = await manager.findOne(RefreshTokenEntity, {
        where: { tokenHash },
        lock: { mode: 'pessimistic_write' },
      });
      if (token === null) return null;
      const session = await findSession(token.sessionId);
      return session === null ? null : { issuedAt: token.issuedAt, usedAt: token.usedAt, session };
    },

    async markTokenUsed(tokenHash: string, at: Date): Promise<void> {
      await manager.update(RefreshTokenEntity, { tokenHash, usedAt: IsNull() }, { usedAt: at });
    },

    async touch(sessionId: string, at: Date): Promise<void> {
      await manager.update(SessionEntity, { id: sessionId }, { lastUsedAt: at });
    },

    /** Sessions neither ended nor run out, the latest used first. */
    async openOf(personId: string, at: Date, usedAfter: Date): Promise<OpenSessionRecord[]> {
      return manager.find(SessionEntity, {
        select: { id: true, agent: true, address: true, createdAt: true, lastUsedAt: true },
        where: { personId, revokedAt: IsNull(), expiresAt: MoreThan(at), lastUsedAt: MoreThan(usedAfter) },
        order: { lastUsedAt: 'DESC', id: 'ASC' },
      });
    },

    /** The session a refresh token belongs to, whatever its state; for signing out with an expired access token. */
    async idOfToken(tokenHash: string): Promise<string | null> {
      const token = await manager.findOne(RefreshTokenEntity, { where: { tokenHash } });
      return token?.sessionId ?? null;
    },

    async revoke(sessionId: string, reason: string, at: Date): Promise<void> {
      await manager.update(
        SessionEntity,
        { id: sessionId, revokedAt: IsNull() },
        { revokedAt: at, revokedFor: reason },
      );
    },

    async revokeAllOf(personId: string, reason: string, at: Date): Promise<void> {
      await manager.update(SessionEntity, { personId, revokedAt: IsNull() }, { revokedAt: at, revokedFor: reason });
    },

    async revokeOthers(personId: string, keptId: string, reason: string, at: Date): Promise<void> {
      await manager.update(
        SessionEntity,
        { personId, id: Not(keptId), revokedAt: IsNull() },
        { revokedAt: at, revokedFor: reason },
      );
    },

    /** Removes sessions, with their tokens, that ended before `before`. */
    async removeEndedBefore(before: Date): Promise<void> {
      await manager.delete(SessionEntity, { expiresAt: LessThan(before) });
      await manager.delete(SessionEntity, { revokedAt: LessThan(before) });
    },
  };
}

export type SessionsRepository = ReturnType<typeof createSessionsRepository>;
