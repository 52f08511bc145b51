import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import process from 'node:process';
import { findProgram, runProgram } from './programs.mjs';
import { Refusal } from './refusal.mjs';

/**
 * Makes node_modules what package-lock.json says; does nothing when it is already.
 * @param {string} projectFolder
 * @param {(text: string) => void} say
 * @returns {Promise<boolean>} whether it had to install
 */
export async function ensureNpmPackages(projectFolder, say) {
  if (packagesMatchLock(projectFolder)) return false;
  say('Installing npm packages (once; takes about a minute) …');
  const npm = npmCommand();
  const [program, ...args] = [...npm, 'ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'];
  const outcome = await runProgram(program, args, { cwd: projectFolder, env: npmEnvironment(projectFolder) });
  if (outcome.code !== 0) {
    throw new Refusal(
      `Installing the npm packages failed (npm ci ended with ${outcome.code})`,
      'check the network and that this user may write in the project folder, then start again',
      errorLines(outcome.output),
    );
  }
  return true;
}

/**
 * What npm says is wrong, without its notices and the usage that it prints after it.
 * @param {string} output
 */
function errorLines(output) {
  return output
    .split('\n')
    .filter((line) => /^npm error \S/.test(line))
    .slice(0, 8);
}

/**
 * Whether what npm recorded as installed has every package of the lock file, in its version.
 * Optional packages may be missing: they depend on the machine.
 * @param {string} projectFolder
 */
export function packagesMatchLock(projectFolder) {
  const wanted = readPackages(path.join(projectFolder, 'package-lock.json'));
  const installed = readPackages(path.join(projectFolder, 'node_modules', '.package-lock.json'));
  if (wanted === null || installed === null) return false;
  return Object.entries(wanted).every(
    ([place, entry]) =>
      place === '' ||
      (installed[place] === undefined ? entry.optional === true : installed[place].version === entry.version),
  );
}

/**
 * @param {string} file
 * @returns {Record<string, { version?: string, optional?: boolean }> | null}
 */
function readPackages(file) {
  try {
    return JSON.parse(fs.readFileSync(file, 'utf8')).packages ?? null;
  } catch {
    return null;
  }
}

/** The npm that started this script, or the one on the PATH. */
function npmCommand() {
  const own = process.env.npm_execpath;
  if (own?.endsWith('.js') && fs.existsSync(own)) return [process.execPath, own];
  const npm = findProgram(['npm']);
  if (npm) return [npm];
  throw new Refusal('npm was not found', 'install npm beside Node and start again');
}

/**
 * A user without a writable home folder gets npm's cache inside the project.
 * @param {string} projectFolder
 */
function npmEnvironment(projectFolder) {
  const env = { ...process.env };
  // What this run's own npm handed down would override the flags and the project's .npmrc.
  for (const name of Object.keys(env)) if (/^npm_config_(global|omit|prefix|dry_run)/i.test(name)) delete env[name];
  if (!homeIsWritable()) env.npm_config_cache = path.join(projectFolder, '.cache', 'npm');
  return env;
}

export function homeIsWritable() {
  try {
    fs.accessSync(os.homedir(), fs.constants.W_OK);
    return true;
  } catch {
    return false;
  }
}
