import { type ChildProcess, spawn } from 'node:child_process';
import fs from 'node:fs';
import path from 'node:path';
import { expect, it, onTestFinished } from 'vitest';
import { prepareDataFolder } from '../../../server/bootstrap/data-folder.mjs';
import { type Instance, InstanceLock } from '../../../server/bootstrap/instance-lock.mjs';
import { identityOf, isRunning, pause, stopProcess } from '../../../server/bootstrap/processes.mjs';
import { temporaryFolder } from './temporary-folder.ts';

function preparedFolder(): string {
  const folder = temporaryFolder();
  prepareDataFolder(folder);
  return folder;
}

/** A process that does nothing for a minute. */
function idler(): ChildProcess & { pid: number } {
  const child = spawn('sleep', ['60'], { stdio: 'ignore' });
  onTestFinished(() => void child.kill('SIGKILL'));
  return Object.assign(child, { pid: child.pid ?? -1 });
}

function writeLock(folder: string, instance: Instance): void {
  fs.writeFileSync(path.join(folder, 'run', 'instance.json'), JSON.stringify(instance));
}

it('a running holder is named with its address', async () => {
  const folder = preparedFolder();
  const holder = idler();
  writeLock(folder, { launcher: identityOf(holder.pid), address: 'http://127.0.0.1:5180', server: null });
  await expect(new InstanceLock(folder).take()).rejects.toThrow(
    `Sidewash is already running at http://127.0.0.1:5180 (process ${holder.pid}, data folder ${folder}); ` +
      'use that one, or stop it with Ctrl-C in its window and start again.',
  );
});

it('a holder that is still starting is named as such', async () => {
  const folder = preparedFolder();
  writeLock(folder, { launcher: identityOf(idler().pid), address: null, server: null });
  await expect(new InstanceLock(folder).take()).rejects.toThrow(/already running and still starting/);
});

it('the lock of a killed holder is taken over and the server it left is stopped', async () => {
  const folder = preparedFolder();
  const holder = idler();
  const launcher = identityOf(holder.pid);
  holder.kill('SIGKILL');
  await stopProcess(launcher);
  const server = identityOf(idler().pid);
  writeLock(folder, { launcher, address: 'http://127.0.0.1:5180', server });
  expect(await new InstanceLock(folder).take()).toEqual({ recovered: true });
  expect(isRunning(server)).toBe(false);
});

it('another process that got the number of a dead holder or server is neither believed nor stopped', async () => {
  const folder = preparedFolder();
  const stranger = identityOf(idler().pid);
  const past = { ...stranger, startTicks: '1' };
  writeLock(folder, { launcher: past, address: null, server: past });
  expect(await new InstanceLock(folder).take()).toEqual({ recovered: true });
  expect(isRunning(stranger)).toBe(true);
});

it('a damaged lock is taken over', async () => {
  const folder = preparedFolder();
  fs.writeFileSync(path.join(folder, 'run', 'instance.json'), '{"launcher":');
  expect(await new InstanceLock(folder).take()).toEqual({ recovered: true });
});

it('of two at once one gets it, and after its release the next does', async () => {
  const folder = preparedFolder();
  const [first, second] = [new InstanceLock(folder), new InstanceLock(folder)];
  expect(await first.take()).toEqual({ recovered: false });
  await expect(second.take()).rejects.toThrow(/already running/);
  first.release();
  expect(await second.take()).toEqual({ recovered: false });
});

it('a zombie counts as gone', async () => {
  // The shell becomes a sleep that never asks how its child ended, so the child stays a zombie.
  const shell = spawn('sh', ['-c', 'sleep 0 & echo $!; exec sleep 60'], { stdio: ['ignore', 'pipe', 'ignore'] });
  onTestFinished(() => void shell.kill('SIGKILL'));
  const printed = await new Promise<string>((resolve) =>
    shell.stdout.once('data', (data: Buffer) => resolve(`${data}`)),
  );
  const zombie = { pid: Number.parseInt(printed, 10), startTicks: null };
  for (let i = 0; i < 50 && isRunning(zombie); i++) await pause(20);
  expect(() => process.kill(zombie.pid, 0)).not.toThrow();
  expect(isRunning(zombie)).toBe(false);
});
