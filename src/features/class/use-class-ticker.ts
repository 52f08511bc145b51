import { shallowRef } from 'vue';
import type { Run } from '#shared/scenario/run-types.ts';
import type { TickerLine } from '../../components/instruments/EventTicker.vue';
import { zeroS } from '../fly/flight-log.ts';

/** What has happened in the run that is shown, newest last; begins again when the run goes back. */
export function useClassTicker() {
  const lines = shallowRef<TickerLine[]>([]);
  let seen = '';
  return {
    lines,
    look(run: Run): void {
      const key = `${run.fired.length} ${run.fired.at(-1)?.id ?? ''} ${run.messages.map(({ text }) => text).join('|')}`;
      if (key === seen) return;
      seen = key;
      const zero = zeroS(run.fired);
      const fired = run.fired.map((event, i) => ({
        id: `${event.id}-${i}`,
        timeS: event.timeS - zero,
        text: event.text,
        kind: event.lane === 'engines' ? ('failure' as const) : ('plain' as const),
      }));
      lines.value = fired;
    },
  };
}
