import { fileURLToPath } from 'node:url';
import type { ShippedAirframes, ShippedSlug } from '#shared/analysis/checks/practice-checks.ts';
import { readAirframe } from './airframe-file.ts';

/** Where the shipped airframes lie in the clone. */
export function shippedAirframeFile(slug: string): string {
  return fileURLToPath(new URL(`../../scenarios/airframes/${slug}.json`, import.meta.url));
}

/** The shipped airframes, parsed. */
export async function readShippedAirframes(): Promise<ShippedAirframes> {
  const read = (slug: ShippedSlug) => readAirframe(shippedAirframeFile(slug), true);
  return {
    'light-twin': await read('light-twin'),
    'commuter-turboprop': await read('commuter-turboprop'),
    'twin-jet': await read('twin-jet'),
    'four-jet': await read('four-jet'),
    'single-trainer': await read('single-trainer'),
  };
}
