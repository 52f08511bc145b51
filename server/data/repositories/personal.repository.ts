import type { EntityManager } from 'typeorm';
import { z } from 'zod';

const json = z.union([z.string().transform((text): unknown => JSON.parse(text)), z.unknown()]);

/** What is kept about a person beside their record: for their own copy of it. */
export function createPersonalRepository(manager: EntityManager) {
  const all = async <S extends z.ZodType>(schema: S, sql: string, values: unknown[]): Promise<z.output<S>[]> => {
    const rows: unknown = await manager.query(sql, values);
    return z.array(schema).parse(rows);
  };
  return {
    cohorts: (personId: string) =>
      all(
        z.object({ name: z.string(), joinedAt: z.date() }),
        'SELECT c.name, m.joined_at AS joinedAt FROM cohort_member m INNER JOIN cohort c ON c.id = m.cohort_id WHERE m.person_id = ?',
        [personId],
      ),
    sessions: (personId: string) =>
      all(
        z.object({
          createdAt: z.date(),
          lastUsedAt: z.date(),
          address: z.string().nullable(),
          agent: z.string().nullable(),
        }),
        'SELECT created_at AS createdAt, last_used_at AS lastUsedAt, address, agent FROM session WHERE person_id = ? ORDER BY created_at',
        [personId],
      ),
    deeds: (organisationId: string, personId: string) =>
      all(
        z.object({
          at: z.date(),
          deed: z.string(),
          subjectKind: z.string(),
          subjectId: z.string().nullable(),
          detail: json,
        }),
        `SELECT at, deed, subject_kind AS subjectKind, subject_id AS subjectId, detail FROM audit_entry
         WHERE organisation_id = ? AND actor_id = ? ORDER BY id LIMIT 50000`,
        [organisationId, personId],
      ),
  };
}
export type PersonalRepository = ReturnType<typeof createPersonalRepository>;
