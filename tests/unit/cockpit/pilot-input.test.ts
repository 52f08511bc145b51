import { describe, expect, it } from 'vitest';
import type { ControlSample } from '#shared/scenario/run-types.ts';
import { createKeyboardSource, DEFAULT_KEY_RATES } from '../../../src/runner/input/keyboard-source.ts';
import { createPadsSource } from '../../../src/runner/input/pads-source.ts';
import { axesOf, createPilotAxes, quantiseInto } from '../../../src/runner/input/pilot-axes.ts';

const TICK = 1 / 120;
const hold = (
  source: { stepInto(a: ReturnType<typeof createPilotAxes>, t: number): void },
  axes: ReturnType<typeof createPilotAxes>,
  seconds: number,
) => {
  for (let i = 0; i < Math.round(seconds / TICK); i += 1) source.stepInto(axes, TICK);
};

describe('keyboard', () => {
  it('a tap on a pedal key is a small correction and it stays', () => {
    const keys = createKeyboardSource(2);
    const axes = createPilotAxes([1, 1]);
    keys.press('KeyX');
    hold(keys, axes, 0.08);
    keys.lift('KeyX');
    const tapped = axes.pedal;
    expect(tapped).toBeGreaterThan(0.02);
    expect(tapped).toBeLessThan(0.09);
    hold(keys, axes, 2);
    expect(axes.pedal).toBe(tapped);
  });
  it('a held pedal key reaches full travel in about a second and stops there', () => {
    const keys = createKeyboardSource(2);
    const axes = createPilotAxes([1, 1]);
    keys.press('Period');
    hold(keys, axes, 0.5);
    expect(axes.pedal).toBeGreaterThan(0.4);
    expect(axes.pedal).toBeLessThan(0.75);
    hold(keys, axes, 1);
    expect(axes.pedal).toBe(1);
  });
  it('C brings the pedals to the centre; another pedal key takes over', () => {
    const keys = createKeyboardSource(2);
    const axes = createPilotAxes([1, 1]);
    axes.pedal = 0.8;
    keys.press('KeyC');
    keys.lift('KeyC');
    hold(keys, axes, 1);
    expect(axes.pedal).toBe(0);
  });
  it('the stick springs back to the centre', () => {
    const keys = createKeyboardSource(2);
    const axes = createPilotAxes([1, 1]);
    keys.press('ArrowLeft');
    hold(keys, axes, 0.4);
    expect(axes.stick).toBeLessThan(-0.3);
    keys.lift('ArrowLeft');
    hold(keys, axes, 1);
    expect(axes.stick).toBe(0);
  });
  it('pedals spring when the pilot prefers it', () => {
    const keys = createKeyboardSource(2, { ...DEFAULT_KEY_RATES, pedalsSpring: true });
    const axes = createPilotAxes([1, 1]);
    keys.press('KeyZ');
    hold(keys, axes, 0.5);
    expect(axes.pedal).toBeLessThan(-0.3);
    keys.lift('KeyZ');
    hold(keys, axes, 1);
    expect(axes.pedal).toBe(0);
  });
  it('digits choose one engine for levers and feather, 0 all', () => {
    const keys = createKeyboardSource(2);
    const axes = createPilotAxes([1, 1]);
    keys.press('Digit1');
    keys.press('PageDown');
    hold(keys, axes, 0.5);
    keys.lift('PageDown');
    expect(axes.levers[0]).toBeLessThan(0.75);
    expect(axes.levers[1]).toBe(1);
    keys.press('KeyF');
    hold(keys, axes, TICK);
    keys.lift('KeyF');
    expect([...axes.feather]).toEqual([1, 0]);
    keys.press('Digit8'); // no such engine
    expect(keys.engine).toBe(0);
    keys.press('Digit0');
    expect(keys.engine).toBeNull();
  });
  it('release lets go of everything that is held', () => {
    const keys = createKeyboardSource(2);
    const axes = createPilotAxes([1, 1]);
    keys.press('KeyX');
    hold(keys, axes, 0.1);
    keys.release();
    const before = axes.pedal;
    hold(keys, axes, 1);
    expect(axes.pedal).toBe(before);
  });
});

describe('pads', () => {
  it('move the axes no faster than a hand, the stick springs, the pedal stays', () => {
    const pads = createPadsSource({ returnPerS: () => 3, pedalsSpring: () => false });
    const axes = createPilotAxes([1, 1]);
    pads.stick({ roll: 1, pitch: 0 });
    pads.pedal(0.6);
    hold(pads, axes, TICK);
    expect(axes.stick).toBeCloseTo(6 * TICK, 9);
    hold(pads, axes, 0.5);
    expect([axes.stick, axes.pedal]).toEqual([1, 0.6]);
    pads.stick(null);
    pads.pedal(null);
    hold(pads, axes, 1);
    expect([axes.stick, axes.pedal]).toEqual([0, 0.6]);
  });
});

describe('quantising', () => {
  it('gives integers in range and comes back within half a step', () => {
    const axes = createPilotAxes([0.5, 2]);
    axes.stick = 0.123456;
    axes.pedal = -3;
    axes.pitch = Number.NaN;
    const sample: ControlSample = {
      stick: 0,
      pedal: 0,
      pitch: 0,
      rudderTrim: 0,
      levers: new Int16Array(2),
      feather: new Uint8Array(2),
    };
    quantiseInto(sample, axes);
    expect(sample.pedal).toBe(-32767);
    expect(sample.pitch).toBe(0);
    expect([...sample.levers]).toEqual([16384, 32767]);
    expect(Math.abs(axesOf(sample).stick - axes.stick)).toBeLessThanOrEqual(0.5 / 32767);
  });
});
