import type { Page } from 'playwright-core';
import { CSRF_COOKIE, CSRF_HEADER } from '#shared/contracts/wire-names.ts';

/** Calls the interface from within a signed-in page, as the page itself would. */
export function apiPost(page: Page, path: string, body: unknown): Promise<{ status: number; text: string }> {
  return page.evaluate(
    async ([path, body, cookie, header]) => {
      const pair = document.cookie.split('; ').find((one) => one.startsWith(`${cookie}=`));
      const token = decodeURIComponent(pair?.slice(cookie.length + 1) ?? '');
      const headers = { 'content-type': 'application/json', [header]: token };
      const response = await fetch(path, { method: 'POST', headers, body: JSON.stringify(body) });
      return { status: response.status, text: await response.text() };
    },
    [path, body, CSRF_COOKIE, CSRF_HEADER] as const,
  );
}
