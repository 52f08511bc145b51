import { createWriteStream } from 'node:fs';
import fs from 'node:fs/promises';
import { get } from 'node:http';
import os from 'node:os';
import path from 'node:path';
import { pipeline } from 'node:stream/promises';
import express from 'express';
import { createPool } from 'mysql2/promise';
import { matrixSchema } from '#shared/contracts/records.ts';
import { listen, startBenchProduct } from '../bench-product.ts';
import { defineBench, median, quantile } from '../harness.ts';

const PEOPLE = 2000;
const SCENARIOS = 40;
const ATTEMPTS = 5;
const ROUNDS = 60;
const GOAL_P95_MS = 150;
const GOAL_MIB = 150;
const MIB = 2 ** 20;

/** The records screen at the size of a large school: its first page, and the whole of it as a workbook. */
export default defineBench({
  name: 'records-matrix',
  claim: `${PEOPLE} trainees × ${SCENARIOS} scenarios × ${ATTEMPTS} attempts: first page, and all of it as XLSX`,
  async run({ note, cleanUp }) {
    const product = await startBenchProduct(cleanUp, 'm.okafor');
    const pool = createPool({ uri: product.databaseUrl, connectionLimit: 4, timezone: 'Z' });
    cleanUp(() => pool.end());
    const from = performance.now();
    const filler = await pool.getConnection(); // its session settings are its own
    for (const statement of FILL) await filler.query(statement);
    filler.destroy();
    note(`${PEOPLE * SCENARIOS * ATTEMPTS} attempts filled in ${((performance.now() - from) / 1000).toFixed(1)} s`);

    const bare = express();
    bare.get('/', async (_asked, response) => {
      const [rows] = await pool.query(RAW);
      response.json(rows);
    });
    const baseline = await listen((incoming, response) => void bare(incoming, response), cleanUp);
    const first = `${product.address}/api/records/matrix?search=bench`;
    const read = async (address: string): Promise<{ ms: number; body: string }> => {
      const started = performance.now();
      const answer = await fetch(address, { headers: product.headers });
      const body = await answer.text();
      if (answer.status !== 200) throw new Error(`${address} answered ${answer.status}: ${body.slice(0, 300)}`);
      return { ms: performance.now() - started, body };
    };
    const page = matrixSchema.parse(JSON.parse((await read(first)).body));
    const filled = page.rows.reduce((sum, row) => sum + row.cells.length, 0);
    if (page.total !== PEOPLE || filled !== page.rows.length * SCENARIOS) {
      throw new Error(`The page holds ${filled} cells of ${page.total} people.`);
    }
    const times: number[] = [];
    const rawTimes: number[] = [];
    for (let i = 0; i < ROUNDS; i++) {
      rawTimes.push((await read(`${baseline}/`)).ms);
      // Pages in turn, so that the database cannot answer from what it has just read.
      times.push((await read(i % 2 === 0 ? first : `${first}&page=${2 + i}`)).ms);
    }
    const totals = await read(`${product.address}/api/records/totals?search=bench`);

    (globalThis as { gc?: () => void }).gc?.(); // given by --expose-gc, not in Node's types
    const idle = process.memoryUsage().rss;
    let most = idle;
    const watch = setInterval(() => (most = Math.max(most, process.memoryUsage().rss)), 50);
    const file = path.join(os.tmpdir(), `records-matrix-${process.pid}.xlsx`);
    cleanUp(() => fs.rm(file, { force: true }));
    const exportFrom = performance.now();
    const firstByteMs = await download(`${product.address}/api/records/table.xlsx?search=bench`, product.headers, file);
    const exportS = (performance.now() - exportFrom) / 1000;
    clearInterval(watch);
    const { size } = await fs.stat(file);
    const overMib = (most - idle) / MIB;
    const p95 = quantile(times, 0.95);
    return {
      value: p95,
      unit: 'ms (p95)',
      ratio: median(times) / median(rawTimes),
      baseline: `the rows of one page through mysql2 from a bare Express handler: ${median(rawTimes).toFixed(1)} ms`,
      goal: `first page p95 ≤ ${GOAL_P95_MS} ms; XLSX memory ≤ ${GOAL_MIB} MiB over idle`,
      met: p95 <= GOAL_P95_MS && overMib <= GOAL_MIB,
      details: [
        { label: 'first page, median', value: median(times), unit: 'ms' },
        { label: 'totals of all, asked beside it', value: totals.ms, unit: 'ms' },
        { label: 'XLSX, memory over idle', value: overMib, unit: 'MiB' },
        { label: 'XLSX, first byte', value: firstByteMs, unit: 'ms' },
        { label: 'XLSX, whole', value: exportS, unit: 's' },
        { label: 'XLSX, size', value: size / MIB, unit: 'MiB' },
      ],
    };
  },
});

