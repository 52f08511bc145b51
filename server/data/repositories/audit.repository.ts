import type { AuditQuery } from '#shared/contracts/administration.ts';
import type { EntityManager } from 'typeorm';
import { z } from 'zod';
import { AuditEntryEntity } from '../entities/audit-entry.entity.ts';
import { anywhere } from './like-pattern.ts';
import { offsetOf, type Rows } from './paging.ts';

export interface NewAuditEntry {
  organisationId: string | null;
  at: Date;
  actorId: string | null;
  deed: string;
  subjectKind: string;
  subjectId: string | null;
  detail: Record<string, unknown>;
  address: string | null;
}

const entrySchema = z.object({
  id: z.coerce.string(),
  at: z.date(),
  actor: z.string().nullable(),
  deed: z.string(),
  kind: z.string(),
  subject: z.string().nullable(),
  detail: z.preprocess(
    (value: unknown) => (typeof value === 'string' ? (JSON.parse(value) as unknown) : value),
    z.record(z.string(), z.unknown()),
  ),
  address: z.string().nullable(),
  seal: z.string().nullable(),
});
export type AuditRecord = z.infer<typeof entrySchema>;

/** All columns as text, exactly as the seal covers them; `position` and `digest` are null before sealing. */
const chainRowSchema = z.object({
  id: z.coerce.string(),
  content: z.string(),
  digest: z.string().nullable(),
});
export type AuditChainRow = z.infer<typeof chainRowSchema>;

/** Every column of an entry in one text, made by the database from what it holds. */
const CONTENT = `CONCAT(JSON_ARRAY(CAST(e.id AS CHAR), CAST(e.organisation_id AS CHAR), CAST(e.at AS CHAR), CAST(e.actor_id AS CHAR),
  e.deed, e.subject_kind, e.subject_id, CAST(e.detail AS CHAR), e.address), '')`;

const FROM = `FROM audit_entry e LEFT JOIN person p ON p.id = e.actor_id LEFT JOIN audit_seal s ON s.entry_id = e.id`;

function conditions(organisationId: string, query: Pick<AuditQuery, 'search' | 'kind' | 'from' | 'to'>) {
  const where = ['e.organisation_id = ?'];
  const values: unknown[] = [organisationId];
  const add = (condition: string, ...more: unknown[]): void => {
    where.push(condition);
    values.push(...more);
  };
  if (query.search !== '') {
    const pattern = anywhere(query.search);
    add(
      '(p.display_name LIKE ? OR e.deed LIKE ? OR e.subject_id LIKE ? OR e.detail LIKE ? OR e.address LIKE ?)',
      ...[pattern, pattern, pattern, pattern, pattern],
    );
  }
  if (query.kind !== undefined) add('e.subject_kind = ?', query.kind);
  if (query.from !== undefined) add('e.at >= ?', `${query.from} 00:00:00`);
  if (query.to !== undefined) add('e.at < ? + INTERVAL 1 DAY', `${query.to} 00:00:00`);
  return { where: where.join(' AND '), values };
}

export function createAuditRepository(manager: EntityManager) {
  return {
    async append(entry: NewAuditEntry): Promise<void> {
      await manager.insert(AuditEntryEntity, entry);
    },

    /** Newest first; `upTo` leaves out entries written after that one, so that pages of a growing trail do not shift. */
    async list(organisationId: string, query: AuditQuery, upTo: string | null = null): Promise<Rows<AuditRecord>> {
      const found = conditions(organisationId, query);
      const where = upTo === null ? found.where : `${found.where} AND e.id <= ?`;
      const values = upTo === null ? found.values : [...found.values, upTo];
      const rows: unknown = await manager.query(
        `SELECT e.id, e.at, p.display_name AS actor, e.deed, e.subject_kind AS kind, e.subject_id AS subject, e.detail,
           e.address, s.digest AS seal ${FROM} WHERE ${where} ORDER BY e.id DESC LIMIT ? OFFSET ?`,
        [...values, query.pageSize, offsetOf(query)],
      );
      const counted: unknown = await manager.query(`SELECT COUNT(*) AS total ${FROM} WHERE ${where}`, values);
      const [{ total }] = z.tuple([z.object({ total: z.coerce.number() })]).parse(counted);
      return { items: z.array(entrySchema).parse(rows), total };
    },

    async kinds(organisationId: string): Promise<string[]> {
      const rows: unknown = await manager.query(
        'SELECT DISTINCT subject_kind AS kind FROM audit_entry WHERE organisation_id = ? ORDER BY kind',
        [organisationId],
      );
      return z
        .array(z.object({ kind: z.string() }))
        .parse(rows)
        .map(({ kind }) => kind);
    },

    /** Entries of every organisation not yet sealed and older than `before`, in the order of writing. */
    async unsealed(before: Date, most: number): Promise<AuditChainRow[]> {
      const rows: unknown = await manager.query(
        `SELECT e.id, ${CONTENT} AS content, NULL AS digest FROM audit_entry e
         LEFT JOIN audit_seal s ON s.entry_id = e.id WHERE s.position IS NULL AND e.at < ? ORDER BY e.id LIMIT ?`,
        [before, most],
      );
      return z.array(chainRowSchema).parse(rows);
    },

    async countUnsealed(): Promise<number> {
      const rows: unknown = await manager.query(
        `SELECT COUNT(*) AS total FROM audit_entry e
         LEFT JOIN audit_seal s ON s.entry_id = e.id WHERE s.position IS NULL`,
      );
      return z.tuple([z.object({ total: z.coerce.number() })]).parse(rows)[0].total;
    },

    /** Digest of the last seal, held to the end of the transaction so that seals are added one after another; null at the start. */
    async lastSeal(): Promise<string | null> {
      const rows: unknown = await manager.query(
        'SELECT digest FROM audit_seal ORDER BY position DESC LIMIT 1 FOR UPDATE',
      );
      return z.array(z.object({ digest: z.string() })).parse(rows)[0]?.digest ?? null;
    },

    async seal(seals: readonly { entryId: string; digest: string }[], at: Date): Promise<void> {
      await manager.query('INSERT INTO audit_seal (entry_id, digest, sealed_at) VALUES ?', [
        seals.map(({ entryId, digest }) => [entryId, digest, at]),
      ]);
    },

    /** The chain from `after` on, in the order of sealing; an entry that is gone has no content. */
    async chain(
      after: string,
      most: number,
    ): Promise<{ position: string; id: string; content: string | null; digest: string }[]> {
      const rows: unknown = await manager.query(
        `SELECT s.position, s.entry_id AS id, IF(e.id IS NULL, NULL, ${CONTENT}) AS content, s.digest
         FROM audit_seal s LEFT JOIN audit_entry e ON e.id = s.entry_id WHERE s.position > ? ORDER BY s.position LIMIT ?`,
        [after, most],
      );
      return z
        .array(
          z.object({
            position: z.coerce.string(),
            id: z.coerce.string(),
            content: z.string().nullable(),
            digest: z.string(),
          }),
        )
        .parse(rows);
    },
  };
}

export type AuditRepository = ReturnType<typeof createAuditRepository>;
