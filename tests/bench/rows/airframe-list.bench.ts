import express from 'express';
import { createPool } from 'mysql2/promise';
import type { EntityManager } from 'typeorm';
import { z } from 'zod';
import { airframeListQuerySchema } from '#shared/contracts/airframes.ts';
import { createAirframesRepository } from '../../../server/data/repositories/airframes.repository.ts';
import { listen, startBenchProduct } from '../bench-product.ts';
import { defineBench, median, quantile } from '../harness.ts';
import { loadHttp } from '../http-load.ts';

const AIRFRAMES = 5000;
const REVISIONS = 10;
const REQUESTS = 400;
const ROUNDS = 5;
const AT_ONCE = 4;
const GOAL_P95_MS = 50;
const QUERIES = [
  'class=III&sort=name&page=3',
  'engineKind=jet&sort=-updatedAt',
  'status=released&class=II-L&sort=-name&page=2',
  'tag=even&sort=name&page=4',
  'search=bench+airframe+41&sort=name',
];

/** The list of airframes over HTTP, signed in, beside the same SQL sent raw from a bare handler. */
export default defineBench({
  name: 'airframe-list',
  claim: `${AIRFRAMES} airframes × ${REVISIONS} revisions: a filtered and sorted page of the list`,
  async run({ note, cleanUp }) {
    const product = await startBenchProduct(cleanUp);
    const pool = createPool({ uri: product.databaseUrl, connectionLimit: 10, timezone: 'Z' });
    cleanUp(() => pool.end());
    const seededFrom = performance.now();
    const filler = await pool.getConnection(); // its temporary table is its own
    for (const statement of FILL) await filler.query(statement);
    filler.release();
    const [sizes] = await pool.query('SELECT COUNT(*) AS n, AVG(LENGTH(document)) AS bytes FROM airframe_revision');
    const [{ n, bytes }] = sizesSchema.parse(sizes);
    note(
      `${n} revisions of ${Math.round(bytes)} bytes filled in ${((performance.now() - seededFrom) / 1000).toFixed(1)} s`,
    );

    const [organisations] = await pool.query('SELECT id FROM organisation');
    const [{ id: organisationId }] = z.tuple([z.object({ id: z.string() })]).parse(organisations);
    const statements = new Map<string, [string, unknown[]][]>();
    for (const query of QUERIES) statements.set(query, await recordStatements(query, organisationId));
    const bare = express();
    bare.get('/list', async (asked, response) => {
      const recorded = statements.get(String(asked.query['q'])) ?? [];
      const answers = await Promise.all(recorded.map(([sql, values]) => pool.query(sql, values)));
      response.json(answers.map(([rows]) => rows));
    });
    const baseline = await listen((incoming, response) => void bare(incoming, response), cleanUp);
    const ours = (i: number) => `${product.address}/api/airframes?${QUERIES[i % QUERIES.length]}`;
    const raw = (i: number) => `${baseline}/list?q=${encodeURIComponent(QUERIES[i % QUERIES.length])}`;
    const load = (addressOf: (i: number) => string, headers: Record<string, string>) =>
      loadHttp(addressOf, { requests: REQUESTS, atOnce: AT_ONCE, headers });
    await load(ours, product.headers);
    await load(raw, {});
    const ratios: number[] = [];
    const times: number[] = [];
    const rates: number[] = [];
    for (let round = 0; round < ROUNDS; round++) {
      const rawRun = await load(raw, {});
      const ourRun = await load(ours, product.headers);
      times.push(...ourRun.times);
      rates.push(ourRun.perSecond);
      ratios.push(ourRun.perSecond / rawRun.perSecond);
    }
    const ratio = median(ratios);
    const p95 = quantile(times, 0.95);
    return {
      value: median(rates),
      unit: 'pages/s',
      ratio: 1 / ratio,
      baseline: `the same SQL through mysql2 from a bare Express handler: ${(median(rates) / ratio).toFixed(0)} pages/s`,
      goal: `≥ half the baseline, p95 ≤ ${GOAL_P95_MS} ms`,
      met: ratio >= 0.5 && p95 <= GOAL_P95_MS,
      details: [
        { label: 'share of the baseline', value: ratio, unit: '' },
        { label: `p95, ${AT_ONCE} at once`, value: p95, unit: 'ms' },
        ...QUERIES.map((query, i) => ({
          label: query,
          value: median(times.filter((_, t) => t % QUERIES.length === i)),
          unit: 'ms',
        })),
      ],
    };
  },
});

