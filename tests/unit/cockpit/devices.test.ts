/** Sticks, pedals and levers: from readings to commands, who has an axis, what is assigned, and going away. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  type AxisBinding,
  axisBindingSchema,
  commandOf,
  leverShaped,
  plainBinding,
  shaped,
  travelOf,
} from '../../../src/runner/input/device-axis.ts';
import {
  type ControlsProfile,
  STANDARD_PROFILE,
  assignments,
  controlsProfileSchema,
  sharedAxes,
  withAxis,
  withButton,
} from '../../../src/runner/input/device-profile.ts';
import {
  type GamepadLike,
  deviceName,
  devicesOf,
  readDevices,
  rawOf,
} from '../../../src/runner/input/device-reading.ts';
import { createDeviceSource } from '../../../src/runner/input/device-source.ts';
import { TRIM_PER_S, createPilotAxes } from '../../../src/runner/input/pilot-axes.ts';

const SEED = 20261201;
const TICK_S = 1 / 120;

function pad(id: string, axes: number[], pressed: number[] = [], mapping = ''): GamepadLike {
  const buttons = Array.from({ length: 16 }, (_, i) => ({
    pressed: pressed.includes(i),
    value: pressed.includes(i) ? 1 : 0,
  }));
  return { id, connected: true, mapping, axes, buttons };
}

describe('an axis of a device', () => {
  const shape = fc.record({
    deadZone: fc.double({ min: 0, max: 0.4, noNaN: true }),
    curve: fc.double({ min: 0, max: 1, noNaN: true }),
  });
  const unit = fc.double({ min: -1, max: 1, noNaN: true });

  it('is odd, reaches both ends, commands nothing in its dead zone and never falls', () => {
    fc.assert(
      fc.property(shape, unit, unit, (binding, a, b) => {
        expect(shaped(-a, binding)).toBeCloseTo(-shaped(a, binding), 12);
        expect(shaped(1, binding)).toBeCloseTo(1, 12);
        expect(shaped(a * binding.deadZone, binding)).toBe(0);
        if (a < b) expect(shaped(a, binding)).toBeLessThanOrEqual(shaped(b, binding) + 1e-12);
      }),
      { seed: SEED },
    );
  });

  it('has no step at the edge of the dead zone', () => {
    const binding = { deadZone: 0.1, curve: 0.3 };
    expect(shaped(0.1 + 1e-6, binding)).toBeLessThan(1e-5);
  });

  it('is gentler about the centre with a curve, and the same at the ends', () => {
    expect(shaped(0.5, { deadZone: 0, curve: 1 })).toBeCloseTo(0.125, 12); // computed: 0.5³
    expect(shaped(0.5, { deadZone: 0, curve: 0 })).toBeCloseTo(0.5, 12);
  });

  it('uses each side of an uneven rest in full, and turns', () => {
    const binding: AxisBinding = { ...plainBinding('axis', 0, 'pedals'), low: -0.8, rest: 0.2, high: 0.9, deadZone: 0 };
    expect(travelOf(binding, -0.8, 'pedals')).toBe(-1);
    expect(travelOf(binding, 0.2, 'pedals')).toBe(0);
    expect(travelOf(binding, 0.9, 'pedals')).toBe(1);
    expect(travelOf(binding, 2, 'pedals')).toBe(1);
    expect(travelOf({ ...binding, turned: true }, 0.9, 'pedals')).toBe(-1);
  });

  it('makes both ends of a lever reachable', () => {
    expect(leverShaped(0.01, { deadZone: 0.02 })).toBe(0);
    expect(leverShaped(0.99, { deadZone: 0.02 })).toBe(1);
    const lever = plainBinding('axis', 2, 'lever-1');
    // Most levers report −1 at full: common practice.
    expect(commandOf(lever, -1, 'lever-1')).toBe(1);
    expect(commandOf(lever, 1, 'lever-1')).toBe(0);
  });

  it('is refused when its ends are the wrong way round or too near', () => {
    const good = plainBinding('axis', 0, 'roll');
    expect(axisBindingSchema.safeParse(good).success).toBe(true);
    expect(axisBindingSchema.safeParse({ ...good, low: 1, high: -1 }).success).toBe(false);
    expect(axisBindingSchema.safeParse({ ...good, low: 0, high: 0.05 }).success).toBe(false);
    expect(axisBindingSchema.safeParse({ ...good, rest: Number.NaN }).success).toBe(false);
  });
});

describe('devices as the browser reports them', () => {
  it('are named without the makers’ numbers', () => {
    expect(deviceName('Rudder pedals (Vendor: 1234 Product: abcd)')).toBe('Rudder pedals');
    expect(deviceName('1234-abcd-Rudder pedals')).toBe('Rudder pedals');
    expect(deviceName('(STANDARD GAMEPAD Vendor: 1 Product: 2)')).toBe('Unnamed device');
  });

  it('keep two of the same name apart and leave out what is not there', () => {
    const devices = readDevices([pad('Lever', [0]), null, { ...pad('Gone', []), connected: false }, pad('Lever', [1])]);
    expect(devices.map(({ key }) => key)).toEqual(['Lever', 'Lever 2']);
  });

  it('read as rest where an axis is not a number or not there', () => {
    const [device] = readDevices([pad('Stick', [Number.NaN, 0.5])]);
    expect([rawOf(device, 'axis', 0), rawOf(device, 'axis', 1), rawOf(device, 'axis', 9)]).toEqual([0, 0.5, 0]);
  });

  it('are none where the browser forbids them', () => {
    const forbidding = {
      getGamepads: () => {
        throw new DOMException('not allowed', 'SecurityError');
      },
    };
    expect(devicesOf(forbidding)).toEqual([]);
    expect(devicesOf({})).toEqual([]);
  });
});

describe('assignments', () => {
  it('of a standard gamepad are there at once; those of any other device are made', () => {
    const devices = readDevices([pad('Pad', [0, 0, 0, 0], [], 'standard'), pad('Pedals', [0, 0, 0])]);
    const inForce = assignments(STANDARD_PROFILE, devices);
    expect(inForce.axes.map(({ control, device }) => `${control} ${device.name}`)).toEqual([
      'pedals Pad',
      'roll Pad',
      'pitch Pad',
    ]);
  });

  it('go to one device, and stay with a device that is away', () => {
    const devices = readDevices([pad('Pad', [0, 0, 0, 0], [], 'standard'), pad('Pedals', [0, 0, 0])]);
    const binding = plainBinding('axis', 2, 'pedals');
    const profile = withAxis(STANDARD_PROFILE, devices, 'pedals', { key: 'Pedals', binding });
    expect(assignments(profile, devices).axes.find(({ control }) => control === 'pedals')?.device.name).toBe('Pedals');
    expect(controlsProfileSchema.parse(JSON.parse(JSON.stringify(profile)))).toEqual(profile);
    const without = readDevices([pad('Pad', [0, 0, 0, 0], [], 'standard')]);
    expect(assignments(profile, without).axes.some(({ control }) => control === 'pedals')).toBe(false);
    const later = withButton(profile, without, 'freeze', { key: 'Pad', button: 5 });
    expect(assignments(later, devices).axes.find(({ control }) => control === 'pedals')?.device.name).toBe('Pedals');
  });

  it('of one axis to two controls are noticed', () => {
    const devices = readDevices([pad('Quadrant', [0, 0])]);
    const lever = (control: 'lever-1' | 'lever-2') => plainBinding('axis', 1, control);
    const one = withAxis(STANDARD_PROFILE, devices, 'lever-1', { key: 'Quadrant', binding: lever('lever-1') });
    const both = withAxis(one, devices, 'lever-2', { key: 'Quadrant', binding: lever('lever-2') });
    expect(sharedAxes(assignments(both, devices).axes)).toEqual([['lever-1', 'lever-2']]);
  });
});

describe('a device in flight', () => {
  function cockpit(profile: ControlsProfile, first: GamepadLike[]) {
    let pads = first;
    const pressed: string[] = [];
    const gone: string[] = [];
    const source = createDeviceSource({
      devices: () => readDevices(pads),
      profile: () => profile,
      engineCount: 2,
      pressed: (control) => pressed.push(control),
    });
    source.onGone((name) => gone.push(name));
    const axes = createPilotAxes([1, 1]);
    const frame = (next: GamepadLike[], ticks = 2): void => {
      pads = next;
      source.poll?.();
      for (let i = 0; i < ticks; i += 1) source.stepInto(axes, TICK_S);
    };
    frame(first);
    return { axes, frame, pressed, gone };
  }
  const standard = (axes: number[], pressed: number[] = []): GamepadLike[] => [pad('Pad', axes, pressed, 'standard')];

  it('moves the controls once it moves, not by where it stands at the start', () => {
    const { axes, frame } = cockpit(STANDARD_PROFILE, standard([0.5, 0, -0.4, 0]));
    expect([axes.stick, axes.pedal]).toEqual([0, 0]);
    frame(standard([0.6, 0, -0.4, 0]));
    expect(axes.stick).toBeCloseTo((0.6 - 0.04) / 0.96, 9); // computed: dead zone 4 %, straight
    expect(axes.pedal).toBe(0);
  });

  it('that jitters takes nothing from the keyboard, and gives an axis back that the keyboard moves', () => {
    const { axes, frame } = cockpit(STANDARD_PROFILE, standard([0.2, 0, 0, 0]));
    axes.stick = -0.3; // the keyboard's
    for (let i = 0; i < 50; i += 1) frame(standard([0.2 + (i % 2 === 0 ? 0.008 : -0.008), 0, 0, 0]));
    expect(axes.stick).toBe(-0.3);
    frame(standard([0.5, 0, 0, 0]));
    expect(axes.stick).toBeGreaterThan(0.4);
    axes.stick = -0.1; // the keyboard again
    frame(standard([0.5, 0, 0, 0]));
    expect(axes.stick).toBe(-0.1);
  });

  it('moves all levers, or one lever, and leaves the others alone', () => {
    const quadrant = (one: number, all: number): GamepadLike[] => [pad('Quadrant', [one, all])];
    const devices = readDevices(quadrant(1, 1));
    const one = plainBinding('axis', 0, 'lever-2');
    const profile = withAxis(STANDARD_PROFILE, devices, 'lever-2', { key: 'Quadrant', binding: one });
    const single = cockpit(profile, quadrant(-1, 1));
    single.frame(quadrant(0, 1));
    expect(Array.from(single.axes.levers)).toEqual([1, 0.5]);
    const all = plainBinding('axis', 1, 'levers');
    const both = cockpit(
      withAxis(STANDARD_PROFILE, devices, 'levers', { key: 'Quadrant', binding: all }),
      quadrant(1, -1),
    );
    both.frame(quadrant(1, 0));
    expect(Array.from(both.axes.levers)).toEqual([0.5, 0.5]);
    both.axes.levers[1] = 0; // a key closes one
    both.frame(quadrant(1, 0));
    expect(Array.from(both.axes.levers)).toEqual([0.5, 0]);
  });

  it('presses once for each press, not for a button that is down at the start, and trims while held', () => {
    const { axes, frame, pressed } = cockpit(STANDARD_PROFILE, standard([0, 0, 0, 0], [9]));
    frame(standard([0, 0, 0, 0], [9]));
    expect(pressed).toEqual([]);
    frame(standard([0, 0, 0, 0]));
    frame(standard([0, 0, 0, 0], [9, 3]));
    frame(standard([0, 0, 0, 0], [9, 3]));
    expect(pressed).toEqual(['freeze', 'view']);
    frame(standard([0, 0, 0, 0], [15]), 120);
    expect(axes.rudderTrim).toBeCloseTo(TRIM_PER_S, 9);
  });

  it('that goes away says so once by name, and its stick springs back while the pedals stay', () => {
    const { axes, frame, gone } = cockpit(STANDARD_PROFILE, standard([0, 0, 0, 0]));
    frame(standard([0.8, 0, 0.9, 0]));
    frame([], 240);
    frame([], 1);
    expect(gone).toEqual(['Pad']);
    expect(axes.stick).toBe(0);
    expect(axes.pedal).toBeGreaterThan(0.8);
  });
});
