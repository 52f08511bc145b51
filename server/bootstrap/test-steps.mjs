import { spawn } from 'node:child_process';
import fs from 'node:fs';
import path from 'node:path';
import process from 'node:process';
import { projectFolder } from './paths.mjs';
import { runProgram } from './programs.mjs';
import { seconds } from './timings.mjs';

/**
 * How a step of `npm test` went.
 * @typedef {object} StepResult
 * @property {string} name
 * @property {number} ms
 * @property {number} passed tests; 0 for a step that has none
 * @property {number} failed tests, or 1 for another failure
 */

/**
 * @param {string} name
 * @param {number} from
 * @param {number} passed
 * @param {number} failed
 * @returns {StepResult}
 */
function result(name, from, passed, failed) {
  return { name, ms: Math.round(performance.now() - from), passed, failed };
}

/** @param {string} relative */
function packageProgram(relative) {
  return path.join(projectFolder, 'node_modules', relative);
}

/** Checks without tests: what to run with Node, in lanes that go side by side on two cores. */
export const CHECK_LANES = [
  [
    { name: 'format', args: [packageProgram('prettier/bin/prettier.cjs'), '--check', '--log-level', 'warn', '.'] },
    { name: 'lint', args: [packageProgram('eslint/bin/eslint.js'), '.'] },
    { name: 'types of shared', args: [packageProgram('typescript/bin/tsc'), '-p', 'tsconfig.shared.json'] },
    // vue-tsc, because tests and what they import reach into .vue files.
    {
      name: 'types of server and tests',
      args: [packageProgram('vue-tsc/bin/vue-tsc.js'), '-p', 'tsconfig.server.json'],
    },
    { name: 'types of the start scripts', args: [packageProgram('typescript/bin/tsc'), '-p', 'tsconfig.scripts.json'] },
  ],
  [
    { name: 'types of the client', args: [packageProgram('vue-tsc/bin/vue-tsc.js'), '-p', 'tsconfig.app.json'] },
    {
      name: 'types of its tests',
      args: [packageProgram('vue-tsc/bin/vue-tsc.js'), '-p', 'tsconfig.client-tests.json'],
    },
  ],
];

/**
 * Runs all checks; prints each as it ends, with what it said.
 * @returns {Promise<StepResult[]>}
 */
export async function runChecks() {
  const lanes = CHECK_LANES.map(async (lane) => {
    const results = [];
    for (const check of lane) results.push(await runCheck(check));
    return results;
  });
  return (await Promise.all(lanes)).flat();
}

/** @param {{ name: string, args: string[] }} check */
async function runCheck({ name, args }) {
  const from = performance.now();
  const outcome = await runProgram(process.execPath, args, { cwd: projectFolder });
  if (outcome.output.trim() !== '') console.log(outcome.output.trimEnd());
  const step = result(name, from, 0, outcome.code === 0 ? 0 : 1);
  console.log(`${outcome.code === 0 ? 'ok' : 'FAILED'}  ${name} (${seconds(step.ms)})`);
  return step;
}

/**
 * Runs the named vitest projects and counts their tests.
 * @param {string} name
 * @param {string[]} projects
 * @param {NodeJS.ProcessEnv} env
 * @returns {Promise<StepResult>}
 */
export async function runVitest(name, projects, env) {
  const from = performance.now();
  console.log(`\n${name}`);
  const report = path.join(projectFolder, '.cache', 'test-results', `${name.replace(/\W+/g, '-')}.json`);
  fs.rmSync(report, { force: true });
  const code = await runVisibly(
    [
      packageProgram('vitest/vitest.mjs'),
      'run',
      ...projects.flatMap((project) => ['--project', project]),
      '--reporter=default',
      '--reporter=json',
      `--outputFile.json=${report}`,
    ],
    env,
  );
  const { passed, failed } = countTests(report);
  // A run that broke down outside its tests, or ran none, has failed too.
  const broken = failed === 0 && (code !== 0 || passed === 0);
  return result(name, from, passed, broken ? 1 : failed);
}

/**
 * @param {string} file
 * @returns {{ passed: number, failed: number }}
 */
export function countTests(file) {
  try {
    const report = JSON.parse(fs.readFileSync(file, 'utf8'));
    return { passed: Number(report.numPassedTests), failed: Number(report.numFailedTests) };
  } catch {
    return { passed: 0, failed: 0 };
  }
}

/**
 * @param {string[]} args
 * @param {NodeJS.ProcessEnv} env
 * @returns {Promise<number>}
 */
function runVisibly(args, env) {
  return new Promise((resolve) => {
    const child = spawn(process.execPath, args, { cwd: projectFolder, env, stdio: ['ignore', 'inherit', 'inherit'] });
    child.once('error', () => resolve(127));
    child.once('close', (code) => resolve(code ?? 1));
  });
}

/**
 * A step of another kind: failed when it throws.
 * @param {string} name
 * @param {() => Promise<unknown>} action
 * @param {(error: unknown) => void} onError
 * @returns {Promise<StepResult>}
 */
export async function runStep(name, action, onError) {
  const from = performance.now();
  try {
    await action();
    return result(name, from, 0, 0);
  } catch (error) {
    onError(error);
    return result(name, from, 0, 1);
  }
}
