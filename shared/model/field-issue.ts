import type { z } from 'zod';

/** What is wrong with one member of a file, in the shape that forms, the command line and the interface show. */
export interface FieldIssue {
  /** JSON Pointer of the member, "" for the whole file. */
  field: string;
  /** Stable name of the rule that was broken. */
  rule: string;
  /** One sentence for people; names value, limit and unit. */
  message: string;
  /** What to do about it. */
  remedy: string;
}

/** Rule and remedy that a schema's own check passes along in `params`. */
export interface RuleParams {
  rule: string;
  remedy: string;
}

/**
 * JSON Pointer of a path of member names and indices.
 *
 * @param path  Member names and list indices from the root.
 * @returns  The pointer; "" for the root.
 * @throws  Nothing.
 * @sign  none
 * @source  RFC 6901.
 */
export function jsonPointer(path: readonly PropertyKey[]): string {
  return path.map((part) => `/${String(part).replaceAll('~', '~0').replaceAll('/', '~1')}`).join('');
}

/**
 * The value at a JSON Pointer; `undefined` when the pointer leads nowhere.
 *
 * @param root  Any value.
 * @param pointer  JSON Pointer; "" for the root.
 * @returns  The value or undefined.
 * @throws  Nothing.
 * @sign  none
 * @source  RFC 6901.
 */
export function valueAt(root: unknown, pointer: string): unknown {
  if (pointer === '') return root;
  let at: unknown = root;
  for (const raw of pointer.split('/').slice(1)) {
    if (typeof at !== 'object' || at === null) return undefined;
    const key = raw.replaceAll('~1', '/').replaceAll('~0', '~');
    if (!Object.hasOwn(at, key)) return undefined;
    at = Reflect.get(at, key);
  }
  return at;
}

function shown(value: unknown): string {
  if (typeof value === 'string') return value.length > 60 ? `"${value.slice(0, 57)}…"` : `"${value}"`;
  if (typeof value === 'number' || typeof value === 'boolean' || value === null) return String(value);
  if (value === undefined) return 'nothing';
  return Array.isArray(value) ? 'a list' : 'an object';
}

const TYPE_WORDS: Readonly<Record<string, string>> = {
  number: 'a number',
  string: 'a text',
  boolean: 'true or false',
  array: 'a list',
  object: 'an object',
  record: 'an object',
  int: 'a whole number',
};

/**
 * The issues of a failed schema, each with field, rule, message and remedy.
 *
 * @param error  What the schema's safeParse returned.
 * @param input  The value that was parsed; messages show the offending part of it.
 * @returns      At least one issue, in the schema's order.
 * @throws       Nothing.
 * @sign         none
 * @source       House style, errors.
 */
export function issuesFromSchema(error: z.ZodError, input: unknown): FieldIssue[] {
  const out: FieldIssue[] = [];
  for (const issue of error.issues) collect(issue, [], input, out);
  return out;
}

function collect(issue: z.core.$ZodIssue, prefix: PropertyKey[], input: unknown, out: FieldIssue[]): void {
  const path = [...prefix, ...issue.path];
  const field = jsonPointer(path);
  const name = field === '' ? 'the file' : field;
  const value = valueAt(input, field);
  const add = (rule: string, message: string, remedy: string): void => {
    out.push({ field, rule, message, remedy });
  };
  switch (issue.code) {
    case 'unrecognized_keys':
      for (const key of issue.keys) {
        const unknown = jsonPointer([...path, key]);
        out.push({
          field: unknown,
          rule: 'unknown-member',
          message: `${unknown} is not a member of this format`,
          remedy: 'Remove it, or correct its spelling.',
        });
      }
      return;
    case 'invalid_type': {
      const wanted = TYPE_WORDS[issue.expected] ?? issue.expected;
      if (value === undefined) return add('required', `${name} is missing; it must be ${wanted}`, `Add ${name}.`);
      if (typeof value === 'number' && !Number.isFinite(value)) {
        return add('finite', `${name} is ${value}; it must be a finite number`, 'Give a finite number.');
      }
      return add('type', `${name} is ${shown(value)}; it must be ${wanted}`, `Replace it by ${wanted}.`);
    }
    case 'invalid_value': {
      const choices = issue.values.map((v) => shown(v)).join(', ');
      if (value === undefined) return add('required', `${name} is missing; it must be ${choices}`, `Add ${name}.`);
      return add('one-of', `${name} is ${shown(value)}; it must be one of ${choices}`, `Choose one of ${choices}.`);
    }
    case 'too_small': {
      const what = sizeWord(issue.origin, value);
      const least = `${issue.inclusive ? 'at least' : 'above'} ${issue.minimum}`;
      const bound = issue.origin === 'string' ? `${least} characters long` : least;
      const rule = issue.origin === 'number' && issue.minimum === 0 && !issue.inclusive ? 'positive' : 'minimum';
      return add(rule, `${name} ${what}; it must be ${bound}`, `Give ${sizeNoun(issue.origin)} ${bound}.`);
    }
    case 'too_big': {
      const what = sizeWord(issue.origin, value);
      const bound = `${issue.inclusive ? 'at most' : 'below'} ${issue.maximum}`;
      return add('maximum', `${name} ${what}; it must be ${bound}`, `Give ${sizeNoun(issue.origin)} ${bound}.`);
    }
    case 'invalid_union': {
      const best = issue.errors.reduce<readonly z.core.$ZodIssue[] | null>(
        (kept, branch) => (kept === null || depth(branch) > depth(kept) ? branch : kept),
        null,
      );
      if (best === null || best.length === 0)
        return add('one-of', `${name} has none of the accepted forms`, 'See the format.');
      for (const inner of best) collect(inner, path, input, out);
      return;
    }
    case 'custom': {
      const params: Record<string, unknown> = issue.params ?? {};
      const rule = typeof params.rule === 'string' ? params.rule : 'rule';
      const remedy = typeof params.remedy === 'string' ? params.remedy : 'Correct the value.';
      return add(rule, issue.message, remedy);
    }
    default:
      return add('format', `${name} is ${shown(value)}; ${issue.message.toLowerCase()}`, 'Correct the value.');
  }
}

function sizeWord(origin: string, value: unknown): string {
  if (origin === 'array' && Array.isArray(value)) return `has ${value.length} entries`;
  if (origin === 'string' && typeof value === 'string' && value.trim() === '') return 'is blank';
  if (origin === 'string' && typeof value === 'string') return `has ${value.length} characters`;
  return `is ${shown(value)}`;
}

function sizeNoun(origin: string): string {
  return origin === 'array' ? 'a number of entries' : origin === 'string' ? 'a length' : 'a value';
}

/** How far into the value the issues of a union branch reach: the branch that was meant reaches furthest. */
function depth(issues: readonly z.core.$ZodIssue[]): number {
  return issues.reduce((deepest, issue) => Math.max(deepest, issue.path.length), 0);
}
