/**
 * Measures every claim, one row each: npm run bench [-- --json FILE] [--only NAME[,NAME]] [--long].
 * A row that misses its goal is printed as missed; a row that cannot be measured ends the run with an error.
 */
import fs from 'node:fs';
import path from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { parseArgs } from 'node:util';
import type { BenchContext, BenchReportLine, BenchRow } from './harness.ts';
import { formatTable } from './table.ts';

const rowsFolder = path.join(path.dirname(fileURLToPath(import.meta.url)), 'rows');

const { values: options } = parseArgs({
  options: { json: { type: 'string' }, only: { type: 'string' }, long: { type: 'boolean', default: false } },
});

const lines: BenchReportLine[] = [];
const broken: string[] = [];
for (const row of chosen(await loadRows(), options.only)) {
  process.stdout.write(`${row.name}: ${row.claim}\n`);
  try {
    lines.push(await measure(row));
  } catch (error) {
    broken.push(row.name);
    console.error(error);
  }
}

console.log(`\n${formatTable(lines)}`);
if (options.json !== undefined) fs.writeFileSync(options.json, `${JSON.stringify(lines, null, 2)}\n`);
if (broken.length > 0) console.error(`\nCould not be measured: ${broken.join(', ')}`);
process.exit(broken.length > 0 ? 1 : 0);

async function loadRows(): Promise<BenchRow[]> {
  const rows: BenchRow[] = [];
  for (const name of fs.readdirSync(rowsFolder).sort()) {
    if (!name.endsWith('.bench.ts')) continue;
    // The row files of this folder: tests/architecture checks that each default-exports rows.
    const module = (await import(pathToFileURL(path.join(rowsFolder, name)).href)) as {
      default: BenchRow | BenchRow[];
    };
    rows.push(...[module.default].flat());
  }
  return rows;
}

function chosen(rows: BenchRow[], only: string | undefined): BenchRow[] {
  if (only === undefined) return rows;
  const names = only.split(',');
  const unknown = names.filter((name) => !rows.some((row) => row.name === name));
  if (unknown.length > 0) {
    console.error(`No row is called ${unknown.join(', ')}; there are ${rows.map((row) => row.name).join(', ')}.`);
    process.exit(2);
  }
  return rows.filter((row) => names.includes(row.name));
}

async function measure(row: BenchRow): Promise<BenchReportLine> {
  const cleanUps: (() => unknown)[] = [];
  const context: BenchContext = {
    long: options.long,
    note: (text) => void process.stdout.write(`  ${text}\n`),
    cleanUp: (action) => void cleanUps.unshift(action),
  };
  try {
    const { value, unit, ratio, goal, baseline, met, details = [] } = await row.run(context);
    return { name: row.name, value, unit, ratio, goal, baseline, met, details };
  } finally {
    for (const action of cleanUps) await action();
  }
}
