/** The caution that every text with a speed or a limit carries. */
export const CAUTION =
  'Not an approved training device, not for operational use. The approved flight manual and licensed instruction govern.';

/** Prints a result as one JSON document; numbers that are not finite are written as null. */
export function printJson(value: unknown): void {
  const text = JSON.stringify(
    value,
    (_key, member: unknown) => (typeof member === 'number' && !Number.isFinite(member) ? null : member),
    2,
  );
  process.stdout.write(`${text}\n`);
}

/** Prints lines of text with the caution last. Names from files may hold control characters: they become blanks. */
export function printText(lines: readonly string[]): void {
  const plain = lines.map((line) => line.replaceAll(/\p{Cc}+/gu, ' '));
  process.stdout.write(`${[...plain, '', CAUTION].join('\n')}\n`);
}

/** Remarks on a condition: lines below the text, or on standard error where standard output is one JSON document. */
export function remarkLines(remarks: readonly string[], json: boolean): string[] {
  if (json) for (const remark of remarks) process.stderr.write(`note: ${remark}\n`);
  return json || remarks.length === 0 ? [] : ['', ...remarks];
}

/** Rows of cells as aligned lines: the first column to the left, columns in `right` to the right. */
export function table(rows: readonly (readonly string[])[], right: ReadonlySet<number> = new Set()): string[] {
  const widths: number[] = [];
  for (const row of rows) row.forEach((cell, i) => (widths[i] = Math.max(widths[i] ?? 0, cell.length)));
  return rows.map((row) =>
    row
      .map((cell, i) => (right.has(i) ? cell.padStart(widths[i]) : cell.padEnd(widths[i])))
      .join('  ')
      .trimEnd(),
  );
}

/** A number with a fixed count of decimals and a proper minus sign; a dash when there is none. */
export function fixed(value: number | null | undefined, decimals: number): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return '–';
  const text = value.toFixed(decimals);
  return /^-0(?:\.0*)?$/u.test(text) ? text.slice(1) : text.replace('-', '−');
}
