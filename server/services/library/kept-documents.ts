import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import { storedAirframe, storedScenario } from '../attempts/attempt-data.ts';

const MOST_KEPT = 300;

/**
 * Parsed documents of revisions that never change again, by the revision's id: parsing one takes longer than reading it.
 * They are frozen, because several answers share them.
 */
export function createKeptDocuments() {
  const airframes = new Map<string, Airframe>();
  const scenarios = new Map<string, Scenario>();
  return {
    /** Of a released or retired airframe revision. */
    airframe: (revisionId: string, document: unknown): Airframe =>
      kept(airframes, revisionId, () => storedAirframe(document)),
    /** Of a published or archived scenario revision. */
    scenario: (revisionId: string, document: unknown): Scenario =>
      kept(scenarios, revisionId, () => storedScenario(document)),
  };
}

/** The least recently used one gives way. */
function kept<T>(known: Map<string, T>, id: string, parse: () => T): T {
  const found = known.get(id) ?? frozen(parse());
  known.delete(id);
  known.set(id, found);
  for (const oldest of known.keys()) {
    if (known.size <= MOST_KEPT) break;
    known.delete(oldest);
  }
  return found;
}

function frozen<T>(value: T): T {
  if (typeof value !== 'object' || value === null) return value;
  for (const part of Object.values(value)) frozen(part);
  return Object.freeze(value);
}
