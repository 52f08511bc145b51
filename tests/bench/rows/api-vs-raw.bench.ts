import express from 'express';
import mysql from 'mysql2';
import { createPool } from 'mysql2/promise';
import { z } from 'zod';
import { listen, startBenchProduct } from '../bench-product.ts';
import { defineBench, median, quantile } from '../harness.ts';
import { loadHttp } from '../http-load.ts';

const REQUESTS = 150;
const AT_ONCE = 4;
const ROUNDS = 5;
const GOAL_SHARE = 0.5;

/** What an instructor reads: lists, and one item of each. */
const LISTS = ['airframes', 'scenarios', 'attempts', 'assignments', 'playlists'];
const ITEMS = ['airframes/light-twin', 'airframes/light-twin/revisions/1', 'scenarios/left-engine-cut-after-lift-off'];
const itemsSchema = z.object({ items: z.array(z.object({ id: z.string().optional() })) });

interface Statement {
  sql: string;
  values: string[];
}

/** What the driver is asked while `action` runs; transactions are opened and closed by nobody here. */
async function recordStatements(action: () => Promise<unknown>): Promise<Statement[]> {
  const recorded: Statement[] = [];
  const own = Reflect.get(mysql.Connection.prototype, 'query') as (...given: unknown[]) => unknown; // the driver's own
  Reflect.set(mysql.Connection.prototype, 'query', function (this: unknown, ...given: unknown[]) {
    const [asked, values] = given;
    const sql = typeof asked === 'string' ? asked : z.object({ sql: z.string() }).parse(asked).sql;
    recorded.push({ sql, values: Array.isArray(values) ? (values as string[]) : [] }); // what TypeORM sent goes back as it is
    return own.apply(this, given);
  });
  try {
    await action();
  } finally {
    Reflect.set(mysql.Connection.prototype, 'query', own);
  }
  return recorded.filter(({ sql }) => /^\s*(\(?SELECT|WITH)/iu.test(sql));
}

/** Every route that reads, signed in, against a bare handler that sends the same statements and answers with their rows. */
export default defineBench({
  name: 'api-vs-raw',
  claim:
    'list and single-item routes against a bare Express and mysql2 handler sending the same SQL; the slowest route',
  async run({ note, cleanUp }) {
    const { address, databaseUrl, headers } = await startBenchProduct(cleanUp, 'm.okafor');
    const pool = createPool({ uri: databaseUrl, connectionLimit: 10, timezone: 'Z' });
    cleanUp(() => pool.end());
    const statements = new Map<string, Statement[]>();
    const bare = express();
    bare.get('/raw', async (asked, response) => {
      const rows: unknown[] = [];
      for (const { sql, values } of statements.get(String(asked.query['route'])) ?? []) {
        rows.push((await pool.query(sql, values))[0]);
      }
      response.json(rows);
    });
    const baseline = await listen((incoming, response) => void bare(incoming, response), cleanUp);

    const routes = [...LISTS, ...ITEMS];
    for (const list of ['attempts', 'assignments', 'playlists']) {
      const answer = await fetch(`${address}/api/${list}`, { headers });
      const [first] = itemsSchema.parse(await answer.json()).items;
      if (first?.id !== undefined) routes.push(`${list}/${first.id}`);
    }
    const rows = [];
    for (const route of routes) {
      const ours = (): string => `${address}/api/${route}`;
      const raw = (): string => `${baseline}/raw?route=${encodeURIComponent(route)}`;
      statements.set(route, await recordStatements(() => fetch(ours(), { headers }).then((answer) => answer.text())));
      const setup = { requests: REQUESTS, atOnce: AT_ONCE };
      await loadHttp(ours, { ...setup, headers });
      await loadHttp(raw, { ...setup, headers: {} });
      const shares: number[] = [];
      const rates: number[] = [];
      const times: number[] = [];
      for (let round = 0; round < ROUNDS; round += 1) {
        const bareRun = await loadHttp(raw, { ...setup, headers: {} });
        const ourRun = await loadHttp(ours, { ...setup, headers });
        shares.push(ourRun.perSecond / bareRun.perSecond);
        rates.push(ourRun.perSecond);
        times.push(...ourRun.times);
      }
      const name = route.replace(/[0-9a-f]{8}-[0-9a-f-]{27}/u, 'one');
      const sent = statements.get(route)?.length ?? 0;
      rows.push({ name, sent, share: median(shares), rate: median(rates), p95: quantile(times, 0.95) });
    }
    note(`${rows.length} routes, ${REQUESTS * ROUNDS} requests each`);
    const slowest = rows.toSorted((a, b) => a.share - b.share)[0];
    return {
      value: slowest.share,
      unit: 'of the baseline',
      ratio: 1 / slowest.share,
      baseline: `the same SQL from a bare handler, ${(slowest.rate / slowest.share).toFixed(0)}/s; ours of ${slowest.name} ${slowest.rate.toFixed(0)}/s`,
      goal: `≥ ${GOAL_SHARE} for every route`,
      met: slowest.share >= GOAL_SHARE,
      details: rows.map(({ name, sent, share, rate }) => ({
        label: `/api/${name}, ${sent} statements, ${rate.toFixed(0)}/s`,
        value: share,
        unit: 'of the baseline',
      })),
    };
  },
});
