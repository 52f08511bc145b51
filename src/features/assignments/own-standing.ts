import type { OwnAssignment, Tries } from '#shared/contracts/assignments.ts';
import type { GlyphState } from '../../components/state-words.ts';

/** One scenario that is set for the reader, as a row by due date. */
export interface SetRow {
  assignment: OwnAssignment;
  scenario: Tries;
  key: string;
  used: number;
  left: number | null;
  state: GlyphState;
  word: string;
  open: boolean;
}

function stateOf(assignment: OwnAssignment, scenario: Tries, now: Date): { state: GlyphState; word: string } {
  const last = scenario.tries.at(-1);
  if (scenario.passedAt !== null) {
    const signed = scenario.tries.some((flown) => flown.signed && flown.met === true);
    if (signed) return { state: 'met', word: 'Signed off' };
    return last?.verdict === 'near' ? { state: 'near', word: 'Met, close' } : { state: 'met', word: 'Met' };
  }
  if (assignment.closedAt !== null) return { state: 'lost', word: 'Closed' };
  if (new Date(assignment.opensAt) > now) return { state: 'waiting', word: 'Not open yet' };
  if (scenario.allowed !== null && scenario.tries.length >= scenario.allowed) {
    return last?.met === null ? { state: 'running', word: 'Flying' } : { state: 'not', word: 'Tries used' };
  }
  if (last === undefined) {
    return new Date(assignment.dueAt) < now ? { state: 'not', word: 'Late' } : { state: 'waiting', word: 'Not flown' };
  }
  if (assignment.passRule === 'sign-off' && last.met === true) return { state: 'near', word: 'To be signed' };
  if (assignment.passRule === 'two-in-a-row' && last.met === true) return { state: 'near', word: 'Met once' };
  return { state: 'not', word: 'Not met yet' };
}

/** Rows of "Set for me": what is open first, by due date, then what is passed or closed. */
export function setRows(own: readonly OwnAssignment[], now: Date): SetRow[] {
  const rows = own.flatMap((assignment) =>
    assignment.scenarios.map((scenario): SetRow => {
      const used = scenario.tries.length;
      const left = scenario.allowed === null ? null : Math.max(0, scenario.allowed - used);
      return {
        assignment,
        scenario,
        key: `${assignment.id} ${scenario.slug}`,
        used,
        left,
        ...stateOf(assignment, scenario, now),
        open:
          assignment.closedAt === null &&
          scenario.passedAt === null &&
          left !== 0 &&
          new Date(assignment.opensAt) <= now,
      };
    }),
  );
  const done = (row: SetRow): number => (row.assignment.closedAt !== null || row.scenario.passedAt !== null ? 1 : 0);
  return rows.sort((a, b) => done(a) - done(b) || a.assignment.dueAt.localeCompare(b.assignment.dueAt));
}

/** "Fly, last attempt", "Fly, attempt 2 of 3". */
export function flyWords({ used, left, scenario }: SetRow): string {
  if (scenario.allowed === null) return 'Fly, counts';
  if (left === 1 && scenario.allowed > 1) return 'Fly, last attempt';
  return `Fly, attempt ${used + 1} of ${scenario.allowed}`;
}
