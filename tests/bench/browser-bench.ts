/** The whole product and a signed-in page in headless Chromium, for rows that measure what a person sees. */
import fs from 'node:fs';
import type { Browser, Page } from 'playwright-core';
import { openChromium } from '../e2e/support/chromium.ts';
import { freshDataFolder, launchProduct } from '../e2e/support/product.ts';
import { PEOPLE, submitSignIn } from '../e2e/support/sign-in.ts';
import type { BenchContext } from './harness.ts';

export interface BenchBrowser {
  readonly address: string;
  readonly browser: Browser;
  /** A page with cookies of its own, signed in as one of a role or by address. `script` runs before the page's own, as text. */
  openPage(who: keyof typeof PEOPLE | `${string}@${string}`, script?: string): Promise<Page>;
}

interface Size {
  width: number;
  height: number;
}

/** @param size of the window */
export async function startBenchBrowser(
  cleanUp: BenchContext['cleanUp'],
  size: Size,
  { webgl = false, env = {} }: { webgl?: boolean; env?: NodeJS.ProcessEnv } = {},
): Promise<BenchBrowser> {
  const dataFolder = freshDataFolder();
  cleanUp(() => fs.rmSync(dataFolder, { recursive: true, force: true }));
  const product = await launchProduct({ dataFolder, env });
  cleanUp(() => product.stop());
  return openBenchBrowser(cleanUp, size, product.address, webgl);
}

/** The same on a product that runs already. */
export async function openBenchBrowser(
  cleanUp: BenchContext['cleanUp'],
  size: Size,
  address: string,
  webgl = false,
): Promise<BenchBrowser> {
  const browser = await openChromium({ webgl });
  cleanUp(() => browser.close());
  return {
    address,
    browser,
    async openPage(who, script) {
      const context = await browser.newContext({ viewport: size, baseURL: address });
      if (script !== undefined) await context.addInitScript(script);
      const page = await context.newPage();
      await page.goto('/sign-in');
      await submitSignIn(page, isRole(who) ? PEOPLE[who] : who);
      await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
      return page;
    },
  };
}

const isRole = (who: string): who is keyof typeof PEOPLE => Object.hasOwn(PEOPLE, who);

/**
 * For `openPage`: adds up how long scripts block the page. `window.benchBlocks` holds the gaps of more than 8 ms between
 * two turns of an idle timer, as [end, length] in ms.
 */
export const WATCH_BLOCKS = `(() => {
  const blocks = [];
  window.benchBlocks = blocks;
  let last = performance.now();
  const channel = new MessageChannel();
  channel.port1.onmessage = () => {
    const now = performance.now();
    if (now - last > 8) blocks.push([now, now - last]);
    last = now;
    setTimeout(() => channel.port2.postMessage(0), 1);
  };
  channel.port2.postMessage(0);
})();`;
