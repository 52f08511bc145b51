import type { Page } from 'playwright-core';
import { z } from 'zod';
import { mapPicture, type MapRequest } from '../../../src/runner/workers/analysis/bench-map.ts';
import { startBenchBrowser } from '../browser-bench.ts';
import { defineBench, median, quantile, timeOnce } from '../harness.ts';

const MOVES = 30;
const GOAL_MS = 100;
const ADDRESS = '/analysis?airframe=light-twin&revision=1&tab=map';

/**
 * When the slider told of a move, and when the frame after the last change of the figures was painted; the newest request
 * to the analysis worker is kept, so that its cost alone can be measured.
 */
const WATCH_FIGURES = `(() => {
  const bench = (window.bench = { moved: 0, painted: 0, changes: 0, request: null });
  const post = Worker.prototype.postMessage;
  Worker.prototype.postMessage = function (message, ...rest) {
    if (message?.request?.kind === 'map') bench.request = message.request;
    return post.call(this, message, ...rest);
  };
  const painted = () => {
    const channel = new MessageChannel();
    channel.port1.onmessage = () => { bench.painted = performance.now(); };
    channel.port2.postMessage(0);
  };
  addEventListener('input', () => { bench.moved = performance.now(); bench.painted = 0; bench.changes = 0; }, true);
  new MutationObserver((changes) => {
    const drawn = changes.filter(({ target }) => (target.closest ? target : target.parentElement)?.closest('.sheet-body svg'));
    if (drawn.length === 0 || bench.moved === 0) return;
    bench.changes += drawn.length;
    requestAnimationFrame(painted);
  }).observe(document, { subtree: true, childList: true, attributes: true, characterData: true });
})();`;

/** Milliseconds from the slider's event to the last painted change, once nothing has changed for a while. */
const WAIT_FOR_FIGURES = `new Promise((resolve, reject) => {
  const look = () => {
    const now = performance.now();
    if (bench.painted > 0 && now - bench.painted > 500) resolve([bench.painted - bench.moved, bench.changes]);
    else if (now - bench.moved > 10000) reject(new Error('the figures did not change'));
    else setTimeout(look, 10);
  };
  look();
})`;

async function move(page: Page, key: string): Promise<[number, number]> {
  await page.keyboard.press(key);
  return z.tuple([z.number(), z.number()]).parse(await page.evaluate(WAIT_FOR_FIGURES));
}

/** The analysis sheet with stability map, time responses and frequency response. */
export default defineBench({
  name: 'slider-to-picture',
  claim: 'analysis with the stability map open: from the slider to all figures redrawn',
  async run({ note, cleanUp }) {
    const bench = await startBenchBrowser(cleanUp, { width: 1440, height: 900 });
    const page = await bench.openPage('engineer', WATCH_FIGURES);
    await page.goto(ADDRESS);
    await page.locator('.sheet-body svg').first().waitFor();
    await page.waitForTimeout(2000);
    const slider = page.locator('input[type="range"]').first();
    await slider.focus();
    const times: number[] = [];
    let least = Infinity;
    for (let i = 0; i < MOVES + 3; i += 1) {
      const [ms, changes] = await move(page, i % 12 < 6 ? 'ArrowRight' : 'ArrowLeft');
      if (i < 3) continue;
      times.push(ms);
      least = Math.min(least, changes);
    }
    note(`${MOVES} moves of the speed, at least ${least} parts of figures changed by each`);
    const request = (await page.evaluate('bench.request')) as MapRequest; // as the page sent it to its worker
    const bare = median(Array.from({ length: 15 }, () => timeOnce(() => mapPicture(request))).slice(5));
    const p95 = quantile(times, 0.95);
    return {
      value: p95,
      unit: 'ms p95',
      ratio: median(times) / bare,
      baseline: `computing the same figures and nothing else, warm: ${bare.toFixed(1)} ms`,
      goal: `p95 ≤ ${GOAL_MS} ms`,
      met: p95 <= GOAL_MS,
      details: [
        { label: 'median', value: median(times), unit: 'ms' },
        { label: 'slowest', value: Math.max(...times), unit: 'ms' },
      ],
    };
  },
});
