import type { AssignmentListQuery, PassRule } from '#shared/contracts/assignments.ts';
import { passRuleSchema } from '#shared/contracts/assignments.ts';
import { verdictSchema } from '#shared/contracts/scenarios.ts';
import type { EntityManager } from 'typeorm';
import { z } from 'zod';
import { anywhere } from './like-pattern.ts';
import { offsetOf, type Rows, sortOrder } from './paging.ts';

const flag = z.coerce.number().transform((value) => value !== 0);
const maybeDate = z.date().nullable();

const assignmentRow = z.object({
  id: z.string(),
  title: z.string(),
  words: z.string(),
  opensAt: z.date(),
  dueAt: z.date(),
  zone: z.string(),
  tries: z.number().nullable(),
  passRule: passRuleSchema,
  practice: flag,
  byMail: flag,
  calendar: flag,
  reminderDays: z.number().nullable(),
  tellAuthor: flag,
  version: z.number(),
  authorId: z.string(),
  author: z.string(),
  authorEmail: z.string(),
  createdAt: z.date(),
  closedAt: maybeDate,
  closedFor: z.string().nullable(),
});
export type AssignmentRecord = z.infer<typeof assignmentRow>;

const scenarioRow = z.object({
  assignmentId: z.string(),
  scenarioId: z.string(),
  slug: z.string(),
  title: z.string(),
  revisionId: z.string(),
  revision: z.number(),
  airframeName: z.string(),
});
export type AssignedScenarioRecord = z.infer<typeof scenarioRow>;

const personRow = z.object({
  assignmentId: z.string(),
  personId: z.string(),
  displayName: z.string(),
  email: z.string(),
  /** Zone of the person's profile; null when none is chosen. */
  zone: z.string().nullable(),
  active: flag,
  cohort: z.string().nullable(),
  dueAt: z.date(),
  extraTries: z.number(),
  sequence: z.number(),
  addedAt: z.date(),
  excusedAt: maybeDate,
});
export type AssignedPersonRecord = z.infer<typeof personRow>;

const tryRow = z.object({
  assignmentId: z.string(),
  personId: z.string(),
  scenarioId: z.string(),
  attemptId: z.string(),
  tryNumber: z.number(),
  startedAt: z.date(),
  completedAt: maybeDate,
  passed: z.number().nullable(),
  verdict: verdictSchema.nullable(),
  signed: z.enum(['met', 'not-met']).nullable(),
  setAside: flag,
});
export type TryRecord = z.infer<typeof tryRow>;

const extensionRow = z.object({
  personId: z.string(),
  person: z.string(),
  dueAt: z.date(),
  extraTries: z.number(),
  reason: z.string(),
  by: z.string(),
  at: z.date(),
});
const noticeRow = z.object({ assignmentId: z.string(), personId: z.string(), at: z.date() });
const totalSchema = z.tuple([z.object({ total: z.coerce.number() })]);
const affected = z.object({ affectedRows: z.number() });

export interface AssignmentTerms {
  title: string;
  words: string;
  opensAt: Date;
  dueAt: Date;
  zone: string;
  tries: number | null;
  passRule: PassRule;
  practice: boolean;
  byMail: boolean;
  calendar: boolean;
  reminderDays: number | null;
  tellAuthor: boolean;
}
export type NoticeKind = 'set' | 'changed' | 'cancelled' | 'reminder' | 'flown';

const SELECT = `SELECT a.id, a.title, a.words, a.opens_at AS opensAt, a.due_at AS dueAt, a.zone, a.tries,
    a.pass_rule AS passRule, a.practice, a.by_mail AS byMail, a.calendar, a.reminder_days AS reminderDays,
    a.tell_author AS tellAuthor, a.version, a.created_by AS authorId, author.display_name AS author,
    author.email AS authorEmail, a.created_at AS createdAt, a.closed_at AS closedAt, a.closed_for AS closedFor
  FROM assignment a INNER JOIN person author ON author.id = a.created_by`;
