import crypto from 'node:crypto';
import fs from 'node:fs';
import path from 'node:path';
import process from 'node:process';
import { lastLines, runProgram } from './programs.mjs';
import { Refusal } from './refusal.mjs';

/**
 * A half of the product: what it is built from and how.
 * @typedef {object} Build
 * @property {string} name
 * @property {string[]} sources files and folders; anything below `bootstrap` is left out
 * @property {string[]} viteArguments
 * @property {string} product a file that a finished build has
 */

const COMMON_SOURCES = ['shared', 'package.json', 'package-lock.json', 'tsconfig.base.json', 'tsconfig.json'];

/** @type {Build[]} */
export const BUILDS = [
  {
    name: 'client',
    sources: [...COMMON_SOURCES, 'src', 'public', 'index.html', 'vite.config.ts', 'tsconfig.app.json'],
    viteArguments: ['build', '--logLevel', 'warn'],
    product: 'dist/client/index.html',
  },
  {
    name: 'server',
    sources: [...COMMON_SOURCES, 'server', 'vite.server.config.ts'],
    viteArguments: ['build', '--logLevel', 'warn', '--config', 'vite.server.config.ts'],
    product: 'dist/server/main.js',
  },
];

/**
 * Builds the halves whose sources changed since they were built, at the same time.
 * @param {string} projectFolder
 * @param {(text: string) => void} say
 * @param {{ force?: boolean, only?: string[] }} [options]
 * @returns {Promise<string[]>} names of what was built
 */
export async function buildStale(projectFolder, say, { force = false, only } = {}) {
  const wanted = BUILDS.filter((build) => only === undefined || only.includes(build.name));
  const stale = wanted.filter((build) => force || isStale(projectFolder, build));
  if (stale.length > 0) say(`Building the ${stale.map((build) => build.name).join(' and the ')} …`);
  await Promise.all(stale.map((build) => buildOne(projectFolder, build)));
  return stale.map((build) => build.name);
}

/**
 * @param {string} projectFolder
 * @param {Build} build
 */
export function isStale(projectFolder, build) {
  if (!fs.existsSync(path.join(projectFolder, build.product))) return true;
  try {
    return fs.readFileSync(markFile(projectFolder, build), 'utf8') !== sourceHash(projectFolder, build.sources);
  } catch {
    return true;
  }
}

/**
 * @param {string} projectFolder
 * @param {Build} build
 */
async function buildOne(projectFolder, build) {
  const mark = markFile(projectFolder, build);
  const hash = sourceHash(projectFolder, build.sources);
  fs.rmSync(mark, { force: true });
  const vite = path.join(projectFolder, 'node_modules', 'vite', 'bin', 'vite.js');
  const outcome = await runProgram(process.execPath, [vite, ...build.viteArguments], {
    cwd: projectFolder,
    env: { ...process.env, NODE_ENV: 'production' },
  });
  if (outcome.code !== 0) {
    throw new Refusal(
      `Building the ${build.name} failed`,
      'what the build said stands above; "npm run check" says more about the sources',
      lastLines(outcome.output, 30),
    );
  }
  fs.mkdirSync(path.dirname(mark), { recursive: true });
  fs.writeFileSync(mark, hash);
}

/**
 * @param {string} projectFolder
 * @param {Build} build
 */
function markFile(projectFolder, build) {
  return path.join(projectFolder, 'dist', `built-${build.name}.sha256`);
}

/**
 * Hash over names and contents of the sources, in a fixed order. Missing ones count as missing.
 * @param {string} projectFolder
 * @param {string[]} sources
 */
export function sourceHash(projectFolder, sources) {
  const hash = crypto.createHash('sha256');
  for (const file of sources.flatMap((source) => filesBelow(path.join(projectFolder, source)))) {
    hash.update(path.relative(projectFolder, file)).update('\0').update(fs.readFileSync(file)).update('\0');
  }
  return hash.digest('hex');
}

/**
 * @param {string} place
 * @returns {string[]}
 */
function filesBelow(place) {
  const stat = fs.statSync(place, { throwIfNoEntry: false });
  if (!stat) return [];
  if (stat.isFile()) return [place];
  if (path.basename(place) === 'bootstrap') return [];
  return fs
    .readdirSync(place)
    .sort()
    .flatMap((name) => filesBelow(path.join(place, name)));
}
