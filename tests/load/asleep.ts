/**
 * A class of ten minutes in real Chromium: an instructor and two trainees, one of whose browsers sleeps for five minutes.
 * node --import tsx tests/load/asleep.ts [--asleep SECONDS] [--shots FOLDER] — on the built product, on loopback; ends by itself.
 */
import fs from 'node:fs';
import path from 'node:path';
import { setTimeout as delay } from 'node:timers/promises';
import { parseArgs } from 'node:util';
import { chromium, type Browser, type Page } from 'playwright-core';
import { z } from 'zod';
import { findProgram } from '../../server/bootstrap/programs.mjs';
import { freshDataFolder, launchProduct } from '../e2e/support/product.ts';
import { submitSignIn } from '../e2e/support/sign-in.ts';
import { openClient } from '../support/test-server.ts';
import { publishLongScenario } from './long-scenario.ts';

const { values } = parseArgs({ options: { asleep: { type: 'string' }, shots: { type: 'string' } } });
const ASLEEP_S = Math.min(600, Number(values.asleep ?? 300));
const DEADLINE_S = ASLEEP_S + 420;
/** A browser that has woken is back at the class clock within this time. */
const BACK_WITHIN_S = 30;
const ARGS = ['--no-sandbox', '--disable-gpu', '--disable-3d-apis', '--disable-dev-shm-usage'];
const failures: string[] = [];
const cleanUps: (() => unknown)[] = [];
const check = (good: boolean, what: string): void => {
  console.log(`${good ? 'yes' : 'NO '}  ${what}`);
  if (!good) failures.push(what);
};
const mail = (mailbox: string): string => `${mailbox}@fieldschool.example`;

async function shot(page: Page, name: string, sizes: readonly (readonly [number, number])[]): Promise<void> {
  if (values.shots === undefined) return;
  fs.mkdirSync(values.shots, { recursive: true });
  const before = page.viewportSize();
  for (const [width, height] of sizes) {
    await page.setViewportSize({ width, height });
    for (const scheme of ['light', 'dark'] as const) {
      await page.emulateMedia({ colorScheme: scheme });
      await delay(500);
      await page.screenshot({ path: path.join(values.shots, `${name}-${width}-${scheme}.png`) });
    }
  }
  await page.emulateMedia({ colorScheme: 'light' });
  if (before) await page.setViewportSize(before);
}
const LARGE = [1440, 900] as const;
const TABLET = [1024, 768] as const;
const PHONE = [390, 844] as const;

/** Seconds on the class clock of a page. */
async function clockOf(page: Page): Promise<number> {
  const text = await page.locator('.clock [role="timer"]').innerText();
  const found = /([+−-]?)(\d+):(\d+(?:\.\d+)?)/u.exec(text);
  if (!found) throw new Error(`No clock: ${text}`);
  return (found[1] === '+' || found[1] === '' ? 1 : -1) * (60 * Number(found[2]) + Number(found[3]));
}

async function openPage(browser: Browser, address: string, mailbox: string): Promise<Page> {
  const context = await browser.newContext({ baseURL: address, viewport: { width: 1440, height: 900 } });
  const page = await context.newPage();
  page.on('pageerror', (error) => failures.push(`${mailbox}: ${error.message}`));
  await page.goto('/sign-in');
  await submitSignIn(page, mail(mailbox));
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
  return page;
}

async function join(page: Page, code: string, shots: boolean): Promise<void> {
  await page.goto(`/join/${code.toLowerCase()}`);
  if (shots) await shot(page, 'join', [PHONE]);
  await page.getByRole('button', { name: 'Join' }).click();
  await page.getByText('You are in.').waitFor();
}

