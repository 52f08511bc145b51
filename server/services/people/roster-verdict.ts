import type { RosterRow, RosterVerdict } from '#shared/contracts/administration.ts';
import { ROLES, type Role } from '#shared/contracts/session.ts';
import { z } from 'zod';
import { emailKey } from '../../data/repositories/people.repository.ts';

const MAX_NAME = 120;
const MAX_COHORT = 80;
const MAX_EMAIL = 254; // RFC 5321 path length less the angle brackets

/** A roster row that can be invited. */
export interface GoodRow {
  line: number;
  name: string;
  email: string;
  roles: Role[];
  cohort: string | null;
}
export type JudgedRow = { verdict: RosterVerdict; good: GoodRow | null };

/** The cohort of a row as it is stored. */
export const cohortName = (row: Pick<RosterRow, 'cohort'>): string =>
  row.cohort.normalize('NFC').trim().replace(/\s+/gu, ' ');

const isRole = (word: string): word is Role => (ROLES as readonly string[]).includes(word);

/**
 * Judges rows on their own and against each other; whether a person is here already is judged by `knownKeys`, the
 * compared forms of addresses in use. An address that differs from an earlier row only in letter case is a repetition.
 */
export function judgeRoster(
  rows: readonly RosterRow[],
  knownKeys: ReadonlyMap<string, 'here' | 'elsewhere'>,
  archivedCohorts: ReadonlySet<string> = new Set(),
): JudgedRow[] {
  const firstLine = new Map<string, number>();
  return rows.map((row) => {
    const wrong = (words: string): JudgedRow => ({ verdict: { line: row.line, verdict: 'wrong', words }, good: null });
    const name = row.name.normalize('NFC').trim().replace(/\s+/gu, ' ');
    const email = row.email.normalize('NFKC').trim();
    const cohort = cohortName(row);
    if (name === '') return wrong('The name is missing. Give the name as it is to be shown.');
    if (name.length > MAX_NAME) return wrong(`The name has more than ${MAX_NAME} characters. Shorten it.`);
    if (/[\p{Cc}\uFFFD\u202A-\u202E\u2066-\u2069]/u.test(name))
      return wrong('The name holds unreadable characters. Save the file as UTF-8.');
    if (email === '') return wrong('The address is missing. Give an e-mail address.');
    if (email.length > MAX_EMAIL || !z.email().safeParse(email).success) {
      return wrong(`“${email.slice(0, 60)}” is not an e-mail address. Write it as name@school.example.`);
    }
    const words = row.roles
      .toLowerCase()
      .split(/[\s,;/]+/u)
      .filter(Boolean);
    const unknown = words.find((word) => !isRole(word));
    if (unknown !== undefined) return wrong(`“${unknown.slice(0, 40)}” is not a role. Use ${ROLES.join(', ')}.`);
    if (cohort.length > MAX_COHORT) return wrong(`The cohort has more than ${MAX_COHORT} characters. Shorten it.`);
    if (/\p{Cc}|\uFFFD/u.test(cohort)) return wrong('The cohort holds unreadable characters. Save the file as UTF-8.');
    if (archivedCohorts.has(cohort)) {
      return wrong(`Cohort ${cohort} is archived. Restore it under Cohorts, or name another.`);
    }
    const key = emailKey(email);
    const before = firstLine.get(key);
    if (before !== undefined) return wrong(`Same address as line ${before}. Keep one of the two.`);
    firstLine.set(key, row.line);
    const known = knownKeys.get(key);
    if (known === 'elsewhere') return wrong('This address cannot be invited. Use another address.');
    if (known === 'here') {
      return { verdict: { line: row.line, verdict: 'here', words: 'Is here already; left as it is.' }, good: null };
    }
    const roles = words.length === 0 ? (['trainee'] satisfies Role[]) : [...new Set(words.filter(isRole))];
    return {
      verdict: { line: row.line, verdict: 'good', words: '' },
      good: { line: row.line, name, email, roles, cohort: cohort === '' ? null : cohort },
    };
  });
}
