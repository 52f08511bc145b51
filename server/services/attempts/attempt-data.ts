import { parseAirframe, type Airframe } from '#shared/model/airframe-schema.ts';
import { parseScenario, type Scenario } from '#shared/scenario/scenario-schema.ts';
import { may, type Actor } from '../permissions.ts';

/** The scenario of a stored document. What the database holds was parsed when it was stored: a fault here is ours. */
export function storedScenario(document: unknown): Scenario {
  const parsed = parseScenario(document);
  if (!parsed.ok) throw new Error(`A stored scenario does not parse: ${parsed.issues[0]?.message ?? 'no reason'}.`);
  return parsed.scenario;
}

/** A scenario as this reader may see it: the talking point stays with those who teach. */
export function readableBy(actor: Actor, scenario: Scenario): Scenario {
  return may(actor, 'scenario.export') ? scenario : { ...scenario, talkingPoint: '' };
}

/** The scenario of a stored document as this reader may see it. */
export const scenarioFor = (actor: Actor, document: unknown): Scenario => readableBy(actor, storedScenario(document));

/** The airframe of a stored document. */
export function storedAirframe(document: unknown): Airframe {
  const parsed = parseAirframe(document);
  if (!parsed.ok) throw new Error(`A stored airframe does not parse: ${parsed.issues[0]?.message ?? 'no reason'}.`);
  return parsed.airframe;
}
