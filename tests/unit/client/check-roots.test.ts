import { describe, expect, it } from 'vitest';
import type { CheckLine, OutcomeLine } from '../../../src/runner/workers/checks/checks-types.ts';
import { approximationsOf, rootsOfCase } from '../../../src/views/checks/roots-of-case.ts';
import { shortNumber, withBlank } from '../../../src/views/checks/use-checks.ts';

function line(id: string, published: number, group = 'Modes: A'): CheckLine {
  return {
    ...{ id, group, topic: 'Modes', quantity: `Printed matrix: ${id}`, provenance: 'seen', source: 'a book' },
    ...{ kind: 'value', published, unit: '1/s', tolerance: 1e-3, toleranceText: '0.001' },
  };
}
const four = (base: string, group?: string): CheckLine[] => [
  line(`${base}-spiral`, -0.01, group),
  line(`${base}-roll`, -1.2, group),
  line(`${base}-dutch-re`, -0.1, group),
  line(`${base}-dutch-im`, 0.9, group),
];
const outcome = (computed: number): OutcomeLine => ({ verdict: 'agrees', computed, deviation: 0.1, detail: '' });

describe('roots of a case', () => {
  const lines = [...four('x'), line('x-zeta', 0.1), ...four('y'), line('lonely', 1, 'Modes: B')];

  it('are the four lines of its own matrix, published and computed', () => {
    const outcomes = new Map([
      ['y-roll', outcome(-1.21)],
      ['y-dutch-re', outcome(-0.11)],
    ]);
    const found = rootsOfCase(lines[7], lines, outcomes); // y-dutch-re
    expect(found?.roots).toEqual([
      { name: 'Dutch roll', published: { re: -0.1, im: 0.9 }, computed: null },
      { name: 'Roll', published: { re: -1.2, im: 0 }, computed: { re: -1.21, im: 0 } },
      { name: 'Spiral', published: { re: -0.01, im: 0 }, computed: null },
    ]);
    expect(found?.what).toBe('Printed matrix');
  });

  it('are those of the first matrix of the group for any other line, and none where the group has none', () => {
    expect(rootsOfCase(lines[4], lines, new Map())?.roots).toHaveLength(3);
    expect(rootsOfCase(lines[9], lines, new Map())).toBeNull();
  });
});

describe('approximations of a case', () => {
  it('stand beside the exact value of the same group once both have run', () => {
    const lines = [line('etkin-omega', 0.947), line('etkin-two-omega', 0.921), line('etkin-zeta', 0.035)];
    const outcomes = new Map([
      ['etkin-omega', outcome(0.947)],
      ['etkin-two-omega', outcome(0.921)],
      ['etkin-zeta', outcome(0.035)],
    ]);
    expect(approximationsOf(lines[0], lines, outcomes)).toEqual([
      { what: 'Dutch roll ω', exact: 0.947, approximate: 0.921, apart: '3 %' },
    ]);
    outcomes.set('etkin-two-zeta', outcome(0.1094));
    expect(approximationsOf(lines[0], lines, outcomes)[1]).toMatchObject({ apart: '× 3.1' });
    expect(approximationsOf(line('other', 1, 'Modes: B'), lines, outcomes)).toEqual([]);
  });
});

it('numbers keep apart from their units, save a degree sign', () => {
  expect(`${shortNumber(-0.0072973)}${withBlank('1/s')}`).toBe('-0.0072973\u00A01/s');
  expect(`${shortNumber(4.28)}${withBlank('°')}`).toBe('4.28°');
  expect([shortNumber(null), shortNumber(0.1 + 0.2)]).toEqual(['…', '0.3']);
});
