import type { Aircraft } from '../model/aircraft.ts';
import { forceLimitRudderRad } from '../model/controls.ts';

/** What can stop a steady flight condition. */
export type StaticLimit = 'rudder travel' | 'aileron travel' | 'pedal force' | 'fin stall';

export const STATIC_LIMITS: readonly StaticLimit[] = ['rudder travel', 'aileron travel', 'pedal force', 'fin stall'];

/**
 * Pedal force over its limit for a held rudder with zero trim; 0 where the data states no force or no limit.
 *
 * @param aircraft   Prepared aircraft.
 * @param easMps     Equivalent airspeed; m/s.
 * @param rudderRad  Rudder; rad.
 * @param travelRad  Rudder at full pedal, ratio changer counted; rad.
 * @returns          Share of the limit; 1 is the limit.
 * @throws           Nothing.
 * @sign             none
 * @source           Flight model, controls: an artificial force goes with the pedal, a reversible one with the surface.
 */
export function pedalForceUse(aircraft: Aircraft, easMps: number, rudderRad: number, travelRad: number): number {
  const { pedalForce, rudderMaxRad, rudderRatio } = aircraft.controls;
  const limit = forceLimitRudderRad(pedalForce, easMps);
  if (!(limit < Infinity)) return 0;
  const size = Math.abs(rudderRad);
  if (pedalForce?.kind !== 'artificial' || rudderRatio?.mode === 'limit') return size / limit;
  return ((size / travelRad) * rudderMaxRad) / limit;
}
