import { spawn } from 'node:child_process';
import path from 'node:path';
import process from 'node:process';
import readline from 'node:readline';
import { identityOf, settlesWithin } from './processes.mjs';
import { Refusal } from './refusal.mjs';

const READY_MARK = 'SIDEWASH_READY ';
const READY_WITHIN_MS = 120_000;

/**
 * @typedef {object} Product
 * @property {string} address
 * @property {Record<string, unknown>} ready what the server said of itself
 * @property {import('./processes.mjs').ProcessIdentity} identity
 * @property {Promise<number>} exited exit code, whenever it ends
 * @property {() => Promise<void>} stop
 */

/**
 * Starts the server and waits for its ready line.
 * @param {object} options
 * @param {string} options.projectFolder
 * @param {boolean} options.dev from the sources, with hot reload of the client
 * @param {NodeJS.ProcessEnv} options.env
 * @param {(identity: import('./processes.mjs').ProcessIdentity, stop: () => Promise<void>) => void} options.onSpawn
 *   called before it is ready, so that it can be stopped
 * @param {(line: string) => void} options.print for what the server prints once it is ready
 * @returns {Promise<Product>}
 */
export async function startProduct({ projectFolder, dev, env, onSpawn, print }) {
  const args = dev
    ? ['--import', 'tsx', path.join(projectFolder, 'server', 'main.ts')]
    : ['--enable-source-maps', path.join(projectFolder, 'dist', 'server', 'main.js')];
  // Detached: Ctrl-C in the terminal reaches the launcher alone, which then stops everything in order.
  const child = spawn(process.execPath, args, {
    cwd: projectFolder,
    env,
    detached: true,
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  const identity = identityOf(child.pid ?? -1);
  /** @type {Promise<number>} */
  const exited = new Promise((resolve) => {
    child.once('error', () => resolve(127));
    child.once('close', (code) => resolve(code ?? 1));
  });
  const stop = async () => {
    child.kill('SIGTERM');
    if (!(await settlesWithin(exited, 15_000))) child.kill('SIGKILL');
    await exited;
  };
  if (child.pid !== undefined) onSpawn(identity, stop);

  /** @type {string[]} */
  const before = [];
  let isReady = false;
  /** @type {Promise<Record<string, unknown>>} */
  const ready = new Promise((resolve) => {
    const take = (/** @type {string} */ line) => {
      if (line.startsWith(READY_MARK)) {
        isReady = true;
        resolve(JSON.parse(line.slice(READY_MARK.length)));
      } else if (isReady) print(line);
      else before.push(line);
    };
    readline.createInterface({ input: child.stdout }).on('line', take);
    readline.createInterface({ input: child.stderr }).on('line', take);
  });

  const first = Promise.race([ready, exited]);
  const outcome = (await settlesWithin(first, READY_WITHIN_MS)) ? await first : 'late';
  if (typeof outcome === 'object') {
    for (const line of before) print(line);
    return { address: addressOf(outcome, env), ready: outcome, identity, exited, stop };
  }
  await stop();
  throw startRefusal(outcome, before);
}

/**
 * @param {number | string} outcome exit code, or "late"
 * @param {string[]} printed
 */
function startRefusal(outcome, printed) {
  const lines = printed.filter((line) => line.trim() !== '').slice(-12);
  if (outcome === 'late') {
    return new Refusal(`The server was not ready within ${READY_WITHIN_MS / 1000} s`, 'its log says more', lines);
  }
  return new Refusal(`The server ended with ${outcome} before it was ready`, 'its last words stand above', lines);
}

/**
 * @param {Record<string, unknown>} ready
 * @param {NodeJS.ProcessEnv} env
 */
function addressOf(ready, env) {
  return typeof ready.address === 'string' ? ready.address : `http://${env.HOST}:${env.PORT}`;
}
