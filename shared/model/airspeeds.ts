import { pow } from '../numerics/elementary.ts';
import {
  densityAt,
  pressurePa,
  SEA_LEVEL_DENSITY,
  SEA_LEVEL_PRESSURE_PA,
  SEA_LEVEL_SOUND_MPS,
  soundMps,
} from './atmosphere.ts';

/** (γ − 1)/2 of air, and (γ − 1)/γ. The power γ/(γ − 1) = 3.5 is taken with a square root. */
const HALF_GAMMA_MINUS_ONE = 0.2;
const INVERSE_GAMMA_RATIO = 2 / 7;

/** (1 + (γ − 1)/2 M²)^(γ/(γ − 1)) − 1: impact pressure over static pressure. */
function impactRatio(mach: number): number {
  const base = 1 + HALF_GAMMA_MINUS_ONE * mach * mach;
  return base * base * base * Math.sqrt(base) - 1;
}

/**
 * Calibrated airspeed of a true airspeed; m/s.
 *
 * Isentropic compression at the height, read as speed at sea level; valid below Mach 1, no position error.
 *
 * @param tasMps   True airspeed; m/s; its sign is kept.
 * @param heightM  Height above sea level; m.
 * @returns        Calibrated airspeed; m/s.
 * @throws         Nothing; NaN in gives NaN out.
 * @sign           as the true airspeed
 * @source         Standard pitot relation, subsonic; check values in the project's reference table (computed).
 */
export function casFromTas(tasMps: number, heightM: number): number {
  const mach = tasMps / soundMps(heightM);
  const speed = casFromImpactPressure(pressurePa(heightM) * impactRatio(mach));
  return tasMps < 0 ? -speed : speed;
}

/**
 * True airspeed of a calibrated airspeed; m/s.
 *
 * @param casMps   Calibrated airspeed; m/s; its sign is kept.
 * @param heightM  Height above sea level; m.
 * @returns        True airspeed; m/s.
 * @throws         Nothing; NaN in gives NaN out.
 * @sign           as the calibrated airspeed
 * @source         Standard pitot relation, subsonic.
 */
export function tasFromCas(casMps: number, heightM: number): number {
  const seaMach = casMps / SEA_LEVEL_SOUND_MPS;
  const rise = SEA_LEVEL_PRESSURE_PA * impactRatio(seaMach);
  const mach = Math.sqrt((pow(rise / pressurePa(heightM) + 1, INVERSE_GAMMA_RATIO) - 1) / HALF_GAMMA_MINUS_ONE);
  const speed = mach * soundMps(heightM);
  return casMps < 0 ? -speed : speed;
}

/**
 * Calibrated airspeed of an impact pressure; m/s.
 *
 * @param risePa  Total minus static pressure; Pa; ≥ 0.
 * @returns       Calibrated airspeed; m/s.
 * @throws        Nothing.
 * @sign          none
 * @source        Standard pitot relation, subsonic.
 */
export function casFromImpactPressure(risePa: number): number {
  const squared = (pow(risePa / SEA_LEVEL_PRESSURE_PA + 1, INVERSE_GAMMA_RATIO) - 1) / HALF_GAMMA_MINUS_ONE;
  return SEA_LEVEL_SOUND_MPS * Math.sqrt(squared > 0 ? squared : 0);
}

/**
 * Calibrated airspeed from a speed and the air it is flown in; m/s.
 *
 * @param tasMps    True airspeed; m/s; ≥ 0.
 * @param pressure  Static pressure; Pa.
 * @param sound     Speed of sound; m/s.
 * @returns         Calibrated airspeed; m/s.
 * @throws          Nothing.
 * @sign            none
 * @source          Standard pitot relation, subsonic.
 */
export function casInAir(tasMps: number, pressure: number, sound: number): number {
  return casFromImpactPressure(pressure * impactRatio(tasMps / sound));
}

/**
 * Equivalent airspeed of a true airspeed: the speed of equal dynamic pressure at sea level; m/s.
 *
 * @param tasMps   True airspeed; m/s.
 * @param heightM  Height above sea level; m.
 * @returns        Equivalent airspeed; m/s.
 * @throws         Nothing.
 * @sign           as the true airspeed
 * @source         Definition.
 */
export function easFromTas(tasMps: number, heightM: number): number {
  return tasMps * Math.sqrt(densityAt(heightM) / SEA_LEVEL_DENSITY);
}

/**
 * True airspeed of an equivalent airspeed; m/s.
 *
 * @param easMps   Equivalent airspeed; m/s.
 * @param heightM  Height above sea level; m.
 * @returns        True airspeed; m/s.
 * @throws         Nothing.
 * @sign           as the equivalent airspeed
 * @source         Definition.
 */
export function tasFromEas(easMps: number, heightM: number): number {
  return easMps / Math.sqrt(densityAt(heightM) / SEA_LEVEL_DENSITY);
}

/**
 * Mach number of a true airspeed.
 *
 * @param tasMps   True airspeed; m/s.
 * @param heightM  Height above sea level; m.
 * @returns        Mach number.
 * @throws         Nothing.
 * @sign           as the true airspeed
 * @source         Definition.
 */
export function machFromTas(tasMps: number, heightM: number): number {
  return tasMps / soundMps(heightM);
}
