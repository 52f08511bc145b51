/** The screens around people: own profile and sessions, cohorts, adding to an assignment, system, the first set-up. */
import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { accessibilityProblems } from './support/axe.ts';
import { PHONE, test } from './support/browser-test.ts';
import { linkInSink } from './support/mail-sink.ts';
import { launchProduct } from './support/product.ts';
import { DEMONSTRATION_PASSWORD, signIn, submitSignIn } from './support/sign-in.ts';

const SIGNED_OUT = /401/;

/** Both themes and a phone, when SHOTS names a folder. */
async function shots(page: Page, name: string): Promise<void> {
  const folder = process.env.SHOTS;
  if (!folder) return;
  for (const theme of ['light', 'dark']) {
    await page.evaluate(`document.documentElement.dataset.theme = '${theme}'`);
    await page.screenshot({ path: `${folder}/${name}-${theme}.png`, fullPage: true });
  }
  const size = page.viewportSize();
  await page.setViewportSize(PHONE);
  await page.screenshot({ path: `${folder}/${name}-phone.png`, fullPage: true });
  if (size) await page.setViewportSize(size);
  await page.evaluate(`document.documentElement.dataset.theme = 'light'`);
}

describe('a person', () => {
  test('edits the profile, changes the address by its link, and signs another device out', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT] });
    await page.goto('/sign-in');
    await submitSignIn(page, 'y.tanaka@fieldschool.example');
    await page.waitForURL('**/my-flights');
    const other = await newPage({ expectedErrors: [SIGNED_OUT], viewport: PHONE });
    await other.goto('/sign-in');
    await submitSignIn(other, 'y.tanaka@fieldschool.example');
    await other.waitForURL('**/my-flights');

    await page.goto('/account');
    const sessions = page.getByRole('list', { name: 'Open sessions' });
    await sessions.getByText('This one').waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
    await page.getByLabel('Name', { exact: true }).fill('田中 Yui');
    await page.getByLabel('Time zone').selectOption('Asia/Tokyo');
    await page.getByRole('button', { name: 'Save profile' }).click();
    await page.getByText('Profile saved.').waitFor();
    const kept = page.waitForResponse((answer) => answer.url().endsWith('/api/session/profile'));
    await page.getByText('m/s, metres').first().click();
    await kept;
    await page.reload();
    expect(await page.getByLabel('Time zone').inputValue()).toBe('Asia/Tokyo');
    expect(await page.getByRole('radio', { name: 'm/s, metres' }).isChecked()).toBe(true);
    await shots(page, 'account');
    await sessions.getByRole('button', { name: /^Sign out/ }).click();
    await page.getByText('is signed out.').waitFor();
    await other.goto('/my-flights');
    await other.waitForURL('**/sign-in**');

    await page.getByLabel('New address').fill('yui@new.example');
    await page.getByLabel('Your password').fill(DEMONSTRATION_PASSWORD);
    await page.getByRole('button', { name: 'Send the link' }).click();
    await expect.poll(() => linkInSink('yui@new.example'), { timeout: 20_000 }).not.toBeNull();
    await other.goto(linkInSink('yui@new.example') ?? '');
    await other.getByRole('button', { name: 'Confirm address' }).click();
    await other.waitForURL('**/sign-in');
    await submitSignIn(other, 'YUI@new.example');
    await other.waitForURL('**/my-flights');
  });
});

describe('an instructor', () => {
  test('makes a cohort, fills it, and adds it to an assignment that is set', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(page, 'instructor');
    await page.goto('/cohorts');
    await page.getByLabel('Name', { exact: true }).fill('Evening');
    await page.getByRole('button', { name: 'Make cohort' }).click();
    await page.getByText('Nobody is in this cohort.').waitFor();
    await page.getByLabel('Find by name or address').fill('weiss');
    await page.getByRole('checkbox', { name: /E\. Weiss/ }).check();
    await page.getByRole('button', { name: 'Add 1 to the cohort' }).click();
    await page.getByRole('button', { name: 'Take out E. Weiss' }).waitFor();
    expect(page.url()).toContain('cohort=');
    expect(await accessibilityProblems(page)).toEqual([]);
    await shots(page, 'cohorts');

    await page.goto('/assignments');
    const choice = page.getByLabel('Scenario or playlist');
    const title = ((await choice.locator('option').nth(2).textContent()) ?? '').trim();
    await choice.selectOption({ index: 2 });
    await page.getByRole('checkbox', { name: /K\. Nowak/ }).check();
    await page.getByRole('button', { name: 'Assign to 1' }).click();
    await page.getByRole('link', { name: title }).first().click();
    await page.getByRole('button', { name: 'Add people' }).click();
    await page.getByRole('checkbox', { name: /Cohort Evening/ }).check();
    await page.getByRole('button', { name: 'Add 1', exact: true }).click();
    await page.getByText('Added one; told as set.').waitFor();
    await page.getByRole('row', { name: /E\. Weiss/ }).waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
    await shots(page, 'assignment');
    await page.goto('/assignments');
    await page.getByRole('link', { name: title }).first().waitFor();
    await shots(page, 'assignments');
    await page.goto('/records');
    await page.getByRole('heading', { name: 'Records' }).first().waitFor();
    await shots(page, 'records');
  });
});

