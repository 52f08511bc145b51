import { open } from 'node:fs/promises';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { FieldIssue } from '#shared/model/field-issue.ts';
import { UsageError } from './usage-error.ts';

/** Files above this size are no airframe or scenario. */
const LARGEST_FILE_BYTES = 8_000_000;
/** Bytes read at a time. */
const PART_BYTES = 65_536;

/** The parsed content of a JSON file; whatever fails is one line that names the file. */
export async function readJsonFile(file: string): Promise<unknown> {
  const text = decoded(file, await bytesOf(file));
  try {
    const value: unknown = JSON.parse(text);
    return value;
  } catch (error) {
    throw new UsageError(`${file}: not valid JSON (${error instanceof Error ? error.message : 'unknown'})`);
  }
}

/** The bytes of a file or of a pipe, read no further than what is taken: an endless device ends here too. */
async function bytesOf(file: string): Promise<Buffer> {
  try {
    const handle = await open(file, 'r');
    try {
      const parts: Buffer[] = [];
      let length = 0;
      for (;;) {
        const { bytesRead, buffer } = await handle.read(Buffer.alloc(PART_BYTES), 0, PART_BYTES, null);
        if (bytesRead === 0) return Buffer.concat(parts);
        length += bytesRead;
        if (length > LARGEST_FILE_BYTES) throw new UsageError(`${file}: larger than ${LARGEST_FILE_BYTES} bytes`);
        parts.push(buffer.subarray(0, bytesRead));
      }
    } finally {
      await handle.close();
    }
  } catch (error) {
    if (error instanceof UsageError) throw error;
    const code = error instanceof Error && 'code' in error ? String(error.code) : 'unknown';
    throw new UsageError(`${file}: cannot be read (${READ_ERRORS[code] ?? code})`);
  }
}

/** JSON is UTF-8 (RFC 8259, 8.1); a mark of byte order before it is let pass. */
function decoded(file: string, bytes: Buffer): string {
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    throw new UsageError(`${file}: not valid JSON (it is not UTF-8 text)`);
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
