/** A school's day: the instructor assigns to the cohort, the trainee flies it, the instructor signs it off, the record goes out. */
import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { accessibilityProblems } from './support/axe.ts';
import { PHONE, test } from './support/browser-test.ts';
import { flyHandsOff, serverResult } from './support/cockpit-pilot.ts';
import { signIn } from './support/sign-in.ts';

/** Before sign-in the page asks who is signed in; the browser prints the answer. */
const SIGNED_OUT = /401/;
const TITLE = 'Left engine cut after lift-off';

/** What the link of a file gives, asked for with the cookies of the page. */
async function fileOf(page: Page, link: string): Promise<string> {
  const address = await page.getByRole('link', { name: link, exact: true }).getAttribute('href');
  const answer = await page.request.get(address ?? '');
  expect(answer.headers()['content-disposition']).toContain('attachment');
  return answer.text();
}

describe('a school', () => {
  test('assigns, flies, signs off and exports', async ({ newPage }) => {
    const instructor = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(instructor, 'instructor');
    await instructor.getByRole('link', { name: 'Assignments' }).click();
    await instructor.getByText('Choose a scenario').waitFor();
    await instructor.getByLabel('Scenario or playlist').selectOption({ label: TITLE });
    await instructor.getByRole('checkbox', { name: /Cohort 26-A/ }).check();
    await instructor.getByLabel('Words to the trainees').fill('Pedal first, then bank.');
    await instructor.getByRole('button', { name: 'Preview e-mail' }).click();
    await instructor.getByText('Set for you: ' + TITLE).waitFor();
    expect(await accessibilityProblems(instructor)).toEqual([]);
    await instructor.getByRole('button', { name: 'Assign to 12' }).click();
    // Other tests of this run set the same scenario to cohorts of their own, and one takes a person into two cohorts.
    const row = instructor.getByRole('row', { name: new RegExp(TITLE) }).filter({ hasText: 'Cohort 26-A' });
    await expect.poll(() => row.first().innerText()).toMatch(/Cohort 26-A, 1[12] people/);

    // The trainee finds it by due date, with the words of the instructor, and flies it for the count.
    const trainee = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(trainee, 'trainee');
    await trainee.getByRole('heading', { name: 'Set for me' }).waitFor();
    await trainee.getByText('Pedal first, then bank.').waitFor();
    expect(await accessibilityProblems(trainee)).toEqual([]);
    await trainee.getByRole('link', { name: 'Fly, attempt 1 of 3' }).click();
    await trainee
      .getByRole('button', { name: /^Start/ })
      .last()
      .click();
    await trainee
      .getByRole('button', { name: /^(Freeze|Leave)/ })
      .first()
      .waitFor();
    await flyHandsOff(trainee);
    await serverResult(trainee);
    await trainee.goto('/my-flights');
    await trainee.getByText('Not met yet').first().waitFor();
    await trainee.getByRole('img', { name: '1 of 3 tries used' }).waitFor();

    // The instructor opens the record, debriefs and signs.
    await instructor.getByRole('link', { name: 'Records' }).click();
    const cell = instructor.getByRole('button', { name: new RegExp(`^J\\. Lindqvist, ${TITLE}`) });
    await cell.click();
    await instructor.getByRole('heading', { name: /^Attempt \d/ }).waitFor();
    await instructor.getByText(/Budget \d/).waitFor({ timeout: 60_000 });
    expect(await accessibilityProblems(instructor)).toEqual([]);
    const address = instructor.url();
    expect(address).toContain('scenario=left-engine-cut-after-lift-off');
    await instructor.getByRole('link', { name: 'Open debrief' }).click();
    await instructor.getByRole('checkbox', { name: /held the controls/ }).check();
    await instructor.getByRole('button', { name: /Sign off as not met/ }).click();
    await instructor
      .getByText(/not met, M\. Okafor/)
      .first()
      .waitFor();
    await instructor.goto(address);
    await instructor.getByText(/Signed off: not met, M\. Okafor/).waitFor();

    // A correction is a new entry beside the signature.
    await instructor.getByRole('button', { name: 'Correct …' }).click();
    await instructor.getByLabel('Reason').fill('Flown for the end-to-end check.');
    await instructor.getByRole('button', { name: 'Enter', exact: true }).click();
    await instructor.getByText('Note, M. Okafor: Flown for the end-to-end check.').waitFor();

    const csv = await fileOf(instructor, 'CSV');
    expect(csv).toMatch(new RegExp(`J\\. Lindqvist,${TITLE},1,\\d+,.*Not met.*"Not met, M\\. Okafor"`));

    // Closing takes it off the trainee's list of what is open.
    await instructor.getByRole('link', { name: 'Assignments' }).click();
    await row.first().getByRole('link', { name: TITLE }).click();
    await instructor.getByRole('button', { name: 'Close …' }).click();
    await instructor.getByRole('button', { name: 'Close for all' }).click();
    await instructor.getByText('Locked, closed').waitFor();
    await trainee.goto('/my-flights');
    await trainee.getByText('Closed', { exact: true }).first().waitFor();
  });

  test('shows a trainee the own record only, also on a phone', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT, /403/], viewport: PHONE });
    await signIn(page, 'trainee');
    await page.goto('/records');
    await page.getByRole('heading', { name: 'My record' }).waitFor();
    await page.getByRole('link', { name: 'All my data' }).waitFor();
    expect(await page.getByText('A. Bauer').count()).toBe(0);
    await page.goto('/assignments');
    await page
      .getByText(/instructor|administrator/)
      .first()
      .waitFor();
    expect(await page.getByText('New assignment').count()).toBe(0);
  });
});
