/** Which part of which device a person has just moved, against how everything stood when the question was asked. */
import type { DeviceReading } from '../../runner/input/device-reading.ts';

export interface MovedPart {
  key: string;
  source: 'axis' | 'button';
  index: number;
  /** Reading before it was moved. */
  before: number;
}

/** Far enough that neither jitter nor a knock on the table counts. */
const AXIS_MOVE = 0.5;
const BUTTON_MOVE = 0.6;

/** The part that moved furthest since `before`; null when none has moved far enough. A device plugged in meanwhile counts from its first reading. */
export function movedPart(
  before: readonly DeviceReading[],
  now: readonly DeviceReading[],
  wanted: 'axis' | 'button',
): MovedPart | null {
  let found: MovedPart | null = null;
  let furthest = 0;
  const consider = (key: string, source: MovedPart['source'], index: number, from: number, share: number): void => {
    if (share < 1 || share <= furthest) return;
    furthest = share;
    found = { key, source, index, before: from };
  };
  for (const device of now) {
    const earlier = before.find(({ key }) => key === device.key);
    if (!earlier) continue;
    device.buttons.forEach(({ value, pressed }, index) => {
      const from = earlier.buttons[index]?.value ?? 0;
      if (wanted === 'button') {
        if (pressed && !earlier.buttons[index]?.pressed) consider(device.key, 'button', index, from, 1);
      } else if (value > 0 && value < 1) {
        // A button counts as an axis only while it reports how far it is pressed.
        consider(device.key, 'button', index, from, (value - from) / BUTTON_MOVE);
      }
    });
    if (wanted === 'axis')
      device.axes.forEach((value, index) => {
        const from = earlier.axes[index] ?? 0;
        consider(device.key, 'axis', index, from, Math.abs(value - from) / AXIS_MOVE);
      });
  }
  return found;
}
