import type { EntityManager } from 'typeorm';
import { z } from 'zod';
import { tokenScopeSchema, type TokenScope } from '#shared/contracts/tokens.ts';
import { roleSchema } from '#shared/contracts/session.ts';

const scopesText = z.string().transform((text) => z.array(tokenScopeSchema).parse(text.split(' ')));
const tokenRowSchema = z.object({
  id: z.string(),
  name: z.string(),
  beginning: z.string(),
  scopes: scopesText,
  createdAt: z.date(),
  expiresAt: z.date(),
  lastUsedAt: z.date().nullable(),
  revokedAt: z.date().nullable(),
});
export type AccessTokenRecord = z.infer<typeof tokenRowSchema>;

const ownerSchema = z.object({
  id: z.string(),
  personId: z.string(),
  organisationId: z.string(),
  status: z.enum(['invited', 'active', 'deactivated']),
  scopes: scopesText,
  roles: z
    .string()
    .nullable()
    .transform((text) => z.array(roleSchema).parse(text === null ? [] : text.split(' '))),
  expiresAt: z.date(),
  lastUsedAt: z.date().nullable(),
  revokedAt: z.date().nullable(),
});
export type TokenOwner = z.infer<typeof ownerSchema>;

const COLUMNS = `id, name, beginning, scopes, created_at AS createdAt, expires_at AS expiresAt,
  last_used_at AS lastUsedAt, revoked_at AS revokedAt`;

/** Personal access tokens; only their digests are kept. */
export function createAccessTokensRepository(manager: EntityManager) {
  return {
    async insert(token: {
      id: string;
      personId: string;
      name: string;
      beginning: string;
      tokenHash: string;
      scopes: readonly TokenScope[];
      at: Date;
      expiresAt: Date;
    }): Promise<void> {
      const { id, personId, name, beginning, tokenHash, scopes, at, expiresAt } = token;
      await manager.query(
        `INSERT INTO access_token (id, person_id, name, beginning, token_hash, scopes, created_at, expires_at)
         VALUES (?, ?, ?, ?, ?, ?, ?, ?)`,
        [id, personId, name, beginning, tokenHash, scopes.join(' '), at, expiresAt],
      );
    },

    async listOf(personId: string): Promise<AccessTokenRecord[]> {
      const rows: unknown = await manager.query(
        `SELECT ${COLUMNS} FROM access_token WHERE person_id = ? ORDER BY created_at DESC, id`,
        [personId],
      );
      return z.array(tokenRowSchema).parse(rows);
    },

    /** Number of the person's tokens that still hold. */
    async countValid(personId: string, at: Date): Promise<number> {
      const rows: unknown = await manager.query(
        'SELECT COUNT(*) AS n FROM access_token WHERE person_id = ? AND revoked_at IS NULL AND expires_at > ?',
        [personId, at],
      );
      return z.tuple([z.object({ n: z.coerce.number() })]).parse(rows)[0].n;
    },

    async findOwner(tokenHash: string): Promise<TokenOwner | null> {
      const rows: unknown = await manager.query(
        `SELECT t.id, t.person_id AS personId, p.organisation_id AS organisationId, p.status, t.scopes,
           (SELECT GROUP_CONCAT(r.role SEPARATOR ' ') FROM person_role r WHERE r.person_id = p.id) AS roles,
           t.expires_at AS expiresAt, t.last_used_at AS lastUsedAt, t.revoked_at AS revokedAt
         FROM access_token t INNER JOIN person p ON p.id = t.person_id WHERE t.token_hash = ?`,
        [tokenHash],
      );
      return z.array(ownerSchema).parse(rows)[0] ?? null;
    },

    async touch(id: string, at: Date): Promise<void> {
      await manager.query('UPDATE access_token SET last_used_at = ? WHERE id = ?', [at, id]);
    },

    /** @returns false when the person has no such token that still holds */
    async revoke(personId: string, id: string, at: Date): Promise<boolean> {
      const done: unknown = await manager.query(
        'UPDATE access_token SET revoked_at = ? WHERE id = ? AND person_id = ? AND revoked_at IS NULL',
        [at, id, personId],
      );
      return z.object({ affectedRows: z.number() }).parse(done).affectedRows === 1;
    },
  };
}
export type AccessTokensRepository = ReturnType<typeof createAccessTokensRepository>;
