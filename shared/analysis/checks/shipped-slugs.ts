import type { ShippedAirframes, ShippedSlug } from './practice-checks.ts';

/** The five airframes that facts are shown on. */
export const SHIPPED_SLUGS: readonly ShippedSlug[] = [
  'light-twin',
  'commuter-turboprop',
  'twin-jet',
  'four-jet',
  'single-trainer',
];

/**
 * Whether the facts shown on the shipped airframes can be computed.
 *
 * @param airframes  Airframes by slug.
 * @returns          True when all five are there.
 * @throws           Nothing.
 * @sign             none
 * @source           none
 */
export function hasAllShipped(airframes: Partial<ShippedAirframes>): airframes is ShippedAirframes {
  return SHIPPED_SLUGS.every((slug) => airframes[slug] !== undefined);
}
