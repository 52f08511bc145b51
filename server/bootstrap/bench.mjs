/** npm run bench [-- --json FILE] [--only NAME]: prepares as npm test does, builds, then measures every claim. */
import { spawn } from 'node:child_process';
import path from 'node:path';
import process from 'node:process';
import { buildStale } from './builds.mjs';
import { CHROMIUM, ensureProgram, MARIADB_SERVER } from './debian-packages.mjs';
import { projectFolder } from './paths.mjs';
import { prepareTools } from './prepare.mjs';
import { printError } from './refusal.mjs';
import { Timings } from './timings.mjs';

try {
  await prepareTools(new Timings(), console.log);
  await ensureProgram(MARIADB_SERVER, { say: console.log });
  await ensureProgram(CHROMIUM, { say: console.log });
  await buildStale(projectFolder, console.log);
  const runner = path.join(projectFolder, 'tests', 'bench', 'run.ts');
  // A young generation large enough that nothing is collected while a row counts what it allocates.
  const flags = ['--expose-gc', '--max-semi-space-size=128', '--import', 'tsx'];
  const child = spawn(process.execPath, [...flags, runner, ...process.argv.slice(2)], {
    cwd: projectFolder,
    stdio: 'inherit',
  });
  child.once('close', (code) => (process.exitCode = code ?? 1));
} catch (error) {
  printError('Nothing was measured', error);
  process.exitCode = 1;
}
