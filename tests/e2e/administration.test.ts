/** An administrator invites from a CSV, the invited person takes the link from the mail in the sink, and the trail holds it all. */
import { describe, expect } from 'vitest';
import { accessibilityProblems } from './support/axe.ts';
import { test } from './support/browser-test.ts';
import { linkInSink } from './support/mail-sink.ts';
import { signIn } from './support/sign-in.ts';

const SIGNED_OUT = /401/;
const ROSTER = `Name,E-mail,Roles,Cohort
Ines Aldana,i.aldana@fieldschool.example,trainee,26-E
Oskar Brandt,o.brandt@fieldschool,trainee,26-E
Sam Osei,s.osei@fieldschool.example,pilot,
Jonas again,J.LINDQVIST@fieldschool.example,,
`;
const PASSWORD = 'four words are enough';

describe('an administrator', () => {
  test('invites from a CSV, changes roles, deactivates, and verifies the trail', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(page, 'administrator');
    await page.getByRole('link', { name: 'Administration' }).click();
    await page.getByRole('table', { name: 'People' }).getByText('a.reyes@fieldschool.example').waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);

    const latin = Buffer.from('name,email\nJosé,jose@fieldschool.example\n', 'latin1');
    const file = page.getByLabel('Roster file (CSV)');
    await file.setInputFiles({ name: 'latin.csv', mimeType: 'text/csv', buffer: latin });
    await page.getByText('The file is not UTF-8.').waitFor();
    await file.setInputFiles({ name: 'roster.csv', mimeType: 'text/csv', buffer: Buffer.from(ROSTER) });
    await page.getByText('“pilot” is not a role').waitFor();
    await page.getByText('“o.brandt@fieldschool” is not an e-mail address').waitFor();
    await page.getByText('Is here already').waitFor();
    if (process.env.SHOTS) await page.screenshot({ path: `${process.env.SHOTS}/people.png`, fullPage: true });
    await page.getByRole('button', { name: 'Invite 1 good row' }).click();
    await page.getByText('One invitation is on its way.').waitFor();
    await page.getByRole('searchbox', { name: 'Name or address' }).fill('aldana');
    await page.getByText('Invited, until').waitFor();

    await expect.poll(() => linkInSink('i.aldana@fieldschool.example'), { timeout: 20_000 }).not.toBeNull();
    const guest = await newPage({ expectedErrors: [SIGNED_OUT, /409/] });
    const address = linkInSink('i.aldana@fieldschool.example') ?? '';
    await guest.goto(address);
    await guest.getByText('You sign in with').waitFor();
    expect(await accessibilityProblems(guest)).toEqual([]);
    await guest.getByLabel('New password', { exact: true }).fill('short');
    await guest.getByLabel('Repeat new password').fill('short');
    await guest.getByRole('button', { name: 'Set password' }).click();
    await guest.getByText('at least 12 characters').waitFor();
    await guest.getByLabel('New password', { exact: true }).fill(PASSWORD);
    await guest.getByLabel('Repeat new password').fill(PASSWORD);
    await guest.getByRole('button', { name: 'Set password' }).click();
    await guest.waitForURL('**/sign-in');
    await guest.getByLabel('Email').fill('i.aldana@fieldschool.example');
    await guest.getByLabel('Password', { exact: true }).fill(PASSWORD);
    await guest.getByRole('button', { name: 'Sign in' }).click();
    await guest.waitForURL('**/my-flights');
    await guest.goto(address);
    await guest.getByText('has been used or replaced').waitFor();

    await page.reload();
    await page.getByRole('button', { name: 'Ines Aldana' }).click();
    await page.getByRole('region', { name: 'Ines Aldana' }).getByLabel('Instructor').check();
    await page.getByRole('button', { name: 'Save roles' }).click();
    await page.getByText('Roles saved.').waitFor();
    await page.getByRole('button', { name: 'Deactivate…' }).click();
    await page.getByRole('button', { name: 'Deactivate', exact: true }).click();
    await page.getByRole('table', { name: 'People' }).getByText('Deactivated').waitFor();

    await page.getByRole('link', { name: 'Mail outbox' }).click();
    await page.getByRole('row', { name: /i\.aldana.*Sent/ }).waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
    await page.getByRole('link', { name: 'Organisation' }).click();
    await page.getByLabel('Recognition time').waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
    await page.getByRole('link', { name: 'Audit trail' }).click();
    await page
      .getByRole('row', { name: /roles changed/ })
      .first()
      .waitFor();
    await page.getByRole('button', { name: 'Verify the chain' }).click();
    await page.getByText('The chain is whole.').waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
    if (process.env.SHOTS) await page.screenshot({ path: `${process.env.SHOTS}/audit.png` });
  });

  test('is the only one who gets in; a forgotten password is asked for without telling who exists', async ({
    newPage,
  }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT, /403/] });
    await page.goto('/sign-in');
    await page.getByRole('link', { name: 'Forgotten password' }).click();
    await page.getByRole('heading', { name: 'Forgotten password' }).waitFor();
    await page.getByLabel('Email').fill('nobody@elsewhere.example');
    await page.getByRole('button', { name: 'Send link' }).click();
    await page.getByText('If this address belongs to someone here').waitFor();
    await signIn(page, 'instructor');
    await page.goto('/administration');
    await page
      .getByText(/administrator/i)
      .first()
      .waitFor();
    expect(await page.getByRole('table', { name: 'People' }).count()).toBe(0);
  });
});
