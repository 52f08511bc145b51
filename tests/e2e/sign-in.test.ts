import { describe, expect } from 'vitest';
import { accessibilityProblems } from './support/axe.ts';
import { PHONE, test } from './support/browser-test.ts';
import { DEMONSTRATION_PASSWORD, PEOPLE, signIn, submitSignIn } from './support/sign-in.ts';

/** The browser itself reports an answer 401 as an error; the page is told by it that nobody is signed in. */
const NOBODY = [/status of 401 .*\/api\/session/];

describe('signing in', () => {
  test('the bare address leads to the sign-in page', async ({ newPage, expect }) => {
    const page = await newPage({ expectedErrors: NOBODY });
    await page.goto('/');
    await page.getByRole('heading', { name: 'Sign in' }).waitFor();
    expect(new URL(page.url()).pathname).toBe('/sign-in');
    expect(await page.title()).toMatch(/Sign in/);
  });

  test('each role gets in and starts at its own area', async ({ newPage }) => {
    const areas = {
      trainee: '/my-flights',
      instructor: '/scenarios',
      engineer: '/airframes',
      administrator: '/scenarios',
    } as const;
    for (const role of ['trainee', 'instructor', 'engineer', 'administrator'] as const) {
      const page = await newPage({ expectedErrors: NOBODY });
      await signIn(page, role);
      await page.waitForURL((url) => url.pathname !== '/');
      expect(new URL(page.url()).pathname, role).toBe(areas[role]);
    }
  });

  test('a wrong password and an unknown person get the same answer', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [...NOBODY, /status of 401/] });
    await page.goto('/sign-in');
    const answers: string[] = [];
    for (const email of [PEOPLE.trainee, 'nobody@fieldschool.example']) {
      await submitSignIn(page, email, 'not-the-password');
      await page.getByRole('alert').waitFor();
      answers.push(await page.getByRole('alert').innerText());
      expect(await page.getByLabel('Password', { exact: true }).inputValue()).toBe('');
      await page.reload();
    }
    expect(answers[0]).toContain('E-mail or password is wrong');
    expect(answers[1]).toBe(answers[0]);
  });

  test('empty fields are named beside the field and nothing is sent', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: NOBODY });
    await page.goto('/sign-in');
    const posts: string[] = [];
    page.on('request', (request) => {
      if (request.method() === 'POST' && request.url().endsWith('/api/session')) posts.push(request.url());
    });
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.getByText('Enter your e-mail address').waitFor();
    await page.getByText('Enter your password').waitFor();
    expect(posts).toEqual([]);
  });

  test('keyboard alone is enough', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: NOBODY });
    await page.goto('/sign-in');
    await page.getByLabel('Email').focus();
    await page.keyboard.type(PEOPLE.trainee);
    await page.keyboard.press('Tab');
    await page.keyboard.type(DEMONSTRATION_PASSWORD);
    await page.keyboard.press('Enter');
    await page.waitForURL('**/my-flights');
  });
});

describe('the session', () => {
  test('a guarded address asks for the sign-in and is kept for afterwards', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: NOBODY });
    await page.goto('/account');
    await page.getByRole('heading', { name: 'Sign in' }).waitFor();
    await submitSignIn(page, PEOPLE.trainee);
    await page.waitForURL('**/account');
  });

  test('survives a reload and ends with signing out, for a bookmarked address too', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: NOBODY });
    await signIn(page, 'trainee');
    await page.reload();
    expect(new URL(page.url()).pathname).toBe('/my-flights');
    await page.getByRole('button', { name: /Account/ }).click();
    await page.getByRole('menuitem', { name: 'Sign out' }).click();
    await page.waitForURL('**/sign-in*');
    await page.goto('/my-flights');
    await page.getByRole('heading', { name: 'Sign in' }).waitFor();
  });

  test('a role without the right is told so and the server refuses the data', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: [...NOBODY, /status of 403/] });
    await signIn(page, 'trainee');
    const answer = await page.request.get('/api/airframes');
    expect(answer.status()).toBe(403);
    await page.goto('/airframes');
    await page
      .getByText(/engineer/i)
      .first()
      .waitFor();
    expect(new URL(page.url()).pathname).toBe('/airframes');
  });
});

describe('the sign-in page', () => {
  test.for([
    ['desktop', undefined],
    ['phone', PHONE],
  ] as const)('has no accessibility faults, light and dark: %s', async ([, viewport], { newPage }) => {
    for (const colorScheme of ['light', 'dark'] as const) {
      const page = await newPage({ expectedErrors: NOBODY, colorScheme, ...(viewport && { viewport }) });
      await page.goto('/sign-in');
      await page.getByRole('heading', { name: 'Sign in' }).waitFor();
      expect(await accessibilityProblems(page), colorScheme).toEqual([]);
    }
  });

  test('the chosen sheet colour is applied and kept', async ({ newPage }) => {
    const page = await newPage({ expectedErrors: NOBODY, colorScheme: 'light' });
    await page.goto('/sign-in');
    const background = () => page.evaluate('getComputedStyle(document.body).backgroundColor');
    await page.getByRole('heading', { name: 'Sign in' }).waitFor();
    const light = await background();
    await page.getByText('dark', { exact: true }).click();
    await page.waitForFunction(`getComputedStyle(document.body).backgroundColor !== ${JSON.stringify(light)}`);
    const dark = await background();
    await page.reload();
    await page.getByRole('heading', { name: 'Sign in' }).waitFor();
    expect(await background()).toBe(dark);
  });
});
