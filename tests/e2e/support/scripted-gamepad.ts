/** A stick and pedals in the page, moved by the test: the Gamepad API answers with them as a browser would. */
import type { Page } from 'playwright-core';

export interface ScriptedDevice {
  id: string;
  axes: number[];
  buttons: number;
  mapping?: string;
}

/** Call before the first page is opened. */
export async function scriptDevices(page: Page, devices: readonly ScriptedDevice[]): Promise<void> {
  await page.addInitScript((given) => {
    const pads = given.map((device, index) => ({
      id: device.id,
      index,
      connected: true,
      mapping: device.mapping ?? '',
      timestamp: 0,
      axes: [...device.axes],
      buttons: Array.from({ length: device.buttons }, () => ({ pressed: false, touched: false, value: 0 })),
    }));
    globalThis.scriptedPads = pads;
    Object.defineProperty(navigator, 'getGamepads', { value: () => pads.map((pad) => (pad.connected ? pad : null)) });
  }, devices);
}

interface ScriptedPad {
  connected: boolean;
  axes: number[];
  buttons: { pressed: boolean; touched: boolean; value: number }[];
}
declare global {
  /** The devices of this page; set by {@link scriptDevices}. */
  var scriptedPads: ScriptedPad[];
}

export async function moveAxis(page: Page, device: number, axis: number, value: number): Promise<void> {
  await page.evaluate(
    ([device, axis, value]) => {
      globalThis.scriptedPads[device].axes[axis] = value;
    },
    [device, axis, value] as const,
  );
}

export async function pressButton(page: Page, device: number, button: number, forMs = 120): Promise<void> {
  await page.evaluate(
    ([device, button, forMs]) => {
      const held = globalThis.scriptedPads[device].buttons[button];
      Object.assign(held, { pressed: true, value: 1 });
      return new Promise<void>((done) =>
        setTimeout(() => {
          Object.assign(held, { pressed: false, value: 0 });
          setTimeout(done, 60);
        }, forMs),
      );
    },
    [device, button, forMs] as const,
  );
}

export async function unplug(page: Page, device: number): Promise<void> {
  await page.evaluate((device) => {
    globalThis.scriptedPads[device].connected = false;
    window.dispatchEvent(new Event('gamepaddisconnected'));
  }, device);
}
