import type { CDPSession, Page } from 'playwright-core';
import { z } from 'zod';
import { flyRun, handsOff } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import { flyHandsOff, startFlight } from '../../e2e/support/cockpit-pilot.ts';
import { shippedScenario, specOf } from '../../unit/scenario/support/build-scenario.ts';
import { startBenchBrowser } from '../browser-bench.ts';
import { defineBench, median } from '../harness.ts';
import { publishScenario } from '../publish-scenario.ts';

const TEMPLATE = 'left-engine-cut-after-lift-off';
const ATTEMPTS = 20;
/** Each attempt is flown this long, to its end; twenty of the long ones are half an hour of flying. */
const SHORT_S = 3.5;
const LONG_S = 90;
/** The first attempts load scripts and warm the engine; what is kept is compared from the third on. */
const SETTLED = 2;
const LOOKED_AT = 3;
const GOAL = 1.2;

/** Nobody has to fly: a gust, and then the aeroplane is left to itself. */
const GUST = {
  id: 'gust',
  lane: 'air',
  kind: 'gust',
  axis: 'lateral',
  shape: 'one-minus-cosine',
  from: 'right',
  peak_kt: 8,
  gradientDistance_m: 60,
  at: { time_s: 1 },
} as const;
const START = { ias_kt: 110, height_ft: 6000, levers: [0.7, 0.7] };

const metricsSchema = z.object({ metrics: z.array(z.object({ name: z.string(), value: z.number() })) });

interface Kept {
  heapMb: number;
  nodes: number;
  listeners: number;
}

/** What the page keeps once everything that can be collected has been. */
async function keptBy(session: CDPSession): Promise<Kept> {
  for (let i = 0; i < 3; i += 1) await session.send('HeapProfiler.collectGarbage');
  const { metrics } = metricsSchema.parse(await session.send('Performance.getMetrics'));
  const of = (name: string): number => metrics.find((one) => one.name === name)?.value ?? Number.NaN;
  return { heapMb: of('JSHeapUsedSize') / 1024 / 1024, nodes: of('Nodes'), listeners: of('JSEventListeners') };
}

async function flyToTheEnd(page: Page): Promise<void> {
  await flyHandsOff(page);
  await page.getByText('Result by the server.').waitFor({ timeout: 60_000 });
}

/** One page that flies twenty attempts to their end, each delivered and judged, without a reload. */
export default defineBench({
  name: 'memory',
  claim: `${ATTEMPTS} attempts flown to their end on one page: what it keeps after the last, against after the first few`,
  async run({ note, cleanUp, long }) {
    const lastsS = long ? LONG_S : SHORT_S;
    const bench = await startBenchBrowser(cleanUp, { width: 1440, height: 900 });
    const over = { title: 'Flown again and again', duration_s: lastsS, events: [GUST], criteria: [], start: START };
    const whole = flyRun(createRun(specOf({ ...shippedScenario(TEMPLATE), ...over })), handsOff());
    if (whole.ended !== 'completed') throw new Error(`hands off the flight ends by ${whole.ended ?? 'nothing'}`);
    const slug = await publishScenario(bench.address, TEMPLATE, over);
    const page = await bench.openPage('trainee');
    const session = await page.context().newCDPSession(page);
    await session.send('Performance.enable');
    await session.send('HeapProfiler.enable');
    await startFlight(page, slug);
    const kept: Kept[] = [];
    for (let i = 0; i < ATTEMPTS; i += 1) {
      await flyToTheEnd(page);
      kept.push(await keptBy(session));
      if (i + 1 === ATTEMPTS) break;
      await page.getByRole('button', { name: 'Fly again' }).last().click();
      await page.locator('.result').waitFor({ state: 'hidden' });
    }
    note(`${ATTEMPTS} attempts of ${lastsS} s: ${((ATTEMPTS * lastsS) / 60).toFixed(1)} minutes of flying`);
    if (!long) note('npm run bench -- --only memory --long flies the whole half hour');
    const early = kept.slice(SETTLED, SETTLED + LOOKED_AT);
    const late = kept.slice(-LOOKED_AT);
    const growth = (of: (one: Kept) => number): number => median(late.map(of)) / median(early.map(of));
    const heap = growth(({ heapMb }) => heapMb);
    const nodes = growth((one) => one.nodes);
    const listeners = growth((one) => one.listeners);
    return {
      value: median(late.map(({ heapMb }) => heapMb)),
      unit: 'MiB',
      ratio: heap,
      baseline: `after attempts ${SETTLED + 1} to ${SETTLED + LOOKED_AT}: ${median(early.map(({ heapMb }) => heapMb)).toFixed(1)} MiB of heap`,
      goal: `heap, nodes and listeners ≤ ${GOAL} × baseline`,
      met: Math.max(heap, nodes, listeners) <= GOAL,
      details: [
        { label: 'nodes against the baseline', value: nodes, unit: '×' },
        { label: 'listeners against the baseline', value: listeners, unit: '×' },
        { label: 'nodes after the last attempt', value: kept[kept.length - 1].nodes, unit: '' },
        {
          label: 'heap added by each attempt',
          value: (1024 * (kept[kept.length - 1].heapMb - kept[SETTLED].heapMb)) / (kept.length - 1 - SETTLED),
          unit: 'KiB',
        },
      ],
    };
  },
});