const sizesSchema = z.tuple([z.object({ n: z.coerce.number(), bytes: z.coerce.number() })]);

const NUMBER = `SUBSTRING_INDEX(a.slug, '-', -1)`;
const KIND = `ELT(1 + ${NUMBER} MOD 2, 'jet', 'propeller')`;
const TAG = `IF(${NUMBER} MOD 2 = 0, 'even', 'odd')`;
const listing = (listedAs: string, condition: string): string =>
  `INSERT INTO airframe_listing
   SELECT r.organisation_id, ${listedAs}, r.airframe_id, a.slug, r.number, r.status, r.name, r.airplane_class, 2, ${KIND},
     ${TAG}, CONCAT('\n', ${TAG}, '\n'),
     LOWER(CONCAT(r.name, ' Invented for demonstration: plausible for the class, not any real aeroplane. ', a.slug)), r.changed_at
   FROM airframe_revision r INNER JOIN airframe a ON a.id = r.airframe_id WHERE a.slug LIKE 'bench-%' AND ${condition}`;

/** Made within the database from the seeded light twin: five thousand airframes, their tags, revisions and listings. */
const FILL = [
  `CREATE TEMPORARY TABLE model SELECT r.organisation_id, r.document FROM airframe_revision r
   INNER JOIN airframe a ON a.id = r.airframe_id WHERE a.slug = 'light-twin'`,
  `INSERT INTO airframe SELECT UUID(), m.organisation_id, CONCAT('bench-airframe-', s.seq), NOW(3)
   FROM model m, seq_1_to_${AIRFRAMES} s`,
  `INSERT INTO airframe_tag SELECT a.id, ${TAG} FROM airframe a WHERE a.slug LIKE 'bench-%'`,
  `INSERT INTO airframe_revision (id, organisation_id, airframe_id, number, status, name, airplane_class, engine_count,
     document, note, created_at, changed_at, released_at, version)
   SELECT UUID(), m.organisation_id, a.id, s.seq, IF(s.seq = ${REVISIONS} AND ${NUMBER} MOD 3 = 0, 'draft', 'released'),
     CONCAT('Bench airframe ', ${NUMBER}), ELT(1 + ${NUMBER} MOD 4, 'I', 'II', 'III', 'IV'), 2, m.document,
     'Filled for the bench.', NOW(3), NOW(3) + INTERVAL s.seq SECOND + INTERVAL ${NUMBER} SECOND, NOW(3), 1
   FROM airframe a, model m, seq_1_to_${REVISIONS} s WHERE a.slug LIKE 'bench-%' ORDER BY a.id, s.seq`,
  listing(`'any'`, `r.number = ${REVISIONS}`),
  listing(`'draft'`, `r.number = ${REVISIONS} AND r.status = 'draft'`),
  listing(`'released'`, `r.number = ${REVISIONS} - (${NUMBER} MOD 3 = 0)`),
  'ANALYZE TABLE airframe, airframe_revision, airframe_tag, airframe_listing',
];

/** The SQL that the product sends for a list query, with its values. */
async function recordStatements(url: string, organisationId: string): Promise<[string, unknown[]][]> {
  const recorded: [string, unknown[]][] = [];
  const manager = {
    query: (sql: string, values: unknown[]) => {
      recorded.push([sql, values]);
      return Promise.resolve(sql.includes('COUNT(*) AS total') ? [{ total: 0 }] : []);
    },
  };
  const query = airframeListQuerySchema.parse(Object.fromEntries(new URLSearchParams(url)));
  await createAirframesRepository(manager as unknown as EntityManager).list(organisationId, query); // the list sends plain statements only
  return recorded;
}