describe('an administrator', () => {
  test('sees the state of the server, and has a chosen person in the address', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(page, 'administrator');
    await page.goto('/administration/system');
    await page.getByText(/Answers in/).waitFor();
    await page.getByText('MariaDB', { exact: true }).waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
    await shots(page, 'system');
    await page.goto('/administration');
    await page.getByRole('button', { name: 'A. Bauer' }).click();
    await page.getByRole('region', { name: 'A. Bauer' }).waitFor();
    await page.reload();
    await page.getByRole('region', { name: 'A. Bauer' }).waitFor();
    await shots(page, 'people');
    await page.getByRole('searchbox', { name: 'Name or address' }).fill('zzz');
    await page.getByText('Nobody fits these filters.').waitFor();
    await page.getByRole('button', { name: 'Clear all' }).last().click();
    await page.getByRole('table', { name: 'People' }).waitFor();
    await page.goto('/administration/organisation');
    await page.getByLabel('Below the caution').fill('Fly the aeroplane first.');
    await page.getByRole('button', { name: 'Save' }).click();
    await page.getByText('Saved.').waitFor();
    await shots(page, 'organisation');
    await page.goto('/account');
    const caution = page.getByRole('note').last();
    expect(await caution.innerText()).toMatch(
      /Not an approved training device[\s\S]*govern\.[\s\S]*Fly the aeroplane first\./,
    );
    await page.goto('/administration/organisation');
    await page.getByLabel('Below the caution').fill('');
    await page.getByRole('button', { name: 'Save' }).click();
    await page.getByText('Saved.').first().waitFor();
    for (const [path, name] of [
      ['/administration/outbox', 'outbox'],
      ['/administration/audit', 'audit'],
    ] as const) {
      await page.goto(path);
      await page.getByRole('heading', { name: 'Administration' }).waitFor();
      await page.waitForLoadState('networkidle');
      await shots(page, name);
    }
  });

  test('sets an empty server up, once', async ({ newPage }) => {
    const product = await launchProduct({ env: { SIDEWASH_DEMONSTRATION: '0' } });
    try {
      expect(product.output()).toMatch(/asks for this code: [2-9A-Z]{4}-[2-9A-Z]{4}-[2-9A-Z]{4}/);
      expect(product.output()).not.toContain('Demonstration sign-ins');
      const page = await newPage({ baseURL: product.address, expectedErrors: [SIGNED_OUT] });
      await page.goto('/');
      await page.getByRole('heading', { name: 'Set up' }).waitFor();
      await page.getByRole('textbox', { name: 'Organisation' }).fill('Nord Flight School');
      expect(await accessibilityProblems(page)).toEqual([]);
      await shots(page, 'set-up');
      await page.getByRole('button', { name: 'Go on' }).click();
      await page.getByRole('textbox', { name: 'Name' }).fill('Ada Moe');
      await page.getByRole('textbox', { name: 'Email' }).fill('ada@nord.example');
      await page.getByLabel('Password', { exact: true }).fill('four words are enough');
      await page.getByLabel('Repeat password').fill('four words are enough');
      await page.getByRole('button', { name: 'Go on' }).click();
      await page.getByText('none stated').waitFor();
      await page.getByRole('button', { name: 'Set up', exact: true }).click();
      await page.waitForURL('**/sign-in');
      await submitSignIn(page, 'ada@nord.example', 'four words are enough');
      await page.waitForURL('**/scenarios');
      await page.goto('/set-up');
      await page.getByText('This server is set up already.').waitFor();
    } finally {
      await product.stop();
    }
  });
});
