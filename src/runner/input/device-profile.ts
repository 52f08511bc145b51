/** Which axis and button of which device does what, for one person in one browser. */
import { z } from 'zod';
import { AXIS_CONTROLS, type AxisBinding, type AxisControl, axisBindingSchema, plainBinding } from './device-axis.ts';
import type { DeviceReading } from './device-reading.ts';

export const BUTTON_CONTROLS = ['freeze', 'view', 'trim-left', 'trim-right'] as const;
export type ButtonControl = (typeof BUTTON_CONTROLS)[number];

const deviceBindingsSchema = z.object({
  axes: z.partialRecord(z.enum(AXIS_CONTROLS), axisBindingSchema),
  buttons: z.partialRecord(z.enum(BUTTON_CONTROLS), z.int().min(0).max(127)),
});
export type DeviceBindings = z.infer<typeof deviceBindingsSchema>;

export const controlsProfileSchema = z.object({
  /** By device key; a device keeps its assignments while it is away. */
  devices: z.record(z.string().max(300), deviceBindingsSchema),
  whenGone: z.enum(['freeze', 'keyboard']),
});
export type ControlsProfile = z.infer<typeof controlsProfileSchema>;

export const STANDARD_PROFILE: ControlsProfile = { devices: {}, whenGone: 'freeze' };

/**
 * Assignments of a device that nobody has set up. Only the standard layout of the Gamepad API says where its sticks
 * are; any other device waits to be assigned.
 */
export function standardBindings(device: Pick<DeviceReading, 'mapping'>): DeviceBindings {
  if (device.mapping !== 'standard') return { axes: {}, buttons: {} };
  return {
    axes: {
      roll: plainBinding('axis', 0, 'roll'),
      pitch: plainBinding('axis', 1, 'pitch'),
      pedals: plainBinding('axis', 2, 'pedals'),
    },
    buttons: { freeze: 9, view: 3, 'trim-left': 14, 'trim-right': 15 },
  };
}

export function bindingsOf(profile: ControlsProfile, device: Pick<DeviceReading, 'key' | 'mapping'>): DeviceBindings {
  return profile.devices[device.key] ?? standardBindings(device);
}

export interface AxisAssignment {
  control: AxisControl;
  device: DeviceReading;
  binding: AxisBinding;
}
export interface ButtonAssignment {
  control: ButtonControl;
  device: DeviceReading;
  button: number;
}

/** What is in force with these devices: for each control the first device that has it. */
export function assignments(
  profile: ControlsProfile,
  devices: readonly DeviceReading[],
): { axes: AxisAssignment[]; buttons: ButtonAssignment[] } {
  const axes: AxisAssignment[] = [];
  const buttons: ButtonAssignment[] = [];
  const all = devices.map((device) => ({ device, bindings: bindingsOf(profile, device) }));
  for (const control of AXIS_CONTROLS) {
    const found = all.find(({ bindings }) => bindings.axes[control]);
    const binding = found?.bindings.axes[control];
    if (found && binding) axes.push({ control, device: found.device, binding });
  }
  for (const control of BUTTON_CONTROLS) {
    const found = all.find(({ bindings }) => bindings.buttons[control] !== undefined);
    const button = found?.bindings.buttons[control];
    if (found && button !== undefined) buttons.push({ control, device: found.device, button });
  }
  return { axes, buttons };
}

/** The profile with a control given to one device and taken from the others that are here. */
function given(
  profile: ControlsProfile,
  devices: readonly DeviceReading[],
  change: (bindings: DeviceBindings, device: DeviceReading) => DeviceBindings,
): ControlsProfile {
  const next = { ...profile.devices };
  for (const device of devices) next[device.key] = change(bindingsOf(profile, device), device);
  return { ...profile, devices: next };
}

export function withAxis(
  profile: ControlsProfile,
  devices: readonly DeviceReading[],
  control: AxisControl,
  to: { key: string; binding: AxisBinding } | null,
): ControlsProfile {
  return given(profile, devices, (bindings, device) => {
    const axes = { ...bindings.axes };
    delete axes[control];
    if (to && device.key === to.key) axes[control] = to.binding;
    return { ...bindings, axes };
  });
}

export function withButton(
  profile: ControlsProfile,
  devices: readonly DeviceReading[],
  control: ButtonControl,
  to: { key: string; button: number } | null,
): ControlsProfile {
  return given(profile, devices, (bindings, device) => {
    const buttons = { ...bindings.buttons };
    delete buttons[control];
    if (to && device.key === to.key) buttons[control] = to.button;
    return { ...bindings, buttons };
  });
}

/** Controls that move with the same axis of the same device: one of them is enough. */
export function sharedAxes(axes: readonly AxisAssignment[]): [AxisControl, AxisControl][] {
  const pairs: [AxisControl, AxisControl][] = [];
  axes.forEach((one, i) => {
    for (const other of axes.slice(i + 1)) {
      const same =
        one.device.key === other.device.key &&
        one.binding.source === other.binding.source &&
        one.binding.index === other.binding.index;
      if (same) pairs.push([one.control, other.control]);
    }
  });
  return pairs;
}
