/** The pads drawn on the screen: the stick square springs back when let go, the pedals stay. */
import type { InputSource } from './input-source.ts';
import { type PilotAxes, bound } from './pilot-axes.ts';

export interface PadsSource extends InputSource {
  readonly kind: 'pads';
  stick(position: { roll: number; pitch: number } | null): void;
  pedal(position: number | null): void;
  lever(engine: number, value: number): void;
  feather(engine: number, on: boolean): void;
}

/** Hands and feet need time: full deflections per second that a pad can move an axis. */
export const PAD_RATE_PER_S = 6;

export function createPadsSource(options: { returnPerS: () => number; pedalsSpring: () => boolean }): PadsSource {
  let stick: { roll: number; pitch: number } | null = null;
  let stickReturning = false;
  let pedal: number | null = null;
  let pedalReturning = false;
  const levers = new Map<number, number>();
  const feathers = new Map<number, boolean>();
  const toward = (value: number, target: number, step: number): number =>
    Math.abs(value - target) <= step ? target : value + Math.sign(target - value) * step;

  return {
    id: 'pads',
    kind: 'pads',
    name: 'Pads on the screen',
    stick(position) {
      stickReturning = position === null && stick !== null;
      stick = position;
    },
    pedal(position) {
      pedalReturning = position === null && pedal !== null && options.pedalsSpring();
      pedal = position;
    },
    lever(engine, value) {
      levers.set(engine, value);
    },
    feather(engine, on) {
      feathers.set(engine, on);
    },
    stepInto(axes: PilotAxes, tickS: number) {
      const step = PAD_RATE_PER_S * tickS;
      if (stick) {
        axes.stick = toward(axes.stick, bound(stick.roll, -1, 1), step);
        axes.pitch = toward(axes.pitch, bound(stick.pitch, -1, 1), step);
      } else if (stickReturning) {
        axes.stick = toward(axes.stick, 0, options.returnPerS() * tickS);
        axes.pitch = toward(axes.pitch, 0, options.returnPerS() * tickS);
        if (axes.stick === 0 && axes.pitch === 0) stickReturning = false;
      }
      if (pedal !== null) axes.pedal = toward(axes.pedal, bound(pedal, -1, 1), step);
      else if (pedalReturning) {
        axes.pedal = toward(axes.pedal, 0, options.returnPerS() * tickS);
        if (axes.pedal === 0) pedalReturning = false;
      }
      for (const [engine, value] of levers) if (engine < axes.levers.length) axes.levers[engine] = bound(value, 0, 1);
      for (const [engine, on] of feathers) if (engine < axes.feather.length) axes.feather[engine] = on ? 1 : 0;
      levers.clear();
      feathers.clear();
    },
    release() {
      stickReturning = stick !== null || stickReturning;
      stick = null;
      pedal = null;
      levers.clear();
      feathers.clear();
    },
  };
}
