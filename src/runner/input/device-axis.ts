/** From what a device reports to what the pilot commands: ends, rest, direction, dead zone and curve of one axis. */
import { z } from 'zod';
import { bound } from './pilot-axes.ts';

export const AXIS_CONTROLS = ['pedals', 'roll', 'pitch', 'levers', 'lever-1', 'lever-2', 'lever-3', 'lever-4'] as const;
export type AxisControl = (typeof AXIS_CONTROLS)[number];

/** Levers move from one end to the other; the rest spring about a centre. */
export function isLever(control: AxisControl): boolean {
  return control.startsWith('lever');
}

/** Widest dead zone on each side of the centre, and the least travel that a calibration must find. */
export const WIDEST_DEAD_ZONE = 0.4;
export const LEAST_TRAVEL = 0.1;

const reading = z.number().min(-2).max(2);
export const axisBindingSchema = z
  .object({
    /** An axis of the device, or a button that reports how far it is pressed. */
    source: z.enum(['axis', 'button']),
    index: z.int().min(0).max(127),
    /** Readings at the two ends and at rest; `low` is the smaller. */
    low: reading,
    rest: reading,
    high: reading,
    turned: z.boolean(),
    /** Share of half the travel around the rest that commands nothing; for levers, of the travel at either end. */
    deadZone: z.number().min(0).max(WIDEST_DEAD_ZONE),
    /** 0 straight … 1 cubic: gentle about the centre, the same at the ends. */
    curve: z.number().min(0).max(1),
  })
  .refine(({ low, rest, high }) => low <= rest && rest <= high && high - low >= LEAST_TRAVEL);
export type AxisBinding = z.infer<typeof axisBindingSchema>;

/** A binding over the whole range that the Gamepad API reports: −1 … 1 for an axis, 0 … 1 for a button. */
export function plainBinding(source: AxisBinding['source'], index: number, control: AxisControl): AxisBinding {
  const low = source === 'axis' ? -1 : 0;
  // Levers of most devices report −1 when pushed forward; a pressed trigger reports 1.
  const turned = isLever(control) && source === 'axis';
  const rest = isLever(control) || source === 'button' ? low : 0;
  return { source, index, low, rest, high: 1, turned, deadZone: isLever(control) ? 0.02 : 0.04, curve: 0 };
}

/** Share of the travel, −1 … 1 about the rest (levers 0 … 1), before dead zone and curve; `turned` applied. */
export function travelOf(binding: AxisBinding, raw: number, control: AxisControl): number {
  const { low, rest, high, turned } = binding;
  if (isLever(control)) {
    const share = bound((raw - low) / (high - low), 0, 1);
    return turned ? 1 - share : share;
  }
  const side = raw < rest ? rest - low : high - rest;
  const share = side <= 0 ? 0 : bound((raw - rest) / side, -1, 1);
  return turned ? -share : share;
}

/** What a travel commands: nothing within the dead zone, full at the ends, rising without a step between. */
export function shaped(travel: number, { deadZone, curve }: Pick<AxisBinding, 'deadZone' | 'curve'>): number {
  const size = Math.abs(travel);
  if (size <= deadZone) return 0;
  const x = bound((size - deadZone) / (1 - deadZone), 0, 1);
  return Math.sign(travel) * ((1 - curve) * x + curve * x * x * x);
}

/** A lever's command, 0 … 1: the dead zone makes both ends reachable. */
export function leverShaped(travel: number, { deadZone }: Pick<AxisBinding, 'deadZone'>): number {
  return bound((travel - deadZone) / (1 - 2 * deadZone), 0, 1);
}

/** What the pilot commands with a reading: −1 … 1, right and nose up positive; levers 0 … 1. */
export function commandOf(binding: AxisBinding, raw: number, control: AxisControl): number {
  const travel = travelOf(binding, raw, control);
  return isLever(control) ? leverShaped(travel, binding) : shaped(travel, binding);
}
