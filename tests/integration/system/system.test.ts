import { mkdtemp, rm, writeFile, mkdir } from 'node:fs/promises';
import os from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { systemStateSchema } from '#shared/contracts/system.ts';
import { noteBackup, writeBackup } from '../../../server/data/backup-file.ts';
import { areaOf } from '../../../server/services/system/system.service.ts';
import { folderSizes } from '../../../server/services/system/folder-sizes.ts';
import { startTestServer, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let folder: string;
beforeAll(async () => {
  server = await startTestServer();
  folder = await mkdtemp(path.join(os.tmpdir(), 'sidewash-system-'));
});
afterAll(async () => {
  await rm(folder, { recursive: true, force: true });
  await server.close();
});
const read = async () =>
  systemStateSchema.parse((await (await server.client('s.virtanen'))('GET', '/api/system')).body);

describe('the state of the server', () => {
  it('is for administrators alone', async () => {
    for (const mailbox of ['m.okafor', 'j.lindqvist', 'a.reyes']) {
      expect((await (await server.client(mailbox))('GET', '/api/system')).status).toBe(403);
    }
    expect((await (await server.client())('GET', '/api/system')).status).toBe(401);
  });

  it('gives versions, health and sizes as they are', async () => {
    const state = await read();
    expect(state.health.databaseMs).toBeGreaterThan(0);
    expect(state.health.redis).toBe('off');
    expect(state.health.loopDelayMs.longest).toBeGreaterThanOrEqual(state.health.loopDelayMs.median);
    expect(state.versions.node).toBe(process.version);
    const [{ v }] = await server.sql('SELECT VERSION() AS v');
    expect(state.versions.mariadb).toBe(v);
    const [{ name }] = await server.sql('SELECT name FROM schema_migration ORDER BY timestamp DESC LIMIT 1');
    expect(state.versions.migration).toBe(name);
    const [{ bytes }] = await server.sql(
      `SELECT SUM(data_length + index_length) AS bytes FROM information_schema.tables WHERE table_schema = DATABASE()`,
    );
    expect(state.storage.areas.reduce((sum, area) => sum + area.bytes, 0)).toBe(Number(bytes));
    expect(state.storage.folder).toBeNull();
  });

  it('has an area for every table that there is', async () => {
    const tables = await server.sql(
      `SELECT table_name AS name FROM information_schema.tables WHERE table_schema = DATABASE()`,
    );
    const other = tables.map(({ name }) => String(name)).filter((name) => areaOf(name) === 'Other');
    expect(other).toEqual(['schema_migration']);
  });

  it('counts mail by what became of it, and names the last backup', async () => {
    const before = await read();
    expect([before.mail.waiting, before.storage.lastBackup]).toEqual([0, null]);
    const administrator = await server.client('s.virtanen');
    const rows = [{ line: 2, name: 'A', email: 'a@school.example', roles: '', cohort: '' }];
    await administrator('POST', '/api/people/roster', { json: { rows, invite: true } });
    await server.sql(`UPDATE outbox_mail SET last_error = 'nobody listens' WHERE email = 'a@school.example'`);
    const file = path.join(folder, 'one.backup.gz');
    const done = await writeBackup({ url: server.url, file, program: 'test' });
    await noteBackup({ url: server.url, file, bytes: 1234, rows: done.rows });
    const after = await read();
    expect(after.mail).toMatchObject({ waiting: 1, failing: 1, lastError: 'nobody listens' });
    expect(after.storage.lastBackup).toMatchObject({ file: 'one.backup.gz', bytes: 1234, rows: done.rows });
    expect(Math.abs(Date.parse(after.storage.lastBackup?.at ?? '') - Date.now())).toBeLessThan(60_000);
    while ((await server.services.auditChain.seal()) > 0);
    expect((await administrator('POST', '/api/audit/check')).body).toMatchObject({ firstBreak: null });
  });
});

describe('the sizes of a folder', () => {
  it('are those of its files, whatever lies deep or is gone', async () => {
    const top = path.join(folder, 'data');
    await mkdir(path.join(top, 'mail', 'old'), { recursive: true });
    await writeFile(path.join(top, 'mail', 'a.eml'), 'x'.repeat(100));
    await writeFile(path.join(top, 'mail', 'old', 'b.eml'), 'x'.repeat(50));
    await writeFile(path.join(top, 'secret'), 'x'.repeat(10));
    expect(await folderSizes(top)).toEqual([
      { name: 'mail', bytes: 150, files: 2 },
      { name: 'secret', bytes: 10, files: 1 },
    ]);
    expect(await folderSizes(path.join(top, 'nothing'))).toEqual([]);
  });
});
