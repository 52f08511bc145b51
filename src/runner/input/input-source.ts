/** Anything that moves the pilot's axes: keyboard, pads, and devices read through the Gamepad API. */
import type { PilotAxes } from './pilot-axes.ts';

export interface InputSource {
  readonly id: string;
  readonly kind: 'keyboard' | 'pads' | 'device';
  /** Words for the pilot: "Keyboard", "Pads on the screen". */
  readonly name: string;
  /** Moves the axes over one tick of run time. Sources are asked in order; the last one that moves an axis has it. */
  stepInto(axes: PilotAxes, tickS: number): void;
  /** Lets go of everything: on freeze, blur and at the start. */
  release(): void;
  /** Called once a frame, running or frozen, before the ticks of the frame. */
  poll?(): void;
}
