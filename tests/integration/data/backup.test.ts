import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import os from 'node:os';
import path from 'node:path';
import { gunzipSync, gzipSync } from 'node:zlib';
import { createConnection } from 'mysql2/promise';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readBackup, writeBackup } from '../../../server/data/backup-file.ts';
import { deliverAttempt, flyAttempt } from '../../support/flown-attempt.ts';
import { freshDatabase, startTestServer, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let folder: string;
beforeAll(async () => {
  server = await startTestServer();
  folder = await mkdtemp(path.join(os.tmpdir(), 'sidewash-backup-'));
});
afterAll(async () => {
  await rm(folder, { recursive: true, force: true });
  await server.close();
});

/** Checksums of all tables, and the names of the triggers. */
async function fingerprint(url: string): Promise<{ tables: Record<string, string>; triggers: string[] }> {
  const connection = await createConnection(url);
  const ask = async (sql: string): Promise<Record<string, unknown>[]> => {
    const [rows] = await connection.query(sql);
    return rows as Record<string, unknown>[]; // these statements give rows
  };
  const names = (await ask('SHOW TABLES')).map((row) => String(Object.values(row)[0]));
  const tables: Record<string, string> = {};
  for (const name of names) {
    const [row] = await ask(`CHECKSUM TABLE \`${name}\``);
    tables[name] = String(row['Checksum']);
  }
  const triggers = (await ask('SHOW TRIGGERS')).map((row) => String(row['Trigger'])).sort();
  await connection.end();
  return { tables, triggers };
}

describe('a backup', () => {
  it('taken while the product works is restored into a second database, table for table', async () => {
    const trainee = await server.client('j.lindqvist');
    await deliverAttempt(trainee, await flyAttempt(server, trainee, 'left-engine-cut-after-lift-off'));
    const file = path.join(folder, 'one.backup.gz');
    // Someone signs in meanwhile; the backup holds one moment.
    const before = await fingerprint(server.url);
    const [done] = await Promise.all([
      writeBackup({ url: server.url, file, program: 'test' }),
      new Promise((resolve) => setTimeout(resolve, 30)).then(() => server.client('m.okafor')),
    ]);
    expect(done.rows).toBeGreaterThan(100);
    const second = await freshDatabase();
    try {
      expect(await readBackup({ url: second.url, file })).toEqual(done);
      const after = await fingerprint(second.url);
      expect(Object.keys(after.tables)).toEqual(Object.keys(before.tables));
      expect(after.triggers).toEqual(before.triggers);
      for (const table of Object.keys(before.tables)) {
        if (['session', 'refresh_token', 'audit_entry'].includes(table)) continue; // the sign-in may be in or out
        expect([table, after.tables[table]]).toEqual([table, before.tables[table]]);
      }
      await expect(readBackup({ url: second.url, file })).rejects.toThrow(/holds tables already/);
    } finally {
      await second.drop();
    }
  });

  it('that is cut short or no backup is refused and leaves nothing behind', async () => {
    const whole = path.join(folder, 'whole.backup.gz');
    await writeBackup({ url: server.url, file: whole, program: 'test' });
    const lines = gunzipSync(await readFile(whole))
      .toString()
      .split('\n');
    const short = path.join(folder, 'short.gz');
    await writeFile(short, gzipSync(lines.slice(0, -2).join('\n')));
    const torn = path.join(folder, 'torn.gz');
    await writeFile(torn, (await readFile(whole)).subarray(0, 5000));
    const other = path.join(folder, 'other.gz');
    await writeFile(other, gzipSync('{"end": 0}\n'));
    const text = path.join(folder, 'text.gz');
    await writeFile(text, 'hello');
    const second = await freshDatabase();
    try {
      await expect(readBackup({ url: second.url, file: short })).rejects.toThrow(/ends early/);
      await expect(readBackup({ url: second.url, file: torn })).rejects.toThrow(/cannot be read/);
      await expect(readBackup({ url: second.url, file: other })).rejects.toThrow(/no backup/);
      await expect(readBackup({ url: second.url, file: text })).rejects.toThrow(/cannot be read/);
      expect((await fingerprint(second.url)).tables).toEqual({});
    } finally {
      await second.drop();
    }
  });
});
