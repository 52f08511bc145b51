import { useRafFn } from '@vueuse/core';
import { computed, ref, shallowRef } from 'vue';
import {
  AXIS_CONTROLS,
  type AxisBinding,
  type AxisControl,
  commandOf,
  isLever,
  plainBinding,
  travelOf,
} from '../../runner/input/device-axis.ts';
import {
  BUTTON_CONTROLS,
  type ButtonControl,
  type ControlsProfile,
  STANDARD_PROFILE,
  assignments,
  sharedAxes,
  withAxis,
  withButton,
} from '../../runner/input/device-profile.ts';
import { type DeviceReading, devicesOf, rawOf } from '../../runner/input/device-reading.ts';
import { useControlsStore } from '../../stores/controls.store.ts';
import { movedPart } from './moved-part.ts';

/** Time to move what is to be assigned. */
export const WAIT_S = 6;
/** Readings kept for the steps of a calibration. */
export const KEPT_S = 2;

export interface TimedReading {
  atMs: number;
  raw: number;
}

export interface LiveAxis {
  control: AxisControl;
  binding: AxisBinding | null;
  device: DeviceReading | null;
  raw: number;
  /** Share of the travel, and what it commands. */
  travel: number;
  command: number;
  /** Greatest and least travel seen on this page. */
  reached: readonly [number, number];
}

interface Waiting {
  control: AxisControl | ButtonControl;
  wanted: 'axis' | 'button';
  since: number;
  before: DeviceReading[];
}

const isAxis = (control: AxisControl | ButtonControl): control is AxisControl =>
  (AXIS_CONTROLS as readonly string[]).includes(control);
const isButton = (control: AxisControl | ButtonControl): control is ButtonControl =>
  (BUTTON_CONTROLS as readonly string[]).includes(control);

/** The controls as they are being set up: nothing is kept until {@link keep}. */
export function useControls() {
  const store = useControlsStore();
  const draft = shallowRef<ControlsProfile>(store.profile);
  const devices = shallowRef<DeviceReading[]>(devicesOf(navigator));
  const waiting = shallowRef<Waiting | null>(null);
  const leftS = ref(0);
  const control = ref<AxisControl>('pedals');
  const history = shallowRef<TimedReading[]>([]);
  const reached = new Map<AxisControl, [number, number]>();
  const lastMoved = ref<string | null>(null);
  let previous: DeviceReading[] = [];

  const inForce = computed(() => assignments(draft.value, devices.value));
  const live = computed<LiveAxis[]>(() =>
    AXIS_CONTROLS.map((name) => {
      const found = inForce.value.axes.find((axis) => axis.control === name);
      if (!found) return { control: name, binding: null, device: null, raw: 0, travel: 0, command: 0, reached: [0, 0] };
      const { binding, device } = found;
      const raw = rawOf(device, binding.source, binding.index);
      return {
        control: name,
        binding,
        device,
        raw,
        travel: travelOf(binding, raw, name),
        command: commandOf(binding, raw, name),
        reached: reached.get(name) ?? [0, 0],
      };
    }),
  );
  const chosen = computed<LiveAxis>(() => live.value.find((axis) => axis.control === control.value) ?? live.value[0]);
  const shared = computed(() => sharedAxes(inForce.value.axes));
  const dirty = computed(() => JSON.stringify(draft.value) !== JSON.stringify(store.profile));

  function lookAgain(atMs: number): void {
    devices.value = devicesOf(navigator);
    for (const { control: name, travel, binding } of live.value) {
      if (!binding) continue;
      const [low, high] = reached.get(name) ?? [travel, travel];
      reached.set(name, [Math.min(low, travel), Math.max(high, travel)]);
    }
    const moved = movedPart(previous, devices.value, 'axis') ?? movedPart(previous, devices.value, 'button');
    if (moved) lastMoved.value = moved.key;
    if (moved || previous.length !== devices.value.length) previous = devices.value;
    if (chosen.value.binding) {
      const kept = history.value.filter((reading) => reading.atMs > atMs - KEPT_S * 1000);
      history.value = [...kept, { atMs, raw: chosen.value.raw }];
    }
  }

  function choose(next: AxisControl): void {
    control.value = next;
    history.value = [];
  }

  function ask(next: AxisControl | ButtonControl): void {
    waiting.value = {
      control: next,
      wanted: isAxis(next) ? 'axis' : 'button',
      since: performance.now(),
      before: devicesOf(navigator),
    };
    leftS.value = WAIT_S;
  }
  function cancel(): void {
    waiting.value = null;
  }

  function change(next: ControlsProfile): void {
    draft.value = next;
  }
  function bind(name: AxisControl, to: { key: string; binding: AxisBinding } | null): void {
    change(withAxis(draft.value, devices.value, name, to));
    reached.delete(name);
    choose(name);
  }

  function settleWaiting(now: number): void {
    const asked = waiting.value;
    if (!asked) return;
    leftS.value = Math.max(0, Math.ceil(WAIT_S - (now - asked.since) / 1000));
    // A device that shows itself only on its first press joins the question then.
    for (const device of devices.value)
      if (!asked.before.some(({ key }) => key === device.key)) asked.before.push(device);
    const moved = movedPart(asked.before, devices.value, asked.wanted);
    if (moved) {
      waiting.value = null;
      if (isButton(asked.control)) {
        change(withButton(draft.value, devices.value, asked.control, { key: moved.key, button: moved.index }));
      } else {
        const plain = plainBinding(moved.source, moved.index, asked.control);
        const centred = !isLever(asked.control) && moved.source === 'axis' && Math.abs(moved.before) < 0.5;
        bind(asked.control, { key: moved.key, binding: centred ? { ...plain, rest: moved.before } : plain });
      }
    } else if (leftS.value === 0) waiting.value = null;
  }

  useRafFn(({ timestamp }) => {
    lookAgain(timestamp);
    settleWaiting(timestamp);
  });

  /** Changes the binding of the chosen control. */
  function adjust(part: Partial<AxisBinding>, name: AxisControl = control.value): void {
    const axis = live.value.find((one) => one.control === name);
    if (!axis?.binding || !axis.device) return;
    change(withAxis(draft.value, devices.value, name, { key: axis.device.key, binding: { ...axis.binding, ...part } }));
  }
  function unassign(name: AxisControl | ButtonControl): void {
    if (isButton(name)) change(withButton(draft.value, devices.value, name, null));
    else bind(name, null);
  }

  return {
    devices,
    inForce,
    live,
    chosen,
    control,
    choose,
    history,
    shared,
    waiting,
    leftS,
    lastMoved,
    draft,
    dirty,
    ask,
    cancel,
    adjust,
    unassign,
    whenGone: computed({
      get: () => draft.value.whenGone,
      set: (whenGone) => change({ ...draft.value, whenGone }),
    }),
    /** Returns false where the browser keeps nothing. */
    keep: () => store.keep(draft.value),
    standard: () => change(STANDARD_PROFILE),
    restore: (earlier: ControlsProfile) => change(earlier),
  };
}
export type Controls = ReturnType<typeof useControls>;
