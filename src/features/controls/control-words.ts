import type { AxisControl } from '../../runner/input/device-axis.ts';
import { isLever } from '../../runner/input/device-axis.ts';
import type { ButtonControl } from '../../runner/input/device-profile.ts';

export interface AxisWords {
  name: string;
  /** What the two ends do, low command first. */
  ends: readonly [string, string];
  /** Letters behind a percentage, low command first. */
  marks: readonly [string, string];
}

const LEVER_ENDS = { ends: ['idle', 'full'], marks: [' %', ' %'] } as const;
export const AXIS_WORDS: Readonly<Record<AxisControl, AxisWords>> = {
  pedals: { name: 'Pedals', ends: ['left', 'right'], marks: ['L', 'R'] },
  roll: { name: 'Stick, roll', ends: ['left', 'right'], marks: ['L', 'R'] },
  pitch: { name: 'Stick, pitch', ends: ['nose down', 'nose up'], marks: ['↓', '↑'] },
  levers: { name: 'All levers', ...LEVER_ENDS },
  'lever-1': { name: 'Lever 1', ...LEVER_ENDS },
  'lever-2': { name: 'Lever 2', ...LEVER_ENDS },
  'lever-3': { name: 'Lever 3', ...LEVER_ENDS },
  'lever-4': { name: 'Lever 4', ...LEVER_ENDS },
};

export const BUTTON_WORDS: Readonly<Record<ButtonControl, { name: string; does: string }>> = {
  freeze: { name: 'Freeze', does: 'freezes' },
  view: { name: 'Next view', does: 'changes the view' },
  'trim-left': { name: 'Trim left', does: 'trims the rudder left' },
  'trim-right': { name: 'Trim right', does: 'trims the rudder right' },
};

/** "62R", "7↑", "33 %": a command as the bars show it. */
export function commandText(control: AxisControl, command: number): string {
  const percent = Math.round(Math.abs(command) * 100);
  const [low, high] = AXIS_WORDS[control].marks;
  if (isLever(control)) return `${percent}${high}`;
  if (percent === 0) return '0';
  return `${percent}${command < 0 ? low : high}`;
}

/** "Rudder pedals, axis 2". */
export function placeText(device: string, source: 'axis' | 'button', index: number): string {
  return `${device}, ${source} ${index}`;
}
