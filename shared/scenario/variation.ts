/** Values drawn by the seed, so that trainees cannot learn the second: uniform, from a stream of its own per event. */
import { createStream } from '../numerics/random.ts';
import type { DrawnValues } from './run-types.ts';
import type { Scenario, ScenarioEvent } from './scenario-format.ts';
import { withMember } from './scenario-rules.ts';

/** The values that a seed draws for every event with `vary`: event id → member → value in the member's own unit. */
export function drawValues(scenario: Pick<Scenario, 'events'>, seed: number): DrawnValues {
  const drawn: DrawnValues = {};
  for (const event of scenario.events) {
    const members = Object.keys(event.vary ?? {}).sort();
    if (!event.vary || members.length === 0) continue;
    const stream = createStream(seed, `vary:${event.id}`);
    const values: Record<string, number> = {};
    for (const member of members) {
      const [low, high] = event.vary[member];
      values[member] = low + (high - low) * stream.uniform();
    }
    drawn[event.id] = values;
  }
  return drawn;
}

/** The event with its drawn values in place. */
export function withDrawnValues(event: ScenarioEvent, drawn: DrawnValues): ScenarioEvent {
  const values = Object.hasOwn(drawn, event.id) ? drawn[event.id] : {};
  return Object.keys(values).reduce((made, member) => withMember(made, member, values[member]), event);
}
