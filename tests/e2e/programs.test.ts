/** A person makes a token, a program uses it, and the token ends when it is revoked. */
import { describe, expect } from 'vitest';
import { accessibilityProblems } from './support/axe.ts';
import { test } from './support/browser-test.ts';
import { signIn } from './support/sign-in.ts';

describe('an instructor', () => {
  test('makes a token for a program, reads what programs can do, and revokes it', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [/401/] });
    await signIn(page, 'instructor');
    await page.goto('/account');
    await page.getByRole('link', { name: 'Tokens' }).click();
    await page.getByRole('button', { name: 'Make the token' }).click();
    await page.getByText('Choose at least one area to read or write.').waitFor();
    await page.getByLabel('What it is for').fill('Nightly playlist');
    await page.getByRole('radio', { name: 'Playlists: read and write' }).check();
    await page.getByRole('button', { name: 'Make the token' }).click();
    const shown = page.getByRole('status').filter({ hasText: 'shown this once' });
    const token = (await shown.locator('.token').innerText()).trim();
    expect(token).toMatch(/^swt_/);
    expect(await accessibilityProblems(page)).toEqual([]);

    const origin = new URL(page.url()).origin;
    const program = async (method: string, body?: unknown): Promise<Response> =>
      fetch(`${origin}/api/playlists`, {
        method,
        headers: {
          authorization: `Bearer ${token}`,
          'content-type': 'application/json',
          ...(method === 'POST' ? { 'idempotency-key': 'nightly-2026-12-01' } : {}),
        },
        body: body === undefined ? undefined : JSON.stringify(body),
      });
    const playlist = { name: 'Made by a program', scenarios: ['left-engine-cut-after-lift-off'] };
    expect((await program('POST', playlist)).status).toBe(201);
    expect((await program('POST', playlist)).headers.get('idempotency-replayed')).toBe('true');
    await page.goto('/playlists');
    await page.getByText('Made by a program').first().waitFor();

    await page.goto('/account/interface');
    await page.getByPlaceholder('Address or words').fill('create a playlist');
    await page.getByRole('button', { name: /POST \/playlists Create a playlist/ }).click();
    await page.getByRole('region', { name: 'Create a playlist' }).getByText('playlists:write').waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);

    await page.goto('/account/tokens');
    page.once('dialog', (dialog) => void dialog.accept());
    await page.getByRole('button', { name: 'Revoke Nightly playlist' }).click();
    await page.getByText('“Nightly playlist” is revoked.').waitFor();
    expect((await program('GET')).status).toBe(401);
  });
});
