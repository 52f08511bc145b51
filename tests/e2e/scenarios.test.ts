/** An instructor writes a scenario from a template, sees preview and budget, publishes; a trainee flies it; newer data is taken. */
import { describe, expect } from 'vitest';
import { accessibilityProblems } from './support/axe.ts';
import { apiPost } from './support/api-post.ts';
import { test } from './support/browser-test.ts';
import { startFlight } from './support/cockpit-pilot.ts';
import { signIn } from './support/sign-in.ts';

const SIGNED_OUT = /401/;
const TITLE = 'Left engine fails, class of December';
const SLUG = 'left-engine-fails-class-of-december';

describe('writing a scenario', () => {
  test('from a template: preview, budget, undo, publish, flown by a trainee', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(page, 'instructor');
    await page.goto('/scenarios?search=left%20engine%20cut%20after');
    await page.getByRole('button', { name: 'New from selected' }).click();
    await page.getByRole('textbox', { name: 'Title', exact: true }).fill(TITLE);
    await page.getByRole('button', { name: 'Begin' }).click();
    await page.waitForURL(/drafts\/1/);
    // Computed by the command line for the template: 2.25 s, bank binds. The same code, so the same digits.
    await page.getByText('2.25', { exact: false }).first().waitFor({ timeout: 30_000 });
    await page.getByText('Bank within 30° binds.').waitFor();

    const cut = page.getByRole('button', { name: /^Left engine fails\s*, at 3 s/ });
    await cut.focus();
    await cut.click();
    await page.keyboard.press('Shift+ArrowRight');
    await page.getByRole('button', { name: /^Left engine fails\s*, at 4 s/ }).waitFor();
    await page.keyboard.press('Control+z');
    await page.getByRole('button', { name: /^Left engine fails\s*, at 3 s/ }).waitFor();

    await page.getByLabel('Add an event').selectOption({ label: 'Air: Gust' });
    await page
      .getByRole('button', { name: /Gust from the right|gust/i })
      .first()
      .waitFor();
    await page.getByText('On a condition').first().click();
    const when = page.getByLabel('When, the first time');
    await when.fill('ias < vmc.constructor');
    await page
      .getByRole('alert')
      .filter({ hasText: /at character \d+/ })
      .waitFor();
    expect(await page.getByRole('button', { name: 'Publish…' }).isDisabled()).toBe(true);
    await when.fill('since(cut) > 3 s');
    await page.getByText(/^Draft 1, saved/).waitFor();
    await page.locator('.budget[aria-busy="false"]').waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);

    await page.getByRole('button', { name: 'Publish…' }).click();
    await page.getByLabel('What is new in this revision').fill('A gust three seconds after the cut.');
    await page.getByRole('button', { name: 'Publish', exact: true }).click();
    await page.waitForURL(`**/scenarios/${SLUG}`);

    const trainee = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(trainee, 'trainee');
    await startFlight(trainee, SLUG);
    await trainee.getByText('Left engine fails').first().waitFor({ timeout: 20_000 });
  });

  test('an engineer’s newer data is offered beside the old and taken into a draft', async ({ newPage, address }) => {
    const engineer = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(engineer, 'engineer');
    await engineer.waitForURL('**/airframes');
    const draft = await apiPost(engineer, '/api/airframes/light-twin/drafts', { from: 1, note: 'same again' });
    expect(draft.status, draft.text).toBe(201);
    const release = '/api/airframes/light-twin/revisions/2/release';
    const released = await apiPost(engineer, release, { note: 'For a test.', answers: [] });
    expect(released.status, released.text).toBe(200);

    const page = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(page, 'instructor');
    await page.goto(`${address}/scenarios/left-engine-cut-after-lift-off/revisions`);
    await page.getByRole('heading', { name: 'Newer airframe data' }).waitFor();
    await page.getByRole('button', { name: 'Take the newer data into a draft' }).click();
    await page.waitForURL(/drafts\/2/);
    await page.goto(`${address}/scenarios/left-engine-cut-after-lift-off/revisions`);
    await page.getByText('light-twin, revision 1 → light-twin, revision 2').waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
  });
});
