/**
 * npm test: prepares a bare clone as npm start does, then checks and tests everything. The last line is
 * "N passed, N failed". --fast (npm run check): no database, no browser. --deep: also what needs patience (DEEP=1).
 */
import process from 'node:process';
import { buildStale } from './builds.mjs';
import { CHROMIUM, ensureProgram, MARIADB_SERVER } from './debian-packages.mjs';
import { projectFolder } from './paths.mjs';
import { prepareTools } from './prepare.mjs';
import { printError } from './refusal.mjs';
import { runChecks, runStep, runVitest } from './test-steps.mjs';
import { seconds, Timings } from './timings.mjs';

const fast = process.argv.includes('--fast');
const env = { ...process.env, ...(process.argv.includes('--deep') ? { DEEP: '1' } : {}) };
const timings = new Timings();
const onError = (/** @type {unknown} */ error) => printError('This step failed', error);

/** @type {import('./test-steps.mjs').StepResult[]} */
const steps = [await runStep('preparation', prepare, onError)];
if (steps[0].failed === 0) {
  steps.push(...(await runChecks()));
  const plain = fast ? ['unit', 'components', 'architecture'] : ['unit', 'components', 'reference', 'architecture'];
  steps.push(await runVitest(plain.join(', '), plain, env));
  if (!fast) await runWholeProduct();
}
report();

async function prepare() {
  await prepareTools(timings, console.log);
  if (fast) return;
  if (!process.env.DATABASE_URL) await ensureProgram(MARIADB_SERVER, { say: console.log });
  await ensureProgram(CHROMIUM, { say: console.log });
}

async function runWholeProduct() {
  steps.push(await runVitest('integration', ['integration'], env));
  const build = await runStep('build', () => buildStale(projectFolder, console.log), onError);
  steps.push(build);
  if (build.failed === 0) steps.push(await runVitest('end-to-end', ['e2e'], env));
}

function report() {
  const width = Math.max(...steps.map((step) => step.name.length));
  console.log('');
  for (const { name, ms, passed, failed } of steps) {
    const counts = passed > 0 ? `${passed} passed` : '';
    console.log(`${failed > 0 ? 'FAILED' : 'ok    '}  ${name.padEnd(width)}  ${seconds(ms).padStart(7)}  ${counts}`);
  }
  const sum = (/** @type {'passed' | 'failed'} */ key) => steps.reduce((total, step) => total + step[key], 0);
  console.log(`\n${seconds(timings.totalMs())} in all`);
  console.log(`${sum('passed')} passed, ${sum('failed')} failed`);
  process.exitCode = sum('failed') === 0 && sum('passed') > 0 ? 0 : 1;
}
