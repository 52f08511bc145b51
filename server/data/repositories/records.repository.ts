import type { RecordFilter } from '#shared/contracts/records.ts';
import { CORRECTION_EFFECTS } from '#shared/contracts/records.ts';
import { SIGN_OFF_KINDS, SIGN_OFF_VERDICTS } from '#shared/contracts/debrief.ts';
import { verdictSchema } from '#shared/contracts/scenarios.ts';
import type { EntityManager } from 'typeorm';
import { z } from 'zod';
import { criteriaColumn, worstColumn } from './json-columns.ts';
import { anywhere } from './like-pattern.ts';

const flag = z.coerce.number().transform((value) => value !== 0);
const json = z.union([z.string().transform((text): unknown => JSON.parse(text)), z.unknown()]);
const totalSchema = z.tuple([z.object({ total: z.coerce.number() })]);
const personRow = z.object({ id: z.string(), displayName: z.string(), active: flag });
const scenarioRow = z.object({ id: z.string(), slug: z.string(), title: z.string() });
export type RecordPerson = z.infer<typeof personRow>;
export type RecordScenario = z.infer<typeof scenarioRow>;

/** One completed or running attempt, narrow: a page of the matrix reads thousands. */
export interface NarrowAttempt {
  id: string;
  personId: string;
  scenarioId: string;
  number: number;
  passed: number | null;
  verdict: z.infer<typeof verdictSchema> | null;
  firstPedalS: number | null;
}
const correctionRow = z.object({
  id: z.string(),
  attemptId: z.string(),
  effect: z.enum(CORRECTION_EFFECTS),
  reason: z.string(),
  author: z.string(),
  at: z.date(),
});
const signatureRow = z.object({
  id: z.string(),
  attemptId: z.string(),
  kind: z.enum(SIGN_OFF_KINDS),
  verdict: z.enum(SIGN_OFF_VERDICTS),
  note: z.string(),
  signerId: z.string(),
  signer: z.string(),
  at: z.date(),
});
const fullRow = z.object({
  id: z.string(),
  number: z.number(),
  personId: z.string(),
  person: z.string(),
  scenarioId: z.string(),
  slug: z.string(),
  title: z.string(),
  summary: z.string(),
  revision: z.number(),
  airframe: z.string(),
  airframeSlug: z.string(),
  airframeRevision: z.number(),
  startedAt: z.date(),
  completedAt: z.date().nullable(),
  ended: z.string().nullable(),
  durationS: z.number().nullable(),
  passed: z.number().nullable(),
  verdict: verdictSchema.nullable(),
  worst: json,
  criteria: json,
  modelVersion: z.string().nullable(),
  firstPedalS: z.number().nullable(),
  assignment: z.string().nullable(),
});
export type FullAttempt = Omit<z.infer<typeof fullRow>, 'worst' | 'criteria'> & {
  worst: ReturnType<typeof worstColumn>;
  criteria: ReturnType<typeof criteriaColumn>;
};

const FULL = `SELECT t.id, t.number, p.id AS personId, p.display_name AS person, t.scenario_id AS scenarioId, s.slug, v.title,
    v.summary, v.number AS revision, f.name AS airframe, af.slug AS airframeSlug, f.number AS airframeRevision,
    t.started_at AS startedAt, t.completed_at AS completedAt, r.ended, r.duration_s AS durationS, r.passed, r.verdict,
    r.worst, r.criteria, r.model_version AS modelVersion, r.first_pedal_s AS firstPedalS, a.title AS assignment
  FROM attempt t INNER JOIN person p ON p.id = t.person_id INNER JOIN scenario s ON s.id = t.scenario_id
  INNER JOIN scenario_revision v ON v.id = t.scenario_revision_id
  INNER JOIN airframe_revision f ON f.id = v.airframe_revision_id INNER JOIN airframe af ON af.id = f.airframe_id
  LEFT JOIN attempt_result r ON r.attempt_id = t.id AND r.counts = 1
  LEFT JOIN assignment_attempt c ON c.attempt_id = t.id LEFT JOIN assignment a ON a.id = c.assignment_id`;

function peopleCondition(organisationId: string, filter: RecordFilter, personId: string | null) {
  const parts = ['p.organisation_id = ?'];
  const values: unknown[] = [organisationId];
  const and = (condition: string, ...given: unknown[]): void => {
    parts.push(condition);
    values.push(...given);
  };
  if (personId !== null) and('p.id = ?', personId);
  else and(`EXISTS (SELECT 1 FROM person_role pr WHERE pr.person_id = p.id AND pr.role = 'trainee')`);
  if (filter.deactivated === 'no' && personId === null) and(`p.status <> 'deactivated'`);
  if (filter.cohort !== undefined)
    and('EXISTS (SELECT 1 FROM cohort_member m WHERE m.person_id = p.id AND m.cohort_id = ?)', filter.cohort);
  if (filter.search !== '') and('p.display_name LIKE ?', anywhere(filter.search));
  return { where: parts.join(' AND '), values };
}

