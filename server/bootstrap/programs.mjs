import { spawn } from 'node:child_process';
import fs from 'node:fs';
import path from 'node:path';
import process from 'node:process';
import { settlesWithin } from './processes.mjs';

/** Folders where Debian keeps servers and which a user's PATH may lack. */
const SYSTEM_FOLDERS = ['/usr/sbin', '/usr/bin', '/usr/local/sbin', '/usr/local/bin', '/sbin', '/bin'];

/**
 * Full path of the first of the named programs that is there and may be executed; undefined when none is.
 * @param {string[]} names
 */
export function findProgram(names) {
  const folders = [...(process.env.PATH ?? '').split(path.delimiter), ...SYSTEM_FOLDERS];
  for (const name of names) {
    for (const folder of folders) {
      if (folder === '') continue;
      const file = path.join(folder, name);
      try {
        fs.accessSync(file, fs.constants.X_OK);
        if (fs.statSync(file).isFile()) return file;
      } catch {
        // not here: the next folder
      }
    }
  }
  return undefined;
}

/**
 * Children of runProgram at work.
 * @type {Map<import('node:child_process').ChildProcess, { ownGroup: boolean, ended: Promise<unknown> }>}
 */
const running = new Map();

/** Ends every program that runProgram has at work, and waits for it; their outcomes then report failure. */
export async function endRunningPrograms() {
  const all = [...running];
  for (const [child, { ownGroup }] of all) {
    try {
      if (child.pid !== undefined) process.kill(ownGroup ? -child.pid : child.pid, 'SIGTERM');
    } catch {
      // it ended just now
    }
  }
  await Promise.all(all.map(([, { ended }]) => settlesWithin(ended, 10_000)));
}

/**
 * @typedef {object} Outcome
 * @property {number} code exit code; 127 when the program could not be started
 * @property {string} output what it printed, both streams, in order
 */

/**
 * @typedef {object} RunOptions
 * @property {string} [cwd]
 * @property {NodeJS.ProcessEnv} [env]
 * @property {boolean} [ownGroup] for a program that starts others: ending it then ends them too
 */

/**
 * Runs a program to its end and keeps what it printed; never rejects.
 * @param {string} program
 * @param {string[]} args
 * @param {RunOptions} [options]
 * @returns {Promise<Outcome>}
 */
export function runProgram(program, args, { cwd, env = process.env, ownGroup = false } = {}) {
  const child = spawn(program, args, { cwd, env, detached: ownGroup, stdio: ['ignore', 'pipe', 'pipe'] });
  let output = '';
  child.stdout.on('data', (data) => (output += data));
  child.stderr.on('data', (data) => (output += data));
  /** @type {Promise<Outcome>} */
  const ended = new Promise((resolve) => {
    child.on('error', (error) => resolve({ code: 127, output: `${output}${error.message}\n` }));
    child.on('close', (code) => resolve({ code: code ?? 1, output }));
  });
  running.set(child, { ownGroup, ended });
  void ended.then(() => running.delete(child));
  return ended;
}

/**
 * The last non-empty lines of a text.
 * @param {string} text
 * @param {number} [count]
 */
export function lastLines(text, count = 12) {
  return text
    .split('\n')
    .filter((line) => line.trim() !== '')
    .slice(-count);
}
