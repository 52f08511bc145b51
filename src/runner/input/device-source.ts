/**
 * Sticks, yokes, pedals and levers as controls. Devices are read once a frame; an axis is the device's as soon as the
 * device moves it, and another source's as soon as that one does, so that a stick at rest never fights the keyboard.
 */
import { type AxisControl, commandOf } from './device-axis.ts';
import { type AxisAssignment, type ButtonControl, type ControlsProfile, assignments } from './device-profile.ts';
import { type DeviceReading, rawOf } from './device-reading.ts';
import type { InputSource } from './input-source.ts';
import { type PilotAxes, TRIM_PER_S, bound } from './pilot-axes.ts';

/** A device takes an axis over when its command moves by more than this; smaller is jitter. */
export const TAKE_OVER = 0.02;
/** A stick whose device went away springs back; full deflections per second. */
const LEFT_ALONE_PER_S = 3;

export interface DeviceSourceSetup {
  devices: () => DeviceReading[];
  profile: () => ControlsProfile;
  engineCount: number;
  /** Buttons other than the trim, on being pressed. */
  pressed: (control: ButtonControl) => void;
}

export interface DeviceSource extends InputSource {
  readonly kind: 'device';
  onGone(callback: (name: string) => void): () => void;
}

interface Held {
  /** Command when the device last had or took the axis. */
  last: number;
  owns: boolean;
  /** Value this source wrote last; another one there means that another source has moved it. */
  wrote: number;
}

export function createDeviceSource(setup: DeviceSourceSetup): DeviceSource {
  let axes: AxisAssignment[] = [];
  const held = new Map<AxisControl, Held>();
  const down = new Set<ButtonControl>();
  /** Devices whose controls are assigned, by key, with the name for words. */
  let known = new Map<string, string>();
  const gone = new Set<(name: string) => void>();
  const returning = new Set<'stick' | 'pitch'>();
  let first = true;
  /** Command of the lever for all engines that was given last, so that one engine's own key is not undone. */
  let allLevers: number | null = null;

  function noticeMissing(devices: readonly DeviceReading[]): void {
    for (const [key, name] of known) {
      if (devices.some((device) => device.key === key)) continue;
      if (held.get('roll')?.owns) returning.add('stick');
      if (held.get('pitch')?.owns) returning.add('pitch');
      for (const tell of gone) tell(name);
    }
  }

  function poll(): void {
    const devices = setup.devices();
    const inForce = assignments(setup.profile(), devices);
    noticeMissing(devices);
    axes = inForce.axes;
    for (const control of held.keys()) if (!axes.some((axis) => axis.control === control)) held.delete(control);
    known = new Map([...inForce.axes, ...inForce.buttons].map(({ device }) => [device.key, device.name]));
    const now = new Set<ButtonControl>();
    for (const { control, device, button } of inForce.buttons) if (device.buttons[button]?.pressed) now.add(control);
    // A button that is down when the flight begins was not pressed for it.
    if (!first)
      for (const control of now) if (!down.has(control) && !control.startsWith('trim')) setup.pressed(control);
    first = false;
    down.clear();
    for (const control of now) down.add(control);
  }

  /** The value that an axis takes, given the one it has. */
  function moved(control: AxisControl, value: number, present: number): number {
    const state = held.get(control);
    if (!state) {
      held.set(control, { last: value, owns: false, wrote: present });
      return present;
    }
    if (state.owns && Math.abs(present - state.wrote) > 1e-9) {
      state.owns = false;
      state.last = value;
    }
    if (!state.owns && Math.abs(value - state.last) > TAKE_OVER) state.owns = true;
    if (!state.owns) return present;
    state.last = value;
    state.wrote = value;
    return value;
  }

  function springBack(value: number, which: 'stick' | 'pitch', tickS: number): number {
    if (!returning.has(which)) return value;
    const step = LEFT_ALONE_PER_S * tickS;
    const next = Math.abs(value) <= step ? 0 : value - Math.sign(value) * step;
    if (next === 0) returning.delete(which);
    return next;
  }

  return {
    id: 'device',
    kind: 'device',
    name: 'Devices',
    poll,
    stepInto(pilot: PilotAxes, tickS: number) {
      pilot.stick = springBack(pilot.stick, 'stick', tickS);
      pilot.pitch = springBack(pilot.pitch, 'pitch', tickS);
      for (const { control, device, binding } of axes) {
        const value = commandOf(binding, rawOf(device, binding.source, binding.index), control);
        if (control === 'roll') pilot.stick = moved(control, value, pilot.stick);
        else if (control === 'pitch') pilot.pitch = moved(control, value, pilot.pitch);
        else if (control === 'pedals') pilot.pedal = moved(control, value, pilot.pedal);
        else if (control === 'levers') {
          const before = held.get(control)?.last ?? value;
          if (allLevers === null && Math.abs(value - before) > TAKE_OVER) allLevers = before;
          if (allLevers === null) held.set(control, { last: before, owns: false, wrote: before });
          else if (value !== allLevers) {
            pilot.levers.fill(value);
            allLevers = value;
          }
        } else {
          const engine = Number(control.slice('lever-'.length)) - 1;
          if (engine < setup.engineCount) pilot.levers[engine] = moved(control, value, pilot.levers[engine]);
        }
      }
      const trim = (down.has('trim-right') ? 1 : 0) - (down.has('trim-left') ? 1 : 0);
      if (trim !== 0) pilot.rudderTrim = bound(pilot.rudderTrim + trim * TRIM_PER_S * tickS, -1, 1);
    },
    release() {
      // A stick that is held stays held: only springs of keys and pads let go on a freeze.
    },
    onGone(callback) {
      gone.add(callback);
      return () => void gone.delete(callback);
    },
  };
}
