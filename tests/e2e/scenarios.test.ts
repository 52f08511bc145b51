/** An instructor writes a scenario from a template, sees preview and budget, publishes; a trainee flies it; newer data is taken. */
import { describe, expect } from 'vitest';
import { accessibilityProblems } from './support/axe.ts';
import { apiPost } from './support/api-post.ts';
import { test } from './support/browser-test.ts';
import { startFlight } from './support/cockpit-pilot.ts';
import { signIn, submitSignIn } from './support/sign-in.ts';

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

    await page.getByText('no pilot', { exact: true }).waitFor();
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
    await page.goto(`${address}/scenarios/${SLUG}/revisions`);
    await page.getByRole('heading', { name: 'Newer airframe data' }).waitFor();
    await page.getByRole('heading', { name: 'Revision 1, pinned' }).waitFor();
    await page.getByRole('heading', { name: 'Revision 2, newer' }).waitFor();
    // The data are the same, so both budgets are those of the editor.
    await page.getByRole('row', { name: /^Reaction budget 2\.\d\d s 2\.\d\d s/ }).waitFor({ timeout: 60_000 });
    await page.getByRole('button', { name: 'Take the newer data into a draft' }).click();
    await page.waitForURL(/drafts\/2/);
    await page.locator('.budget[aria-busy="false"]').waitFor({ timeout: 60_000 });
    await page.goto(`${address}/scenarios/${SLUG}/revisions`);
    await page.getByText('light-twin, revision 1 → light-twin, revision 2').waitFor();
    expect(await accessibilityProblems(page)).toEqual([]);
    await page.goto(`${address}/scenarios/${SLUG}/drafts/2`);
    await page.getByRole('button', { name: 'Publish…' }).click();
    await page.getByLabel('What is new in this revision').fill('On the newer data.');
    await page.getByRole('button', { name: 'Publish', exact: true }).click();
    await page.waitForURL(`**/scenarios/${SLUG}`);
    const flown = await newPage({ expectedErrors: [SIGNED_OUT] });
    await signIn(flown, 'trainee');
    await startFlight(flown, SLUG);
  });

  test('dragged by mouse and finger, typed in the table, undone; two instructors on one draft', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [SIGNED_OUT, /412/], hasTouch: true });
    await signIn(page, 'instructor');
    await page.goto('/scenarios?search=left%20engine%20cut%20after');
    await page.getByRole('button', { name: 'New from selected' }).click();
    await page.getByRole('textbox', { name: 'Title', exact: true }).fill('Two hands on it');
    await page.getByRole('button', { name: 'Begin' }).click();
    await page.waitForURL(/drafts\/1/);
    const cutAt = (seconds: string) =>
      page.getByRole('button', { name: new RegExp(`^Left engine fails\\s*, at ${seconds} s`) });
    const box = await cutAt('3').boundingBox();
    const ruler = await page.locator('.ruler').boundingBox();
    if (!box || !ruler) throw new Error('the time line is not drawn');
    // The scenario lasts 15 s; the ruler keeps 132 px on the left and 24 px on the right.
    const pxPerS = (ruler.width - 156) / 15;
    const [x, y] = [box.x + 30, box.y + 12];
    await page.mouse.move(x, y);
    await page.mouse.down();
    await page.mouse.move(x + pxPerS * 1.02, y, { steps: 5 });
    await page.mouse.up();
    await cutAt('4').waitFor();
    const touch = await page.context().newCDPSession(page);
    const finger = (type: 'touchStart' | 'touchMove' | 'touchEnd', at: number) =>
      touch.send('Input.dispatchTouchEvent', { type, touchPoints: type === 'touchEnd' ? [] : [{ x: at, y }] });
    const from = x + pxPerS;
    await finger('touchStart', from);
    for (let step = 1; step <= 5; step += 1) await finger('touchMove', from + (step / 5) * pxPerS * 0.99);
    await finger('touchEnd', from);
    await cutAt('5').waitFor();

    await page.locator('label', { hasText: 'Table' }).first().click();
    const time = page.getByLabel('Time of Left engine fails, seconds');
    await time.fill('6.04');
    await time.press('Tab');
    await expect.poll(() => time.inputValue()).toBe('6');
    for (let i = 0; i < 3; i += 1) await page.getByRole('button', { name: 'Undo', exact: true }).click();
    await expect.poll(() => time.inputValue()).toBe('3');
    expect(await page.getByRole('button', { name: 'Undo', exact: true }).isDisabled()).toBe(true);
    await page.getByText(/^Draft 1, saved/).waitFor();

    const second = await newPage({ expectedErrors: [SIGNED_OUT] });
    await second.goto('/sign-in');
    await submitSignIn(second, 'h.brandt@fieldschool.example');
    await second.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
    await second.goto(page.url());
    await second.getByRole('textbox', { name: 'Title', exact: true }).fill('Theirs');
    await second.getByText(/^Draft 1, saved/).waitFor();
    await second.waitForTimeout(1500);
    await second.getByText(/^Draft 1, saved/).waitFor();

    await time.fill('7');
    await time.press('Tab');
    const told = page.getByRole('alert').filter({ hasText: 'H. Brandt saved this draft while you were writing.' });
    await told.waitFor();
    await told.getByText('Theirs', { exact: false }).first().waitFor();
    await page.getByRole('button', { name: 'Keep mine' }).click();
    await page.getByText(/^Draft 1, saved/).waitFor();
    expect(await time.inputValue()).toBe('7');
    // Theirs is one step back, mine one step forward: nothing is lost.
    await page.getByRole('button', { name: 'Undo', exact: true }).click();
    await page.getByRole('heading', { name: 'Theirs' }).waitFor();
    await page.getByRole('button', { name: 'Redo', exact: true }).click();
    await page.getByRole('heading', { name: 'Two hands on it' }).waitFor();
  });
});
