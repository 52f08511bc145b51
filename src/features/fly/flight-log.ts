/** Lines of the ticker and flags of the traces, from what the run reports. */
import { TICK_S } from '#shared/model/plant-types.ts';
import type { FiredEvent, RunningCriterion } from '#shared/scenario/run-types.ts';
import type { TraceFlag } from '../../components/charts/trace-grid.ts';
import type { TickerLine } from '../../components/instruments/EventTicker.vue';
import type { ReactionMarks } from '../../runner/reaction-marks.ts';

const LETTERS: Record<FiredEvent['lane'], TraceFlag['letter']> = {
  engines: 'E',
  air: 'G',
  controls: 'C',
  systems: 'S',
  notes: 'N',
};
const FAILURES: ReadonlySet<string> = new Set([
  'engine-failure',
  'engine-partial',
  'rudder-hardover',
  'rudder-jam',
  'aileron-jam',
]);

/** The first event that is more than a note: where the time axis has its zero. */
export const zeroEvent = (fired: readonly FiredEvent[]): FiredEvent | null =>
  fired.find((event) => event.lane !== 'notes') ?? null;

/** Run time of the zero of the axis; the start until something has happened. */
export const zeroS = (fired: readonly FiredEvent[]): number => zeroEvent(fired)?.timeS ?? 0;

export function flagsOf(fired: readonly FiredEvent[], marks: ReactionMarks): TraceFlag[] {
  const flags: TraceFlag[] = fired
    .filter((event) => event.kind !== 'message')
    .map((event, i) => ({
      id: `${event.id}-${i}`,
      timeS: event.timeS,
      letter: LETTERS[event.lane],
      text: event.text,
      kind: FAILURES.has(event.kind) ? 'dead' : 'ink',
    }));
  if (marks.firstCorrectPedalTick !== null) {
    flags.push({
      id: 'first-pedal',
      timeS: marks.firstCorrectPedalTick * TICK_S,
      letter: 'P',
      text: pedalText(marks.correctSide),
      kind: 'ink',
    });
  }
  return flags.sort((a, b) => a.timeS - b.timeS);
}

export const pedalText = (side: -1 | 0 | 1): string => (side < 0 ? 'Left pedal begins' : 'Right pedal begins');

export interface LoggedNote {
  id: string;
  /** Run time; s. */
  timeS: number;
  text: string;
  kind: TickerLine['kind'];
}

export interface FlightLog {
  readonly notes: readonly LoggedNote[];
  /** Adds what is new; returns true when a line was added. */
  see(input: {
    timeS: number;
    fired: readonly FiredEvent[];
    marks: ReactionMarks;
    criteria?: readonly RunningCriterion[];
  }): boolean;
  add(note: Omit<LoggedNote, 'id'>): void;
  lines(zero: number): TickerLine[];
}

/** Keeps the ticker of one flight. Lines stay in time order; a criterion is named once, when it is first not met. */
export function createFlightLog(): FlightLog {
  let notes: LoggedNote[] = [];
  const seen = new Set<string>();
  const put = (note: LoggedNote): boolean => {
    if (seen.has(note.id)) return false;
    seen.add(note.id);
    notes = [...notes, note].sort((a, b) => a.timeS - b.timeS);
    return true;
  };
  return {
    get notes() {
      return notes;
    },
    see({ timeS, fired, marks, criteria = [] }) {
      let added = false;
      fired.forEach((event, i) => {
        const kind = FAILURES.has(event.kind) ? 'failure' : 'plain';
        added = put({ id: `fired-${i}-${event.id}`, timeS: event.timeS, text: event.text, kind }) || added;
      });
      const mark = (id: string, tick: number | null, text: string, kind: TickerLine['kind'] = 'plain'): void => {
        if (tick !== null) added = put({ id, timeS: tick * TICK_S, text, kind }) || added;
      };
      mark('first-pedal', marks.firstCorrectPedalTick, pedalText(marks.correctSide));
      mark(
        'wrong-pedal',
        marks.firstWrongPedalTick,
        // The wrong side is the other one; with no correct pedal yet it is named without a side.
        marks.correctSide === 0
          ? 'Pedal the wrong way'
          : marks.correctSide > 0
            ? 'Wrong pedal: left'
            : 'Wrong pedal: right',
        'not',
      );
      mark('yaw-arrested', marks.yawArrestedTick, 'Yaw arrested');
      mark('saturated', marks.saturatedTick, 'Rudder at its limit');
      for (const criterion of criteria) {
        if (criterion.verdict !== 'not-met' || criterion.phase === 'waiting') continue;
        // Only a limit that cannot be won back is announced: a maximum that has been passed.
        const passed = criterion.limit.max !== undefined && criterion.margin !== null && criterion.margin < 0;
        if (!passed && criterion.phase !== 'done') continue;
        added =
          put({
            id: `criterion-${criterion.id}`,
            timeS: criterion.atS ?? timeS,
            text: `Not met: ${criterion.title}`,
            kind: 'not',
          }) || added;
      }
      return added;
    },
    add(note) {
      put({ ...note, id: `note-${seen.size}` });
    },
    lines: (zero) => notes.map((note) => ({ id: note.id, timeS: note.timeS - zero, text: note.text, kind: note.kind })),
  };
}
