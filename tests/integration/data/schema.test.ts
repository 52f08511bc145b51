import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createDataSource } from '../../../server/data/data-source.ts';
import { EngineersBench1764547300000 } from '../../../server/data/migrations/1764547300000-engineers-bench.ts';
import { createAirframesRepository } from '../../../server/data/repositories/airframes.repository.ts';
import { airframeListQuerySchema } from '#shared/contracts/airframes.ts';
import { freshDatabase, startTestServer } from '../../support/test-server.ts';

let fresh: Awaited<ReturnType<typeof freshDatabase>>;
beforeAll(async () => {
  fresh = await freshDatabase();
});
afterAll(() => fresh.drop());

describe('the schema', () => {
  it('is what the entities say once all migrations have run', async () => {
    const source = createDataSource({ url: fresh.url, connections: 2 });
    await source.initialize();
    await source.runMigrations();
    const { upQueries } = await source.driver.createSchemaBuilder().log();
    await source.destroy();
    expect(upQueries.map(({ query }) => query)).toEqual([]);
  });

  it('takes the airframes of an earlier schema along, with their listings', async () => {
    const server = await startTestServer();
    const source = createDataSource({ url: server.url, connections: 2 });
    await source.initialize();
    try {
      const runner = source.createQueryRunner();
      const list = () =>
        server
          .sql('SELECT organisation_id FROM airframe LIMIT 1')
          .then(([{ organisation_id: id }]) =>
            createAirframesRepository(source.manager).list(
              String(id),
              airframeListQuerySchema.parse({ search: 'INVENTED for', sort: 'name', tag: 'Propeller' }),
            ),
          );
      const before = await list();
      expect(before.total).toBeGreaterThan(0);
      const migration = new EngineersBench1764547300000();
      await migration.down(runner);
      await migration.up(runner);
      await runner.release();
      expect(await list()).toEqual(before);
      await expect(server.sql('UPDATE airframe_revision SET version = 2')).rejects.toThrow('never changes');
    } finally {
      await source.destroy();
      await server.close();
    }
  });
});
