/**
 * An airframe file as a two-column table of members, for CSV and workbooks: one row a value, named by JSON Pointer.
 * The table holds the file exactly: reading it back gives the same document.
 */
import { jsonPointer, valueAt } from './field-issue.ts';

export const TABLE_HEAD = ['field', 'value'] as const;

/** Head of an exported table: its third column says what each value is, so that reading it back gives the same document. */
export const EXACT_TABLE_HEAD = ['field', 'value', 'kind'] as const;

export type TableCell = string | number | boolean | null;
/** "quoted" is a text written as in JSON, within quotation marks: no program takes it for a formula or trims it. */
export type TableKind = 'text' | 'quoted' | 'number' | 'yes-no' | 'empty' | 'list' | 'group';
export type ExactRow = [string, TableCell, TableKind];

/** Largest number of rows that is read back; a full airframe has a few hundred. */
export const LARGEST_TABLE_ROWS = 20_000;
const DEEPEST = 12;

/**
 * Rows of a document, in its own order.
 *
 * @param document  Parsed JSON; the members of an airframe file.
 * @returns         [pointer, value] rows; empty lists and objects keep a row with the text "[]" or "{}".
 * @throws          Nothing.
 * @sign            none
 * @source          JSON Pointer, RFC 6901.
 */
export function documentToTable(document: unknown): [string, TableCell][] {
  const rows: [string, TableCell][] = [];
  const walk = (value: unknown, path: PropertyKey[]): void => {
    if (value === undefined) return;
    if (value === null || typeof value !== 'object') {
      rows.push([
        jsonPointer(path),
        typeof value === 'number' || typeof value === 'boolean' ? value : value === null ? null : String(value),
      ]);
      return;
    }
    const members = Object.entries(value);
    if (members.length === 0) rows.push([jsonPointer(path), Array.isArray(value) ? '[]' : '{}']);
    members.forEach(([name, member]) => walk(member, [...path, name]));
  };
  walk(document, []);
  return rows;
}

