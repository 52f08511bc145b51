/** ±2σ of the minimum control speed against bank: seeded draws of every uncertain value of the data. */
import { DEG, KT } from '../units/constants.ts';
import { drawAirframe, uncertainFields } from './airframe-sampling.ts';
import { prepareSubject, shiftedAirframe } from './bench-condition.ts';
import { failedOf, type EngineOutRequest } from './bench-engine-out.ts';
import { minimumControlSpeed } from './minimum-control-speed.ts';

export interface BandRequest extends Omit<EngineOutRequest, 'kind'> {
  kind: 'control-speed-band';
}
export interface BandPicture {
  bankDeg: number[];
  /** Twice the standard deviation; kt; null where too few draws can be held. */
  twoSigmaKt: (number | null)[];
  draws: number;
  /** How many values of the data are uncertain; 0 gives no band. */
  fields: number;
}

export const BAND_DRAWS = 40;
const SEED = 7;
/** Below this share of draws with a value a spread would mislead. */
const LEAST_SHARE = 0.8;
const BANKS_DEG = Array.from({ length: 13 }, (_, i) => -6 + 1.5 * i);

/**
 * Spread of the minimum control speed at banks from −6° to 12°, of the first revision of the request.
 *
 * @param request  As of the Engine out figures.
 * @returns        2σ at each bank; nulls without stated uncertainties.
 * @throws {ModelError} When the undrawn revision cannot be computed.
 * @sign           Bank positive toward the live engine.
 * @source         `drawAirframe`; the number of draws is ours.
 */
export function bandPicture(request: BandRequest): BandPicture {
  const { condition } = request;
  const none = { bankDeg: BANKS_DEG, twoSigmaKt: BANKS_DEG.map(() => null), draws: 0, fields: 0 };
  if (request.subjects.length === 0) return none;
  const base = shiftedAirframe(request.subjects[0].airframe, condition.shifts);
  const fields = uncertainFields(base);
  if (fields.length === 0 || base.engines.length === 0) return none;
  const still = { ...condition, shifts: {} };
  const failed = failedOf(prepareSubject({ label: '', airframe: base }, still, false).aircraft, request);
  const { heightM } = condition;
  const { lever, feathered } = request;
  const values = BANKS_DEG.map(() => [] as number[]);
  for (let draw = 0; draw < BAND_DRAWS; draw++) {
    try {
      const airframe = drawAirframe(base, fields, SEED, draw);
      const { aircraft } = prepareSubject({ label: '', airframe }, still, false);
      BANKS_DEG.forEach((deg, i) => {
        const speed = minimumControlSpeed(aircraft, {
          heightM,
          failed,
          lever,
          feathered,
          bank: { exactlyRad: deg * DEG },
        });
        if (speed.found) values[i].push(speed.casMps / KT);
      });
    } catch {
      // A drawn airframe that cannot be trimmed here gives no value.
    }
  }
  return { bankDeg: BANKS_DEG, twoSigmaKt: values.map(twoSigma), draws: BAND_DRAWS, fields: fields.length };
}

function twoSigma(values: readonly number[]): number | null {
  if (values.length < BAND_DRAWS * LEAST_SHARE) return null;
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  return 2 * Math.sqrt(values.reduce((sum, value) => sum + (value - mean) * (value - mean), 0) / (values.length - 1));
}
