/** What a file says about one of its values. */
export interface ValueSource {
  /** The source's text; null when none covers the value. */
  text: string | null;
  /** 2σ, per cent of the value; null when not stated. */
  uncertaintyPct: number | null;
}

const member = (value: unknown, name: string): unknown =>
  typeof value === 'object' && value !== null && Object.hasOwn(value, name) ? Reflect.get(value, name) : undefined;

/**
 * Source and uncertainty of one value: the entry with the longest pointer that leads to it counts, "*" is the shortest.
 *
 * @param document  An airframe file, finished or not.
 * @param field     JSON Pointer of the value.
 * @returns         The source's text and 2σ; nulls where no entry covers the value.
 * @throws          Nothing.
 * @sign            none
 * @source          Flight model, airframe data: sources.
 */
export function valueSource(document: unknown, field: string): ValueSource {
  const sources = member(document, 'sources');
  let best: ValueSource = { text: null, uncertaintyPct: null };
  let length = -1;
  for (const source of Array.isArray(sources) ? sources : []) {
    const of = member(source, 'field');
    const text = member(source, 'text');
    if (typeof of !== 'string' || typeof text !== 'string') continue;
    if (of !== '*' && of !== field && !field.startsWith(`${of}/`)) continue;
    const weight = of === '*' ? 0 : of.length;
    if (weight < length) continue;
    const pct = member(source, 'uncertainty_pct');
    length = weight;
    best = { text, uncertaintyPct: typeof pct === 'number' ? pct : null };
  }
  return best;
}