async function session(): Promise<void> {
  const dataFolder = freshDataFolder();
  cleanUps.unshift(() => fs.rmSync(dataFolder, { recursive: true, force: true }));
  const product = await launchProduct({ dataFolder });
  cleanUps.unshift(() => product.stop());
  const address = product.address.replace(/\/$/u, '');
  const slug = await publishLongScenario(await openClient(address, 'm.okafor'));
  const executablePath = findProgram(['chromium', 'chromium-browser', 'google-chrome']);
  const awake = await chromium.launch({ executablePath, args: ARGS });
  cleanUps.unshift(() => awake.close());
  const sleeperServer = await chromium.launchServer({ executablePath, args: ARGS });
  cleanUps.unshift(() => sleeperServer.kill());
  const sleeper = await chromium.connect(sleeperServer.wsEndpoint());
  const group = sleeperServer.process().pid ?? 0;

  const teacher = await openPage(awake, address, 'm.okafor');
  await teacher.goto(`/classes?scenario=${slug}`);
  await teacher.getByText('Ten minutes level').last().waitFor();
  await shot(teacher, 'open', [LARGE]);
  await teacher.getByRole('button', { name: 'Open the class' }).click();
  await teacher.waitForURL(/\/classes\/[0-9a-f-]{36}/u);
  const code = (await teacher.locator('.lobby .big').first().innerText()).replace(/\s/gu, '');
  const first = await openPage(sleeper, address, 'j.lindqvist');
  const second = await openPage(awake, address, 'a.bauer');
  await join(first, code, true);
  await join(second, code, false);
  await teacher.getByText('A. Bauer').waitFor();
  await delay(3500);
  await shot(teacher, 'lobby', [LARGE, TABLET]);
  await shot(second, 'lobby-trainee', [PHONE]);

  // Demonstration, handed to a trainee and back.
  await teacher.getByRole('button', { name: 'Start', exact: true }).click();
  await second.getByText('You are looking on.').waitFor({ timeout: 20_000 });
  await delay(5000);
  await teacher.locator('.stage').hover({ position: { x: 300, y: 200 } });
  await shot(teacher, 'demonstration', [LARGE, TABLET]);
  await shot(second, 'looking-on', [LARGE, PHONE]);
  await teacher.getByRole('button', { name: 'Stop run' }).click();
  await second.getByText('You are in.').waitFor();

  await teacher.getByText('Everyone flies', { exact: true }).first().click();
  await teacher.getByRole('button', { name: 'Start', exact: true }).click();
  for (const page of [first, second]) await page.getByText('You have the controls.').waitFor({ timeout: 20_000 });
  await delay(4000);
  await teacher.getByRole('button', { name: 'Inject now' }).click();
  await shot(teacher, 'board', [LARGE, TABLET]);
  await teacher.keyboard.press('KeyW');
  await shot(teacher, 'wall', [LARGE, [1920, 1080]]);
  await teacher.keyboard.press('Escape');
  await shot(second, 'flying', [LARGE, PHONE]);
  await teacher.getByRole('button', { name: 'Roster' }).click();
  await shot(teacher, 'roster', [LARGE]);
  await teacher.getByRole('button', { name: 'Roster' }).click();

  console.log(`A trainee's browser sleeps for ${ASLEEP_S} s.`);
  const before = await clockOf(teacher);
  process.kill(-group, 'SIGSTOP');
  cleanUps.unshift(() => process.kill(-group, 'SIGCONT'));
  try {
    await delay(Math.min(15_000, 500 * ASLEEP_S));
    check((await teacher.getByText(/^Lost \d+ s/u).count()) === 1, 'the board shows the sleeping trainee as lost');
    await shot(teacher, 'board-lost', [LARGE]);
    await delay(Math.max(0, 1000 * ASLEEP_S - 15_000));
  } finally {
    process.kill(-group, 'SIGCONT');
  }
  const woken = performance.now();
  let behind = Infinity;
  while (performance.now() - woken < 1000 * BACK_WITHIN_S && !(Math.abs(behind) < 0.7)) {
    await delay(300);
    const [here, there] = await Promise.all([clockOf(teacher), clockOf(first).catch(() => NaN)]);
    if ((await first.getByText('The connection is lost.').count()) === 0) behind = here - there;
  }
  const took = ((performance.now() - woken) / 1000).toFixed(1);
  check(Math.abs(behind) < 0.7, `awake again at the class clock after ${took} s (apart by ${behind.toFixed(1)} s)`);
  check((await clockOf(teacher)) - before > ASLEEP_S, 'the class went on meanwhile');
  await delay(10_000);
  check((await first.getByText('still on the way').count()) === 0, 'everything it flew meanwhile is delivered');
  check((await teacher.getByText(/^Lost \d+ s/u).count()) === 0, 'the board sees it again');

  await teacher.getByRole('button', { name: 'Stop run' }).click();
  await delay(4000);
  await teacher.getByRole('button', { name: 'End class…' }).click();
  await teacher.getByRole('button', { name: 'End for all' }).click();
  await teacher.getByRole('heading', { name: 'Runs' }).waitFor({ timeout: 20_000 });
  await teacher.getByRole('button', { name: 'Play all in step' }).waitFor({ timeout: 60_000 });
  await delay(8000);
  await shot(teacher, 'after', [LARGE, TABLET]);
  const http = await openClient(address, 'm.okafor');
  const id = new URL(teacher.url()).pathname.split('/').at(-1) ?? '';
  const detail = z
    .object({
      runsFlown: z.array(
        z.object({
          mode: z.string(),
          attempts: z.array(
            z.object({
              name: z.string(),
              status: z.string(),
              result: z.object({ statesAgree: z.boolean(), durationS: z.number() }).nullable(),
            }),
          ),
        }),
      ),
    })
    .parse((await http('GET', `/api/classes/${id}`)).body);
  const flown = detail.runsFlown.find(({ mode }) => mode === 'everyone-flies');
  for (const { name, status, result } of flown?.attempts ?? [])
    check(
      status === 'complete' && result?.statesAgree === true && result.durationS > ASLEEP_S,
      `${name}: ${status}, ${result?.durationS.toFixed(1) ?? '–'} s, the server comes to the same states`,
    );
  check(flown?.attempts.length === 2, 'two attempts');
}

try {
  await Promise.race([
    session(),
    delay(1000 * DEADLINE_S, undefined, { ref: false }).then(() => Promise.reject(new Error('Out of time.'))),
  ]);
} catch (error) {
  failures.push(String(error));
  console.error(error);
} finally {
  for (const action of cleanUps) {
    try {
      await action();
    } catch {
      // It is gone already.
    }
  }
}
console.log(failures.length === 0 ? 'Nothing was lost.' : `Lost or wrong: ${failures.join('; ')}`);
process.exit(failures.length === 0 ? 0 : 1);
