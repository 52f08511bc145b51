import { readFile } from 'node:fs/promises';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { FieldIssue } from '#shared/model/field-issue.ts';
import { UsageError } from './usage-error.ts';

/** Files above this size are no airframe or scenario. */
const LARGEST_FILE_BYTES = 8_000_000;

/** The parsed content of a JSON file; whatever fails is one line that names the file. */
export async function readJsonFile(file: string): Promise<unknown> {
  let text: string;
  try {
    text = await readFile(file, 'utf8');
  } catch (error) {
    const code = error instanceof Error && 'code' in error ? String(error.code) : 'unknown';
    throw new UsageError(`${file}: cannot be read (${READ_ERRORS[code] ?? code})`);
  }
  if (text.length > LARGEST_FILE_BYTES) throw new UsageError(`${file}: larger than ${LARGEST_FILE_BYTES} bytes`);
  try {
    const value: unknown = JSON.parse(text.replace(/^\uFEFF/u, ''));
    return value;
  } catch (error) {
    throw new UsageError(`${file}: not valid JSON (${error instanceof Error ? error.message : 'unknown'})`);
  }
}

const READ_ERRORS: Readonly<Record<string, string>> = {
  ENOENT: 'no such file',
  EACCES: 'no permission',
  EISDIR: 'it is a folder',
};

/** One line that names the file, the field and the rule of the first issue, and how many more there are. */
export function issueLine(file: string, issues: readonly FieldIssue[]): string {
  const [first] = issues;
  const more = issues.length > 1 ? ` (and ${issues.length - 1} more)` : '';
  const line = `${file}: ${first.field === '' ? '/' : first.field}: ${first.rule}: ${first.message}${more}. ${first.remedy}`;
  // Names out of the file are quoted in messages: no control character of theirs may break the line or reach a terminal.
  return line.replaceAll(/\p{Cc}+/gu, ' ');
}

/** The airframe of a file; warnings go to standard error, one line each, unless JSON is wanted. */
export async function readAirframe(file: string, quiet: boolean): Promise<Airframe> {
  const parsed = parseAirframe(await readJsonFile(file));
  if (!parsed.ok) throw new UsageError(issueLine(file, parsed.issues));
  if (!quiet) for (const warning of parsed.warnings) process.stderr.write(`warning: ${issueLine(file, [warning])}\n`);
  return parsed.airframe;
}
