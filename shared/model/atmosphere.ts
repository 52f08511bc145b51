import { exp, pow } from '../numerics/elementary.ts';
import { G0 } from '../units/constants.ts';
import { requireFiniteNumber } from './errors.ts';

/** ISA constants (ISO 2533:1975). */
export const SEA_LEVEL_TEMPERATURE_K = 288.15;
export const SEA_LEVEL_PRESSURE_PA = 101325;
export const GAS_CONSTANT = 287.05287;
export const HEAT_RATIO = 1.4;
export const LAPSE_K_PER_M = 0.0065;
export const TROPOPAUSE_M = 11000;
export const SEA_LEVEL_DENSITY = SEA_LEVEL_PRESSURE_PA / (GAS_CONSTANT * SEA_LEVEL_TEMPERATURE_K);
export const TROPOPAUSE_TEMPERATURE_K = SEA_LEVEL_TEMPERATURE_K - LAPSE_K_PER_M * TROPOPAUSE_M;
/** Exponents of temperature ratio in pressure and density below the tropopause. */
export const PRESSURE_EXPONENT = G0 / (LAPSE_K_PER_M * GAS_CONSTANT);
export const DENSITY_EXPONENT = PRESSURE_EXPONENT - 1;
/** Scale height of the isothermal layer; m. */
export const SCALE_HEIGHT_M = (GAS_CONSTANT * TROPOPAUSE_TEMPERATURE_K) / G0;
export const SEA_LEVEL_SOUND_MPS = Math.sqrt(HEAT_RATIO * GAS_CONSTANT * SEA_LEVEL_TEMPERATURE_K);
const TROPOPAUSE_DENSITY =
  SEA_LEVEL_DENSITY * pow(TROPOPAUSE_TEMPERATURE_K / SEA_LEVEL_TEMPERATURE_K, DENSITY_EXPONENT);
/** Heights are held inside this range, which keeps density positive and finite; m (ours). */
const LOWEST_M = -5000;
const HIGHEST_M = 30000;

function held(heightM: number): number {
  return heightM < LOWEST_M ? LOWEST_M : heightM > HIGHEST_M ? HIGHEST_M : heightM;
}

/**
 * Air temperature of the standard atmosphere; K.
 *
 * Linear to 11 km, constant above; heights are taken as geopotential and held between −5 km and 30 km.
 *
 * @param heightM  Height above sea level; m.
 * @returns        Temperature; K.
 * @throws         Nothing.
 * @sign           none
 * @source         ISO 2533:1975, Standard Atmosphere.
 */
export function temperatureK(heightM: number): number {
  const h = held(heightM);
  return h < TROPOPAUSE_M ? SEA_LEVEL_TEMPERATURE_K - LAPSE_K_PER_M * h : TROPOPAUSE_TEMPERATURE_K;
}

/**
 * Air density of the standard atmosphere; kg/m³.
 *
 * @param heightM  Height above sea level; m; held between −5 km and 30 km.
 * @returns        Density; kg/m³.
 * @throws         Nothing.
 * @sign           none
 * @source         ISO 2533:1975, Standard Atmosphere.
 */
export function densityAt(heightM: number): number {
  const h = held(heightM);
  if (h < TROPOPAUSE_M) {
    return SEA_LEVEL_DENSITY * pow(1 - (LAPSE_K_PER_M * h) / SEA_LEVEL_TEMPERATURE_K, DENSITY_EXPONENT);
  }
  return TROPOPAUSE_DENSITY * exp(-(h - TROPOPAUSE_M) / SCALE_HEIGHT_M);
}

/**
 * Density close to an anchor height whose density is known; kg/m³.
 *
 * Third-order series, fourth in the isothermal layer; the error is below 2e-12 of the density within 30 m.
 *
 * @param rise         Height above the anchor; m.
 * @param density      Density at the anchor; kg/m³.
 * @param temperature  Temperature at the anchor; K.
 * @param troposphere  Whether the anchor lies below 11 km.
 * @returns            Density; kg/m³.
 * @throws             Nothing.
 * @sign               rise positive upward
 * @source             Expansion of ISO 2533:1975.
 */
export function densityNear(rise: number, density: number, temperature: number, troposphere: boolean): number {
  const n = DENSITY_EXPONENT;
  if (!troposphere) {
    const part = -rise / SCALE_HEIGHT_M;
    return density * (1 + part * (1 + 0.5 * part * (1 + (part / 3) * (1 + 0.25 * part))));
  }
  const part = (-LAPSE_K_PER_M * rise) / temperature;
  return density * (1 + n * part * (1 + 0.5 * (n - 1) * part * (1 + ((n - 2) / 3) * part)));
}

/**
 * Static pressure of the standard atmosphere; Pa.
 *
 * @param heightM  Height above sea level; m; held between −5 km and 30 km.
 * @returns        Pressure; Pa.
 * @throws         Nothing.
 * @sign           none
 * @source         ISO 2533:1975, Standard Atmosphere.
 */
export function pressurePa(heightM: number): number {
  return densityAt(heightM) * GAS_CONSTANT * temperatureK(heightM);
}

/**
 * Speed of sound in the standard atmosphere; m/s.
 *
 * @param heightM  Height above sea level; m; held between −5 km and 30 km.
 * @returns        Speed of sound; m/s.
 * @throws         Nothing.
 * @sign           none
 * @source         ISO 2533:1975, Standard Atmosphere.
 */
export function soundMps(heightM: number): number {
  return Math.sqrt(HEAT_RATIO * GAS_CONSTANT * temperatureK(heightM));
}

export interface AirData {
  densityKgM3: number;
  /** Density over that at sea level. */
  sigma: number;
  temperatureK: number;
  pressurePa: number;
  soundMps: number;
}

/**
 * Density, density ratio, temperature, pressure and speed of sound of the standard atmosphere.
 *
 * @param heightM  Height above sea level; m; finite; held between −5 km and 30 km.
 * @returns        A fresh record; SI.
 * @throws {ModelError} non-finite-input.
 * @sign           none
 * @source         ISO 2533:1975, Standard Atmosphere.
 */
export function standardAtmosphere(heightM: number): AirData {
  requireFiniteNumber(heightM, 'height');
  const densityKgM3 = densityAt(heightM);
  const temperature = temperatureK(heightM);
  return {
    densityKgM3,
    sigma: densityKgM3 / SEA_LEVEL_DENSITY,
    temperatureK: temperature,
    pressurePa: densityKgM3 * GAS_CONSTANT * temperature,
    soundMps: Math.sqrt(HEAT_RATIO * GAS_CONSTANT * temperature),
  };
}
