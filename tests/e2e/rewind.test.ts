/** Freezing, looking back, flying on as a branch, and comparing it in the debrief afterwards. */
import { describe, expect } from 'vitest';
import { test } from './support/browser-test.ts';
import { flyHandsOff, serverResult, startFlight } from './support/cockpit-pilot.ts';
import { signIn } from './support/sign-in.ts';

const SIGNED_OUT = /401/;

describe('rewinding a flight', () => {
  test('goes on from an earlier second, is delivered as flown, and is compared with an earlier attempt', async ({
    newPage,
  }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(page, 'trainee');
    await startFlight(page, 'left-engine-cut-after-lift-off');
    await page.getByText('Left engine fails').first().waitFor({ timeout: 20_000 });
    await page.waitForTimeout(2500);
    await page.keyboard.press('Space');
    await page.getByRole('group', { name: 'Rewind' }).waitFor();
    const slider = page.getByRole('slider', { name: /Rewind to/ });
    const head = Number(await slider.getAttribute('max'));
    await slider.focus();
    await page.keyboard.press('Home');
    expect(await slider.inputValue()).toBe('0');
    await page.keyboard.press('End');
    for (let i = 0; i < 20; i += 1) await page.keyboard.press('ArrowLeft');
    expect(Number(await slider.inputValue())).toBeLessThan(head);
    await page
      .getByRole('button', { name: /^Go on/ })
      .last()
      .click();
    await page.getByText('Rewound from').first().waitFor();
    await flyHandsOff(page);
    expect(await serverResult(page)).toContain('state for state');

    await page.getByRole('link', { name: 'Debrief' }).click();
    await page.getByText('Flown with one rewind').waitFor();
    const compare = page.getByRole('combobox', { name: 'Compare with' });
    const options = await compare.locator('option').allTextContents();
    expect(options.length).toBeGreaterThan(1);
    const earlier = options.find((option) => /attempt/i.test(option));
    if (earlier) {
      await compare.selectOption({ label: earlier });
      await page.getByRole('button', { name: 'Table' }).click();
      await page.getByRole('table', { name: /trace/i }).first().waitFor();
    }

    // The address names the moment: opened anew it stands there.
    const replay = page.getByRole('slider', { name: 'Replay position' });
    await replay.focus();
    await page.keyboard.press('Home');
    for (let i = 0; i < 3; i += 1) await page.keyboard.press('Shift+ArrowRight');
    await page.waitForURL(/[?&]t=3\.0/);
    await page.reload();
    await replay.waitFor();
    expect(await replay.getAttribute('aria-valuenow')).toBe('3');
  });
});
