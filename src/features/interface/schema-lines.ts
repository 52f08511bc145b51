/** One member of a JSON Schema as a line of a table. */
export interface SchemaLine {
  depth: number;
  name: string;
  kind: string;
  rules: string;
  required: boolean;
}
type Schema = Readonly<Record<string, unknown>>;

const DEEPEST = 7;
const MOST_LINES = 160;
const isSchema = (value: unknown): value is Schema =>
  typeof value === 'object' && value !== null && !Array.isArray(value);
const listOf = (value: unknown): unknown[] => (Array.isArray(value) ? value : []);
const alternatives = (schema: Schema): Schema[] =>
  [...listOf(schema['anyOf']), ...listOf(schema['oneOf'])].filter(isSchema);

/** The schema without the alternative "null", and whether there was one. */
function withoutNull(schema: Schema): { schema: Schema; nullable: boolean } {
  const all = alternatives(schema);
  const rest = all.filter((one) => one['type'] !== 'null');
  const [only] = rest;
  if (all.length === rest.length || only === undefined) return { schema, nullable: false };
  return rest.length === 1 ? { schema: only, nullable: true } : { schema: { anyOf: rest }, nullable: true };
}

function kindOf(given: Schema): string {
  const { schema, nullable } = withoutNull(given);
  const ending = nullable ? ' or null' : '';
  if ('const' in schema) return JSON.stringify(schema['const']) + ending;
  if (Array.isArray(schema['enum'])) return schema['enum'].map((one) => JSON.stringify(one)).join(' | ') + ending;
  const others = alternatives(schema);
  if (others.length > 0) return [...new Set(others.map(kindOf))].join(' | ') + ending;
  const type = schema['type'];
  if (type === 'array') return `list of ${isSchema(schema['items']) ? kindOf(schema['items']) : 'anything'}${ending}`;
  if (typeof type === 'string') return (typeof schema['format'] === 'string' ? schema['format'] : type) + ending;
  return `anything${ending}`;
}

const BOUNDS: Readonly<Record<string, (value: unknown) => string>> = {
  minimum: (v) => `≥ ${String(v)}`,
  exclusiveMinimum: (v) => `> ${String(v)}`,
  maximum: (v) => `≤ ${String(v)}`,
  exclusiveMaximum: (v) => `< ${String(v)}`,
  minLength: (v) => `at least ${String(v)} ${v === 1 ? 'character' : 'characters'}`,
  maxLength: (v) => `at most ${String(v)} characters`,
  minItems: (v) => `at least ${String(v)}`,
  maxItems: (v) => `at most ${String(v)}`,
};
export function rulesOf(given: Schema): string {
  const { schema } = withoutNull(given);
  const bounds = Object.entries(BOUNDS).flatMap(([name, words]) => {
    const value = schema[name];
    return typeof value === 'number' && Math.abs(value) < Number.MAX_SAFE_INTEGER ? [words(value)] : [];
  });
  const standard = 'default' in given ? [`otherwise ${JSON.stringify(given['default'])}`] : [];
  return [...bounds, ...standard].join(', ');
}

/** Lines of a schema's members, depth first, so far as a person still reads them. */
export function schemaLines(schema: Schema): SchemaLine[] {
  const lines: SchemaLine[] = [];
  const walk = (given: Schema, depth: number): void => {
    const { schema: one } = withoutNull(given);
    if (depth > DEEPEST) return;
    if (isSchema(one['items'])) {
      walk(one['items'], depth);
      return;
    }
    for (const other of alternatives(one)) walk(other, depth);
    const required = new Set(listOf(one['required']));
    if (!isSchema(one['properties'])) return;
    for (const [name, member] of Object.entries(one['properties'])) {
      if (!isSchema(member)) continue;
      if (lines.length >= MOST_LINES) return;
      lines.push({ depth, name, kind: kindOf(member), rules: rulesOf(member), required: required.has(name) });
      walk(member, depth + 1);
    }
  };
  walk(schema, 0);
  if (lines.length === 0)
    lines.push({ depth: 0, name: '', kind: kindOf(schema), rules: rulesOf(schema), required: true });
  return lines;
}

/** A value that the schema takes, so far as its form tells; for examples. */
export function exampleOf(given: Schema, depth = 0): unknown {
  const { schema } = withoutNull(given);
  if ('const' in schema) return schema['const'];
  if ('default' in schema && depth > 0) return schema['default'];
  const [first] = listOf(schema['enum']);
  if (first !== undefined) return first;
  const [other] = alternatives(schema);
  if (other !== undefined) return exampleOf(other, depth);
  const type = schema['type'];
  if (type === 'array') {
    const { items } = schema;
    return isSchema(items) && depth <= DEEPEST ? [exampleOf(items, depth + 1)] : [];
  }
  if (type === 'object') {
    const members = isSchema(schema['properties']) ? Object.entries(schema['properties']) : [];
    const required = new Set(listOf(schema['required']));
    return Object.fromEntries(
      members.flatMap(([name, member]) =>
        required.has(name) && isSchema(member) && depth <= DEEPEST ? [[name, exampleOf(member, depth + 1)]] : [],
      ),
    );
  }
  if (type === 'integer' || type === 'number')
    return typeof schema['minimum'] === 'number' ? Math.max(schema['minimum'], 0) : 1;
  if (type === 'boolean') return true;
  if (schema['format'] === 'uuid') return '00000000-0000-4000-8000-000000000000';
  if (schema['format'] === 'date-time') return '2026-12-01T09:00:00Z';
  return type === 'string' ? 'text' : null;
}
