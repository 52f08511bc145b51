import fs from 'node:fs';
import net from 'node:net';
import path from 'node:path';
import { expect, it, onTestFinished } from 'vitest';
import { createConnection } from 'mysql2/promise';
import { prepareDataFolder } from '../../../server/bootstrap/data-folder.mjs';
import { startMariadb } from '../../../server/bootstrap/mariadb.mjs';
import { anyFreePort } from '../../../server/bootstrap/ports.mjs';
import { isRunning } from '../../../server/bootstrap/processes.mjs';
import { temporaryFolder } from './temporary-folder.ts';

async function start(dataFolder: string) {
  prepareDataFolder(dataFolder);
  const mariadb = await startMariadb({ dataFolder, say: () => undefined });
  onTestFinished(() => mariadb.stop());
  return mariadb;
}

async function query(url: string, sql: string): Promise<unknown> {
  const connection = await createConnection(url);
  try {
    return (await connection.query(sql))[0];
  } finally {
    await connection.end();
  }
}

it('starts in an empty folder, keeps its password to this user, and stops', async () => {
  const folder = temporaryFolder();
  const mariadb = await start(folder);
  expect(await query(mariadb.url, 'select 1 as one')).toEqual([{ one: 1 }]);
  expect(fs.statSync(path.join(folder, 'mariadb-access.json')).mode & 0o777).toBe(0o600);
  expect(fs.existsSync(path.join(folder, 'run', 'mariadb-grants.sql'))).toBe(false);
  await mariadb.stop();
  expect(isRunning(mariadb.identity)).toBe(false);
});

it('keeps what was committed through kill -9, and the port through a restart', async () => {
  const folder = temporaryFolder();
  const first = await start(folder);
  await query(first.url, 'create table kept (n int)');
  await query(first.url, 'insert into kept values (7)');
  process.kill(first.identity.pid, 'SIGKILL');
  await first.exited;
  const second = await start(folder);
  expect(await query(second.url, 'select n from kept')).toEqual([{ n: 7 }]);
  expect(second.url).toBe(first.url);
});

it('stops a server that was left running on the same files', async () => {
  const folder = temporaryFolder();
  const left = await start(folder);
  const next = await start(folder);
  expect(isRunning(left.identity)).toBe(false);
  expect(await query(next.url, 'select 1 as one')).toEqual([{ one: 1 }]);
});

it('moves to another port when its own was taken meanwhile', async () => {
  const folder = temporaryFolder();
  prepareDataFolder(folder);
  const port = await anyFreePort('127.0.0.1');
  const access = { user: 'sidewash', password: 'abc', database: 'sidewash', port };
  fs.writeFileSync(path.join(folder, 'mariadb-access.json'), JSON.stringify(access));
  const squatter = net.createServer();
  await new Promise<void>((resolve) => squatter.listen(port, '127.0.0.1', resolve));
  onTestFinished(() => void squatter.close());
  const mariadb = await start(folder);
  expect(mariadb.port).not.toBe(port);
  expect(await query(mariadb.url, 'select 1 as one')).toEqual([{ one: 1 }]);
});

it('works in a folder whose path is too long for a socket', async () => {
  const folder = path.join(temporaryFolder(), 'a'.repeat(60), 'b'.repeat(60));
  const mariadb = await start(folder);
  expect(await query(mariadb.url, 'select 1 as one')).toEqual([{ one: 1 }]);
});

it('says what is wrong when its files are damaged', async () => {
  const folder = temporaryFolder();
  const mariadb = await start(folder);
  await mariadb.stop();
  fs.writeFileSync(path.join(folder, 'mariadb', 'ibdata1'), 'damaged');
  await expect(start(folder)).rejects.toThrow(/The private database did not start .* its log .*mariadb\.log says more/);
});
