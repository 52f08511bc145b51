/** An engineer imports a published set from a sheet in US units, sees its modes, changes it, releases it and reads the difference. */
import { writeFileSync } from 'node:fs';
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { describe, expect } from 'vitest';
import { accessibilityProblems } from './support/axe.ts';
import { test } from './support/browser-test.ts';
import { signIn } from './support/sign-in.ts';

const SIGNED_OUT = /401/;
/** D. K. Schmidt, AIAA 1998, appendix B.4 (G. L. Teper, NASA CR-96008): DC-8, condition 1, primed dimensional, US units. */
const DC8 = `Quantity,Value
W,190000
S,2600
b,142.3
c,23
V,243
rho,0.002384
Ix,3090000
Iz,5580000
Ixz,28000
Yβ,-27.05
Yδr,5.782
L'β,-1.327
L'p,-0.95
L'r,0.609
L'δa,0.726
L'δr,0.181
N'β,0.756
N'p,-0.124
N'r,-0.264
N'δa,0.053
N'δr,-0.388
`;

describe('an engineer', () => {
  test('imports a sheet, edits in place with undo, releases, exports and reads it again', async ({ newPage }) => {
    const folder = mkdtempSync(path.join(tmpdir(), 'sidewash-import-'));
    const file = path.join(folder, 'dc-8-approach.csv');
    writeFileSync(file, DC8);
    const page = await newPage({ expectedErrors: [SIGNED_OUT], acceptDownloads: true });
    await signIn(page, 'engineer');
    await page.getByRole('link', { name: 'Import…' }).click();
    await page.getByLabel('Airframe file').setInputFiles(file);
    await page.getByLabel('Units').selectOption('US');
    await page.getByLabel('Derivatives are').selectOption('dimensional-primed');
    await page.getByLabel('Airplane class').selectOption('III');
    // Published denominator s² + 0.22 s + 0.99: 0.995 rad/s, damping 0.11.
    await page.getByText(/ω 0\.99\d rad\/s, ζ 0\.1(09|10|11)/).waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
    await page.getByRole('button', { name: 'Save as a draft' }).click();
    await page.waitForURL(/airframes\/dc-8-approach\/revisions\/1/);

    const cell = page.getByRole('button', { name: /^Cn β at CL/ });
    await cell.click();
    await page.locator('input.in-place').fill('0.12');
    await page.keyboard.press('Enter');
    await page.keyboard.press('Escape');
    await expect.poll(() => cell.innerText()).toBe('0.120');
    await page.getByRole('button', { name: 'Undo' }).click();
    await expect.poll(() => cell.innerText()).not.toBe('0.120');
    await page.getByText(/^saved \d/).waitFor();

    await page.getByRole('link', { name: 'Fin and dihedral estimator…' }).click();
    await page.getByRole('heading', { name: 'Fin and dihedral estimator' }).waitFor();
    await page.getByRole('button', { name: 'Adopt Cn dr' }).click();
    await page.getByText('Cn dr adopted with its source.').waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
    await page.goto('/airframes/dc-8-approach/revisions/1');

    await page.getByRole('button', { name: /^Release revision 1/ }).click();
    const dialog = page.getByRole('dialog');
    for (const answer of await dialog.getByRole('textbox').all()) await answer.fill('Known, from the published set.');
    await dialog.getByRole('button', { name: /^Release/ }).click();
    await page.getByText('Revision 1 is released.').waitFor();

    await page.goto('/airframes?selected=dc-8-approach&search=dc-8');
    const download = page.waitForEvent('download');
    await page.getByRole('link', { name: 'JSON of revision 1' }).click();
    const saved = path.join(folder, 'again.json');
    await (await download).saveAs(saved);
    await page.getByRole('link', { name: 'Import…' }).click();
    await page.getByLabel('Airframe file').setInputFiles(saved);
    await page.getByText('nothing has to be mapped').waitFor();
    await page.getByRole('button', { name: 'Save as a draft' }).click();
    await page.waitForURL(/airframes\/dc-8-approach-2\/revisions\/1/);
  });
});
