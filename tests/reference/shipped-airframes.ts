import { readFileSync } from 'node:fs';
import type { ShippedAirframes, ShippedSlug } from '#shared/analysis/checks/practice-checks.ts';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';

export const SHIPPED_SLUGS: readonly ShippedSlug[] = [
  'light-twin',
  'commuter-turboprop',
  'twin-jet',
  'four-jet',
  'single-trainer',
];

/** A shipped airframe, parsed; a refusal fails the test that asks. */
export function shippedAirframe(slug: ShippedSlug): Airframe {
  const file = new URL(`../../scenarios/airframes/${slug}.json`, import.meta.url);
  const parsed = parseAirframe(JSON.parse(readFileSync(file, 'utf8')));
  if (!parsed.ok) throw new Error(`${slug}: ${parsed.issues[0].field} ${parsed.issues[0].message}`);
  return parsed.airframe;
}

export const SHIPPED: ShippedAirframes = {
  'light-twin': shippedAirframe('light-twin'),
  'commuter-turboprop': shippedAirframe('commuter-turboprop'),
  'twin-jet': shippedAirframe('twin-jet'),
  'four-jet': shippedAirframe('four-jet'),
  'single-trainer': shippedAirframe('single-trainer'),
};
