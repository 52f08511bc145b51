import type { CohortQuery } from '#shared/contracts/cohorts.ts';
import { personStateSchema } from '#shared/contracts/administration.ts';
import { roleSchema } from '#shared/contracts/session.ts';
import type { EntityManager } from 'typeorm';
import { z } from 'zod';
import { anywhere } from './like-pattern.ts';
import { offsetOf, type Rows, sortOrder } from './paging.ts';

const cohortRow = z.object({
  id: z.string(),
  name: z.string(),
  members: z.coerce.number(),
  createdAt: z.date(),
  archivedAt: z.date().nullable(),
});
export type CohortRecord = z.infer<typeof cohortRow>;
const memberRow = z.object({
  id: z.string(),
  displayName: z.string(),
  state: personStateSchema,
  roles: z
    .string()
    .nullable()
    .transform((joined) => (joined === null ? [] : joined.split(',').map((role) => roleSchema.parse(role)))),
  joinedAt: z.date(),
  openAssignments: z.coerce.number(),
});
export type CohortMemberRecord = z.infer<typeof memberRow>;
const candidateRow = z.object({ id: z.string(), displayName: z.string(), email: z.string() });
const changedSchema = z.object({ affectedRows: z.number() });

const SELECT = `SELECT c.id, c.name, c.created_at AS createdAt, c.archived_at AS archivedAt,
    (SELECT COUNT(*) FROM cohort_member m WHERE m.cohort_id = c.id) AS members
  FROM cohort c`;
const SORT: Record<string, string> = { name: 'c.name', created: 'c.created_at' };
const MOST_CANDIDATES = 50;

/** Cohorts and who is in them. People join and leave; what was assigned to them through a cohort stays theirs. */
export function createCohortsRepository(manager: EntityManager) {
  const all = async <S extends z.ZodType>(schema: S, sql: string, values: unknown[]): Promise<z.output<S>[]> => {
    const rows: unknown = await manager.query(sql, values);
    return z.array(schema).parse(rows);
  };
  const changed = async (sql: string, values: unknown[]): Promise<number> => {
    const answer: unknown = await manager.query(sql, values);
    return changedSchema.parse(answer).affectedRows;
  };

  return {
    async list(organisationId: string, query: CohortQuery): Promise<Rows<CohortRecord>> {
      const where = `c.organisation_id = ? AND c.archived_at IS ${query.state === 'archived' ? 'NOT ' : ''}NULL
        AND c.name LIKE ?`;
      const values = [organisationId, anywhere(query.search)];
      const { key, direction } = sortOrder(query.sort);
      const [items, [{ total }]] = await Promise.all([
        all(cohortRow, `${SELECT} WHERE ${where} ORDER BY ${SORT[key]} ${direction}, c.id LIMIT ? OFFSET ?`, [
          ...values,
          query.pageSize,
          offsetOf(query),
        ]),
        all(z.object({ total: z.coerce.number() }), `SELECT COUNT(*) AS total FROM cohort c WHERE ${where}`, values),
      ]);
      return { items, total };
    },

    /** `lock` holds it to the end of the transaction, so that who assigns to it meanwhile waits. */
    async find(organisationId: string, id: string, lock = false): Promise<CohortRecord | null> {
      const [row] = await all(
        cohortRow,
        `${SELECT} WHERE c.organisation_id = ? AND c.id = ?${lock ? ' FOR UPDATE' : ''}`,
        [organisationId, id],
      );
      return row ?? null;
    },

    async members(cohortId: string): Promise<CohortMemberRecord[]> {
      return all(
        memberRow,
        `SELECT p.id, p.display_name AS displayName, p.status AS state, m.joined_at AS joinedAt,
           (SELECT GROUP_CONCAT(r.role ORDER BY r.role) FROM person_role r WHERE r.person_id = p.id) AS roles,
           (SELECT COUNT(*) FROM assignment_person ap INNER JOIN assignment a ON a.id = ap.assignment_id
             WHERE ap.person_id = p.id AND ap.cohort_name = c.name AND ap.excused_at IS NULL AND a.closed_at IS NULL)
             AS openAssignments
         FROM cohort c INNER JOIN cohort_member m ON m.cohort_id = c.id INNER JOIN person p ON p.id = m.person_id
         WHERE c.id = ? ORDER BY p.display_name, p.id`,
        [cohortId],
      );
    },

    /** People who are not in the cohort and not deactivated, by name. */
    async candidates(organisationId: string, cohortId: string, search: string) {
      const pattern = anywhere(search);
      return all(
        candidateRow,
        `SELECT p.id, p.display_name AS displayName, p.email FROM person p
         WHERE p.organisation_id = ? AND p.status <> 'deactivated' AND (p.display_name LIKE ? OR p.email LIKE ?)
           AND NOT EXISTS (SELECT 1 FROM cohort_member m WHERE m.person_id = p.id AND m.cohort_id = ?)
         ORDER BY p.display_name, p.id LIMIT ?`,
        [organisationId, pattern, pattern, cohortId, MOST_CANDIDATES],
      );
    },

    /** Names of the organisation's archived cohorts among some names, as they are stored. */
    async archivedAmong(organisationId: string, names: readonly string[]): Promise<string[]> {
      if (names.length === 0) return [];
      const rows = await all(
        z.object({ wanted: z.string() }),
        `SELECT w.wanted FROM (${names.map(() => 'SELECT ? AS wanted').join(' UNION ALL ')}) w
         INNER JOIN cohort c ON c.organisation_id = ? AND c.archived_at IS NOT NULL
           AND c.name = CONVERT(w.wanted USING utf8mb4) COLLATE utf8mb4_unicode_ci`,
        [...names, organisationId],
      );
      return rows.map(({ wanted }) => wanted);
    },

    /** @throws a duplicate-key error when another cohort has the name */
    async rename(id: string, name: string): Promise<void> {
      await changed('UPDATE cohort SET name = ? WHERE id = ?', [name, id]);
    },

    async setArchived(id: string, at: Date | null): Promise<void> {
      await changed('UPDATE cohort SET archived_at = ? WHERE id = ?', [at, id]);
    },

    /** @returns ids of those who were not in it before; only people of the organisation who are not deactivated */
    async add(organisationId: string, cohortId: string, people: readonly string[], at: Date): Promise<string[]> {
      const fresh: string[] = [];
      for (const id of people) {
        const added = await changed(
          `INSERT IGNORE INTO cohort_member (cohort_id, person_id, joined_at)
           SELECT ?, p.id, ? FROM person p WHERE p.id = ? AND p.organisation_id = ? AND p.status <> 'deactivated'`,
          [cohortId, at, id, organisationId],
        );
        if (added === 1) fresh.push(id);
      }
      return fresh;
    },

    async remove(cohortId: string, personId: string): Promise<boolean> {
      return (
        (await changed('DELETE FROM cohort_member WHERE cohort_id = ? AND person_id = ?', [cohortId, personId])) > 0
      );
    },
  };
}
export type CohortsRepository = ReturnType<typeof createCohortsRepository>;
