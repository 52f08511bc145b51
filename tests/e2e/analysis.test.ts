/** An engineer studies a published set: modes, sliders, stability map, figures to save, a study for others, the printed report. */
import { readFileSync } from 'node:fs';
import path from 'node:path';
import Papa from 'papaparse';
import type { Locator, Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { accessibilityProblems } from './support/axe.ts';
import { test } from './support/browser-test.ts';
import { signIn } from './support/sign-in.ts';

const SIGNED_OUT = /401/;
const DC8 = path.join(import.meta.dirname, 'data/dc-8-approach.csv');

/** Imports the published DC-8 set under a name of its own; its address name. */
async function importedDc8(page: Page): Promise<string> {
  await page.goto('/airframes/import');
  const file = { name: 'dc-8-studied.csv', mimeType: 'text/csv', buffer: readFileSync(DC8) };
  await page.getByLabel('Airframe file').setInputFiles(file);
  await page.getByLabel('Units').selectOption('US');
  await page.getByLabel('Derivatives are').selectOption('dimensional-primed');
  await page.getByLabel('Axes of the inertias').selectOption('body');
  await page.getByLabel('Airplane class').selectOption('III');
  await page.getByRole('button', { name: 'Save as a draft' }).click();
  await page.waitForURL(/airframes\/[\w-]+\/revisions\/1/);
  return /airframes\/([\w-]+)\//.exec(page.url())?.[1] ?? '';
}
const tab = (page: Page, name: string): Promise<void> => page.getByRole('tab', { name }).click();
const figure = (page: Page, name: string): Locator => page.getByRole('region', { name, exact: true });
async function saved(page: Page, of: Locator, kind: 'PNG' | 'SVG' | 'CSV'): Promise<Buffer> {
  await of.getByRole('button', { name: 'Save' }).click();
  const download = page.waitForEvent('download');
  await of.getByRole('button', { name: kind, exact: true }).click();
  return readFileSync(await (await download).path());
}
async function type(page: Page, label: string, text: string): Promise<void> {
  await page.getByLabel(label, { exact: true }).fill(text);
  await page.keyboard.press('Enter');
}
const row = (page: Page, table: string, name: string): Locator =>
  page.getByRole('table', { name: table }).getByRole('row', { name: new RegExp(`^${name}`) });
const pointOnMap = async (page: Page): Promise<number> =>
  Number(await page.getByLabel('Cnβ of the point', { exact: true }).inputValue());

describe('an engineer', () => {
  test('moves a derivative of a published set, saves the study for the instructor and prints it', async ({
    newPage,
  }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT], acceptDownloads: true });
    await signIn(page, 'engineer');
    const slug = await importedDc8(page);

    // Heffley & Jewell, NASA CR-2144, DC-8 approach, 243.5 ft/s at sea level: 0.995 rad/s with damping 0.11.
    await page.goto(`/analysis?airframe=${slug}&revision=1`);
    await type(page, 'Speed', '243.5 ft/s');
    await expect.poll(() => row(page, 'Modes', 'Dutch roll').innerText()).toMatch(/ζ 0\.1(?:09|1\d?), ω 0\.99\d?/);
    await type(page, 'Speed', 'fast');
    await page.getByText(/"fast" is not a number with a unit/).waitFor();
    await page.keyboard.press('Escape');
    expect(await accessibilityProblems(page)).toEqual([]);

    await page.getByRole('button', { name: 'Sweep Cnβ' }).click();
    const slider = page.getByRole('slider', { name: 'Cnβ of the first entry' });
    await expect.poll(() => row(page, 'Modes', 'Dutch roll').innerText()).toContain('Level 1');
    await slider.focus();
    for (let step = 0; step < 20; step++) {
      if ((await row(page, 'Modes', 'Dutch roll').innerText()).includes('Level 2')) break;
      const before = await row(page, 'Modes', 'Dutch roll').innerText();
      await page.keyboard.press('PageDown');
      await expect.poll(() => row(page, 'Modes', 'Dutch roll').innerText()).not.toBe(before);
    }
    // Table VI, Class III, category C: ζω of 0.10 rad/s is the least of Level 1, 0.05 of Level 2.
    const [, zeta, omega] = /ζ ([\d.]+), ω ([\d.]+)/.exec(await row(page, 'Modes', 'Dutch roll').innerText()) ?? [];
    expect(await row(page, 'Modes', 'Dutch roll').innerText()).toContain('Level 2');
    expect(Number(zeta) * Number(omega)).toBeLessThan(0.1);
    expect(Number(zeta) * Number(omega)).toBeGreaterThan(0.05);
    await page.getByText('The data of the revision is unchanged.').waitFor();

    await tab(page, 'Map and responses');
    const map = page.getByRole('application', { name: /^Stability map/ });
    await map.waitFor();
    expect(await row(page, 'Revisions on the map', 'revision 1').innerText()).toContain('Level 2');
    const start = await pointOnMap(page);
    const box = await map.boundingBox();
    if (!box) throw new Error('the map is not drawn');
    await page.mouse.move(box.x + box.width * 0.5, box.y + box.height * 0.5);
    await page.mouse.down();
    await page.mouse.move(box.x + box.width * 0.8, box.y + box.height * 0.5, { steps: 8 });
    await page.mouse.up();
    await expect.poll(() => row(page, 'Revisions on the map', 'revision 1').innerText()).toContain('Level 1');
    const dragged = await pointOnMap(page);
    expect(dragged).toBeGreaterThan(start);
    await map.press('ArrowLeft');
    await expect.poll(() => pointOnMap(page)).toBeLessThan(dragged);
    await type(page, 'Cnβ of the point', '0.001 /deg');
    // 0.001 · 180/π
    await expect.poll(() => pointOnMap(page)).toBeCloseTo(0.0573, 4);
    await type(page, 'Size of the input', '0.1 rad');
    await figure(page, 'Rudder doublet, 5.73 deg').waitFor();
    await page.getByLabel('Input').last().selectOption('side-gust');
    await page.getByText('sideslip to side gust, dB, 1 rad per m/s').waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);

    const response = figure(page, 'Rudder doublet, 5.73 deg');
    await response.getByRole('button', { name: 'Table' }).click();
    expect(await response.getByRole('columnheader', { name: 'revision 1 sideslip, deg' }).count()).toBe(1);
    await response.getByRole('button', { name: 'Figure' }).click();
    const csv = Papa.parse<string[]>((await saved(page, response, 'CSV')).toString(), { skipEmptyLines: true });
    expect(csv.errors).toEqual([]);
    expect(csv.data[0]?.slice(0, 3)).toEqual(['Time, s', 'revision 1 rudder, deg', 'revision 1 sideslip, deg']);
    expect(csv.data.length).toBeGreaterThan(200);
    expect(csv.data.slice(1).every((cells) => cells.every((cell) => Number.isFinite(Number(cell))))).toBe(true);
    const svg = (await saved(page, figure(page, 'Frequency response'), 'SVG')).toString();
    expect(svg).toContain('not for operational use');
    expect(svg.match(/<svg/g)?.length, 'the picture, and both of its plots in it').toBe(3);
    const png = await saved(page, figure(page, 'Stability map'), 'PNG');
    expect(png.subarray(1, 4).toString()).toBe('PNG');
    expect(png.length).toBeGreaterThan(5000);

    await page.getByRole('button', { name: 'Studies' }).click();
    await page.getByLabel('Save what is on view as').fill('Little weathercock stability');
    await page.getByRole('button', { name: 'Save study' }).click();
    await page.getByText('Saved as “Little weathercock stability”').waitFor();
    const id = new URL(page.url()).searchParams.get('study') ?? '';
    expect(await accessibilityProblems(page)).toEqual([]);
    const download = page.waitForEvent('download', { timeout: 60_000 });
    await page.getByRole('button', { name: 'Report, PDF' }).click();
    const report = await download;
    expect(report.suggestedFilename()).toMatch(/^AR-\d{4}-dc-8-studied/);
    expect(
      readFileSync(await report.path())
        .subarray(0, 5)
        .toString(),
    ).toBe('%PDF-');

    const reader = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(reader, 'instructor');
    await reader.goto(`/analysis?study=${id}`);
    await reader.getByText('Study Little weathercock stability').waitFor();
    await expect.poll(() => pointOnMap(reader)).toBeCloseTo(0.0573, 4);
    await figure(reader, 'Rudder doublet, 5.73 deg').waitFor();
    expect(await row(reader, 'Revisions on the map', 'revision 1').innerText()).toContain('Level 2');
    await reader.getByRole('button', { name: 'Studies' }).click();
    await reader.getByRole('button', { name: 'Open Little weathercock stability' }).waitFor();
    expect(await reader.getByRole('button', { name: 'Save study' }).count()).toBe(0);

    await page.getByRole('button', { name: 'Delete Little weathercock stability' }).click();
    await page.getByRole('button', { name: 'Delete', exact: true }).click();
    await page.getByText('No study is saved yet.').waitFor();
    await page.getByRole('button', { name: 'Undo' }).click();
    await page.getByRole('button', { name: 'Open Little weathercock stability' }).waitFor();
  });

  test('compares revisions on every tab in the units of choice, draws a dispersion and stops it', async ({
    newPage,
  }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(page, 'engineer');
    await page.goto('/analysis?airframe=light-twin&tab=engine-out');
    await page.getByLabel('Compare').selectOption({ label: 'Twin jet transport 1' });
    const bank = figure(page, 'Minimum control speed against bank');
    await bank.getByText('twin-jet 1').waitFor();
    await page.getByText(/Shaded: ±2σ of 40 seeded draws/).waitFor();
    for (const name of ['What moves Vmca', 'Climb', 'Against height', 'Against mass', 'Against centre of gravity'])
      expect(await figure(page, name).getByRole('button', { name: 'Table' }).count(), name).toBe(1);
    const inKt = Number(/([\d.]+) wings level/.exec(await bank.innerText())?.[1]);
    await page.getByText('m/s m °').click();
    // 1 kt is 0.514444 m/s.
    await expect
      .poll(async () => Number(/([\d.]+) wings level/.exec(await bank.innerText())?.[1]))
      .toBeCloseTo(inKt * 0.514444, 1);
    await page.getByText('kt ft °').click();
    expect(await accessibilityProblems(page)).toEqual([]);
    await tab(page, 'Crosswind');
    await row(page, 'Crosswind by revision', 'twin-jet 1').waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
    await tab(page, 'Modes');
    await page.getByText(/Open ring: twin-jet 1/).waitFor();

    await tab(page, 'Dispersion');
    await type(page, 'Draws', '12');
    await page.getByText('Draws lies between 100 and 20000.').waitFor();
    await type(page, 'Draws', '20000');
    await page.getByRole('button', { name: 'Draw', exact: true }).click();
    await page.getByText(/About \d+ s left\. Cancelling keeps what is drawn\./).waitFor();
    await page.getByRole('button', { name: 'Cancel' }).click();
    const done = Number(/(\d+) of 20000/.exec(await page.locator('.progress').innerText())?.[1]);
    expect(done).toBeGreaterThan(0);
    expect(done).toBeLessThan(20_000);
    await page.getByRole('img', { name: 'Dutch roll damping ζ' }).waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
  });
});
