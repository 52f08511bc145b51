import type { Page } from 'playwright-core';

/** Password of all invented people of the demonstration. */
export const DEMONSTRATION_PASSWORD = 'balanced-line-26';

/** One invented person of each role. */
export const PEOPLE = {
  trainee: 'j.lindqvist@fieldschool.example',
  instructor: 'm.okafor@fieldschool.example',
  engineer: 'a.reyes@fieldschool.example',
  administrator: 's.virtanen@fieldschool.example',
} as const;

/** Fills in the sign-in form and sends it; does not wait for what comes of it. */
export async function submitSignIn(page: Page, email: string, password = DEMONSTRATION_PASSWORD): Promise<void> {
  await page.getByLabel('Email').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
}

/** Signs a person of the role in through the form and waits until the sign-in page is left. */
export async function signIn(page: Page, role: keyof typeof PEOPLE): Promise<void> {
  await page.goto('/sign-in');
  await submitSignIn(page, PEOPLE[role]);
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
}