/** Streams an answer to a file; returns when its first byte came. */
async function download(address: string, headers: Record<string, string>, file: string): Promise<number> {
  const started = performance.now();
  let firstMs = 0;
  await new Promise<void>((resolve, reject) => {
    get(address, { headers }, (response) => {
      if (response.statusCode !== 200) reject(new Error(`${address} answered ${response.statusCode}.`));
      response.once('data', () => (firstMs = performance.now() - started));
      pipeline(response, createWriteStream(file)).then(resolve, reject);
    }).on('error', reject);
  });
  return firstMs;
}

const CRITERION = (id: string): string =>
  `{"id":"${id}","title":"Bank toward the dead side","measure":"bank-dead-side","required":true,"value":3.25,"limit":{"max":5,"unit":"deg"},"margin":1.75,"atS":6.5,"verdict":"met"}`;
const CRITERIA = `[${['a', 'b', 'c', 'd'].map(CRITERION).join(',')}]`;
const RAW = `SELECT t.id, t.person_id, t.scenario_id, t.number, r.passed, r.verdict, r.worst FROM
  (SELECT id FROM person WHERE display_name LIKE '%bench%' ORDER BY display_name LIMIT 25) p
  INNER JOIN attempt t ON t.person_id = p.id LEFT JOIN attempt_result r ON r.attempt_id = t.id AND r.counts = 1`;

/** Made within the database: people of one cohort, scenarios copied to the number wanted, attempts and results of all. */
const FILL = [
  'SET SESSION foreign_key_checks = 0, unique_checks = 0',
  'SET @organisation = (SELECT id FROM organisation)',
  `INSERT INTO person (id, organisation_id, email, email_key, display_name, full_name, status, created_at)
   SELECT UUID(), @organisation, CONCAT('bench-', seq, '@bench.example'), CONCAT('bench-', seq, '@bench.example'),
     CONCAT('Bench ', LPAD(seq, 5, '0')), CONCAT('Bench trainee ', seq), 'active', NOW(3) FROM seq_1_to_${PEOPLE}`,
  `INSERT INTO person_role SELECT id, 'trainee', NOW(3) FROM person WHERE email LIKE 'bench-%'`,
  `INSERT INTO cohort_member SELECT (SELECT id FROM cohort LIMIT 1), id, NOW(3) FROM person WHERE email LIKE 'bench-%'`,
  `SET @more = ${SCENARIOS} - (SELECT COUNT(*) FROM scenario)`,
  `INSERT INTO scenario (id, organisation_id, slug, created_at)
   SELECT UUID(), @organisation, CONCAT('bench-', seq), NOW(3) FROM seq_1_to_${SCENARIOS} WHERE seq <= @more`,
  `CREATE TEMPORARY TABLE model SELECT * FROM scenario_revision ORDER BY title LIMIT 1`,
  `INSERT INTO scenario_revision (id, organisation_id, scenario_id, number, status, title, summary, purpose, duration_s,
     criterion_count, lanes, document, airframe_revision_id, note, created_at, published_at, changed_at, version)
   SELECT UUID(), m.organisation_id, s.id, 1, 'published', CONCAT('Bench scenario ', s.slug), m.summary, m.purpose,
     m.duration_s, m.criterion_count, m.lanes, m.document, m.airframe_revision_id, m.note, NOW(3), NOW(3), NOW(3), 1
   FROM scenario s, model m WHERE s.slug LIKE 'bench-%'`,
  `INSERT INTO attempt (id, organisation_id, person_id, scenario_id, scenario_revision_id, number, seed, drawn, chunk_key,
     model_version, status, started_at, completed_at)
   SELECT UUID(), @organisation, p.id, r.scenario_id, r.id, n.seq, n.seq, '{}', '0000000000000000', '1', 'complete',
     NOW(3) - INTERVAL n.seq DAY, NOW(3) - INTERVAL n.seq DAY
   FROM person p, scenario_revision r, seq_1_to_${ATTEMPTS} n WHERE p.email LIKE 'bench-%'
     AND r.number = 1 ORDER BY p.id`,
  `INSERT INTO attempt_result (id, attempt_id, model_version, counts, ended, duration_s, passed, verdict, worst, criteria,
     strip, state_hash, states_agree, computed_at, first_pedal_s)
   SELECT UUID(), t.id, '1', 1, 'completed', 42.5, t.number MOD 2, IF(t.number MOD 2, 'met', 'not-met'),
     '{"title":"Bank toward the dead side","margin":1.75,"unit":"deg"}', '${CRITERIA}',
     '{"tS":[0,5,10,15,20],"betaDeg":[0,4.25,6.5,1.25,0.5]}', '0000000000000000', 1, NOW(3), 0.5 + t.number / 10
   FROM attempt t WHERE t.model_version = '1' AND t.chunk_key = '0000000000000000'`,
  'ANALYZE TABLE person, attempt, attempt_result, scenario',
];