function timeCondition(filter: Pick<RecordFilter, 'from' | 'to'>) {
  const parts: string[] = [];
  const values: unknown[] = [];
  if (filter.from !== undefined) {
    parts.push('AND t.started_at >= ?');
    values.push(new Date(`${filter.from}T00:00:00Z`));
  }
  if (filter.to !== undefined) {
    parts.push('AND t.started_at < ? + INTERVAL 1 DAY');
    values.push(new Date(`${filter.to}T00:00:00Z`));
  }
  return { and: parts.join(' '), values };
}

/** Attempts that a correction has set aside do not count; asked row by row through the index of corrections. */
const NOT_SET_ASIDE = `NOT EXISTS (SELECT 1 FROM record_correction k WHERE k.attempt_id = t.id AND k.effect = 'set-aside'
  AND NOT EXISTS (SELECT 1 FROM record_correction l WHERE l.attempt_id = t.id AND l.effect = 'restored'
    AND (l.created_at, l.id) > (k.created_at, k.id)))`;

export function createRecordsRepository(manager: EntityManager) {
  const all = async <S extends z.ZodType>(schema: S, sql: string, values: unknown[]): Promise<z.output<S>[]> => {
    const rows: unknown = await manager.query(sql, values);
    return z.array(schema).parse(rows);
  };

  return {
    async people(
      organisationId: string,
      filter: RecordFilter,
      personId: string | null,
      page: { limit: number; offset: number },
    ): Promise<{ items: RecordPerson[]; total: number }> {
      const { where, values } = peopleCondition(organisationId, filter, personId);
      const counted: unknown = await manager.query(`SELECT COUNT(*) AS total FROM person p WHERE ${where}`, values);
      const items = await all(
        personRow,
        `SELECT p.id, p.display_name AS displayName, p.status = 'active' AS active FROM person p WHERE ${where}
         ORDER BY p.display_name, p.id LIMIT ? OFFSET ?`,
        [...values, page.limit, page.offset],
      );
      return { items, total: totalSchema.parse(counted)[0].total };
    },

    /** Columns of the matrix: those of a playlist, else those that somebody has flown or has been set, by title. */
    async scenarios(organisationId: string, playlist: string | undefined): Promise<RecordScenario[]> {
      if (playlist !== undefined) {
        return all(
          scenarioRow,
          `SELECT s.id, s.slug, v.title FROM playlist l INNER JOIN playlist_item i ON i.playlist_id = l.id
           INNER JOIN scenario s ON s.id = i.scenario_id INNER JOIN scenario_revision v ON v.scenario_id = s.id
           AND v.number = (SELECT MAX(n.number) FROM scenario_revision n WHERE n.scenario_id = s.id AND n.status <> 'draft')
           WHERE l.organisation_id = ? AND l.id = ? ORDER BY i.position`,
          [organisationId, playlist],
        );
      }
      return all(
        scenarioRow,
        `SELECT s.id, s.slug, v.title FROM scenario s INNER JOIN scenario_revision v ON v.scenario_id = s.id
         AND v.number = (SELECT MAX(n.number) FROM scenario_revision n WHERE n.scenario_id = s.id AND n.status <> 'draft')
         WHERE s.organisation_id = ? AND (EXISTS (SELECT 1 FROM attempt t WHERE t.scenario_id = s.id)
           OR EXISTS (SELECT 1 FROM assignment_scenario i WHERE i.scenario_id = s.id))
         ORDER BY v.title, s.slug LIMIT 200`,
        [organisationId],
      );
    },

    /** All attempts of people, oldest first. Rows are taken as they come: the columns are typed by the schema. */
    async attempts(
      personIds: readonly string[],
      scenarioIds: readonly string[],
      filter: Pick<RecordFilter, 'from' | 'to'>,
    ): Promise<NarrowAttempt[]> {
      if (personIds.length === 0 || scenarioIds.length === 0) return [];
      const time = timeCondition(filter);
      const rows: unknown = await manager.query(
        `SELECT t.id, t.person_id AS personId, t.scenario_id AS scenarioId, t.number, r.passed, r.verdict,
           r.first_pedal_s AS firstPedalS
         FROM attempt t LEFT JOIN attempt_result r ON r.attempt_id = t.id AND r.counts = 1
         WHERE t.person_id IN (?) AND t.scenario_id IN (?) ${time.and}
         ORDER BY t.person_id, t.scenario_id, t.number`,
        [personIds, scenarioIds, ...time.values],
      );
      return rows as NarrowAttempt[]; // columns of this very statement; parsing thousands of rows would cost more than reading them
    },

    /** The least margins of some attempts. */
    async margins(attemptIds: readonly string[]): Promise<Map<string, NonNullable<FullAttempt['worst']>>> {
      const found = new Map<string, NonNullable<FullAttempt['worst']>>();
      if (attemptIds.length === 0) return found;
      const rows = await all(
        z.object({ id: z.string(), worst: json }),
        'SELECT attempt_id AS id, worst FROM attempt_result WHERE attempt_id IN (?) AND counts = 1',
        [attemptIds],
      );
      for (const { id, worst } of rows) {
        const parsed = worstColumn(worst);
        if (parsed !== null) found.set(id, parsed);
      }
      return found;
    },

    signatures: async (personIds: readonly string[]) =>
      personIds.length === 0
        ? []
        : all(
            signatureRow,
            `SELECT g.id, g.attempt_id AS attemptId, g.kind, g.verdict, g.note, g.signer_id AS signerId,
               p.display_name AS signer, g.created_at AS at
             FROM attempt t INNER JOIN sign_off g ON g.attempt_id = t.id INNER JOIN person p ON p.id = g.signer_id
             WHERE t.person_id IN (?) ORDER BY g.created_at, g.id`,
            [personIds],
          ),

    corrections: async (personIds: readonly string[]) =>
      personIds.length === 0
        ? []
        : all(
            correctionRow,
            `SELECT k.id, k.attempt_id AS attemptId, k.effect, k.reason, p.display_name AS author, k.created_at AS at
             FROM record_correction k INNER JOIN attempt t ON t.id = k.attempt_id INNER JOIN person p ON p.id = k.author_id
             WHERE t.person_id IN (?) ORDER BY k.created_at, k.id`,
            [personIds],
          ),

    correctionsOf: (attemptId: string) =>
      all(
        correctionRow,
        `SELECT k.id, k.attempt_id AS attemptId, k.effect, k.reason, p.display_name AS author, k.created_at AS at
         FROM record_correction k INNER JOIN person p ON p.id = k.author_id
         WHERE k.attempt_id = ? ORDER BY k.created_at, k.id`,
        [attemptId],
      ),

    async insertCorrection(entry: {
      id: string;
      organisationId: string;
      attemptId: string;
      authorId: string;
      effect: (typeof CORRECTION_EFFECTS)[number];
      reason: string;
      at: Date;
    }): Promise<void> {
      await manager.query(
        `INSERT INTO record_correction (id, organisation_id, attempt_id, author_id, effect, reason, created_at)
         VALUES (?, ?, ?, ?, ?, ?, ?)`,
        [entry.id, entry.organisationId, entry.attemptId, entry.authorId, entry.effect, entry.reason, entry.at],
      );
    },

    /** What is set for people and open: the earliest due time by person and scenario. */
    due: async (personIds: readonly string[]) =>
      personIds.length === 0
        ? []
        : all(
            z.object({ personId: z.string(), scenarioId: z.string(), dueAt: z.date() }),
            `SELECT ap.person_id AS personId, i.scenario_id AS scenarioId, MIN(ap.due_at) AS dueAt
             FROM assignment_person ap INNER JOIN assignment a ON a.id = ap.assignment_id AND a.closed_at IS NULL
             INNER JOIN assignment_scenario i ON i.assignment_id = a.id
             WHERE ap.person_id IN (?) AND ap.excused_at IS NULL GROUP BY ap.person_id, i.scenario_id`,
            [personIds],
          ),

    totals: (organisationId: string, filter: RecordFilter, personId: string | null, scenarioIds: readonly string[]) => {
      const people = peopleCondition(organisationId, filter, personId);
      const time = timeCondition(filter);
      return all(
        z.object({ scenarioId: z.string(), flown: z.coerce.number(), met: z.coerce.number() }),
        `SELECT x.scenario_id AS scenarioId, COUNT(*) AS flown, SUM(x.met) AS met FROM (
           SELECT t.scenario_id, t.person_id, MAX(r.passed) AS met FROM person p
           INNER JOIN attempt t ON t.person_id = p.id
           INNER JOIN attempt_result r ON r.attempt_id = t.id AND r.counts = 1
           WHERE ${people.where} AND t.scenario_id IN (?) ${time.and} AND ${NOT_SET_ASIDE}
           GROUP BY t.scenario_id, t.person_id) x GROUP BY x.scenario_id`,
        [...people.values, scenarioIds.length === 0 ? [''] : scenarioIds, ...time.values],
      );
    },

    /** Reaction times of a group in one scenario, by person and number. */
    reactions: (organisationId: string, filter: RecordFilter, scenarioId: string) => {
      const people = peopleCondition(organisationId, filter, null);
      const time = timeCondition(filter);
      return all(
        z.object({ personId: z.string(), firstPedalS: z.number().nullable() }),
        `SELECT t.person_id AS personId, r.first_pedal_s AS firstPedalS FROM person p
         INNER JOIN attempt t ON t.person_id = p.id
         INNER JOIN attempt_result r ON r.attempt_id = t.id AND r.counts = 1
         WHERE ${people.where} AND t.scenario_id = ? ${time.and} AND ${NOT_SET_ASIDE}
         ORDER BY t.person_id, t.number`,
        [...people.values, scenarioId, ...time.values],
      );
    },

    /** Complete rows of attempts of people, for drill-down and exports. */
    async full(
      organisationId: string,
      personIds: readonly string[],
      scenarioIds: readonly string[] | null,
      filter: Pick<RecordFilter, 'from' | 'to'>,
    ): Promise<FullAttempt[]> {
      if (personIds.length === 0) return [];
      const time = timeCondition(filter);
      const rows = await all(
        fullRow,
        `${FULL} WHERE t.organisation_id = ? AND t.person_id IN (?) ${scenarioIds === null ? '' : 'AND t.scenario_id IN (?)'}
         ${time.and} ORDER BY p.display_name, p.id, t.started_at, t.id`,
        [organisationId, personIds, ...(scenarioIds === null ? [] : [scenarioIds]), ...time.values],
      );
      return rows.map((row) => ({
        ...row,
        worst: worstColumn(row.worst),
        criteria: row.criteria === null ? [] : criteriaColumn(row.criteria),
      }));
    },

    /** The same without criteria, for tables of hundreds of thousands of rows. */
    async table(
      organisationId: string,
      personIds: readonly string[],
      scenarioIds: readonly string[],
      filter: Pick<RecordFilter, 'from' | 'to'>,
    ): Promise<TableAttempt[]> {
      if (personIds.length === 0 || scenarioIds.length === 0) return [];
      const time = timeCondition(filter);
      const rows: unknown = await manager.query(
        `SELECT t.id, t.person_id AS personId, t.scenario_id AS scenarioId, t.number, v.number AS revision,
           t.started_at AS startedAt, r.ended, r.duration_s AS durationS, r.passed, r.verdict,
           JSON_VALUE(r.worst, '$.title') AS marginOf, JSON_VALUE(r.worst, '$.margin') AS margin,
           JSON_VALUE(r.worst, '$.unit') AS unit, r.first_pedal_s AS firstPedalS
         FROM attempt t INNER JOIN scenario_revision v ON v.id = t.scenario_revision_id
         LEFT JOIN attempt_result r ON r.attempt_id = t.id AND r.counts = 1
         WHERE t.organisation_id = ? AND t.person_id IN (?) AND t.scenario_id IN (?) ${time.and}
         ORDER BY t.person_id, t.scenario_id, t.number`,
        [organisationId, personIds, scenarioIds, ...time.values],
      );
      return rows as TableAttempt[]; // columns of this very statement; parsing hundreds of thousands of rows would cost more than reading them
    },

    async attemptIds(organisationId: string, from: Date | null): Promise<string[]> {
      const rows = await all(
        z.object({ id: z.string() }),
        `SELECT t.id FROM attempt t INNER JOIN attempt_result r ON r.attempt_id = t.id AND r.counts = 1
         WHERE t.organisation_id = ? AND (? IS NULL OR t.started_at >= ?) ORDER BY t.started_at, t.id`,
        [organisationId, from, from],
      );
      return rows.map(({ id }) => id);
    },

    async fullByIds(organisationId: string, ids: readonly string[]): Promise<FullAttempt[]> {
      if (ids.length === 0) return [];
      const rows = await all(fullRow, `${FULL} WHERE t.organisation_id = ? AND t.id IN (?)`, [organisationId, ids]);
      return rows.map((row) => ({
        ...row,
        worst: worstColumn(row.worst),
        criteria: row.criteria === null ? [] : criteriaColumn(row.criteria),
      }));
    },
  };
}

export interface TableAttempt {
  id: string;
  personId: string;
  scenarioId: string;
  number: number;
  revision: number;
  startedAt: Date;
  ended: string | null;
  durationS: number | null;
  passed: number | null;
  verdict: string | null;
  marginOf: string | null;
  margin: string | number | null;
  unit: string | null;
  firstPedalS: number | null;
}
export type RecordsRepository = ReturnType<typeof createRecordsRepository>;
