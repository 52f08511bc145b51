import type { FactCase, Provenance, PublishedCase } from './published-case.ts';

/** What the cases of one group share. */
export interface GroupDefaults {
  group: string;
  source: string;
  provenance: Provenance;
}

/** Id, quantity, unit, published value, tolerance (absolute, or "0.5 %" of the value), computation, what differs. */
export type ValueRow = readonly [
  id: string,
  quantity: string,
  unit: string,
  published: number,
  tolerance: number | `${number} %`,
  compute: () => number,
  overrides?: Partial<GroupDefaults>,
];

/** Value cases from rows. */
export function values(defaults: GroupDefaults, rows: readonly ValueRow[]): PublishedCase[] {
  return rows.map(([id, quantity, unit, published, tolerance, compute, overrides]) => ({
    kind: 'value',
    id,
    quantity,
    unit,
    published,
    tolerance:
      typeof tolerance === 'number' ? { absolute: tolerance } : { relative: Number.parseFloat(tolerance) / 100 },
    compute,
    ...defaults,
    ...overrides,
  }));
}

/** Id, quantity, statement, computation, what differs. */
export type FactRow = readonly [
  id: string,
  quantity: string,
  statement: string,
  compute: FactCase['compute'],
  overrides?: Partial<GroupDefaults>,
];

/** Fact cases from rows. */
export function facts(defaults: GroupDefaults, rows: readonly FactRow[]): PublishedCase[] {
  return rows.map(([id, quantity, statement, compute, overrides]) => ({
    kind: 'fact',
    id,
    quantity,
    statement,
    compute,
    ...defaults,
    ...overrides,
  }));
}

/** A number for reading inside a fact. */
export function shown(x: number): string {
  return Number.isFinite(x) ? String(Number(x.toPrecision(4))) : 'no value';
}
