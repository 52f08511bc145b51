/** npm run build: both halves of the product, whether they are stale or not. */
import { buildStale } from './builds.mjs';
import { projectFolder } from './paths.mjs';
import { prepareTools } from './prepare.mjs';
import { printError } from './refusal.mjs';
import { seconds, Timings } from './timings.mjs';

const timings = new Timings();
try {
  await prepareTools(timings, console.log);
  const built = await buildStale(projectFolder, console.log, { force: true });
  console.log(`Built the ${built.join(' and the ')} in ${seconds(timings.totalMs())}.`);
} catch (error) {
  printError('Nothing was built', error);
  process.exitCode = 1;
}
