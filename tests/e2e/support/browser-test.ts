import type { Browser, BrowserContext, BrowserContextOptions, Page } from 'playwright-core';
import { inject, test as base } from 'vitest';
import { openChromium } from './chromium.ts';

/** Sizes the screens are made for. */
export const DESKTOP = { width: 1440, height: 900 };
export const PHONE = { width: 390, height: 844 };

export interface PageOptions extends BrowserContextOptions {
  /** Messages of the browser console that this page is expected to print: matched ones do not fail the test. */
  readonly expectedErrors?: readonly RegExp[];
}

export interface BrowserTools {
  /** Address of the running product, without a slash at the end. */
  address: string;
  /** A new page in a context of its own (own cookies), closed after the test; a console error fails the test. */
  newPage(options?: PageOptions): Promise<Page>;
  /** The same in a Chromium without WebGL. */
  newPageWithoutWebgl(options?: PageOptions): Promise<Page>;
}

interface FileTools {
  /** Opened on first use in a file, closed at its end. */
  browserWithWebgl: Browser;
  browserWithoutWebgl: Browser;
}

/** vitest's `test` with a real browser on the running product. */
export const test = base.extend<BrowserTools & FileTools>({
  browserWithWebgl: [({}, use) => useBrowser(true, use), { scope: 'file' }],
  browserWithoutWebgl: [({}, use) => useBrowser(false, use), { scope: 'file' }],
  address: ({}, use) => use(inject('address').replace(/\/$/, '')),
  newPage: ({ address, browserWithWebgl }, use) => usePages(browserWithWebgl, address, use),
  newPageWithoutWebgl: ({ address, browserWithoutWebgl }, use) => usePages(browserWithoutWebgl, address, use),
});

async function useBrowser(webgl: boolean, use: (browser: Browser) => Promise<void>): Promise<void> {
  const browser = await openChromium({ webgl });
  await use(browser);
  await browser.close();
}

async function usePages(
  browser: Browser,
  address: string,
  use: (newPage: BrowserTools['newPage']) => Promise<void>,
): Promise<void> {
  const contexts: BrowserContext[] = [];
  const errors: string[] = [];
  await use(async ({ expectedErrors = [], ...options } = {}) => {
    const context = await browser.newContext({ baseURL: address, viewport: DESKTOP, ...options });
    contexts.push(context);
    const page = await context.newPage();
    collectErrors(page, expectedErrors, errors);
    return page;
  });
  for (const context of contexts) await context.close();
  if (errors.length > 0) throw new Error(`The browser console shows errors:\n${errors.join('\n')}`);
}

function collectErrors(page: Page, expected: readonly RegExp[], errors: string[]): void {
  const add = (text: string) => {
    if (!expected.some((pattern) => pattern.test(text))) errors.push(`${page.url()}: ${text}`);
  };
  page.on('pageerror', (error) => add(`uncaught ${error.message}`));
  page.on('console', (message) => {
    if (message.type() === 'error') add(`${message.text()} (${message.location().url})`);
  });
}
