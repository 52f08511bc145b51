/** Events of a run on its time line: what has happened, and for the instructor what is still to come. */
import type { ScenarioEvent } from '#shared/scenario/scenario-schema.ts';
import type { ClassRun } from '#shared/scenario/class-state.ts';
import { injectedOn } from '#shared/scenario/class-state.ts';
import { eventText } from '#shared/scenario/describe.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import type { FiredEvent } from '#shared/scenario/run-types.ts';
import type { TimeLineEvent } from '../../components/time-line-marks.ts';

export interface PlannedEvent {
  id: string;
  lane: TimeLineEvent['lane'];
  text: string;
  timeS: number;
}

/**
 * Events whose time is known before they happen: by the clock, or after one of those.
 *
 * @param events  Of the scenario, in its order.
 * @param run     The run, with its drawn values and what the class added.
 */
export function plannedEvents(events: readonly ScenarioEvent[], run: ClassRun): PlannedEvent[] {
  const known = new Map<string, number>();
  const found: PlannedEvent[] = [];
  const add = (event: ScenarioEvent, earliestS: number): void => {
    const drawn = run.drawn[event.id] ?? {};
    const { at } = event;
    let timeS: number | null = null;
    if ('time_s' in at) timeS = Math.max(earliestS, drawn['time_s'] ?? at.time_s);
    else if ('after' in at) {
      const from = known.get(at.after);
      if (from !== undefined) timeS = from + (drawn['delay_s'] ?? at.delay_s);
    }
    if (timeS === null) return;
    known.set(event.id, timeS);
    found.push({ id: event.id, lane: event.lane, text: eventText(event), timeS });
  };
  for (const event of events) add(event, 0);
  for (const { event, tick, until } of injectedOn(run)) if (until === null) add(event, tick / TICK_RATE_HZ);
  return found.sort((a, b) => a.timeS - b.timeS);
}

export interface LineMark extends PlannedEvent {
  happened: boolean;
}

/** What has happened where it did, and what is planned later where `future` is set. */
export function lineMarks(
  planned: readonly PlannedEvent[],
  fired: readonly FiredEvent[] | null,
  nowS: number,
  future: boolean,
): LineMark[] {
  if (fired === null)
    return planned.map((one) => ({ ...one, happened: one.timeS <= nowS })).filter((one) => future || one.happened);
  const done = new Set(fired.map(({ id }) => id));
  const past = fired.map(({ id, lane, text, timeS }) => ({ id, lane, text, timeS, happened: true }));
  const ahead = future ? planned.filter(({ id }) => !done.has(id)).map((one) => ({ ...one, happened: false })) : [];
  return [...past, ...ahead].sort((a, b) => a.timeS - b.timeS);
}

/** Run time of the first event that is more than a note, once it has happened. */
export function zeroOf(marks: readonly LineMark[]): LineMark | null {
  return marks.find(({ lane, happened }) => happened && lane !== 'notes') ?? null;
}
