/** Two engineers on one draft: what each changed is found, put together, and chosen where both changed the same. */
import { describe, expect, it } from 'vitest';
import type { Json } from '../../../src/features/airframe-editing/draft-document.ts';
import { changedMembers, compareDrafts, mergeDrafts } from '../../../src/features/airframe-editing/merge-drafts.ts';
import { withSource } from '../../../src/features/airframe-editing/value-sources.ts';

const BASE = {
  name: 'Twin',
  mass: { mass_kg: 1750, Ixx_kgm2: 2900 },
  rows: [
    { CL: 0.4, Cn: 0.08 },
    { CL: 0.9, Cn: 0.07 },
  ],
  fin: { area_m2: 2.1 },
};
const at = (mine: Json, theirs: Json) => compareDrafts(BASE, mine, theirs);

describe('two versions of a draft', () => {
  it('are put together when they changed different values', () => {
    const mine = { ...BASE, name: 'My twin' };
    const theirs = { ...BASE, rows: [BASE.rows[0], { CL: 0.9, Cn: 0.06 }] } as Json; // plain JSON
    const comparison = at(mine, theirs);
    expect(comparison).toEqual({ mine: ['/name'], theirs: ['/rows/1/Cn'], both: [] });
    expect(mergeDrafts(mine, theirs, comparison, () => 'theirs')).toEqual({ ...(theirs as object), name: 'My twin' });
  });

  it('ask for a choice where both changed one value, and not where they changed it alike', () => {
    const mine = { ...BASE, name: 'Alike', mass: { ...BASE.mass, mass_kg: 1800 } };
    const theirs = { ...BASE, name: 'Alike', mass: { ...BASE.mass, mass_kg: 1900 } };
    const comparison = at(mine, theirs);
    expect(comparison.both).toEqual([{ pointer: '/mass/mass_kg', base: 1750, mine: 1800, theirs: 1900 }]);
    expect(mergeDrafts(mine, theirs, comparison, () => 'mine')).toEqual(mine);
    expect(mergeDrafts(mine, theirs, comparison, () => 'theirs')).toEqual(theirs);
  });

  it('treat a list whose length changed as one member', () => {
    const longer = { ...BASE, rows: [{ CL: 0.2, Cn: 0.09 }, ...BASE.rows] };
    const edited = { ...BASE, rows: [BASE.rows[0], { CL: 0.9, Cn: 0.05 }] } as Json; // plain JSON
    expect(changedMembers(BASE, longer)).toEqual(['/rows']);
    const comparison = at(longer, edited);
    expect(comparison.both.map(({ pointer }) => pointer)).toEqual(['/rows']);
    expect(mergeDrafts(longer, edited, comparison, () => 'mine')).toEqual(longer);
  });

  it('keep what one took out and the other changed as a choice', () => {
    const { fin: _fin, ...without } = BASE;
    const larger = { ...BASE, fin: { area_m2: 2.4 } };
    const comparison = at(without, larger);
    expect(comparison.both).toMatchObject([{ pointer: '/fin', mine: undefined, theirs: { area_m2: 2.4 } }]);
    expect(mergeDrafts(without, larger, comparison, () => 'mine')).toEqual(without);
    expect(mergeDrafts(without, larger, comparison, () => 'theirs')).toEqual(larger);
  });
});

describe('a source', () => {
  it('replaces the one that names the same value and leaves the others', () => {
    const document: Json = {
      sources: [
        { field: '*', text: 'all' },
        { field: '/fin/area_m2', text: 'old', uncertainty_pct: 5 },
      ],
    };
    expect(withSource(document, ['/fin/area_m2'], 'drawing 7', null)).toEqual({
      sources: [
        { field: '*', text: 'all' },
        { field: '/fin/area_m2', text: 'drawing 7' },
      ],
    });
    expect(withSource({}, ['/a', '/b'], 'x', 3)).toEqual({
      sources: [
        { field: '/a', text: 'x', uncertainty_pct: 3 },
        { field: '/b', text: 'x', uncertainty_pct: 3 },
      ],
    });
  });
});
