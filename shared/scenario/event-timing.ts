/**
 * What is known before a run about when events fire: each event hangs, through delays, on the run's start or on a
 * condition. Used to refuse windows that end before they start and to warn of events that cannot fire.
 */
import type { Scenario, ScenarioEvent, WindowEdge } from './scenario-format.ts';

export interface EventTiming {
  /** "start", or the id of the event with a condition on which this one hangs. */
  root: string;
  /** Earliest and latest seconds after the root. */
  lowS: number;
  highS: number;
  /** Ids on which the event waits, nearest first, the root included when it is an event. */
  chain: readonly string[];
}

function rangeOf(event: ScenarioEvent, member: 'time_s' | 'delay_s', fixed: number): [number, number] {
  const varied = event.vary && Object.hasOwn(event.vary, member) ? event.vary[member] : null;
  return varied ? [Math.min(...varied), Math.max(...varied)] : [fixed, fixed];
}

/** Timing of every event; an event on a cycle or on an unknown id is left out. */
export function timingsOf(events: readonly ScenarioEvent[]): Map<string, EventTiming> {
  const byId = new Map(events.map((event) => [event.id, event]));
  const found = new Map<string, EventTiming>();
  const visit = (event: ScenarioEvent, seen: Set<string>): EventTiming | null => {
    const known = found.get(event.id);
    if (known) return known;
    if (seen.has(event.id)) return null;
    seen.add(event.id);
    const timing = timingOf(event, seen);
    if (timing) found.set(event.id, timing);
    return timing;
  };
  const timingOf = (event: ScenarioEvent, seen: Set<string>): EventTiming | null => {
    const { at } = event;
    if ('time_s' in at) {
      const [lowS, highS] = rangeOf(event, 'time_s', at.time_s);
      return { root: 'start', lowS, highS, chain: [] };
    }
    if ('when' in at) return { root: event.id, lowS: 0, highS: 0, chain: [] };
    const before = byId.get(at.after);
    const base = before ? visit(before, seen) : null;
    if (!base) return null;
    const [low, high] = rangeOf(event, 'delay_s', at.delay_s);
    return { root: base.root, lowS: base.lowS + low, highS: base.highS + high, chain: [at.after, ...base.chain] };
  };
  for (const event of events) visit(event, new Set());
  return found;
}

interface EdgeTiming extends EventTiming {
  plusS: number;
  id: string;
}

function edgeTiming(edge: WindowEdge, timings: ReadonlyMap<string, EventTiming>, endS: number): EdgeTiming | null {
  const id = typeof edge === 'string' ? edge : edge.after;
  const plusS = typeof edge === 'string' ? 0 : edge.plus_s;
  if (id === 'start') return { root: 'start', lowS: plusS, highS: plusS, chain: [], plusS, id };
  if (id === 'end') return { root: 'start', lowS: endS + plusS, highS: endS + plusS, chain: [], plusS, id };
  const timing = timings.get(id);
  return timing ? { ...timing, lowS: timing.lowS + plusS, highS: timing.highS + plusS, plusS, id } : null;
}

/** True when a window closes before it opens in every run. */
export function endsBeforeStart(
  from: WindowEdge,
  to: WindowEdge,
  scenario: Pick<Scenario, 'events' | 'duration_s'>,
): boolean {
  const timings = timingsOf(scenario.events);
  const opens = edgeTiming(from, timings, scenario.duration_s);
  const closes = edgeTiming(to, timings, scenario.duration_s);
  if (!opens || !closes) return false;
  // The same event: only the seconds after it count, whatever the spread.
  if (opens.id === closes.id) return closes.plusS < opens.plusS;
  if (closes.id === 'end') return false;
  // The closing event comes before the opening one by the latter's own delays.
  if (opens.chain.includes(closes.id)) {
    const base = timings.get(closes.id);
    const waits = base ? opens.lowS - base.lowS : 0;
    if (closes.plusS < waits) return true;
  }
  return opens.root === closes.root && closes.highS < opens.lowS;
}

/** Why a window holds next to nothing in every run: it opens too late, or closes as it opens; null when neither is known. */
export function emptyWindow(
  from: WindowEdge,
  to: WindowEdge,
  scenario: Pick<Scenario, 'events' | 'duration_s'>,
): 'opens-too-late' | 'no-length' | null {
  if (from === 'end') return null; // the last state alone is meant
  const timings = timingsOf(scenario.events);
  const opens = edgeTiming(from, timings, scenario.duration_s);
  const closes = edgeTiming(to, timings, scenario.duration_s);
  if (!opens || !closes) return null;
  if (opens.root === 'start' && opens.lowS >= scenario.duration_s) return 'opens-too-late';
  const sameEvent = opens.id === closes.id && opens.plusS === closes.plusS;
  const sameTime = opens.root === closes.root && opens.lowS === closes.highS && opens.highS === closes.lowS;
  return sameEvent || (sameTime && opens.lowS === opens.highS) ? 'no-length' : null;
}
