import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import { KT } from '#shared/units/constants.ts';
import { formatQuantity, type UnitPreference } from '#shared/units/quantity.ts';

/** "Wind from 120°, 8 kt; light turbulence", "Still air". */
export function windWords(air: Scenario['air'], units: UnitPreference): string {
  const parts: string[] = [];
  if (air.wind_kt > 0) {
    const from = String(Math.round(air.windFrom_deg)).padStart(3, '0');
    parts.push(`Wind from ${from}°, ${formatQuantity(air.wind_kt * KT, 'speed', units, 0)}`);
  }
  if (air.turbulence !== 'none') parts.push(`${air.turbulence} turbulence`);
  if (parts.length === 0) return 'Still air';
  const text = parts.join('; ');
  return text.charAt(0).toUpperCase() + text.slice(1);
}

/** What the scenario lets a person do while flying. */
export function allowedWords(allow: Scenario['allow']): string {
  const can = [
    allow.freeze ? 'freeze' : '',
    allow.slow ? 'slow motion' : '',
    allow.rewind ? 'rewind' : '',
    allow.arrows ? 'force arrows' : '',
  ].filter((word) => word !== '');
  if (can.length === 0) return 'No freeze, slow motion, rewind or force arrows';
  const last = can.pop() ?? '';
  const text = can.length === 0 ? last : `${can.join(', ')} and ${last}`;
  return `${text.charAt(0).toUpperCase()}${text.slice(1)} allowed`;
}
