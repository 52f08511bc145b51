/** The debrief: the same flight again from the server's chunks, by keyboard, with the result that counts. */
import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { test } from './support/browser-test.ts';
import { accessibilityProblems } from './support/axe.ts';
import { flyHandsOff, serverResult, startFlight } from './support/cockpit-pilot.ts';
import { signIn } from './support/sign-in.ts';

/** Before sign-in the page asks who is signed in; the browser prints the answer. */
const SIGNED_OUT = /401/;
const LEFT_CUT = 'left-engine-cut-after-lift-off';

/** Values of the trace table: one row a second, times against the event. */
async function tableRows(page: Page): Promise<{ t: number; bank: number; heading: number }[]> {
  await page.getByRole('button', { name: 'Table' }).click();
  const rows = await page
    .locator('.trace-table tbody tr')
    .evaluateAll((all) => all.map((row) => [...row.querySelectorAll('th, td')].map((cell) => cell.textContent ?? '')));
  await page.getByRole('button', { name: 'Plot' }).click();
  const number = (text: string): number => Number(text.replace('−', '-'));
  return rows.map((cells) => ({ t: number(cells[0]), bank: number(cells[2]), heading: number(cells[3]) }));
}

describe('debrief of a flight flown hands off', () => {
  test('replays what was flown, sought by keyboard, with the server’s result', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(page, 'trainee');
    await startFlight(page, LEFT_CUT);
    await flyHandsOff(page);
    await serverResult(page);
    await page.getByRole('link', { name: 'Debrief' }).click();
    const slider = page.getByRole('slider', { name: 'Replay position' });
    await slider.waitFor();

    // Yaw first, then roll, both to the left: at a second after the cut the nose has moved more than the wings.
    const rows = await tableRows(page);
    const at = (t: number) => rows.reduce((best, row) => (Math.abs(row.t - t) < Math.abs(best.t - t) ? row : best));
    expect(at(1).heading).toBeLessThan(-0.5);
    expect(at(4).heading).toBeLessThan(-10);
    expect(at(4).bank).toBeLessThan(-20);
    expect(Math.abs(at(0).bank)).toBeLessThan(2);

    await slider.focus();
    await page.keyboard.press('End');
    const end = Number(await slider.getAttribute('aria-valuenow'));
    expect(end).toBeGreaterThan(5);
    await page.keyboard.press('Home');
    expect(await slider.getAttribute('aria-valuenow')).toBe('0');
    await page.keyboard.press('Shift+ArrowRight');
    await page.keyboard.press('ArrowRight');
    expect(await slider.getAttribute('aria-valuenow')).toBe('1.1');

    expect(await page.getByText('bit for bit').innerText()).toContain('ends in the same state');
    expect(await page.getByRole('table').first().innerText()).toContain('Not met');
    expect(await accessibilityProblems(page)).toEqual([]);

    // The address alone brings it back, and playing moves it on.
    await page.reload();
    await slider.waitFor();
    await page.getByRole('button', { name: /^Play/ }).click();
    await expect.poll(async () => Number(await slider.getAttribute('aria-valuenow'))).toBeGreaterThan(0.5);
    await page.getByRole('button', { name: /^Pause/ }).click();
  });

  test('another organisation’s or an unknown attempt is not found', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT, /404/] });
    await signIn(page, 'trainee');
    await page.goto('/attempts/00000000-0000-4000-8000-000000000000');
    await page.getByRole('alert').waitFor();
  });
});
