/** Writing where a value comes from into a draft. */
import { valueAtPointer, withValue, type Json } from './draft-document.ts';

interface SourceEntry {
  readonly [name: string]: Json;
}
const isEntry = (value: Json): value is SourceEntry =>
  value !== null && typeof value === 'object' && !Array.isArray(value);

/** The draft with one source for each of the given members; an entry that names a member already is replaced. */
export function withSource(
  document: Json,
  pointers: readonly string[],
  text: string,
  uncertaintyPct: number | null,
): Json {
  const sources = valueAtPointer(document, '/sources');
  const others = Array.isArray(sources)
    ? sources.filter((one) => !isEntry(one) || !pointers.includes(String(one['field'])))
    : [];
  const entries = pointers.map((field) => ({
    field,
    text,
    ...(uncertaintyPct !== null && { uncertainty_pct: uncertaintyPct }),
  }));
  return withValue(document, '/sources', [...others, ...entries]);
}
