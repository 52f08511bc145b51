/** Inputs that `input` events add to the pilot's: step, pulse, doublet, ramp. */
import { ticksOf } from './measures/measure.ts';
import type { ScenarioEvent } from './scenario-format.ts';

type InputEvent = Extract<ScenarioEvent, { kind: 'input' }>;

export interface ScriptedInput {
  axis: 'pedal' | 'stick';
  shape: InputEvent['shape'];
  amplitude: number;
  startTick: number;
  lengthTicks: number;
}

export function scriptedInput(event: InputEvent, tick: number): ScriptedInput {
  const { axis, shape, amplitude } = event;
  return { axis, shape, amplitude, startTick: tick, lengthTicks: Math.max(1, ticksOf(event.duration_s ?? 0)) };
}

/** Share of travel that a scripted input adds in a tick. */
export function scriptedAt(input: ScriptedInput, tick: number): number {
  const gone = tick - input.startTick;
  if (gone < 0) return 0;
  switch (input.shape) {
    case 'step':
      return input.amplitude;
    case 'pulse':
      return gone < input.lengthTicks ? input.amplitude : 0;
    case 'doublet':
      return gone < input.lengthTicks ? input.amplitude : gone < 2 * input.lengthTicks ? -input.amplitude : 0;
    case 'ramp':
      return input.amplitude * Math.min(1, gone / input.lengthTicks);
  }
}
