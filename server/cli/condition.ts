import { prepareAircraft } from '#shared/model/aircraft.ts';
import type { Aircraft } from '#shared/model/aircraft.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { casFromTas, tasFromCas } from '#shared/model/airspeeds.ts';
import { ModelError } from '#shared/model/errors.ts';
import { NumericsError } from '#shared/numerics/errors.ts';
import { KT } from '#shared/units/constants.ts';
import { heightOption, speedOption } from './arguments.ts';
import type { ParsedArguments } from './arguments.ts';
import { UsageError } from './usage-error.ts';

/** The aircraft in the configuration that `--configuration` names, else the first. */
export function aircraftOption(args: ParsedArguments, airframe: Airframe, file: string): Aircraft {
  return named(file, () => prepareAircraft(airframe, { configuration: args.values.get('configuration') }));
}

/** True airspeed and height from `--speed` (true) or `--ias` (calibrated) and `--height` (default sea level). */
export function speedAndHeight(args: ParsedArguments): { tasMps: number; casMps: number; heightM: number } {
  const heightM = heightOption(args, 0);
  const tas = speedOption(args, 'speed');
  const cas = speedOption(args, 'ias');
  if (tas !== undefined && cas !== undefined) throw new UsageError('--speed and --ias: give one of them');
  if (tas === undefined && cas === undefined) throw new UsageError('--speed or --ias: missing');
  const tasMps = tas ?? tasFromCas(cas ?? NaN, heightM);
  if (!(tasMps > 0) || !Number.isFinite(tasMps)) throw new UsageError('--ias: gives no true airspeed at this height');
  return { tasMps, casMps: cas ?? casFromTas(tasMps, heightM), heightM };
}

/** Runs a computation and turns the named reasons of the model and of numerics into one line about the file. */
export function named<T>(file: string, compute: () => T): T {
  try {
    return compute();
  } catch (error) {
    if (error instanceof ModelError) {
      const field = error.field === undefined ? '' : `${error.field}: `;
      throw new UsageError(`${file}: ${field}${error.code}: ${error.message}`);
    }
    if (error instanceof NumericsError) throw new UsageError(`${file}: ${error.code}: ${error.message}`);
    throw error;
  }
}

export function knots(mps: number): number {
  return mps / KT;
}
