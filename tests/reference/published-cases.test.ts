import { describe, expect, it } from 'vitest';
import { allChecks, publishedChecks } from '#shared/analysis/checks/all-checks.ts';
import { PUBLISHED_SETS } from '#shared/analysis/checks/data-sets.ts';
import { runCheck } from '#shared/analysis/checks/published-case.ts';
import type { PublishedCase } from '#shared/analysis/checks/published-case.ts';
import { documentOfSet } from '#shared/analysis/checks/set-airframe.ts';
import { hasAllShipped } from '#shared/analysis/checks/shipped-slugs.ts';
import { topicOf } from '#shared/analysis/checks/topics.ts';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import { SHIPPED } from './shipped-airframes.ts';

const checks = allChecks(SHIPPED);
const groups = [...new Set(checks.map((check) => check.group))];

function title(check: PublishedCase): string {
  return check.kind === 'value' ? `${check.quantity}: ${check.published} ${check.unit}` : check.statement;
}

for (const group of groups) {
  describe(group, () => {
    it.each(checks.filter((check) => check.group === group).map((check) => [title(check), check] as const))(
      '%s',
      (_title, check) => {
        const outcome = runCheck(check);
        expect(outcome, `${check.id} (${check.source}, ${check.provenance})`).toMatchObject({ verdict: 'agrees' });
      },
    );
  });
}

describe('the list of cases', () => {
  it('has unique ids, a source and a positive tolerance everywhere', () => {
    expect(new Set(checks.map((check) => check.id)).size).toBe(checks.length);
    for (const check of checks) {
      expect(check.source.length).toBeGreaterThan(5);
      if (check.kind === 'value') expect(Object.values(check.tolerance)[0]).toBeGreaterThan(0);
    }
  });

  it.each([
    // One entry per row of the reference page; a prefix of the ids that cover it.
    ['Etkin & Reid matrix', 'etkin-matrix-'],
    ['characteristic polynomial', 'etkin-polynomial-'],
    ['Routh value', 'etkin-routh'],
    ['non-dimensional 747', 'etkin-set-'],
    ['one-degree roll', 'etkin-roll'],
    ['roll–spiral approximation', 'etkin-slow'],
    ['Dutch roll approximation', 'etkin-two-'],
    ['DC-8 φ/δa', 'dc8-bank-'],
    ['DC-8 dimensional derivatives', 'dc8-1-'],
    ['DC-8 step', 'dc8-step-'],
    ['NAVION printed matrix', 'navion-matrix-'],
    ['|φ/β|, 747', 'etkin-phi-beta'],
    ['|φ/β|, DC-8', 'dc8-phi-beta'],
    ['|φ/β|, NAVION', 'navion-phi-beta'],
    ['traps', 'trap-'],
    ['table VI', 'mil-vi-'],
    ['table VII', 'mil-vii-'],
    ['table VIII', 'mil-viii-'],
    ['coupled roll–spiral', 'mil-coupled'],
    ['roll-rate oscillation', 'mil-oscillation-'],
    ['table IX', 'mil-ix-'],
    ['sideslip on the approach', 'mil-sideslip'],
    ['3.3.7 and 3.3.9.2', 'mil-failure-'],
    ['25.149', 'cfr-25149-'],
    ['25.147(a)', 'cfr-25147-'],
    ['23.149', 'cfr-23149-'],
    ['23.181(b)', 'cfr-23181'],
    ['25.237(a)', 'cfr-25237-'],
    ['25.341(a)', 'cfr-25341-'],
    ['Cessna 310 trims', 'c310-beta-'],
    ['Cessna 310 speeds', 'c310-speed-'],
    ['Cessna 310 slip', 'c310-slip-'],
    ['Cessna 310 modes', 'c310-spiral'],
    ['Boeing 747 approach', 'b747-'],
    ['Learjet', 'learjet-'],
    ['turbulence', 'dryden-'],
    ['fin', 'fin-'],
    ['flap', 'flap-'],
    ['cross derivatives', 'cross-derivatives'],
    ['dorsal fin', 'dorsal-fin'],
    ['atmosphere', 'isa-density-'],
    ['airspeeds', 'cas-'],
    ['independent minimum control speeds', 'vmc-light-twin-'],
  ])('covers %s', (_row, prefix) => {
    expect(checks.filter((check) => check.id.startsWith(prefix)).length).toBeGreaterThan(0);
  });

  it('without the shipped airframes holds the same published cases, less the facts shown on them', () => {
    const published = new Set(publishedChecks().map(({ id }) => id));
    const left = checks.filter(({ id }) => !published.has(id));
    expect(published.size + left.length).toBe(checks.length);
    expect(left.length).toBeGreaterThan(30);
    expect(new Set(left.map(({ group }) => topicOf(group)))).toEqual(
      new Set(['Minimum control speed', 'Common practice']),
    );
    expect(hasAllShipped(SHIPPED)).toBe(true);
    expect(hasAllShipped({ ...SHIPPED, 'twin-jet': undefined })).toBe(false);
  });

  it('stands under nine topics, each in one piece', () => {
    const topics = checks.map(({ group }) => topicOf(group));
    const pieces = topics.filter((topic, i) => topic !== topics[i - 1]);
    expect(new Set(topics).size).toBe(9);
    expect(pieces).toHaveLength(9);
  });

  it('finds a wrong value: every value case differs when its published number moves by three tolerances', () => {
    for (const check of checks) {
      if (check.kind !== 'value') continue;
      const bound =
        'absolute' in check.tolerance ? check.tolerance.absolute : check.tolerance.relative * Math.abs(check.published);
      const moved = { ...check, published: check.published + 3 * bound, tolerance: { absolute: bound } };
      expect(runCheck(moved).verdict, check.id).toBe('differs');
    }
  });
});

describe('published sets as airframe files', () => {
  it.each(PUBLISHED_SETS.map((set) => [set.aircraft, set] as const))('%s is accepted by the format', (_name, set) => {
    expect(parseAirframe(documentOfSet(set))).toMatchObject({ ok: true });
  });
});
