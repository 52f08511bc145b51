/** Directions that the stage frame shows, from the state. */

/**
 * Azimuth of the flight path through the air less the heading of the nose; rad.
 *
 * From the velocity (V cosβ, V sinβ, 0) turned through bank and path pitch; equals β with the wings level.
 *
 * @sign positive: path to the right of the nose.
 */
export function pathOffsetRad(betaRad: number, phiRad: number, thetaRad: number): number {
  const along = Math.cos(betaRad) * Math.cos(thetaRad) + Math.sin(betaRad) * Math.sin(phiRad) * Math.sin(thetaRad);
  return Math.atan2(Math.sin(betaRad) * Math.cos(phiRad), along);
}

/** 0 … 360. */
export const compass = (deg: number): number => ((deg % 360) + 360) % 360;

/** "005", "260"; 360 for north, as headings are spoken. */
export function headingText(deg: number): string {
  const whole = Math.round(compass(deg)) % 360;
  return String(whole === 0 ? 360 : whole).padStart(3, '0');
}

/** The value nearest to `reference` among angles equal to `deg` modulo 360. */
export const nearestTurn = (deg: number, reference: number): number => deg + 360 * Math.round((reference - deg) / 360);
