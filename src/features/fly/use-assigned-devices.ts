import { useEventListener, useIntervalFn } from '@vueuse/core';
import { type ComputedRef, computed, shallowRef } from 'vue';
import { assignments } from '../../runner/input/device-profile.ts';
import { type DeviceReading, devicesOf } from '../../runner/input/device-reading.ts';
import { useControlsStore } from '../../stores/controls.store.ts';

/** What is plugged in and set up, in words: "Rudder pedals, Side stick ready". */
export function useAssignedDevices(): ComputedRef<string> {
  const controls = useControlsStore();
  const devices = shallowRef<DeviceReading[]>(devicesOf(navigator));
  const look = (): void => {
    devices.value = devicesOf(navigator);
  };
  useEventListener(window, 'gamepadconnected', look);
  useEventListener(window, 'gamepaddisconnected', look);
  useIntervalFn(look, 1000);
  return computed(() => {
    if (devices.value.length === 0) return 'No stick or pedals seen.';
    const { axes } = assignments(controls.profile, devices.value);
    const names = [...new Set(axes.map(({ device }) => device.name))];
    const idle = devices.value.filter(({ name }) => !names.includes(name)).map(({ name }) => name);
    const parts = names.length > 0 ? [`${names.join(', ')} ready.`] : [];
    if (idle.length > 0) parts.push(`${idle.join(', ')} not set up.`);
    return parts.join(' ');
  });
}
