/** What the pilot is told before the start: never more than a real flight would tell. */
import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import { DEG, FT, KT } from '#shared/units/constants.ts';
import { type UnitPreference, formatQuantity } from '#shared/units/quantity.ts';

export interface BriefFact {
  name: string;
  value: string;
}

const bearing = (deg: number): string => `${String(Math.round(((deg % 360) + 360) % 360) || 360).padStart(3, '0')}°`;

export function briefFacts(scenario: Scenario, airframe: Airframe, units: UnitPreference): BriefFact[] {
  const { start, air, runway } = scenario;
  const facts: BriefFact[] = [
    { name: 'Airframe', value: airframe.name },
    { name: 'Configuration', value: scenario.configuration ?? airframe.configurations[0]?.name ?? 'as data' },
    { name: 'Airspeed', value: formatQuantity(start.ias_kt * KT, 'speed', units, 0) },
    {
      name: runway ? 'Height above the runway' : 'Height',
      value: formatQuantity((start.height_ft - (runway?.elevation_ft ?? 0)) * FT, 'height', units, 0),
    },
    { name: 'Heading', value: bearing(start.heading_deg) },
    {
      name: 'Wind',
      value:
        air.wind_kt > 0
          ? `${bearing(air.windFrom_deg)}, ${formatQuantity(air.wind_kt * KT, 'speed', units, 0)}`
          : 'calm',
    },
  ];
  if (air.turbulence !== 'none') facts.push({ name: 'Turbulence', value: air.turbulence });
  return facts;
}

/** Who flies pitch; yaw and roll are always the pilot's. */
export function pitchWords(scenario: Scenario, units: UnitPreference): string {
  const pitch = scenario.automation.pitch ?? { mode: 'hold-path' };
  switch (pitch.mode) {
    case 'hold-path':
      return `Pitch is flown for you: it holds a path of ${formatQuantity((('path_deg' in pitch ? pitch.path_deg : undefined) ?? scenario.start.path_deg) * DEG, 'angle', units, 1)}.`;
    case 'hold-speed':
      return 'Pitch is flown for you: it holds the airspeed.';
    case 'hold-lift':
      return 'Pitch is flown for you: it holds the lift of the start.';
    case 'decelerate':
      return 'Pitch is flown for you: it lets the airspeed fall.';
    case 'glidepath':
      return 'Pitch is flown for you: it follows the glidepath and flares.';
    case 'manual':
      return 'Pitch is yours: stick forward and back.';
  }
}

/** What the scenario gives away of its events: nothing where the moment is drawn by lot. */
export function eventWords(scenario: Scenario): string {
  const events = scenario.events.filter((event) => event.lane !== 'notes');
  if (events.length === 0) return 'Nothing is scripted.';
  const drawn = events.some((event) => event.vary !== undefined);
  return drawn
    ? 'What happens, and when, is drawn anew each time.'
    : 'Something happens on the way; you are not told when.';
}

export const allowedWords = (allow: Scenario['allow']): string => {
  const can = [allow.freeze && 'freeze', allow.slow && 'slow motion', allow.arrows && 'force arrows'].filter(
    (word): word is string => typeof word === 'string',
  );
  if (can.length === 0) return 'No freeze, slow motion or force arrows here.';
  return `Allowed: ${can.join(', ')}.`;
};
