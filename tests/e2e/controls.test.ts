/** Pedals and stick: assigned by moving them, calibrated, kept, flown with, and pulled out in flight. */
import { describe, expect } from 'vitest';
import { accessibilityProblems } from './support/axe.ts';
import { test } from './support/browser-test.ts';
import { startFlight } from './support/cockpit-pilot.ts';
import { moveAxis, pressButton, scriptDevices, unplug } from './support/scripted-gamepad.ts';
import { signIn } from './support/sign-in.ts';

const SIGNED_OUT = /401/;
const PEDALS = { id: 'Rudder pedals (Vendor: 1234 Product: 0001)', axes: [0, 0, 0.1], buttons: 0 };
const STICK = { id: 'Side stick', axes: [0, 0, 0, 0], buttons: 12 };

describe('stick and pedals', () => {
  test('are assigned, calibrated, kept and flown with; pulled out, the flight freezes and says so', async ({
    newPage,
  }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT] });
    await scriptDevices(page, [PEDALS, STICK]);
    await signIn(page, 'trainee');
    await page.goto('/controls?flight=left-engine-cut-after-lift-off');
    await page.getByText('Rudder pedals', { exact: true }).waitFor();

    await page.getByRole('button', { name: 'Assign Pedals' }).click();
    await page.getByText('Move it now').waitFor();
    await moveAxis(page, 0, 2, 0.8);
    await page.getByText('Rudder pedals, axis 2').waitFor();
    await page.getByRole('button', { name: 'Assign Stick, roll' }).click();
    await moveAxis(page, 1, 0, -0.9);
    await page.getByText('Side stick, axis 0').waitFor();
    await moveAxis(page, 1, 0, 0);
    await page.getByRole('button', { name: 'Assign Freeze' }).click();
    await pressButton(page, 1, 3);
    await page.getByText('Side stick, button 3').waitFor();

    // The pedals rest at 0.1, reach −0.7 and 0.9, and report right as negative: the steps must find all of it.
    await page.getByRole('button', { name: 'Set Pedals' }).click();
    const next = page.getByRole('button', { name: 'Next', exact: true });
    const held = async (value: number) => {
      await moveAxis(page, 0, 2, value);
      await page.waitForTimeout(1300);
      await next.click();
    };
    await page.getByText('Take your feet off and wait').waitFor();
    await held(0.1);
    await held(0.9);
    await page.getByText('Move it fully right').waitFor();
    await held(-0.7);
    await page.getByText('The dead zone should cover').waitFor();
    const meter = page.getByRole('meter', { name: 'Pedals' });
    await moveAxis(page, 0, 2, -0.7);
    await expect.poll(() => meter.getAttribute('aria-valuetext')).toBe('100R');
    await moveAxis(page, 0, 2, 0.9);
    await expect.poll(() => meter.getAttribute('aria-valuetext')).toBe('100L');
    await moveAxis(page, 0, 2, 0.1);
    await expect.poll(() => meter.getAttribute('aria-valuetext')).toBe('0');
    expect(await accessibilityProblems(page)).toEqual([]);

    await page.getByRole('button', { name: 'Keep' }).click();
    await page.getByText('Controls kept').waitFor();
    await page.reload();
    await page.getByText('Rudder pedals, axis 2').waitFor();

    await startFlight(page, 'left-engine-cut-after-lift-off');
    await moveAxis(page, 0, 2, -0.3);
    const pedal = page.locator('[data-readout="pedal"]');
    // Computed: (0.4 / 0.8 − 0.04) / 0.96 = 48 % right.
    await expect.poll(() => pedal.textContent()).toMatch(/^4[78]%R$/);
    await pressButton(page, 1, 3);
    await page.getByRole('heading', { name: 'Frozen', exact: true }).waitFor();
    await pressButton(page, 1, 3);
    await page.getByRole('heading', { name: 'Frozen', exact: true }).waitFor({ state: 'detached' });
    await unplug(page, 0);
    await page.getByRole('heading', { name: 'Frozen: a control was unplugged' }).waitFor();
  });

  test('without any device the page says how a browser finds one', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(page, 'trainee');
    await page.goto('/controls');
    await page.getByText('No stick or pedals are seen').waitFor();
    expect(await page.getByRole('button', { name: 'Keep' }).isDisabled()).toBe(true);
  });
});
