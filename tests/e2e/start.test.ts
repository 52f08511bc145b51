import fs from 'node:fs';
import path from 'node:path';
import { expect, inject, it, onTestFinished } from 'vitest';
import { readInstance } from '../../server/bootstrap/instance-lock.mjs';
import { portIsFree } from '../../server/bootstrap/ports.mjs';
import { identityOf, isRunning, stopProcess } from '../../server/bootstrap/processes.mjs';
import { expectStartToEnd, freshDataFolder, type LaunchedProduct, launchProduct } from './support/product.ts';

function dataFolder(): string {
  const folder = freshDataFolder();
  onTestFinished(() => fs.rmSync(folder, { recursive: true, force: true }));
  return folder;
}

/** The processes that a started product consists of. */
function partsOf(product: LaunchedProduct) {
  const instance = readInstance(path.join(product.dataFolder, 'run', 'instance.json'));
  if (instance?.server == null) throw new Error('The lock names no server.');
  const pid = fs.readFileSync(path.join(product.dataFolder, 'run', 'mariadb.pid'), 'utf8');
  return { launcher: instance.launcher, server: instance.server, database: identityOf(Number.parseInt(pid, 10)) };
}

it('a second start names the address of the first and leaves it alone', async () => {
  const { code, output } = await expectStartToEnd({ dataFolder: inject('dataFolder') });
  expect(code).toBe(1);
  expect(output.trim()).toMatch(
    new RegExp(`^Sidewash did not start: Sidewash is already running at ${inject('address')} .*; use that one, .*\\.$`),
  );
  expect((await fetch(`${inject('address')}/api/health`)).ok).toBe(true);
});

it('Ctrl-C through npm stops the server and the database, and gives back the lock and the port', async () => {
  const product = await launchProduct({ dataFolder: dataFolder(), command: 'npm' });
  const parts = partsOf(product);
  expect(Object.values(parts).map(isRunning)).toEqual([true, true, true]);
  await product.stop();
  expect(Object.values(parts).map(isRunning)).toEqual([false, false, false]);
  expect(fs.existsSync(path.join(product.dataFolder, 'run', 'instance.json'))).toBe(false);
  expect(await portIsFree('127.0.0.1', product.port)).toBe(true);
});

it('after kill -9 of the launcher the next start recovers by itself and keeps the data', async () => {
  const first = await launchProduct({ dataFolder: dataFolder() });
  const parts = partsOf(first);
  process.kill(parts.launcher.pid, 'SIGKILL');
  await stopProcess(parts.launcher);
  expect([parts.server, parts.database].some(isRunning)).toBe(true);

  const second = await launchProduct({ dataFolder: first.dataFolder, port: first.port });
  onTestFinished(() => void second.stop());
  expect(second.output()).toContain('The last run ended without stopping; taking over its data folder.');
  expect([parts.server, parts.database].map(isRunning)).toEqual([false, false]);
  const answer = await fetch(`${second.address}/api/session`, {
    method: 'POST',
    headers: { 'content-type': 'application/json', origin: second.address },
    body: JSON.stringify({ email: 'j.lindqvist@fieldschool.example', password: 'balanced-line-26' }),
  });
  expect(answer.status).toBeLessThan(500);
  expect(await second.stop()).toBe(0);
});

it('when the server dies, the launcher says so, stops the database and ends with an error', async () => {
  const product = await launchProduct({ dataFolder: dataFolder() });
  const parts = partsOf(product);
  const ended = new Promise((resolve) => product.launcher.once('close', resolve));
  process.kill(parts.server.pid, 'SIGKILL');
  expect(await ended).toBe(1);
  expect(product.output()).toContain('The server ended by itself');
  expect(isRunning(parts.database)).toBe(false);
});

it('the started product serves the client, its interface, and says what is not there', async () => {
  const address = inject('address');
  const page = await fetch(`${address}/my-flights`);
  expect(page.status).toBe(200);
  expect(page.headers.get('content-type')).toMatch(/text\/html/);
  expect((await fetch(`${address}/api/no-such-thing`)).headers.get('content-type')).toMatch(/json/);
  expect((await fetch(`${address}/assets/no-such-file.js`)).status).toBe(404);
});
