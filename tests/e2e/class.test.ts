/** One instructor and three trainees in their own browsers: lobby, demonstration, everyone flies, a late joiner, and what remains. */
import { describe, expect } from 'vitest';
import { accessibilityProblems } from './support/axe.ts';
import { test } from './support/browser-test.ts';
import { signIn, submitSignIn } from './support/sign-in.ts';

const SIGNED_OUT = /401/;
const OTHERS = ['a.bauer@fieldschool.example', 's.chandran@fieldschool.example'];

describe('a live class', () => {
  test('is opened, joined by code, flown by all, frozen, rewound and looked at afterwards', async ({ newPage }) => {
    const options = { expectedErrors: [SIGNED_OUT] };
    const teacher = await newPage(options);
    await signIn(teacher, 'instructor');
    await teacher.goto('/classes?scenario=left-engine-cut-after-lift-off');
    await teacher.getByLabel('Title').last().fill('Tuesday, group two');
    await teacher.getByText('Left engine cut after lift-off').last().waitFor();
    await teacher.getByRole('button', { name: 'Open the class' }).click();
    await teacher.waitForURL(/\/classes\/[0-9a-f-]{36}/);
    const code = (await teacher.locator('.lobby .big').first().innerText()).replace(/\s/g, '');
    expect(code).toMatch(/^[2-9A-Z]{6}$/);
    expect(await accessibilityProblems(teacher)).toEqual([]);

    const first = await newPage(options);
    await signIn(first, 'trainee');
    const second = await newPage(options);
    await second.goto('/sign-in');
    await submitSignIn(second, OTHERS[0]);
    await second.waitForURL('**/my-flights');
    for (const page of [first, second]) {
      await page.goto(`/join/${code.toLowerCase()}`);
      await page.getByRole('button', { name: 'Join' }).click();
      await page.getByText('You are in.').waitFor();
    }
    await teacher.getByText('J. Lindqvist').waitFor();

    if (process.env.SHOTS) await teacher.screenshot({ path: `${process.env.SHOTS}/class-lobby.png` });
    // Demonstration: the instructor flies, the others see it.
    await teacher.getByRole('button', { name: 'Start' }).click();
    await first.getByText('You are looking on.').waitFor({ timeout: 20_000 });
    await teacher.getByText('You have the controls.').waitFor();
    await first.locator('[data-readout="wings"]').waitFor();
    await teacher.getByRole('button', { name: /^Freeze all/ }).click();
    await first.getByText('frozen').first().waitFor();
    await expect
      .poll(async () => {
        const clocks = [teacher, first, second].map((page) => page.locator('.head [role="timer"]').innerText());
        return new Set(await Promise.all(clocks)).size;
      })
      .toBe(1);
    if (process.env.SHOTS) {
      await teacher.screenshot({ path: `${process.env.SHOTS}/class-demo.png` });
      await first.screenshot({ path: `${process.env.SHOTS}/class-viewer.png` });
    }
    await teacher.getByRole('button', { name: 'Inject now' }).click();
    await teacher.getByRole('button', { name: 'Stop run' }).click();
    await first.getByText('You are in.').waitFor();

    // Everyone flies; one comes late.
    await teacher.getByText('Everyone flies', { exact: true }).first().click();
    await teacher.getByRole('button', { name: 'Start' }).click();
    await first.getByText('You have the controls.').waitFor({ timeout: 20_000 });
    const late = await newPage(options);
    await late.goto('/sign-in');
    await submitSignIn(late, OTHERS[1]);
    await late.waitForURL('**/my-flights');
    await late.goto(`/join/${code}`);
    await late.getByRole('button', { name: 'Join' }).click();
    await late.getByText('You have the controls.').waitFor({ timeout: 20_000 });
    const board = teacher.getByRole('region', { name: 'Class', exact: true });
    await board.getByText('S. Chandran').waitFor();
    await expect
      .poll(() => board.getByText(/Balanced|Toward dead side|No input|Wants|Hit|Ended/).count())
      .toBeGreaterThan(1);
    if (process.env.SHOTS) await teacher.screenshot({ path: `${process.env.SHOTS}/class-board.png` });
    await board.getByRole('button', { name: 'Show J. Lindqvist to all' }).click();
    await second.getByText(/Shown to all/).waitFor();
    await teacher.getByRole('button', { name: 'Stop run' }).click();
    await teacher.waitForTimeout(1500);
    await teacher.getByRole('button', { name: 'End class…' }).click();
    await teacher.getByRole('button', { name: 'End for all' }).click();
    await teacher.getByRole('heading', { name: 'Runs' }).waitFor({ timeout: 20_000 });
    await teacher
      .getByRole('row', { name: /J. Lindqvist/ })
      .first()
      .waitFor();
    await teacher.getByText('Class ended').waitFor();
    await teacher.getByText('Sideslip, ±20°').waitFor();
    if (process.env.SHOTS) await teacher.screenshot({ path: `${process.env.SHOTS}/class-after.png` });
    expect(await accessibilityProblems(teacher)).toEqual([]);
  });
});
