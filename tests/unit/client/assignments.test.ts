import { describe, expect, it } from 'vitest';
import type { OwnAssignment, Targets } from '#shared/contracts/assignments.ts';
import { calendarDays, fieldsOf, untilWords } from '../../../src/features/assignments/due-words.ts';
import { flyWords, setRows } from '../../../src/features/assignments/own-standing.ts';
import { barParts, timeAxis } from '../../../src/features/assignments/time-axis.ts';
import { useChosenPeople } from '../../../src/features/assignments/use-chosen-people.ts';

const NOW = new Date(2026, 5, 4, 12, 0);
const at = (days: number, hour = 17): string => new Date(2026, 5, 4 + days, hour).toISOString();

function assignment(over: Partial<OwnAssignment> = {}): OwnAssignment {
  return {
    id: '00000000-0000-4000-8000-000000000001',
    title: 'Engine-out day',
    words: '',
    author: 'M. Okafor',
    opensAt: at(-3),
    dueAt: at(1),
    closedAt: null,
    passRule: 'one',
    practice: true,
    standing: 'to-fly',
    passedLate: false,
    scenarios: [{ slug: 'cut', title: 'Cut', revision: 1, tries: [], allowed: 3, passedAt: null }],
    ...over,
  };
}
const flown = (met: boolean | null, signed = false) => ({
  attemptId: '00000000-0000-4000-8000-00000000000a',
  met,
  verdict: met ? ('met' as const) : ('not-met' as const),
  at: at(-1),
  signed,
});

describe('words of a due date', () => {
  it('count days on the calendar, not hours', () => {
    expect(untilWords(at(0, 23), NOW)).toBe('today, 23:00');
    expect(untilWords(at(1, 1), NOW)).toBe('tomorrow, 01:00');
    expect(untilWords(at(4, 1), NOW)).toBe('4 days');
    expect(untilWords(at(21), NOW)).toBe('3 weeks');
    expect(untilWords(at(-1, 23), NOW)).toBe('1 day late');
    expect(untilWords(at(0, 10), NOW)).toBe('2 hours late');
  });

  it('are not misled by a night with a clock change', () => {
    // Whatever zone the tests run in, a day on the calendar is one day, also where it has 23 or 25 hours.
    for (let day = 0; day < 366; day++) {
      const today = new Date(2026, 0, 1 + day, 23, 30);
      expect(calendarDays(new Date(2026, 0, 2 + day, 0, 30), today)).toBe(1);
    }
    expect(fieldsOf('2026-10-25T01:30:00Z', 'Europe/Oslo')).toEqual({ day: '2026-10-25', time: '02:30' });
  });
});

describe('what is set for me', () => {
  it('comes by due date, what is done last', () => {
    const rows = setRows(
      [
        assignment({ id: 'a', dueAt: at(8) }),
        assignment({ id: 'b', dueAt: at(2) }),
        assignment({
          id: 'c',
          dueAt: at(-4),
          scenarios: [{ ...assignment().scenarios[0], tries: [flown(true, true)], passedAt: at(-5) }],
        }),
      ],
      NOW,
    );
    expect(rows.map(({ assignment: { id }, word }) => [id, word])).toEqual([
      ['b', 'Not flown'],
      ['a', 'Not flown'],
      ['c', 'Signed off'],
    ]);
  });

  it('says how many tries are left and why it cannot be flown', () => {
    const row = (over: Partial<OwnAssignment>, tries = [flown(false)], allowed: number | null = 3) =>
      setRows([assignment({ scenarios: [{ ...assignment().scenarios[0], tries, allowed }], ...over })], NOW)[0];
    expect(flyWords(row({}))).toBe('Fly, attempt 2 of 3');
    expect(flyWords(row({}, [flown(false), flown(false)]))).toBe('Fly, last attempt');
    expect(flyWords(row({}, [], null))).toBe('Fly, counts');
    expect(row({}, [flown(false)], 1)).toMatchObject({ word: 'Tries used', open: false });
    expect(row({ opensAt: at(1) }, [])).toMatchObject({ word: 'Not open yet', open: false });
    expect(row({ closedAt: at(-1) })).toMatchObject({ word: 'Closed', open: false });
    expect(row({ dueAt: at(-1) }, [])).toMatchObject({ word: 'Late', open: true });
    expect(row({ passRule: 'two-in-a-row' }, [flown(true)])).toMatchObject({ word: 'Met once', open: true });
    expect(row({ passRule: 'sign-off' }, [flown(true)])).toMatchObject({ word: 'To be signed', open: true });
  });
});

describe('the time axis', () => {
  const counts = { passed: 3, flown: 1, toFly: 0, late: 0 };
  const item = (from: number, to: number) => ({ opensAt: at(from), dueAt: at(to), counts });

  it('holds today and every bar, in order, within its ends', () => {
    const axis = timeAxis([item(-3, 5), item(-40, 90)], NOW);
    expect(axis.days.length).toBeLessThanOrEqual(42);
    expect(axis.days.filter(({ today }) => today)).toHaveLength(1);
    expect(axis.now).toBeGreaterThan(0);
    expect(axis.place(at(-40))).toBe(0);
    expect(axis.place(at(90))).toBe(1);
    expect(axis.place(at(-3))).toBeLessThan(axis.place(at(5)));
  });

  it('shares a bar by people', () => {
    const parts = barParts({ ...item(-3, 5) } as Parameters<typeof barParts>[0]); // only the counts are read
    expect(parts).toEqual([
      { kind: 'passed', share: 0.75 },
      { kind: 'flown', share: 0.25 },
    ]);
  });
});

describe('choosing people', () => {
  const person = (id: string, active = true) => ({ id, displayName: id.toUpperCase(), active });
  const targets: Targets = {
    cohorts: [{ id: 'k', name: '26-A', members: ['a', 'b', 'c', 'd'] }],
    people: [person('a'), person('b'), person('c'), person('d', false), person('e')],
  };

  it('sends a cohort without those left out, and others by name', () => {
    const chosen = useChosenPeople(() => targets);
    chosen.toggle(chosen.cohorts.value[0].members, true);
    expect(chosen.cohorts.value[0]).toMatchObject({ here: 3, all: true });
    chosen.toggle(['b'], false);
    chosen.toggle(['e'], true);
    expect(chosen.body.value).toEqual({ cohorts: ['k'], without: ['b'], people: ['e'] });
    expect(chosen.chips.value.map(({ text }) => text)).toEqual(['Cohort 26-A, 2', 'E']);
    chosen.toggle(['c'], false);
    expect(chosen.body.value).toEqual({ cohorts: [], without: [], people: ['a', 'e'] });
  });
});
