/** Changed members of two airframes in words that an engineer reads: derivatives by name, other members by path. */
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { changedPointers, valueAtPointer, type Json } from '../airframe-editing/draft-document.ts';
import { DERIVATIVE_SUFFIXES, sourceOf } from '../airframe-editing/derivative-rows.ts';

export interface DerivativeChange {
  pointer: string;
  /** e.g. CY and β, set apart for the subscript. */
  letter: string;
  sign: string;
  configuration: string;
  CL: number;
  before: number;
  after: number;
  /** 2σ as a share of the value; null without one. */
  spreadBefore: number | null;
  spreadAfter: number | null;
}
export interface OtherChange {
  pointer: string;
  name: string;
  before: string;
  after: string;
}
export interface DataChanges {
  derivatives: DerivativeChange[];
  others: OtherChange[];
  /** How many values both revisions hold together. */
  values: number;
}

/** Both documents as plain JSON: parsed airframes contain nothing else. */
const json = (airframe: Airframe): Json => airframe as unknown as Json;

export function dataChanges(before: Airframe, after: Airframe): DataChanges {
  const pointers = changedPointers(json(before), json(after));
  const derivatives: DerivativeChange[] = [];
  const others: OtherChange[] = [];
  for (const pointer of pointers) {
    const match = /^\/configurations\/(\d+)\/derivatives\/(\d+)\/(CY|Cl|Cn)_(beta|p|r|da|dr)$/.exec(pointer);
    const a = valueAtPointer(json(before), pointer);
    const b = valueAtPointer(json(after), pointer);
    if (match && typeof a === 'number' && typeof b === 'number') {
      const configuration = after.configurations[Number(match[1])];
      const spread = (airframe: Airframe): number | null => {
        const pct = sourceOf(airframe, pointer).uncertaintyPct;
        return pct === null ? null : pct / 100;
      };
      derivatives.push({
        pointer,
        letter: match[3] ?? '',
        sign: DERIVATIVE_SUFFIXES.find((s) => s.key === match[4])?.sign ?? match[4] ?? '',
        configuration: configuration?.name ?? '',
        CL: configuration?.derivatives[Number(match[2])]?.CL ?? NaN,
        before: a,
        after: b,
        spreadBefore: spread(before),
        spreadAfter: spread(after),
      });
    } else others.push({ pointer, name: memberName(pointer, before, after), before: words(a), after: words(b) });
  }
  return { derivatives, others, values: countValues(json(after)) };
}

function words(value: Json | undefined): string {
  if (value === undefined) return 'not given';
  if (value === true) return 'yes';
  if (value === false) return 'no';
  if (value === null) return 'empty';
  if (typeof value === 'object') return Array.isArray(value) ? `${value.length} entries` : 'given';
  return String(value);
}

/** A pointer as a path of words; list entries by their own name. */
export function memberName(pointer: string, before: Airframe, after: Airframe): string {
  const parts = pointer.split('/').slice(1);
  const out: string[] = [];
  let path = '';
  for (const part of parts) {
    path += `/${part}`;
    if (!/^\d+$/.test(part)) {
      out.push(part.replace(/_(kg|m|m2|kgm2|deg|deg_s|s|kt|N|W|pct|per_rad)$/, ' ($1)').replaceAll('_', ' '));
      continue;
    }
    const name = valueAtPointer(json(after), `${path}/name`) ?? valueAtPointer(json(before), `${path}/name`);
    out.push(typeof name === 'string' ? name : String(Number(part) + 1));
  }
  return out.join(', ');
}

function countValues(value: Json): number {
  if (value === null || typeof value !== 'object') return 1;
  return Object.values(value).reduce<number>((sum, member) => sum + countValues(member as Json), 0); // members of JSON are JSON
}
