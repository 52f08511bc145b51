import type { Lane, Scenario } from './scenario-format.ts';

/**
 * Marks of a small time line: each event in its lane.
 *
 * @returns `atS` in seconds from the start, null for an event that waits for a condition or another event.
 */
export function lanesOf(scenario: Pick<Scenario, 'events'>): { lane: Lane; kind: string; atS: number | null }[] {
  return scenario.events.map(({ lane, kind, at }) => ({ lane, kind, atS: 'time_s' in at ? at.time_s : null }));
}
