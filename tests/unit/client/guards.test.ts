import { describe, expect, it } from 'vitest';
import { areasFor, homeFor, roleWords } from '../../../src/router/areas.ts';
import { decide, type GuardSession, mayOpen, safeReturn } from '../../../src/router/guards.ts';

const out: GuardSession = { state: 'signed-out', roles: [] };
const trainee: GuardSession = { state: 'signed-in', roles: ['trainee'] };

function to(fullPath: string, more: { name?: string; open?: boolean } = {}) {
  const url = new URL(fullPath, 'http://site.example');
  return {
    fullPath,
    path: url.pathname,
    query: Object.fromEntries(url.searchParams),
    name: more.name,
    meta: { title: '', ...(more.open ? { open: true } : {}) },
  };
}

describe('route guard', () => {
  it('sends a stranger to sign in and remembers where to', () => {
    expect(decide(to('/scenarios?page=2'), out)).toEqual({ name: 'sign-in', query: { return: '/scenarios?page=2' } });
    expect(decide(to('/'), out)).toEqual({ name: 'sign-in', query: {} });
  });

  it('lets a stranger open what is open', () => {
    expect(decide(to('/sign-in', { name: 'sign-in', open: true }), out)).toBe(true);
  });

  it('takes someone signed in from the start and from sign-in to where they belong', () => {
    expect(decide(to('/'), trainee)).toBe('/my-flights');
    expect(decide(to('/sign-in', { name: 'sign-in', open: true }), trainee)).toBe('/my-flights');
    expect(decide(to('/sign-in?return=%2Fscenarios', { name: 'sign-in', open: true }), trainee)).toBe('/scenarios');
  });

  it('keeps the address of a page the person may not open: the page itself refuses', () => {
    expect(decide(to('/airframes'), trainee)).toBe(true);
    expect(mayOpen(['engineer', 'instructor'], ['trainee'])).toBe(false);
    expect(mayOpen(['engineer', 'instructor'], ['trainee', 'instructor'])).toBe(true);
    expect(mayOpen(undefined, [])).toBe(true);
  });

  it.each([
    'https://elsewhere.example',
    '//elsewhere.example',
    '/\\elsewhere.example',
    'scenarios',
    '/sign-in',
    '/',
    7,
  ])('never returns to %s', (address) => {
    expect(safeReturn(address)).toBeNull();
  });
});

describe('areas', () => {
  it('shows each role its own areas, in one order', () => {
    expect(areasFor(['trainee']).map((area) => area.name)).not.toContain('airframes');
    expect(areasFor(['trainee']).map((area) => area.name)).toContain('my-flights');
    expect(areasFor(['engineer']).map((area) => area.name)).toContain('airframes');
    expect(areasFor(['engineer']).map((area) => area.name)).not.toContain('my-flights');
  });

  it('starts each person in an area that is theirs', () => {
    for (const role of ['trainee', 'instructor', 'engineer', 'administrator'] as const) {
      expect(areasFor([role]).map((area) => area.to)).toContain(homeFor([role]));
    }
  });

  it('names several roles in words', () => {
    expect(roleWords(['engineer', 'instructor'])).toBe('Instructor, engineer');
  });
});
