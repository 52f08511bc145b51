import { MAX_DOCUMENT_BYTES } from '#shared/contracts/airframe-editing.ts';
import type { FieldError } from '#shared/contracts/problem.ts';
import { AIRFRAME_FORMAT } from '#shared/model/airframe-format.ts';
import { documentToTable, LARGEST_TABLE_ROWS } from '#shared/model/airframe-table.ts';
import { jsonPointer } from '#shared/model/field-issue.ts';
import { ProblemError } from '../problem-error.ts';

export type Document = Record<string, unknown>;

const DEEPEST = 12;
const MOST_ERRORS = 50;
/** What no table, sheet or page can carry: control characters but tab and line ends, and halves of characters. */
const UNPRINTABLE = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]|\p{Surrogate}/u;
const RESERVED = new Set(['__proto__', 'constructor', 'prototype']);
const NUMERAL = /^\d+$/;

/**
 * Refuses a document that cannot be kept exactly, whatever it means: a draft may be unfinished, but not unreadable.
 *
 * @throws {ProblemError} too-large, validation
 */
export function checkDocument(document: Document, at = '/document'): void {
  const errors: FieldError[] = [];
  const refuse = (path: PropertyKey[], rule: string, message: string, remedy: string): void => {
    if (errors.length < MOST_ERRORS) errors.push({ field: `${at}${jsonPointer(path)}`, rule, message, remedy });
  };
  const walk = (value: unknown, path: PropertyKey[]): void => {
    if (typeof value === 'number' && !Number.isFinite(value))
      refuse(path, 'finite', 'the number is beyond what can be kept', 'Give a finite number.');
    if (typeof value === 'string' && UNPRINTABLE.test(value))
      refuse(path, 'characters', 'the text holds characters that cannot be printed', 'Type the text again.');
    if (typeof value !== 'object' || value === null) return;
    if (path.length >= DEEPEST)
      return refuse(path, 'depth', `members are nested more than ${DEEPEST} deep`, 'Use the members of the format.');
    for (const [name, inner] of Object.entries(value)) {
      const foreign = !Array.isArray(value) && (RESERVED.has(name) || NUMERAL.test(name) || name.length > 200);
      if (foreign || UNPRINTABLE.test(name))
        refuse([...path, name], 'unknown-member', 'the member’s name cannot be kept', 'Remove the member.');
      else walk(inner, [...path, name]);
    }
  };
  walk(document, []);
  if (errors.length > 0) throw new ProblemError('validation', `${errors[0].message}. ${errors[0].remedy}`, { errors });
  const bytes = Buffer.byteLength(JSON.stringify(document));
  const values = documentToTable(document).length;
  const tooLarge = (size: string, most: string): ProblemError =>
    new ProblemError('too-large', `The document has ${size}; at most ${most} are kept.`);
  if (bytes > MAX_DOCUMENT_BYTES) throw tooLarge(`${Math.ceil(bytes / 1024)} KiB`, `${MAX_DOCUMENT_BYTES / 1024} KiB`);
  if (values >= LARGEST_TABLE_ROWS) throw tooLarge(`${values} values`, `${LARGEST_TABLE_ROWS - 1} values`);
}

/** Refuses a file of another format; one without a format member is a draft that still lacks it. */
export function checkFormat(document: Document, at = '/document'): void {
  const format = document['format'];
  if (format === undefined || format === AIRFRAME_FORMAT) return;
  const error: FieldError = {
    field: `${at}/format`,
    rule: 'format',
    message: `the format is ${typeof format === 'string' ? `"${format.slice(0, 60)}"` : 'no text'}; this program reads "${AIRFRAME_FORMAT}"`,
    remedy: 'Export the airframe again in this format, or import it through the mapping of columns.',
  };
  throw new ProblemError('validation', `${error.message}.`, { errors: [error] });
}
