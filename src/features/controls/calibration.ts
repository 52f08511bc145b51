/** The steps of a calibration, each from what the axis reported while the person did what was asked. */
import {
  type AxisBinding,
  type AxisControl,
  LEAST_TRAVEL,
  WIDEST_DEAD_ZONE,
  isLever,
} from '../../runner/input/device-axis.ts';
import { AXIS_WORDS } from './control-words.ts';

export const STEPS = ['rest', 'low', 'high', 'dead-zone', 'curve'] as const;
export type Step = (typeof STEPS)[number];

export function stepsOf(control: AxisControl): readonly Step[] {
  return isLever(control) ? ['low', 'high', 'dead-zone'] : STEPS;
}

export function stepTitle(step: Step, control: AxisControl): string {
  const [low, high] = AXIS_WORDS[control].ends;
  const titles: Record<Step, string> = {
    rest: 'Rest',
    low: isLever(control) ? 'Idle' : `Full ${low}`,
    high: isLever(control) ? 'Full' : `Full ${high}`,
    'dead-zone': isLever(control) ? 'End zones' : 'Dead zone',
    curve: 'Curve',
  };
  return titles[step];
}

export function stepRequest(step: Step, control: AxisControl): string {
  const hands = control === 'pedals' ? 'Take your feet off' : 'Let go';
  const [low, high] = AXIS_WORDS[control].ends;
  if (isLever(control)) {
    if (step === 'low') return 'Pull the lever back to idle and leave it there.';
    if (step === 'high') return 'Push the lever fully forward and leave it there.';
    return 'The end zones make idle and full reachable. A few per cent are enough.';
  }
  const requests: Record<Step, string> = {
    rest: `${hands} and wait a moment.`,
    low: `Move it fully ${low} and hold it there.`,
    high: `Move it fully ${high} and hold it there.`,
    'dead-zone': `${hands}. The dead zone should cover what still moves.`,
    curve: 'More curve is gentler about the centre; full travel stays full.',
  };
  return requests[step];
}

/** What one step has seen: readings of the last second or so, oldest first. */
export type Readings = readonly number[];

export interface Halfway {
  rest: number;
  /** Reading at the low command. */
  low: number | null;
}

const mean = (readings: Readings): number => readings.reduce((sum, x) => sum + x, 0) / readings.length;

/** Largest distance of the readings from their mean, as a share of half the travel. */
export function unrest(readings: Readings, binding: Pick<AxisBinding, 'low' | 'high'>): number {
  if (readings.length === 0) return 0;
  const middle = mean(readings);
  const half = (binding.high - binding.low) / 2;
  return Math.max(...readings.map((x) => Math.abs(x - middle))) / half;
}

/** A dead zone that covers what was seen at rest, with half as much again; at least 2 %. */
export function proposedDeadZone(atRest: number): number {
  return Math.min(WIDEST_DEAD_ZONE, Math.max(0.02, Math.ceil(atRest * 150) / 100));
}

export type Taken = { ok: true; binding: AxisBinding; halfway: Halfway } | { ok: false; problem: string };

/** The binding after a step; `halfway` carries the readings of the steps before. */
export function takeStep(
  step: Step,
  control: AxisControl,
  binding: AxisBinding,
  halfway: Halfway,
  readings: Readings,
): Taken {
  if (readings.length === 0) return { ok: false, problem: 'The device reports nothing. Move it or plug it in again.' };
  const here = mean(readings);
  if (step === 'rest') return { ok: true, binding, halfway: { rest: here, low: null } };
  if (step === 'low') {
    if (!isLever(control) && Math.abs(here - halfway.rest) < LEAST_TRAVEL)
      return {
        ok: false,
        problem: `It stands where it rested. Move it fully ${AXIS_WORDS[control].ends[0]} and hold it.`,
      };
    return { ok: true, binding, halfway: { ...halfway, low: here } };
  }
  if (step === 'high') {
    const other = halfway.low ?? binding.low;
    if (Math.abs(here - other) < 2 * LEAST_TRAVEL)
      return { ok: false, problem: 'Both ends read almost the same. Move it to the other end and hold it.' };
    const low = Math.min(other, here);
    const high = Math.max(other, here);
    const turned = here < other;
    const rest = isLever(control) ? (turned ? high : low) : halfway.rest;
    if (!isLever(control) && (rest - low < LEAST_TRAVEL / 2 || high - rest < LEAST_TRAVEL / 2))
      return { ok: false, problem: 'The rest is not between the two ends. Begin again with Rest.' };
    return { ok: true, binding: { ...binding, low, rest, high, turned }, halfway };
  }
  return { ok: true, binding, halfway };
}
