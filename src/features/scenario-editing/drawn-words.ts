/** What an event draws afresh for each attempt, as "time 2.5 to 4 s". */
import type { ScenarioEvent } from '#shared/scenario/scenario-schema.ts';

const MEMBERS: Readonly<Record<string, readonly [name: string, unit: string]>> = {
  time_s: ['time', ' s'],
  delay_s: ['delay', ' s'],
  over_s: ['time taken', ' s'],
  duration_s: ['length', ' s'],
  fraction: ['thrust left', ''],
  position: ['lever', ''],
  peak_kt: ['peak', ' kt'],
  peak_deg_s: ['peak', '°/s'],
  gradientDistance_m: ['gradient distance', ' m'],
  windFrom_deg: ['wind from', '°'],
  wind_kt: ['wind', ' kt'],
  at_deg: ['angle', '°'],
  deg: ['trim', '°'],
  amplitude: ['amplitude', ''],
  path_deg: ['path', '°'],
  target_kt: ['speed', ' kt'],
  rate_kt_s: ['rate', ' kt/s'],
};

export function drawnWords({ vary }: Pick<ScenarioEvent, 'vary'>): string {
  return Object.entries(vary ?? {})
    .map(([member, [low, high]]) => {
      const [name, unit] = MEMBERS[member] ?? [member, ''];
      return `${name} ${low} to ${high}${unit}`;
    })
    .join(', ');
}
