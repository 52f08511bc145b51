/**
 * Keys as controls. A key moves its axis slowly at first, then faster, so that a tap is a small correction.
 * The stick springs back when let go; the pedals stay where they are unless the pilot prefers a spring.
 */
import type { InputSource } from './input-source.ts';
import { type FlightAction, KEY_MAP, engineOfKey } from './key-map.ts';
import { type PilotAxes, TRIM_PER_S, bound } from './pilot-axes.ts';

export interface KeyRates {
  /** Full deflections per second once a key has been held for RAMP_S. */
  stickPerS: number;
  pedalPerS: number;
  leverPerS: number;
  /** Return of a sprung axis; full deflections per second. */
  returnPerS: number;
  pedalsSpring: boolean;
}

export const DEFAULT_KEY_RATES: KeyRates = {
  stickPerS: 1.8,
  pedalPerS: 1.4,
  leverPerS: 0.7,
  returnPerS: 3,
  pedalsSpring: false,
};

/** A key reaches its full rate after this long, starting from SLOW_START of it. */
export const RAMP_S = 0.35;
const SLOW_START = 0.35;

export interface KeyboardSource extends InputSource {
  readonly kind: 'keyboard';
  rates: KeyRates;
  /** Engine that the lever keys move; null for all. */
  readonly engine: number | null;
  press(code: string): boolean;
  lift(code: string): void;
}

export function createKeyboardSource(engineCount: number, rates: KeyRates = DEFAULT_KEY_RATES): KeyboardSource {
  const down = new Set<string>();
  const heldS = new Map<FlightAction, number>();
  let engine: number | null = null;
  let current = rates;
  let centring = false;
  let featherPending = false;

  const isDown = (action: FlightAction): boolean => {
    for (const code of down) if (KEY_MAP[code] === action) return true;
    return false;
  };
  /** Speed of an action now, 0 when its key is up. */
  const rateOf = (action: FlightAction, full: number, tickS: number): number => {
    if (!isDown(action)) {
      heldS.delete(action);
      return 0;
    }
    const held = (heldS.get(action) ?? 0) + tickS;
    heldS.set(action, held);
    return full * (SLOW_START + (1 - SLOW_START) * Math.min(1, held / RAMP_S));
  };
  const toward = (value: number, target: number, step: number): number =>
    Math.abs(value - target) <= step ? target : value + Math.sign(target - value) * step;

  /** An axis that springs to zero: against its key it also moves at the return rate. */
  function sprung(value: number, less: FlightAction, more: FlightAction, full: number, tickS: number): number {
    const up = rateOf(more, full, tickS);
    const downRate = rateOf(less, full, tickS);
    if (up === 0 && downRate === 0) return toward(value, 0, current.returnPerS * tickS);
    if (up > 0 && downRate > 0) return value;
    const target = up > 0 ? 1 : -1;
    const against = value * target < 0;
    return toward(value, target, (up + downRate + (against ? current.returnPerS : 0)) * tickS);
  }

  let stickHeld = false;
  let pitchHeld = false;
  let pedalHeld = false;
  return {
    id: 'keyboard',
    kind: 'keyboard',
    name: 'Keyboard',
    get rates() {
      return current;
    },
    set rates(next) {
      current = next;
    },
    get engine() {
      return engine;
    },
    press(code) {
      const chosen = engineOfKey(code);
      if (chosen !== null) {
        if (chosen === 'all') engine = null;
        else if (chosen < engineCount) engine = chosen;
        return true;
      }
      const action = KEY_MAP[code];
      if (action === undefined) return false;
      if (!down.has(code)) {
        if (action === 'pedal-centre') centring = true;
        if (action === 'feather') featherPending = true;
      }
      down.add(code);
      return true;
    },
    lift(code) {
      down.delete(code);
    },
    stepInto(axes: PilotAxes, tickS: number) {
      const stickKey = isDown('stick-left') || isDown('stick-right');
      if (stickKey) stickHeld = true;
      if (stickHeld) {
        axes.stick = sprung(axes.stick, 'stick-left', 'stick-right', current.stickPerS, tickS);
        if (!stickKey && axes.stick === 0) stickHeld = false;
      }
      const pitchKey = isDown('stick-forward') || isDown('stick-back');
      if (pitchKey) pitchHeld = true;
      if (pitchHeld) {
        axes.pitch = sprung(axes.pitch, 'stick-forward', 'stick-back', current.stickPerS, tickS);
        if (!pitchKey && axes.pitch === 0) pitchHeld = false;
      }
      const pedalKey = isDown('pedal-left') || isDown('pedal-right');
      if (pedalKey) {
        pedalHeld = true;
        centring = false;
      }
      if (centring) {
        axes.pedal = toward(axes.pedal, 0, current.returnPerS * tickS);
        if (axes.pedal === 0) centring = false;
      } else if (current.pedalsSpring) {
        if (pedalHeld) axes.pedal = sprung(axes.pedal, 'pedal-left', 'pedal-right', current.pedalPerS, tickS);
        if (!pedalKey && axes.pedal === 0) pedalHeld = false;
      } else {
        const right = rateOf('pedal-right', current.pedalPerS, tickS);
        const left = rateOf('pedal-left', current.pedalPerS, tickS);
        axes.pedal = bound(axes.pedal + (right - left) * tickS, -1, 1);
      }
      const trim = (isDown('trim-right') ? 1 : 0) - (isDown('trim-left') ? 1 : 0);
      if (trim !== 0) axes.rudderTrim = bound(axes.rudderTrim + trim * TRIM_PER_S * tickS, -1, 1);
      const lever = (isDown('lever-up') ? 1 : 0) - (isDown('lever-down') ? 1 : 0);
      for (let i = 0; i < axes.levers.length; i += 1) {
        if (lever !== 0 && (engine === null || engine === i)) {
          axes.levers[i] = bound(axes.levers[i] + lever * current.leverPerS * tickS, 0, 1);
        }
        if (featherPending && engine === i) axes.feather[i] = axes.feather[i] ? 0 : 1;
      }
      featherPending = false;
    },
    release() {
      down.clear();
      heldS.clear();
      centring = false;
      featherPending = false;
    },
  };
}
