import fs from 'node:fs';
import path from 'node:path';
import { z } from 'zod';
import { anyFreePort } from '../../../server/bootstrap/ports.mjs';
import { freshDataFolder, type LaunchedProduct, launchProduct } from '../../e2e/support/product.ts';
import { defineBench, median } from '../harness.ts';

const WARM_STARTS = 5;
const GOAL_S = 5;

const timingsSchema = z.object({ steps: z.array(z.object({ name: z.string(), ms: z.number() })) });

/** A first start fills the database; then the starts that count. */
export default defineBench({
  name: 'warm-start',
  claim: 'from npm start to the first served page, everything installed, built and seeded',
  async run({ note, cleanUp }) {
    const dataFolder = freshDataFolder();
    cleanUp(() => fs.rmSync(dataFolder, { recursive: true, force: true }));
    const first = await startOnce(dataFolder);
    note(`first start, database created and filled: ${first.totalS.toFixed(1)} s`);

    const starts: Awaited<ReturnType<typeof startOnce>>[] = [];
    for (let i = 0; i < WARM_STARTS; i++) starts.push(await startOnce(dataFolder));
    const value = median(starts.map((start) => start.totalS));
    const step = (name: string) => median(starts.map((start) => start.steps[name] ?? 0));
    const serverS = step('server');
    return {
      value,
      unit: 's',
      ratio: value / serverS,
      baseline: `the server alone on a running database: ${serverS.toFixed(2)} s`,
      goal: `< ${GOAL_S} s`,
      met: value < GOAL_S,
      details: [
        { label: 'npm and checks of the surroundings', value: value - waitOf(step), unit: 's' },
        ...['packages', 'database', 'build', 'server'].map((name) => ({ label: name, value: step(name), unit: 's' })),
        { label: 'stopping again', value: median(starts.map((start) => start.stopS)), unit: 's' },
      ],
    };
  },
});

/** Database and build go side by side; the rest one after the other. */
function waitOf(step: (name: string) => number): number {
  return step('packages') + Math.max(step('database'), step('build')) + step('server');
}

async function startOnce(dataFolder: string) {
  const timingsFile = path.join(dataFolder, 'timings.json');
  const port = await anyFreePort('127.0.0.1');
  const from = performance.now();
  const launching = launchProduct({ dataFolder, port, command: 'npm', env: { SIDEWASH_TIMINGS: timingsFile } });
  const product: LaunchedProduct = await launching;
  const page = await fetch(`${product.address}/`);
  if (!page.ok || !(await page.text()).includes('<script')) throw new Error(`${product.address} served no page.`);
  const totalS = (performance.now() - from) / 1000;
  const stopFrom = performance.now();
  await product.stop();
  const stopS = (performance.now() - stopFrom) / 1000;
  const { steps } = timingsSchema.parse(JSON.parse(fs.readFileSync(timingsFile, 'utf8')));
  return { totalS, stopS, steps: Object.fromEntries(steps.map(({ name, ms }) => [name, ms / 1000])) };
}
