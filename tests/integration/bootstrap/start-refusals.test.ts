import net from 'node:net';
import path from 'node:path';
import { expect, it, onTestFinished } from 'vitest';
import { identityOf } from '../../../server/bootstrap/processes.mjs';
import { prepareDataFolder } from '../../../server/bootstrap/data-folder.mjs';
import { InstanceLock } from '../../../server/bootstrap/instance-lock.mjs';
import { expectStartToEnd } from '../../e2e/support/product.ts';
import { temporaryFolder } from './temporary-folder.ts';

/** What npm start says when it refuses is one line, and the exit code says so too. */
function refusalLine(output: string): string {
  const lines = output.split('\n').filter((line) => line.trim() !== '');
  expect(lines).toHaveLength(1);
  return lines[0];
}

async function takenPort(): Promise<number> {
  const server = net.createServer();
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  onTestFinished(() => void server.close());
  const address = server.address();
  return typeof address === 'object' && address !== null ? address.port : 0;
}

it('a port in use', async () => {
  const port = await takenPort();
  const { code, output } = await expectStartToEnd({ dataFolder: temporaryFolder(), port });
  expect(code).toBe(1);
  expect(refusalLine(output)).toBe(
    `Sidewash did not start: Port ${port} on 127.0.0.1 cannot be used; another program listens there or this user ` +
      `may not; stop that program, or choose another port, such as PORT=${port + 1} npm start.`,
  );
});

it('a port that is none', async () => {
  const { code, output } = await expectStartToEnd({ dataFolder: temporaryFolder(), env: { PORT: 'http' } });
  expect(code).toBe(1);
  expect(refusalLine(output)).toMatch(/PORT=http is no port number; use 1 to 65535\.$/);
});

it('a data folder in use', async () => {
  const dataFolder = temporaryFolder();
  prepareDataFolder(dataFolder);
  const lock = new InstanceLock(dataFolder);
  await lock.take();
  lock.update({ address: 'http://127.0.0.1:5180', launcher: identityOf(process.pid) });
  const { code, output } = await expectStartToEnd({ dataFolder });
  expect(code).toBe(1);
  expect(refusalLine(output)).toMatch(/already running at http:\/\/127\.0\.0\.1:5180 .*; use that one, or stop it/);
});

it('a data folder that cannot be', async () => {
  const { code, output } = await expectStartToEnd({ dataFolder: path.join('/dev/null', 'data') });
  expect(code).toBe(1);
  expect(refusalLine(output)).toMatch(/data folder \/dev\/null\/data cannot be written .* SIDEWASH_DATA/);
});

it('a database that does not answer; the lock is given back', async () => {
  const dataFolder = temporaryFolder();
  const env = { DATABASE_URL: 'mysql://u:p@127.0.0.1:9/sidewash' };
  const { code, output } = await expectStartToEnd({ dataFolder, env });
  expect(code).toBe(1);
  expect(refusalLine(output)).toMatch(/No database answers at 127\.0\.0\.1:9, .* or unset it/);
  expect(await new InstanceLock(dataFolder).take()).toEqual({ recovered: false });
});
