import type { Page } from 'playwright-core';
import { z } from 'zod';
import { createStream } from '#shared/numerics/random.ts';
import { VIEW_DELAY_MS } from '#shared/scenario/class-follow.ts';
import { startLoadProduct } from '../../load/crowd.ts';
import { startSlowLink } from '../../load/slow-link.ts';
import { openBenchBrowser } from '../browser-bench.ts';
import { defineBench, median, quantile } from '../harness.ts';

const SCENARIO = 'left-engine-cut-after-lift-off';
const RUNS = 3;
const GOAL_MS = 250;
/** A constant trail: what its middle ninety per cent may differ by. */
const GOAL_SPREAD_MS = 50;
const JITTER_MS = 80;
const SEED = 7;
/** Bank to the left between which every instant is compared; deg. It grows steadily there. */
const BANKS = [3, 70] as const;

/** Every frame: the bank written on the sheet, with the wall clock of this machine, when it differs from the frame before. */
const WATCH_BANK = `(() => {
  window.benchBank = [];
  let last = '';
  const look = () => {
    const text = document.querySelector('[data-readout="wings"]')?.textContent ?? '';
    if (text !== last) {
      last = text;
      window.benchBank.push([performance.timeOrigin + performance.now(), text]);
    }
    requestAnimationFrame(look);
  };
  requestAnimationFrame(look);
})();`;

type Sample = readonly [ms: number, bankDeg: number];

/** The part of what a page has shown in which the bank grows to the left. */
async function bankOf(page: Page): Promise<Sample[]> {
  const shown = z.array(z.tuple([z.number(), z.string()])).parse(await page.evaluate('benchBank.splice(0)'));
  const samples: Sample[] = [];
  for (const [ms, text] of shown) {
    const match = /^(\d+(?:\.\d+)?)°L$/u.exec(text.trim());
    const bank = match ? Number(match[1]) : Number.NaN;
    if (bank >= BANKS[0] && bank <= BANKS[1] && bank > (samples.at(-1)?.[1] ?? 0)) samples.push([ms, bank]);
  }
  return samples;
}

/** How much later the viewer shows each bank that the instructor's sheet showed; ms. */
function lags(instructor: readonly Sample[], viewer: readonly Sample[]): number[] {
  return viewer.flatMap(([ms, bank]) => {
    const after = instructor.findIndex((sample) => sample[1] >= bank);
    if (after <= 0) return [];
    const [beforeMs, beforeBank] = instructor[after - 1];
    const [afterMs, afterBank] = instructor[after];
    return [ms - (beforeMs + ((bank - beforeBank) / (afterBank - beforeBank)) * (afterMs - beforeMs))];
  });
}

const mean = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;
const deviation = (values: readonly number[]): number => {
  const middle = mean(values);
  return Math.sqrt(mean(values.map((value) => (value - middle) ** 2)));
};
const spread = (values: readonly number[]): number => quantile(values, 0.95) - quantile(values, 0.05);

/** Three sheets of one demonstration in real browsers: the instructor's, a viewer's, and a viewer's behind a link that jitters. */
export default defineBench({
  name: 'viewer-lag',
  claim: `a viewer's picture trails the instructor's by a constant time, also when the network jitters by ${JITTER_MS} ms`,
  async run({ note, cleanUp }) {
    const { server } = await startLoadProduct(cleanUp);
    const stream = createStream(SEED, 'viewer-lag');
    const link = await startSlowLink(server.address, {
      delayMs: 5,
      lossShare: 0,
      jitterMs: JITTER_MS,
      random: () => stream.uniform(),
    });
    cleanUp(() => link.stop());
    const size = { width: 1280, height: 800 };
    const near = await openBenchBrowser(cleanUp, size, server.address);
    const far = await openBenchBrowser(cleanUp, size, link.address);
    const instructor = await near.openPage('instructor', WATCH_BANK);
    await instructor.goto(`/classes?scenario=${SCENARIO}`);
    await instructor.getByLabel('Title').last().fill('Viewer lag');
    await instructor.getByText('Left engine cut after lift-off').last().waitFor();
    await instructor.getByRole('button', { name: 'Open the class' }).click();
    await instructor.waitForURL(/\/classes\/[0-9a-f-]{36}/);
    const code = (await instructor.locator('.lobby .big').first().innerText()).replace(/\s/g, '');
    const viewers = [
      await near.openPage('trainee', WATCH_BANK),
      await far.openPage('a.bauer@fieldschool.example', WATCH_BANK),
    ];
    for (const page of viewers) {
      await page.goto(`/join/${code}`);
      await page.getByRole('button', { name: 'Join' }).click();
      await page.getByText('You are in.').waitFor();
    }
    const found: number[][] = [[], []];
    const stills: number[] = [];
    for (let run = 0; run < RUNS; run += 1) {
      await instructor.getByRole('button', { name: 'Start' }).click();
      await instructor.getByText('You have the controls.').waitFor({ timeout: 30_000 });
      await instructor.waitForTimeout(9500);
      const shown = await bankOf(instructor);
      for (const [i, page] of viewers.entries()) {
        const samples = await bankOf(page);
        found[i].push(...lags(shown, samples));
        stills.push(...samples.slice(1).map(([ms], k) => ms - samples[k][0]));
      }
      await instructor.getByRole('button', { name: 'Stop run' }).click();
      await viewers[0].getByText('You are in.').waitFor();
      await instructor.waitForTimeout(600);
      for (const page of [instructor, ...viewers]) await bankOf(page);
    }
    const [direct, jittered] = found;
    if (direct.length < 100 || jittered.length < 100) throw new Error('too few instants could be compared');
    note(`${direct.length} and ${jittered.length} instants compared, seed ${SEED}`);
    const met = found.every((one) => quantile(one, 0.95) <= GOAL_MS && spread(one) <= GOAL_SPREAD_MS);
    const details = (name: string, values: number[]) => [
      { label: `${name}: mean`, value: mean(values), unit: 'ms' },
      { label: `${name}: p95`, value: quantile(values, 0.95), unit: 'ms' },
      { label: `${name}: standard deviation`, value: deviation(values), unit: 'ms' },
      { label: `${name}: middle ninety per cent within`, value: spread(values), unit: 'ms' },
    ];
    return {
      value: median(jittered),
      unit: 'ms',
      ratio: median(jittered) / median(direct),
      baseline: `a viewer without jitter: ${median(direct).toFixed(0)} ms; the delay that is meant: ${VIEW_DELAY_MS} ms`,
      goal: `p95 ≤ ${GOAL_MS} ms, middle 90 % within ${GOAL_SPREAD_MS} ms`,
      met,
      details: [
        ...details('without jitter', direct),
        ...details('with jitter', jittered),
        { label: 'longest stillness of a viewer', value: Math.max(...stills), unit: 'ms' },
      ],
    };
  },
});
