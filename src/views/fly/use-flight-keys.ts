import { useEventListener } from '@vueuse/core';
import type { FlightPhase } from '../../runner/flight-session.ts';
import type { Flight } from '../../features/fly/start-flight.ts';

export interface FlightKeyTargets {
  flight: () => Flight | null;
  phase: () => FlightPhase | 'briefing';
  /** Space: freeze or go on. */
  toggleFreeze: () => void;
  /** One tick of a frozen flight. */
  step: () => void;
  nextView: () => void;
  toggleGhost: () => void;
}

const TYPING = 'input:not([type=checkbox]):not([type=radio]):not([type=range]), textarea, select, [contenteditable]';

/** Keys of the cockpit, on the whole window while a flight is open. Fields keep their typing, buttons their Space. */
export function useFlightKeys(targets: FlightKeyTargets, source: Window = window): void {
  const elsewhere = (event: KeyboardEvent): boolean =>
    event.ctrlKey ||
    event.metaKey ||
    event.altKey ||
    (event.target instanceof Element && event.target.closest(TYPING) !== null);

  useEventListener(source, 'keydown', (event: KeyboardEvent) => {
    const flight = targets.flight();
    const phase = targets.phase();
    if (!flight || (phase !== 'running' && phase !== 'frozen') || elsewhere(event)) return;
    const onButton = event.target instanceof Element && event.target.closest('button, a, summary, input') !== null;
    if (event.code === 'Space') {
      if (onButton) return;
      event.preventDefault();
      if (!event.repeat) targets.toggleFreeze();
      return;
    }
    if (event.code === 'KeyV' && !event.repeat) return targets.nextView();
    if (event.code === 'KeyG' && !event.repeat) return targets.toggleGhost();
    if (event.code === 'KeyN') return targets.step();
    if (phase !== 'running') return;
    if (flight.keyboard.press(event.code)) event.preventDefault();
  });
  useEventListener(source, 'keyup', (event: KeyboardEvent) => targets.flight()?.keyboard.lift(event.code));
  // Keys let go in another window would otherwise stay down.
  useEventListener(source, 'blur', () => targets.flight()?.keyboard.release());
}
