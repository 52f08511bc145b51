/** Devices as the browser's Gamepad API reports them, made safe to read: finite numbers, a key for each device. */

export interface GamepadLike {
  readonly id: string;
  readonly connected: boolean;
  readonly mapping: string;
  readonly axes: readonly number[];
  readonly buttons: readonly { readonly pressed: boolean; readonly value: number }[];
}

export interface DeviceReading {
  /** The device's own name; a second one of the same name has a number behind it. */
  readonly key: string;
  /** Name for people: without the makers' numbers that some browsers add. */
  readonly name: string;
  readonly mapping: string;
  readonly axes: readonly number[];
  readonly buttons: readonly { readonly pressed: boolean; readonly value: number }[];
}

/** "Pedals (Vendor: 1234 Product: abcd)" and "1234-abcd-Pedals" both read "Pedals". */
export function deviceName(id: string): string {
  const plain = id
    .replace(/\((?:[^()]*\bvendor:|standard gamepad)[^()]*\)/gi, '')
    .replace(/^[0-9a-f]{3,4}-[0-9a-f]{3,4}-/i, '')
    .replace(/\s+/g, ' ')
    .trim();
  return plain === '' ? 'Unnamed device' : plain;
}

const finite = (value: number): number => (Number.isFinite(value) ? value : 0);

export function readDevices(pads: readonly (GamepadLike | null)[]): DeviceReading[] {
  const seen = new Map<string, number>();
  const devices: DeviceReading[] = [];
  for (const pad of pads) {
    if (!pad?.connected) continue;
    const count = (seen.get(pad.id) ?? 0) + 1;
    seen.set(pad.id, count);
    const number = count === 1 ? '' : ` ${count}`;
    devices.push({
      key: `${pad.id}${number}`,
      name: `${deviceName(pad.id)}${number}`,
      mapping: pad.mapping,
      axes: pad.axes.map(finite),
      buttons: pad.buttons.map(({ pressed, value }) => ({ pressed, value: finite(value) })),
    });
  }
  return devices;
}

/** The devices that this browser shows now; none where it has no Gamepad API or forbids it. */
export function devicesOf(navigator: { getGamepads?: () => readonly (GamepadLike | null)[] }): DeviceReading[] {
  try {
    return readDevices(navigator.getGamepads?.() ?? []);
  } catch {
    return [];
  }
}

export function rawOf(device: DeviceReading, source: 'axis' | 'button', index: number): number {
  return source === 'axis' ? (device.axes[index] ?? 0) : (device.buttons[index]?.value ?? 0);
}
