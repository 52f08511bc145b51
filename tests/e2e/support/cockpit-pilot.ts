import type { Page } from 'playwright-core';

/** "8.2°L", "49%R", "0.0°" as a signed number, right positive. */
export function sidedNumber(text: string): number {
  const match = /^(\d+(?:\.\d+)?)[°%]?([LR])?$/.exec(text.trim());
  if (!match) return Number.NaN;
  return Number(match[1]) * (match[2] === 'L' ? -1 : 1);
}

interface Readouts {
  /** Nose off the flight path, right positive; deg. */
  nose: number;
  pedal: number;
  pedalWanted: number;
  wings: number;
  wingsWanted: number;
  heading: number;
  failed: boolean;
  over: boolean;
}

/** Reads off the screen what a pilot would. */
async function readScreen(page: Page): Promise<Readouts> {
  const seen = await page.evaluate(() => {
    const text = (name: string) => document.querySelector(`[data-readout="${name}"]`)?.textContent ?? '';
    const edge = [...document.querySelectorAll('.edge-text')].map((e) => e.textContent ?? '');
    return {
      texts: ['nose', 'pedal', 'pedal-wanted', 'wings', 'wings-wanted'].map(text),
      nose: edge.find((t) => t.startsWith('nose')) ?? '',
      failed: document.querySelector('.ticker .failure') !== null,
      over: document.querySelector('.result') !== null,
    };
  });
  const [nose, pedal, pedalWanted, wings, wingsWanted] = seen.texts.map(sidedNumber);
  const heading = Number(/\d+/.exec(seen.nose)?.[0] ?? Number.NaN);
  return { nose, pedal, pedalWanted, wings, wingsWanted, heading, failed: seen.failed, over: seen.over };
}

/** Presses Start and waits until the clock runs. */
export async function startFlight(page: Page, slug: string): Promise<void> {
  await page.goto(`/fly/${slug}`);
  await page
    .getByRole('button', { name: /^Start/ })
    .last()
    .click();
  await page
    .getByRole('button', { name: /^(Freeze|Leave)/ })
    .first()
    .waitFor();
}

/** A busy machine freezes a flight rather than letting it jump: the pilot goes on, as a person would. */
async function goOnWhenFrozen(page: Page): Promise<void> {
  const frozen = page.locator('.frozen');
  if (await frozen.isVisible()) await page.keyboard.press('Space');
}

/** Waits for the end of the flight without touching the controls. */
export async function flyHandsOff(page: Page): Promise<void> {
  const result = page.locator('.result');
  while (!(await result.isVisible())) {
    await goOnWhenFrozen(page);
    await page.waitForTimeout(250);
  }
}

const RIGHT_PEDAL = 'x';
const LEFT_PEDAL = 'z';

/** How long to press a pedal key for a share of travel: slow at first, full rate after 0.35 s (the standard key rates). */
function pressMs(share: number): number {
  let travel = 0;
  let t = 0;
  while (travel < Math.min(0.5, share) && t < 0.5) {
    travel += 1.4 * (0.35 + 0.65 * Math.min(1, t / 0.35)) * 0.005;
    t += 0.005;
  }
  return t * 1000;
}

/**
 * Flies a failed engine with the keyboard, from what the screen shows: one press of the pedal for what the strip wants,
 * small ones to correct, and the wings to what it wants and a little against the heading that was lost.
 */
export async function flyWithPedal(page: Page, startHeading: number): Promise<void> {
  const down = new Set<string>();
  const hold = async (key: string, on: boolean): Promise<void> => {
    if (on === down.has(key)) return;
    if (on) {
      down.add(key);
      await page.keyboard.down(key);
    } else {
      down.delete(key);
      await page.keyboard.up(key);
    }
  };
  // The result of an earlier flight gives way to the new one.
  await page.locator('.result').waitFor({ state: 'hidden' });
  let last: { wings: number; ms: number } | null = null;
  let pedalRestsUntil = 0;
  for (;;) {
    const seen = await readScreen(page);
    if (seen.over) break;
    await goOnWhenFrozen(page);
    if (seen.failed && Number.isFinite(seen.pedal) && Number.isFinite(seen.pedalWanted)) {
      const ms = performance.now();
      const rate = last ? ((seen.wings - last.wings) / Math.max(30, ms - last.ms)) * 1000 : 0;
      last = { wings: seen.wings, ms };
      const lost = Number.isFinite(seen.heading) ? seen.heading - startHeading : 0;
      const bank = seen.wingsWanted - 0.25 * lost - (seen.wings + 0.35 * rate);
      await hold('ArrowRight', bank > 5);
      await hold('ArrowLeft', bank < -5);
      const error = seen.pedalWanted + 3 - seen.pedal;
      if (Math.abs(error) > 5 && ms > pedalRestsUntil) {
        const key = error > 0 ? RIGHT_PEDAL : LEFT_PEDAL;
        await page.keyboard.press(key, { delay: pressMs(Math.abs(error) / 100) });
        pedalRestsUntil = performance.now() + 150;
      }
    }
    await page.waitForTimeout(20);
  }
  for (const key of down) await page.keyboard.up(key);
}

/** The text of the finished flight's result, once the server has given it. */
export async function serverResult(page: Page): Promise<string> {
  await page.getByText('Result by the server.').waitFor({ timeout: 60_000 });
  return page.locator('.result').innerText();
}