const SELECT_PEOPLE = `SELECT ap.assignment_id AS assignmentId, ap.person_id AS personId, p.display_name AS displayName,
    p.email, p.time_zone AS zone, p.status = 'active' AS active, ap.cohort_name AS cohort, ap.due_at AS dueAt, ap.extra_tries AS extraTries,
    ap.sequence, ap.added_at AS addedAt, ap.excused_at AS excusedAt
  FROM assignment_person ap INNER JOIN person p ON p.id = ap.person_id`;
const TERMS = `title = ?, words = ?, opens_at = ?, due_at = ?, zone = ?, tries = ?, pass_rule = ?, practice = ?,
  by_mail = ?, calendar = ?, reminder_days = ?, tell_author = ?`;
const SORT: Record<string, string> = { due: 'a.due_at', title: 'a.title', created: 'a.created_at' };

const termValues = (t: AssignmentTerms): unknown[] => [
  ...[t.title, t.words, t.opensAt, t.dueAt, t.zone, t.tries, t.passRule, t.practice],
  ...[t.byMail, t.calendar, t.reminderDays, t.tellAuthor],
];

export function createAssignmentsRepository(manager: EntityManager) {
  const all = async <S extends z.ZodType>(schema: S, sql: string, values: unknown[]): Promise<z.output<S>[]> => {
    const rows: unknown = await manager.query(sql, values);
    return z.array(schema).parse(rows);
  };
  const changes = async (sql: string, values: unknown[]): Promise<number> => {
    const done: unknown = await manager.query(sql, values);
    return affected.parse(done).affectedRows;
  };

  return {
    async list(organisationId: string, query: AssignmentListQuery): Promise<Rows<AssignmentRecord>> {
      const { key, direction } = sortOrder(query.sort);
      const where = `a.organisation_id = ? AND a.closed_at IS ${query.state === 'open' ? '' : 'NOT'} NULL AND a.title LIKE ?`;
      const values = [organisationId, anywhere(query.search)];
      const counted: unknown = await manager.query(`SELECT COUNT(*) AS total FROM assignment a WHERE ${where}`, values);
      const items = await all(
        assignmentRow,
        `${SELECT} WHERE ${where} ORDER BY ${SORT[key] ?? 'a.due_at'} ${direction}, a.id LIMIT ? OFFSET ?`,
        [...values, query.pageSize, offsetOf(query)],
      );
      return { items, total: totalSchema.parse(counted)[0].total };
    },

    async find(organisationId: string, id: string, lock = false): Promise<AssignmentRecord | null> {
      const sql = `${SELECT} WHERE a.organisation_id = ? AND a.id = ?${lock ? ' FOR UPDATE' : ''}`;
      const [row] = await all(assignmentRow, sql, [organisationId, id]);
      return row ?? null;
    },

    /** All that are open, or the given person's: open ones and those closed or passed within the last weeks. */
    open: (organisationId: string) =>
      all(assignmentRow, `${SELECT} WHERE a.organisation_id = ? AND a.closed_at IS NULL`, [organisationId]),

    ofPerson: (organisationId: string, personId: string) =>
      all(
        assignmentRow,
        `${SELECT} INNER JOIN assignment_person ap ON ap.assignment_id = a.id
         WHERE a.organisation_id = ? AND ap.person_id = ? AND ap.excused_at IS NULL
         ORDER BY a.closed_at IS NOT NULL, ap.due_at, a.id LIMIT 200`,
        [organisationId, personId],
      ),

    scenarios: async (ids: readonly string[]): Promise<AssignedScenarioRecord[]> =>
      ids.length === 0
        ? []
        : all(
            scenarioRow,
            `SELECT i.assignment_id AS assignmentId, i.scenario_id AS scenarioId, s.slug, r.title, r.id AS revisionId,
               r.number AS revision, f.name AS airframeName
             FROM assignment_scenario i INNER JOIN scenario s ON s.id = i.scenario_id
             INNER JOIN scenario_revision r ON r.id = i.scenario_revision_id
             INNER JOIN airframe_revision f ON f.id = r.airframe_revision_id
             WHERE i.assignment_id IN (?) ORDER BY i.assignment_id, i.position`,
            [ids],
          ),

    people: async (ids: readonly string[], personId: string | null = null): Promise<AssignedPersonRecord[]> =>
      ids.length === 0
        ? []
        : all(
            personRow,
            `${SELECT_PEOPLE} WHERE ap.assignment_id IN (?) AND (? IS NULL OR ap.person_id = ?)
             ORDER BY p.display_name, p.id`,
            [ids, personId, personId],
          ),

    tries: async (ids: readonly string[], personId: string | null = null): Promise<TryRecord[]> =>
      ids.length === 0
        ? []
        : all(
            tryRow,
            `SELECT c.assignment_id AS assignmentId, c.person_id AS personId, c.scenario_id AS scenarioId,
               c.attempt_id AS attemptId, c.try_number AS tryNumber, t.started_at AS startedAt,
               t.completed_at AS completedAt, r.passed, r.verdict,
               (SELECT g.verdict FROM sign_off g WHERE g.attempt_id = t.id AND g.kind = 'sign-off'
                ORDER BY g.created_at DESC, g.id DESC LIMIT 1) AS signed,
               COALESCE((SELECT k.effect = 'set-aside' FROM record_correction k WHERE k.attempt_id = t.id
                AND k.effect <> 'note' ORDER BY k.created_at DESC, k.id DESC LIMIT 1), 0) AS setAside
             FROM assignment_attempt c INNER JOIN attempt t ON t.id = c.attempt_id
             LEFT JOIN attempt_result r ON r.attempt_id = t.id AND r.counts = 1
             WHERE c.assignment_id IN (?) AND (? IS NULL OR c.person_id = ?)
             ORDER BY c.assignment_id, c.person_id, c.scenario_id, c.try_number`,
            [ids, personId, personId],
          ),

    extensions: (id: string) =>
      all(
        extensionRow,
        `SELECT e.person_id AS personId, p.display_name AS person, e.due_at AS dueAt, e.extra_tries AS extraTries,
           e.reason, g.display_name AS \`by\`, e.given_at AS at
         FROM assignment_extension e INNER JOIN person p ON p.id = e.person_id
         INNER JOIN person g ON g.id = e.given_by WHERE e.assignment_id = ? ORDER BY e.given_at, e.id`,
        [id],
      ),

    notices: async (ids: readonly string[], kind: NoticeKind) =>
      ids.length === 0
        ? []
        : all(
            noticeRow,
            `SELECT assignment_id AS assignmentId, person_id AS personId, created_at AS at FROM assignment_notice
             WHERE assignment_id IN (?) AND kind = ? ORDER BY created_at`,
            [ids, kind],
          ),

    /** Cohorts with their active trainees; locked to the end of the transaction when `lock`. */
    async cohorts(organisationId: string, lock: boolean) {
      return all(
        z.object({ id: z.string(), name: z.string(), personId: z.string().nullable() }),
        `SELECT c.id, c.name, p.id AS personId FROM cohort c
         LEFT JOIN cohort_member m ON m.cohort_id = c.id
         LEFT JOIN person p ON p.id = m.person_id AND p.status = 'active'
         WHERE c.organisation_id = ? AND c.archived_at IS NULL ORDER BY c.name, p.display_name${lock ? ' LOCK IN SHARE MODE' : ''}`,
        [organisationId],
      );
    },

    async flyingPeople(organisationId: string) {
      return all(
        z.object({ id: z.string(), displayName: z.string(), email: z.string(), active: flag }),
        `SELECT p.id, p.display_name AS displayName, p.email, p.status = 'active' AS active FROM person p
         WHERE p.organisation_id = ? AND EXISTS (SELECT 1 FROM person_role r WHERE r.person_id = p.id AND r.role = 'trainee')
         ORDER BY p.display_name, p.id LIMIT 5000`,
        [organisationId],
      );
    },

    async insert(
      entry: { id: string; organisationId: string; by: string; at: Date },
      terms: AssignmentTerms,
      scenarios: readonly { scenarioId: string; revisionId: string }[],
    ): Promise<void> {
      await manager.query(
        `INSERT INTO assignment SET id = ?, organisation_id = ?, version = 1, created_by = ?, created_at = ?,
           changed_at = ?, ${TERMS}`,
        [entry.id, entry.organisationId, entry.by, entry.at, entry.at, ...termValues(terms)],
      );
      await manager.query(
        'INSERT INTO assignment_scenario (assignment_id, position, scenario_id, scenario_revision_id) VALUES ?',
        [scenarios.map(({ scenarioId, revisionId }, i) => [entry.id, i + 1, scenarioId, revisionId])],
      );
    },

    /** Adds people; who is there already stays as they are, who was excused comes back. */
    async addPeople(
      id: string,
      dueAt: Date,
      people: readonly { id: string; cohort: string | null }[],
      at: Date,
    ): Promise<void> {
      if (people.length === 0) return;
      await manager.query(
        `INSERT INTO assignment_person (assignment_id, person_id, cohort_name, due_at, extra_tries, sequence, added_at)
         VALUES ? ON DUPLICATE KEY UPDATE excused_at = NULL, sequence = sequence + 1`,
        [people.map(({ id: personId, cohort }) => [id, personId, cohort, dueAt, 0, 0, at])],
      );
    },

    async change(id: string, version: number, terms: AssignmentTerms, at: Date): Promise<boolean> {
      const sql = `UPDATE assignment SET ${TERMS}, changed_at = ?, version = version + 1 WHERE id = ? AND version = ?`;
      return (await changes(sql, [...termValues(terms), at, id, version])) > 0;
    },

    /** The due time of all who have no extension of their own. */
    async moveDue(id: string, dueAt: Date): Promise<void> {
      await manager.query(
        `UPDATE assignment_person ap SET ap.due_at = ? WHERE ap.assignment_id = ? AND NOT EXISTS
           (SELECT 1 FROM assignment_extension e WHERE e.assignment_id = ap.assignment_id
            AND e.person_id = ap.person_id AND e.due_at > ?)`,
        [dueAt, id, dueAt],
      );
    },

    async raiseSequence(id: string, personIds: readonly string[]): Promise<void> {
      if (personIds.length === 0) return;
      await manager.query(
        'UPDATE assignment_person SET sequence = sequence + 1 WHERE assignment_id = ? AND person_id IN (?)',
        [id, personIds],
      );
    },

    async close(id: string, at: Date, reason: string): Promise<boolean> {
      const sql =
        'UPDATE assignment SET closed_at = ?, closed_for = ?, changed_at = ?, version = version + 1 WHERE id = ? AND closed_at IS NULL';
      return (await changes(sql, [at, reason, at, id])) > 0;
    },

    async excuse(id: string, personIds: readonly string[], at: Date): Promise<number> {
      return changes(
        'UPDATE assignment_person SET excused_at = ?, sequence = sequence + 1 WHERE assignment_id = ? AND person_id IN (?) AND excused_at IS NULL',
        [at, id, personIds],
      );
    },

    async extend(entry: {
      id: string;
      assignmentId: string;
      personId: string;
      dueAt: Date;
      extraTries: number;
      reason: string;
      by: string;
      at: Date;
    }): Promise<void> {
      const e = entry;
      await manager.query(
        `INSERT INTO assignment_extension (id, assignment_id, person_id, due_at, extra_tries, reason, given_by, given_at)
         VALUES (?, ?, ?, ?, ?, ?, ?, ?)`,
        [e.id, e.assignmentId, e.personId, e.dueAt, e.extraTries, e.reason, e.by, e.at],
      );
      await manager.query(
        `UPDATE assignment_person SET due_at = ?, extra_tries = extra_tries + ?, sequence = sequence + 1
         WHERE assignment_id = ? AND person_id = ?`,
        [e.dueAt, e.extraTries, e.assignmentId, e.personId],
      );
    },

    /** True when this notice was not given before: the unique key of its occasion decides, whoever is first. */
    async noteNotice(notice: {
      id: string;
      assignmentId: string;
      personId: string;
      kind: NoticeKind;
      occasion: string;
      at: Date;
    }): Promise<boolean> {
      const sql =
        'INSERT IGNORE INTO assignment_notice (id, assignment_id, person_id, kind, occasion, created_at) VALUES (?, ?, ?, ?, ?, ?)';
      const n = notice;
      return (await changes(sql, [n.id, n.assignmentId, n.personId, n.kind, n.occasion, n.at])) > 0;
    },

    async countTry(entry: {
      attemptId: string;
      assignmentId: string;
      personId: string;
      scenarioId: string;
      tryNumber: number;
    }): Promise<void> {
      const { attemptId, assignmentId, personId, scenarioId, tryNumber } = entry;
      await manager.query(
        'INSERT INTO assignment_attempt (attempt_id, assignment_id, person_id, scenario_id, try_number) VALUES (?, ?, ?, ?, ?)',
        [attemptId, assignmentId, personId, scenarioId, tryNumber],
      );
    },

    /** Open assignments that set this scenario for the person and allow no practice. */
    withoutPractice: (organisationId: string, personId: string, scenarioId: string) =>
      all(
        assignmentRow,
        `${SELECT} INNER JOIN assignment_person ap ON ap.assignment_id = a.id AND ap.person_id = ? AND ap.excused_at IS NULL
         INNER JOIN assignment_scenario i ON i.assignment_id = a.id AND i.scenario_id = ?
         WHERE a.organisation_id = ? AND a.closed_at IS NULL AND a.practice = 0`,
        [personId, scenarioId, organisationId],
      ),

    /** The assignment for which an attempt counts. */
    async ofAttempt(attemptId: string): Promise<{ organisationId: string; assignmentId: string } | null> {
      const [row] = await all(
        z.object({ organisationId: z.string(), assignmentId: z.string() }),
        `SELECT a.organisation_id AS organisationId, a.id AS assignmentId FROM assignment_attempt c
         INNER JOIN assignment a ON a.id = c.assignment_id WHERE c.attempt_id = ?`,
        [attemptId],
      );
      return row ?? null;
    },

    /** People whose reminder is due and was not given for this due time. */
    remindersDue: (at: Date) =>
      all(
        z.object({ organisationId: z.string(), assignmentId: z.string(), personId: z.string() }),
        `SELECT a.organisation_id AS organisationId, a.id AS assignmentId, ap.person_id AS personId
         FROM assignment a INNER JOIN assignment_person ap ON ap.assignment_id = a.id
         INNER JOIN person p ON p.id = ap.person_id AND p.status = 'active'
         WHERE a.closed_at IS NULL AND a.reminder_days IS NOT NULL AND ap.excused_at IS NULL AND ap.due_at > ?
           AND ap.due_at <= ? + INTERVAL a.reminder_days DAY AND a.opens_at <= ?
           AND NOT EXISTS (SELECT 1 FROM assignment_notice n WHERE n.assignment_id = a.id AND n.person_id = ap.person_id
             AND n.kind = 'reminder' AND n.occasion = CONCAT('due ', DATE_FORMAT(ap.due_at, '%Y-%m-%dT%H:%i')))
         LIMIT 500`,
        [at, at, at],
      ),
  };
}

export type AssignmentsRepository = ReturnType<typeof createAssignmentsRepository>;
