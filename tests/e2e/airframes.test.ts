/** An engineer imports a published set from a sheet in US units, sees its modes, changes it, releases it and reads the difference. */
import { mkdtempSync, readFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { accessibilityProblems } from './support/axe.ts';
import { test } from './support/browser-test.ts';
import { signIn } from './support/sign-in.ts';

const SIGNED_OUT = /401/;
const SOMEONE_ELSE_SAVED = /412/;
/** Published inertias turned to body axes; see data/README.md. */
const DC8 = path.join(import.meta.dirname, 'data/dc-8-approach.csv');

async function release(page: Page, revision: number): Promise<void> {
  await page.getByRole('button', { name: new RegExp(`^Release revision ${revision}`) }).click();
  const dialog = page.getByRole('dialog');
  for (const answer of await dialog.getByRole('textbox').all()) await answer.fill('Known, from the published set.');
  await dialog.getByRole('button', { name: /^Release/ }).click();
  await page.getByText(`Revision ${revision} is released.`).waitFor();
}
async function typeInto(page: Page, cell: RegExp, text: string): Promise<void> {
  await page.getByRole('button', { name: cell }).click();
  await page.locator('input.in-place').fill(text);
  await page.keyboard.press('Enter');
  await page.keyboard.press('Escape');
}
async function exported(page: Page, name: string, to: string): Promise<string> {
  const download = page.waitForEvent('download');
  await page.getByRole('link', { name }).click();
  await (await download).saveAs(to);
  return readFileSync(to, 'utf8');
}

describe('an engineer', () => {
  test('imports a sheet, edits in place, releases, reads the difference, exports and reads it again', async ({
    newPage,
  }) => {
    const folder = mkdtempSync(path.join(tmpdir(), 'sidewash-import-'));
    const page = await newPage({ expectedErrors: [SIGNED_OUT], acceptDownloads: true });
    await signIn(page, 'engineer');
    await page.getByRole('link', { name: 'Import…' }).click();
    await page.getByLabel('Airframe file').setInputFiles(DC8);
    await page.getByLabel('Units').selectOption('US');
    await page.getByLabel('Derivatives are').selectOption('dimensional-primed');
    await page.getByLabel('Axes of the inertias').selectOption('body');
    await page.getByLabel('Airplane class').selectOption('III');
    // Published denominator s² + 0.22 s + 0.99: 0.995 rad/s, damping 0.11; roll 1.121 1/s, here within 0.2 %.
    await page.getByText(/ω 0\.99\d rad\/s, ζ 0\.1(09|10|11)/).waitFor();
    await page.getByText(/^-1\.1(19|20|21|22|23)\d* 1\/s$/).waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
    await page.getByRole('button', { name: 'Save as a draft' }).click();
    await page.waitForURL(/airframes\/dc-8-approach\/revisions\/1/);

    const cell = page.getByRole('button', { name: /^Cn β at CL/ });
    await typeInto(page, /^Cn β at CL/, '0.12');
    await expect.poll(() => cell.innerText()).toBe('0.120');
    await page.getByRole('button', { name: 'Undo' }).click();
    await expect.poll(() => cell.innerText()).toBe('0.163');
    await page.getByText(/^saved \d/).waitFor();

    await page.getByRole('link', { name: 'Fin and dihedral estimator…' }).click();
    await page.getByRole('heading', { name: 'Fin and dihedral estimator' }).waitFor();
    await page.getByRole('button', { name: 'Adopt Cn δr' }).click();
    await page.getByText('Cn δr adopted with its source.').waitFor();
    await page.getByRole('button', { name: 'Close this notice' }).click();
    await page.setViewportSize({ width: 1440, height: 1500 }); // fields that scroll below the caution count as covered
    expect(await accessibilityProblems(page)).toEqual([]);
    await page.setViewportSize({ width: 1440, height: 900 });
    await page.goto('/airframes/dc-8-approach/revisions/1');
    await release(page, 1);

    // A second revision with less weathercock stability: the difference names the value and what it does.
    await page.getByRole('button', { name: 'New draft from 1' }).click();
    await page.waitForURL(/revisions\/2/);
    await typeInto(page, /^Cn β at CL/, '0.001 /deg');
    await expect.poll(() => page.getByRole('button', { name: /^Cn β at CL/ }).innerText()).toBe('0.057');
    await page.getByText('Every revision, newest first').waitFor();
    await page.getByText(/^saved \d/).waitFor();
    await release(page, 2);
    await page.getByRole('link', { name: 'Compare with revision 1' }).click();
    await page.getByRole('heading', { name: 'Revision 1 against 2' }).waitFor();
    await page.getByRole('region', { name: 'What changed' }).getByText('0.0573').waitFor();
    await page.getByRole('region', { name: 'Modes and levels' }).getByText('Dutch roll frequency').waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);

    // Out and in again through each form: the data of the copy is the data of the original.
    await page.goto('/airframes?selected=dc-8-approach&search=dc-8');
    const original = await exported(page, 'JSON of revision 2', path.join(folder, 'first.json'));
    let copies = 1;
    for (const form of ['json', 'csv', 'xlsx'] as const) {
      const file = path.join(folder, `again.${form}`);
      await page.goto('/airframes?selected=dc-8-approach&search=dc-8');
      await exported(page, `${form.toUpperCase()} of revision 2`, file);
      await page.getByRole('link', { name: 'Import…' }).click();
      await page.getByLabel('Airframe file').setInputFiles(file);
      await page.getByText('nothing has to be mapped').waitFor();
      await page.getByRole('button', { name: 'Save as a draft' }).click();
      copies += 1;
      await page.waitForURL(new RegExp(`airframes/dc-8-approach-${copies}/revisions/1`));
      await page.goto(`/airframes?selected=dc-8-approach-${copies}&search=dc-8`);
      const copy = await exported(page, 'JSON of revision 1', path.join(folder, `copy-${form}.json`));
      expect(JSON.parse(copy), form).toEqual(JSON.parse(original));
    }
  });

  test('is told when a colleague saved the same draft, loses nothing and chooses', async ({ newPage }) => {
    const mine = await newPage({ expectedErrors: [SIGNED_OUT, SOMEONE_ELSE_SAVED] });
    await signIn(mine, 'engineer');
    await mine.goto('/airframes?selected=single-trainer&search=single');
    await mine.getByRole('button', { name: 'New draft' }).click();
    await mine.waitForURL(/single-trainer\/revisions\/2/);
    const theirs = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(theirs, 'engineer');
    await theirs.goto(new URL(mine.url()).pathname);
    await theirs.getByText(/^saved \d/).waitFor();
    await mine.getByText(/^saved \d/).waitFor();

    const first = /^Cn β at CL/;
    const firstOf = (page: Page) => page.getByRole('button', { name: first }).first();
    const firstP = (page: Page) => page.getByRole('button', { name: /^Cn p at CL/ }).first();
    const put = async (page: Page, cell: ReturnType<typeof firstOf>, text: string): Promise<void> => {
      await cell.click();
      await page.locator('input.in-place').fill(text);
      await page.keyboard.press('Enter');
      await page.keyboard.press('Escape');
    };
    await put(theirs, firstOf(theirs), '0.071');
    await put(theirs, firstP(theirs), '-0.061');
    await theirs.getByText('not saved yet').waitFor();
    await theirs.getByText(/^saved \d/).waitFor();
    await put(mine, firstOf(mine), '0.099');
    const conflict = mine.getByRole('alert', { name: 'Two versions of this draft' });
    await conflict.waitFor();
    expect(await conflict.getByRole('button', { name: 'Keep both versions’ changes' }).isDisabled()).toBe(true);
    expect(await accessibilityProblems(mine)).toEqual([]);
    await conflict.getByRole('radio', { name: /^Yours: .*Cn beta/ }).check();
    await conflict.getByRole('button', { name: 'Keep both versions’ changes' }).click();
    await conflict.waitFor({ state: 'detached' });
    await mine.getByText(/^saved \d/).waitFor();
    await mine.reload();
    await expect.poll(() => firstOf(mine).innerText()).toBe('0.099');
    expect(await firstP(mine).innerText()).toBe('-0.061');
  });

  test('leaves rows of a tunnel sheet out that cannot be read, and types what the sheet has not', async ({
    newPage,
  }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(page, 'engineer');
    await page.goto('/airframes/import');
    await page.getByLabel('Airframe file').setInputFiles({
      name: 'tunnel.csv',
      mimeType: 'text/csv',
      buffer: Buffer.from(TUNNEL),
    });
    await page.getByRole('region', { name: 'Rows to mend' }).getByText('Cn beta: “n/a” is not a number.').waitFor();
    await page.getByRole('button', { name: 'Leave all of them out' }).click();
    await page.getByLabel('Axes of the derivatives').selectOption('body');
    await page.getByLabel('Angles per').selectOption('degree');
    const values = {
      'Mass, or weight in lb': '1750',
      'Wing area': '17',
      'Wing span': '11.3',
      Ixx: '2900',
      Izz: '5400',
    };
    for (const [label, value] of Object.entries(values)) await page.getByLabel(label, { exact: true }).fill(value);
    await page.getByRole('table', { name: /^Modes at/ }).waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
    await page.getByRole('button', { name: 'Save as a draft' }).click();
    await page.waitForURL(/airframes\/tunnel\/revisions\/1/);
    await page.getByRole('button', { name: /^Cn β at CL 0.6/ }).waitFor();
    expect(await page.getByRole('button', { name: /^Cn β at CL/ }).count()).toBe(2);
  });
});

/** Invented values in the shape of a tunnel sheet: body axes, per degree, one condition a row, two rows spoilt. */
const TUNNEL = `Invented series,,,,,,,,,,,,,,
Alpha,CL,CYb,Clb,Cnb,Clp,Cnp,Clr,Cnr,CYdr,Clda,Cnda,Cldr,Cndr,Remark
2.1,0.60,-0.01326,-0.00157,0.00192,-0.510,-0.030,0.120,-0.130,0.0026,0.0028,-0.0002,0.00031,-0.00130,cruise
6.8,1.20,-0.01361,-0.00188,0.00185,-0.530,-0.055,0.210,-0.140,0.0025,0.0027,-0.0003,0.00028,-0.00128,
9.2,1.5O,-0.01292,-0.00210,0.00166,-0.527,-0.080,0.260,-0.150,0.0025,0.0026,-0.0004,0.00021,-0.00125,typed
13.0,1.90,-0.01309,-0.00230,n/a,-0.410,-0.100,0.330,-0.160,0.0024,0.0022,-0.0005,0.00019,-0.00120,stall
`;
