/** What the pilot holds, before it is quantised: one set of axes that every input source moves. */
import type { ControlSample } from '#shared/scenario/run-types.ts';

export interface PilotAxes {
  /** −1 … 1, right positive. */
  stick: number;
  pedal: number;
  /** Nose up positive; read only when the scenario hands pitch over. */
  pitch: number;
  rudderTrim: number;
  /** 0 … 1 per engine. */
  levers: Float64Array;
  feather: Uint8Array;
}

/** Rudder trim moves this share of full travel per second while its key or button is held. */
export const TRIM_PER_S = 0.12;

const FULL = 32767;

export function createPilotAxes(levers: ArrayLike<number>): PilotAxes {
  return {
    stick: 0,
    pedal: 0,
    pitch: 0,
    rudderTrim: 0,
    levers: Float64Array.from(levers),
    feather: new Uint8Array(levers.length),
  };
}

export const bound = (value: number, low: number, high: number): number =>
  Number.isFinite(value) ? Math.max(low, Math.min(high, value)) : 0;

const quantise = (value: number, low: number): number => Math.round(bound(value, low, 1) * FULL);

/** Writes the axes into a sample as integers: what is recorded is what is flown. */
export function quantiseInto(out: ControlSample, axes: PilotAxes): void {
  out.stick = quantise(axes.stick, -1);
  out.pedal = quantise(axes.pedal, -1);
  out.pitch = quantise(axes.pitch, -1);
  out.rudderTrim = quantise(axes.rudderTrim, -1);
  for (let i = 0; i < out.levers.length; i += 1) {
    out.levers[i] = quantise(axes.levers[i], 0);
    out.feather[i] = axes.feather[i] ? 1 : 0;
  }
}

/** Puts the axes where a sample holds them. */
export function axesInto(axes: PilotAxes, sample: ControlSample): void {
  for (let i = 0; i < axes.levers.length; i += 1) axes.levers[i] = sample.levers[i] / FULL;
  axes.stick = sample.stick / FULL;
  axes.pedal = sample.pedal / FULL;
  axes.pitch = sample.pitch / FULL;
  axes.rudderTrim = sample.rudderTrim / FULL;
  axes.feather.set(sample.feather);
}

/** Axes of a sample, for a start from what is held already. */
export function axesOf(sample: ControlSample): PilotAxes {
  const axes = createPilotAxes(Array.from(sample.levers));
  axesInto(axes, sample);
  return axes;
}
