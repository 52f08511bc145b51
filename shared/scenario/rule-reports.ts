/** How the rules of a scenario report, and what several of them say alike. */
import type { Scenario } from './scenario-format.ts';

export type Report = (field: string, rule: string, message: string, remedy: string) => void;

/** Names of window edges, which no event may bear. */
export const RESERVED_IDS: readonly string[] = ['start', 'end'];

export function reportExpression(
  field: string,
  problem: { position: number; message: string; remedy: string },
  report: Report,
): void {
  report(field, 'expression', `at character ${problem.position + 1}: ${problem.message}`, problem.remedy);
}

export function reportUnknownSince(
  scenario: Scenario,
  field: string,
  { sinceIds, sincePlaces }: { sinceIds: readonly string[]; sincePlaces: readonly number[] },
  report: Report,
): void {
  sinceIds.forEach((id, k) => {
    if (hasEvent(scenario, id)) return;
    report(
      field,
      'known-event',
      `at character ${sincePlaces[k] + 1}: since(${id}) names no event of this scenario`,
      knownEvents(scenario),
    );
  });
}

export function hasEvent(scenario: Scenario, id: string): boolean {
  return scenario.events.some((event) => event.id === id);
}

export function knownEvents({ events }: Scenario): string {
  if (events.length === 0) return 'Add the event first; this scenario has none.';
  const shown = events.slice(0, 12).map(({ id }) => id);
  return `Use one of ${shown.join(', ')}${events.length > 12 ? ', …' : ''}.`;
}