/** Texts that a spreadsheet would run, trim or change. */
const NEEDS_QUOTES = /^$|^[=+\-@"']|^\s|\s$|[\u0000-\u001f\u007f]|_x[0-9A-Fa-f]{4}_/;

/**
 * Rows of a document with the kind of each value: what exports hold.
 *
 * @param document  Parsed JSON.
 * @returns         [pointer, value, kind] rows in the document's order.
 * @throws          Nothing.
 * @sign            none
 * @source          JSON Pointer, RFC 6901; JSON strings, RFC 8259.
 */
export function documentToExactTable(document: unknown): ExactRow[] {
  return documentToTable(document).map(([field, value]) => {
    if (value === null) return [field, null, 'empty'];
    if (typeof value === 'number') return [field, value, 'number'];
    if (typeof value === 'boolean') return [field, value, 'yes-no'];
    const here = valueAt(document, field);
    if (typeof here === 'object' && here !== null) return [field, value, Array.isArray(here) ? 'list' : 'group'];
    return NEEDS_QUOTES.test(value) ? [field, quoted(value), 'quoted'] : [field, value, 'text'];
  });
}

/** As a JSON string, without the sequences that workbooks take for a character. */
const quoted = (text: string): string => JSON.stringify(text).replaceAll(/_x(?=[0-9A-Fa-f]{4}_)/g, '\\u005fx');

export type DocumentFromTable =
  { ok: true; document: unknown } | { ok: false; row: number; message: string; remedy: string };

/** Members that hold text even when it looks like a number. */
const TEXT_MEMBERS = new Set([
  'name',
  'text',
  'description',
  'format',
  'class',
  'field',
  'source',
  'configuration',
  'category',
  'kind',
  'law',
  'mode',
  'axes',
  'rotation',
]);

/**
 * The document of a table of members.
 *
 * @param rows  Rows of cells, [pointer, value] first; the head row may be present, and where it names a third column "kind",
 *              that column is obeyed. Further columns are ignored.
 * @returns     The document, still to be parsed by the airframe schema; or the first row that cannot be read.
 * @throws      Nothing.
 * @sign        none
 * @source      JSON Pointer, RFC 6901.
 */
export function tableToDocument(rows: readonly (readonly unknown[])[]): DocumentFromTable {
  if (rows.length > LARGEST_TABLE_ROWS) {
    return {
      ok: false,
      row: LARGEST_TABLE_ROWS + 1,
      message: `the table has ${rows.length} rows; at most ${LARGEST_TABLE_ROWS} are read`,
      remedy: 'Split the file.',
    };
  }
  let document: unknown;
  const seen = new Set<string>();
  let exact = false;
  for (let i = 0; i < rows.length; i++) {
    const [rawField, rawValue] = rows[i];
    const field = typeof rawField === 'string' ? rawField.trim() : '';
    if (field === TABLE_HEAD[0]) exact = rows[i][2] === EXACT_TABLE_HEAD[2];
    if (field === TABLE_HEAD[0] || (field === '' && (rawValue === undefined || rawValue === null || rawValue === '')))
      continue;
    const refuse = (message: string, remedy: string): DocumentFromTable => ({ ok: false, row: i + 1, message, remedy });
    if (!field.startsWith('/'))
      return refuse(
        `"${field}" is not a field name; it must start with /`,
        'Use the names that an export writes, such as /mass/mass_kg.',
      );
    if (seen.has(field)) return refuse(`${field} is given twice`, 'Keep one of the two rows.');
    seen.add(field);
    const parts = field
      .split('/')
      .slice(1)
      .map((part) => part.replaceAll('~1', '/').replaceAll('~0', '~'));
    if (parts.length > DEEPEST)
      return refuse(`${field} is nested more than ${DEEPEST} deep`, 'Use the names that an export writes.');
    if (parts.some((part) => part === '__proto__' || part === 'constructor' || part === 'prototype')) {
      return refuse(`${field} is not a member of this format`, 'Remove the row.');
    }
    const kind = exact ? rows[i][2] : undefined;
    if (kind === 'number' && !readsAsNumber(rawValue))
      return refuse(`${field} is "${String(rawValue)}", not a number`, 'Write it with a decimal point, such as 0.087.');
    const placed = place(document, parts, exactValue(rawValue, kind) ?? cellValue(rawValue, parts[parts.length - 1]));
    if (!placed.ok)
      return refuse(
        `${field} does not fit the rows before it: ${placed.message}`,
        'Order list entries from 0 without gaps.',
      );
    document = placed.value;
  }
  if (document === undefined)
    return { ok: false, row: 1, message: 'the table has no rows', remedy: 'Export an airframe to see the layout.' };
  return { ok: true, document };
}

function readsAsNumber(raw: unknown): boolean {
  if (raw === null || raw === undefined || typeof raw === 'number') return true;
  return typeof raw === 'string' && !Number.isNaN(Number(raw));
}

/** The value as its kind says; undefined where the kind leaves it open. */
function exactValue(raw: unknown, kind: unknown): unknown {
  const text = raw === null || raw === undefined ? '' : String(raw);
  if (kind === 'text') return text;
  if (kind !== 'quoted') return undefined;
  try {
    const value: unknown = JSON.parse(text);
    return typeof value === 'string' ? value : text;
  } catch {
    // Retyped without quotation marks: the text as it stands.
    return text;
  }
}

function cellValue(raw: unknown, member: string): unknown {
  if (raw === null || raw === undefined) return null;
  if (typeof raw === 'number' || typeof raw === 'boolean') return TEXT_MEMBERS.has(member) ? String(raw) : raw;
  const text = String(raw);
  if (text === '[]') return [];
  if (text === '{}') return {};
  if (TEXT_MEMBERS.has(member)) return text;
  const trimmed = text.trim();
  if (trimmed === 'true') return true;
  if (trimmed === 'false') return false;
  if (trimmed === '') return null;
  const value = Number(trimmed);
  return trimmed !== '' && !Number.isNaN(value) ? value : text;
}

type Placed = { ok: true; value: unknown } | { ok: false; message: string };

function place(root: unknown, parts: readonly string[], value: unknown): Placed {
  if (parts.length === 0) return { ok: true, value };
  const [head, ...rest] = parts;
  const index = /^(?:0|[1-9]\d*)$/.test(head) ? Number(head) : null;
  const at: unknown = root ?? (index === 0 ? [] : {});
  if (Array.isArray(at)) {
    if (index === null) return { ok: false, message: `a list has no member "${head}"` };
    if (index > at.length) return { ok: false, message: `entry ${index} comes before entry ${at.length}` };
    const inner = place(at[index], rest, value);
    if (!inner.ok) return inner;
    at[index] = inner.value;
    return { ok: true, value: at };
  }
  if (typeof at !== 'object' || at === null) return { ok: false, message: 'a value stands where members are expected' };
  const inner = place(Object.hasOwn(at, head) ? Reflect.get(at, head) : undefined, rest, value);
  if (!inner.ok) return inner;
  Reflect.set(at, head, inner.value);
  return { ok: true, value: at };
}
