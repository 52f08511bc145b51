import { ref, shallowRef } from 'vue';
import type { RunningCriterion } from '#shared/scenario/run-types.ts';
import type { TraceFlag } from '../../components/charts/trace-grid.ts';
import type { DeadSide } from '../../components/instruments/balance-verdict.ts';
import type { TickerLine } from '../../components/instruments/EventTicker.vue';
import { type ReactionTracker, createReactionTracker } from '../../runner/reaction-marks.ts';
import { type FlightLog, createFlightLog, flagsOf, zeroEvent, zeroS } from './flight-log.ts';
import type { Flight } from './start-flight.ts';
import { validityWords } from './validity-words.ts';

export type Indication = 'normal' | 'failed' | 'frozen';

/** What a flight says beside its numbers: ticker, flags, messages, lost indications. Looked at ten times a second. */
export function useFlightNotes() {
  const deadSide = ref<DeadSide>(0);
  const zero = ref(0);
  const flags = shallowRef<TraceFlag[]>([]);
  const lines = shallowRef<TickerLine[]>([]);
  const messages = ref<string[]>([]);
  const validity = ref('');
  const display = ref<Partial<Record<string, Indication>>>({});
  /** Something has happened: before that the reference would give the moment away. */
  const revealed = ref(false);
  let log: FlightLog = createFlightLog();
  let reactions: ReactionTracker = createReactionTracker();

  function begin(): void {
    log = createFlightLog();
    reactions = createReactionTracker();
    deadSide.value = 0;
    zero.value = 0;
    flags.value = [];
    lines.value = [];
    messages.value = [];
    validity.value = '';
    display.value = {};
    revealed.value = false;
  }

  /** After every tick. */
  function tick({ run }: Flight): void {
    if (reactions.marks.eventTick !== null) {
      reactions.see(run.now, run.deadSide);
      return;
    }
    const first = zeroEvent(run.fired);
    if (first) reactions.begin(run.now, first.tick);
  }

  function look({ run }: Flight, criteria: readonly RunningCriterion[]): void {
    if (!revealed.value && zeroEvent(run.fired)) revealed.value = true;
    const nextZero = zeroS(run.fired);
    const added = log.see({ timeS: run.timeS, fired: run.fired, marks: reactions.marks, criteria });
    if (added || nextZero !== zero.value) {
      zero.value = nextZero;
      flags.value = flagsOf(run.fired, reactions.marks);
      lines.value = log.lines(nextZero);
    }
    if (run.deadSide !== deadSide.value) deadSide.value = run.deadSide;
    const said = run.messages.map((message) => message.text);
    if (said.join('\n') !== messages.value.join('\n')) messages.value = said;
    if (Object.entries(run.display).some(([name, state]) => display.value[name] !== state)) {
      display.value = { ...run.display };
    }
    const words = validityWords(run.now);
    if (words !== validity.value) validity.value = words;
  }

  /** A line of the cockpit's own: a clock that was held. */
  function note(timeS: number, text: string): void {
    log.add({ timeS, text, kind: 'held' });
    lines.value = log.lines(zero.value);
  }

  return { deadSide, zero, flags, lines, messages, validity, display, revealed, begin, tick, look, note };
}
