import type { Page } from 'playwright-core';
import { z } from 'zod';
import { createReplay } from '#shared/scenario/replay.ts';
import { startLoadProduct } from '../../load/crowd.ts';
import { deliverAttempt, flyAttempt } from '../../support/flown-attempt.ts';
import { openClient } from '../../support/test-server.ts';
import { attemptDetailSchema } from '#shared/contracts/attempts.ts';
import { openBenchBrowser } from '../browser-bench.ts';
import { defineBench, median, quantile, timeOnce } from '../harness.ts';
import { publishScenario } from '../publish-scenario.ts';

const TEMPLATE = 'rudder-ratio-stuck';
const SECONDS = 120;
const OPENINGS = 5;
const SEEKS = 60;
const GOAL_OPEN_MS = 1000;
const GOAL_SEEK_MS = 50;

/** When a link or the scrubber was pressed, and when the stage of the debrief was last drawn. */
const WATCH_PICTURE = `(() => {
  const bench = (window.bench = { pressed: 0, first: 0, drawn: 0 });
  const clear = CanvasRenderingContext2D.prototype.clearRect;
  CanvasRenderingContext2D.prototype.clearRect = function (...given) {
    clear.apply(this, given);
    if (!this.canvas.closest('.flight-stage')) return;
    bench.drawn = performance.now();
    if (bench.first === 0) bench.first = bench.drawn;
  };
  addEventListener('pointerdown', () => { bench.pressed = performance.now(); bench.first = 0; }, true);
})();`;
const FIRST_PICTURE = `new Promise((resolve, reject) => {
  const look = () => {
    if (bench.first > 0) resolve(bench.first - bench.pressed);
    else if (performance.now() - bench.pressed > 10000) reject(new Error('no picture within ten seconds'));
    else setTimeout(look, 2);
  };
  look();
})`;

async function measured(page: Page): Promise<number> {
  return z.number().parse(await page.evaluate(FIRST_PICTURE));
}

/** A trainee's attempt of two minutes: from the link in the list to its first picture, and from the scrubber to the picture there. */
export default defineBench({
  name: 'replay-open',
  claim: `an attempt of ${SECONDS} s: from the click to the first picture, and from the scrubber to the picture anywhere`,
  async run({ note, cleanUp }) {
    const product = await startLoadProduct(cleanUp);
    const { address } = product.server;
    const slug = await publishScenario(address, TEMPLATE, { title: 'Two minutes', duration_s: SECONDS });
    const trainee = await openClient(address, 'j.lindqvist');
    const flown = await flyAttempt(product, trainee, slug, { delayS: 1 });
    const delivered = await deliverAttempt(trainee, flown);
    if (delivered.status >= 300 || flown.durationTicks !== SECONDS * 120) throw new Error('The attempt is not whole.');
    note(`${flown.chunks.length} chunks`);

    const bench = await openBenchBrowser(cleanUp, { width: 1440, height: 900 }, address);
    const page = await bench.openPage('trainee', WATCH_PICTURE);
    const opened: number[] = [];
    for (let i = 0; i < OPENINGS + 1; i += 1) {
      await page.goto('/my-flights');
      await page.waitForLoadState('networkidle');
      await page.locator(`a[href^="/attempts/${flown.id}"]`).first().click();
      opened.push(await measured(page));
    }
    await page.waitForTimeout(1500);
    const box = await page.locator('[role="slider"]').first().boundingBox();
    if (box === null) throw new Error('There is no scrubber.');
    const sought: number[] = [];
    for (let i = 0; i < SEEKS; i += 1) {
      const share = ((i + 1) * 0.618034) % 1; // spread evenly, neighbours far apart
      await page.mouse.click(box.x + 8 + share * (box.width - 16), box.y + box.height / 2);
      sought.push(await measured(page));
      await page.waitForTimeout(40);
    }
    const bare = await bareReplay(trainee, flown);
    const value = median(opened.slice(1));
    const p95 = quantile(sought, 0.95);
    return {
      value,
      unit: 'ms',
      ratio: value / bare,
      baseline: `integrating the recording with its key frames and nothing else: ${bare.toFixed(0)} ms`,
      goal: `first picture ≤ ${GOAL_OPEN_MS} ms, seek p95 ≤ ${GOAL_SEEK_MS} ms`,
      met: value <= GOAL_OPEN_MS && p95 <= GOAL_SEEK_MS,
      details: [
        { label: 'the first opening, scripts not yet loaded', value: opened[0], unit: 'ms' },
        { label: 'slowest opening after it', value: Math.max(...opened.slice(1)), unit: 'ms' },
        { label: 'scrubber to picture, median', value: median(sought), unit: 'ms' },
        { label: 'scrubber to picture, p95', value: p95, unit: 'ms' },
        { label: 'scrubber to picture, slowest', value: Math.max(...sought), unit: 'ms' },
      ],
    };
  },
});

async function bareReplay(
  client: Awaited<ReturnType<typeof openClient>>,
  flown: Awaited<ReturnType<typeof flyAttempt>>,
) {
  const detail = attemptDetailSchema.parse((await client('GET', `/api/attempts/${flown.id}`)).body);
  const spec = {
    scenario: detail.scenario,
    airframe: detail.airframe.airframe,
    seed: detail.seed,
    drawn: detail.drawn,
  };
  return median([0, 1, 2, 3, 4].map(() => timeOnce(() => createReplay(spec, flown.chunks))).slice(1));
}
