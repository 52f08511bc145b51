import type { Scenario } from '#shared/scenario/scenario-schema.ts';

/** True when the pilot moves the nose up and down in some part of the scenario. */
export const handsPitch = (scenario: Scenario): boolean =>
  scenario.automation.pitch?.mode === 'manual' ||
  scenario.events.some((event) => event.kind === 'pitch-mode' && event.mode === 'manual');
