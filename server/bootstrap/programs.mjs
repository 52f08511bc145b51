import { spawn } from 'node:child_process';
import fs from 'node:fs';
import path from 'node:path';

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

/** Children of runProgram at work. @type {Set<import('node:child_process').ChildProcess>} */
const running = new Set();

/** Ends every program that runProgram has at work; their outcomes then report failure. */
export function endRunningPrograms() {
  for (const child of running) child.kill('SIGTERM');
}

/**
 * @typedef {object} Outcome
 * @property {number} code exit code; 127 when the program could not be started
 * @property {string} output what it printed, both streams, in order
 */

/**
 * Runs a program to its end and keeps what it printed; never rejects.
 * @param {string} program
 * @param {string[]} args
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv, onOutput?: (text: string) => void, timeoutMs?: number }} [options]
 * @returns {Promise<Outcome>}
 */
export function runProgram(program, args, options = {}) {
  return new Promise((resolve) => {
    const child = spawn(program, args, {
      cwd: options.cwd,
      env: options.env ?? process.env,
      stdio: ['ignore', 'pipe', 'pipe'],
      timeout: options.timeoutMs,
    });
    running.add(child);
    let output = '';
    const take = (/** @type {Buffer} */ data) => {
      output += data.toString();
      options.onOutput?.(data.toString());
    };
    child.stdout.on('data', take);
    child.stderr.on('data', take);
    const finish = (/** @type {number} */ code) => {
      running.delete(child);
      resolve({ code, output });
    };
    child.on('error', (error) => {
      output += `${error.message}\n`;
      finish(127);
    });
    child.on('close', (code) => finish(code ?? 1));
  });
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
