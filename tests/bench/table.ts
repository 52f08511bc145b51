import type { BenchReportLine } from './harness.ts';

const HEADINGS = ['row', 'value', 'ratio', 'goal', '', 'baseline of the same run'];

/** The measured rows as a table for the terminal, further numbers of a row below it. */
export function formatTable(lines: readonly BenchReportLine[]): string {
  const cells = lines.map((line) => [
    line.name,
    `${formatNumber(line.value)} ${line.unit}`,
    line.ratio === null ? '–' : formatNumber(line.ratio),
    line.goal,
    line.met ? 'met' : 'MISSED',
    line.baseline,
  ]);
  const widths = HEADINGS.map((heading, i) => Math.max(heading.length, ...cells.map((row) => row[i].length)));
  const format = (row: readonly string[]) =>
    row
      .map((cell, i) => cell.padEnd(widths[i]))
      .join('  ')
      .trimEnd();
  const body = lines.flatMap((line, i) => [
    format(cells[i]),
    ...line.details.map((detail) => `  ${detail.label}: ${formatNumber(detail.value)} ${detail.unit}`.trimEnd()),
  ]);
  return [format(HEADINGS), ...body].join('\n');
}

/** Three significant digits, but never fewer than the integer part has. */
function formatNumber(value: number): string {
  if (!Number.isFinite(value)) return String(value);
  const size = Math.abs(value);
  if (size >= 100) return value.toFixed(0);
  if (size >= 10) return value.toFixed(1);
  return size >= 1 ? value.toFixed(2) : value.toPrecision(3);
}
