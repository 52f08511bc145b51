/** Inputs, shapes and outputs of the responses, with their names and the units of the input's size. */
import type { Dimension } from '#shared/units/quantity.ts';
import type { BenchState } from './bench-state.ts';

export const INPUTS = [
  { value: 'rudder', text: 'Rudder' },
  { value: 'aileron', text: 'Aileron' },
  { value: 'side-gust', text: 'Side gust' },
  { value: 'yaw-gust', text: 'Yaw gust' },
  { value: 'roll-gust', text: 'Roll gust' },
] as const;
export const SHAPES = [
  { value: 'step', text: 'Step' },
  { value: 'pulse', text: 'Pulse' },
  { value: 'doublet', text: 'Doublet' },
  { value: 'one-minus-cosine', text: '1 − cosine' },
] as const;
export const OUTPUTS = [
  { value: 'beta', text: 'Sideslip' },
  { value: 'p', text: 'Roll rate' },
  { value: 'r', text: 'Yaw rate' },
  { value: 'phi', text: 'Bank' },
] as const;

export const inputName = (input: BenchState['input']): string => INPUTS.find((i) => i.value === input)?.text ?? '';

/** Dimension of the size of an input, and the unit in which the state holds it. */
export function inputSize(input: BenchState['input']): { dimension: Dimension; unit: string } {
  if (input === 'side-gust') return { dimension: 'speed', unit: 'm/s' };
  if (input === 'yaw-gust' || input === 'roll-gust') return { dimension: 'angular-rate', unit: 'deg/s' };
  return { dimension: 'angle', unit: 'deg' };
}

/** What a decibel is of: both parts in SI, angles in rad. */
export function decibelOf(input: BenchState['input'], output: BenchState['output']): string {
  const above = output === 'p' || output === 'r' ? 'rad/s' : 'rad';
  const below = input === 'side-gust' ? 'm/s' : input === 'yaw-gust' || input === 'roll-gust' ? 'rad/s' : 'rad';
  return above === below ? 'dB' : `dB, 1 ${above} per ${below}`;
}
