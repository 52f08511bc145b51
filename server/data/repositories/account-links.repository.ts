import type { EntityManager } from 'typeorm';
import { z } from 'zod';

const linkKindSchema = z.enum(['invitation', 'reset', 'address']);
export type LinkKind = z.infer<typeof linkKindSchema>;

const linkSchema = z.object({
  kind: linkKindSchema,
  personId: z.string(),
  organisationId: z.string(),
  displayName: z.string(),
  email: z.string(),
  /** The address to sign in with once a change of address is confirmed; null for other links. */
  newEmail: z.string().nullable(),
  organisation: z.string(),
  status: z.enum(['invited', 'active', 'deactivated']),
  expiresAt: z.date(),
  usedAt: z.date().nullable(),
});
export type AccountLinkRecord = z.infer<typeof linkSchema>;

/** Links of invitations and password resets; only the digest of a token is kept. */
export function createAccountLinksRepository(manager: EntityManager) {
  return {
    /** Adds a link; earlier open links of the person of this kind end. */
    async replace(link: {
      tokenHash: string;
      kind: LinkKind;
      personId: string;
      at: Date;
      expiresAt: Date;
      newEmail?: string;
    }): Promise<void> {
      const { tokenHash, kind, personId, at, expiresAt, newEmail = null } = link;
      await manager.query('UPDATE account_link SET used_at = ? WHERE person_id = ? AND kind = ? AND used_at IS NULL', [
        at,
        personId,
        kind,
      ]);
      await manager.query(
        `INSERT INTO account_link (token_hash, kind, person_id, created_at, expires_at, new_email)
         VALUES (?, ?, ?, ?, ?, ?)`,
        [tokenHash, kind, personId, at, expiresAt, newEmail],
      );
    },

    /** `lock` holds it to the end of the transaction, so that a link is taken once. */
    async find(tokenHash: string, lock: boolean): Promise<AccountLinkRecord | null> {
      const rows: unknown = await manager.query(
        `SELECT l.kind, l.person_id AS personId, p.organisation_id AS organisationId, p.display_name AS displayName,
           p.email, l.new_email AS newEmail, o.name AS organisation, p.status, l.expires_at AS expiresAt, l.used_at AS usedAt
         FROM account_link l INNER JOIN person p ON p.id = l.person_id
         INNER JOIN organisation o ON o.id = p.organisation_id
         WHERE l.token_hash = ?${lock ? ' FOR UPDATE' : ''}`,
        [tokenHash],
      );
      return z.array(linkSchema).parse(rows)[0] ?? null;
    },

    async endAllOf(personId: string, at: Date): Promise<void> {
      await manager.query('UPDATE account_link SET used_at = ? WHERE person_id = ? AND used_at IS NULL', [
        at,
        personId,
      ]);
    },
  };
}
export type AccountLinksRepository = ReturnType<typeof createAccountLinksRepository>;
