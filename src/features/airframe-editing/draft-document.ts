import { z } from 'zod';
/** An airframe file being edited: plain JSON, changed only through pointers, with undo to the start of the session. */

export type Json = null | boolean | number | string | readonly Json[] | { readonly [name: string]: Json };

/** A parsed answer or file as JSON, whatever its type said. @throws when it holds anything that JSON cannot. */
export const jsonOf = (value: unknown): Json => z.json().parse(value);

export interface DraftHistory {
  readonly present: Json;
  readonly past: readonly Json[];
  readonly future: readonly Json[];
  /** What the last change was about; changes of one field in a row share an undo step. */
  readonly lastField: string | null;
}

/** More changes than a session of writing holds: undo reaches its start. Documents share what did not change. */
const DEPTH = 20_000;

/** Starts a history at a document. */
export function openDraft(document: Json): DraftHistory {
  return { present: document, past: [], future: [], lastField: null };
}

/** The parts of a JSON Pointer. */
export function pointerParts(pointer: string): string[] {
  if (pointer === '') return [];
  return pointer
    .split('/')
    .slice(1)
    .map((part) => part.replaceAll('~1', '/').replaceAll('~0', '~'));
}

/** Value at a pointer; undefined where the document has none. */
export function valueAtPointer(document: Json, pointer: string): Json | undefined {
  let at: Json | undefined = document;
  for (const part of pointerParts(pointer)) {
    if (at === null || typeof at !== 'object') return undefined;
    at = Array.isArray(at)
      ? at[Number(part)]
      : Object.hasOwn(at, part)
        ? (at as Record<string, Json>)[part]
        : undefined; // an object here
  }
  return at;
}

function changed(at: Json | undefined, parts: readonly string[], value: Json | undefined): Json | undefined {
  const [head, ...rest] = parts;
  if (head === undefined) return value;
  if (Array.isArray(at)) {
    const copy: Json[] = [...at];
    const index = head === '-' ? copy.length : Number(head);
    const next = changed(copy[index], rest, value);
    if (next === undefined) copy.splice(index, 1);
    else copy[index] = next;
    return copy;
  }
  const copy: Record<string, Json> = at !== null && typeof at === 'object' ? { ...(at as Record<string, Json>) } : {}; // not an array: checked above
  const next = changed(copy[head], rest, value);
  if (next === undefined) delete copy[head];
  else copy[head] = next;
  return copy;
}

/** The document with one value replaced, added ("-" appends to a list) or, with undefined, taken out. */
export function withValue(document: Json, pointer: string, value: Json | undefined): Json {
  return changed(document, pointerParts(pointer), value) ?? null;
}

/** Records a change. Successive changes of the same field merge into one undo step. */
export function recordChange(history: DraftHistory, next: Json, field: string, merge = false): DraftHistory {
  if (next === history.present) return history;
  const join = merge && history.lastField === field && history.past.length > 0;
  return {
    present: next,
    past: join ? history.past : [...history.past, history.present].slice(-DEPTH),
    future: [],
    lastField: field,
  };
}

/** One step back; the same history when there is none. */
export function undo(history: DraftHistory): DraftHistory {
  const before = history.past.at(-1);
  if (before === undefined) return history;
  return {
    present: before,
    past: history.past.slice(0, -1),
    future: [history.present, ...history.future],
    lastField: null,
  };
}

/** One step forward again; the same history when there is none. */
export function redo(history: DraftHistory): DraftHistory {
  const [next, ...rest] = history.future;
  if (next === undefined) return history;
  return { present: next, past: [...history.past, history.present], future: rest, lastField: null };
}

/** Pointers whose values differ between two documents, deepest members only. */
export function changedPointers(before: Json | undefined, after: Json | undefined, at = ''): string[] {
  if (before === after) return [];
  const isTree = (value: Json | undefined): value is readonly Json[] | { readonly [name: string]: Json } =>
    value !== null && typeof value === 'object';
  if (!isTree(before) || !isTree(after) || Array.isArray(before) !== Array.isArray(after)) return [at];
  const names = new Set([...Object.keys(before), ...Object.keys(after)]);
  const out: string[] = [];
  for (const name of names) {
    const step = `${at}/${name.replaceAll('~', '~0').replaceAll('/', '~1')}`;
    out.push(...changedPointers(Reflect.get(before, name), Reflect.get(after, name), step));
  }
  return out;
}
