import { cos, PI, pow } from '../numerics/elementary.ts';
import { FT } from '../units/constants.ts';
import { ModelError } from './errors.ts';
import * as D from './plant-memory.ts';
import type { GustAxis, GustShape, WindProfile } from './plant-types.ts';

/** Power-law profile: exponent, height from which the given wind blows, and lowest height it is read at (ours). */
export const PROFILE_EXPONENT = 1 / 7;
export const PROFILE_TOP_M = 1000 * FT;
export const PROFILE_FLOOR_M = 10 * FT;
/** Shortest change of wind; s. */
export const SHORTEST_WIND_CHANGE_S = 1;

/** What the right-hand sides ask of the air. */
export interface AirFlow {
  /** [north, east, d/dt north, d/dt east] of the mean wind met on the way; m/s, m/s². */
  windInto(out: Float64Array, timeS: number, heightM: number, climbMps: number): void;
  /** [lateral, roll rate, yaw rate] of the gusts that are growing or passing; m/s, rad/s. */
  gustInto(out: Float64Array, timeS: number, distanceM: number): void;
}

/**
 * Share of the given wind that blows at a height over the ground.
 *
 * The given wind is that of 1,000 ft and above (ours); below, (h/1,000 ft)^(1/7), read no lower than 10 ft.
 *
 * @param profile  none or power-law.
 * @param heightM  Height above the ground; m.
 * @returns        Factor; 0 < f ≤ 1.
 * @throws         Nothing.
 * @sign           none
 * @source         Flight model, air; power law, common practice.
 */
export function profileFactor(profile: WindProfile, heightM: number): number {
  if (profile === 'none' || heightM >= PROFILE_TOP_M) return 1;
  return pow(Math.max(heightM, PROFILE_FLOOR_M) / PROFILE_TOP_M, PROFILE_EXPONENT);
}

/**
 * Wind and discrete gusts of a plant, read from its memory.
 *
 * @param d         Memory (plant-memory.ts).
 * @param profile   Profile of the mean wind.
 * @param groundM   Elevation from which the profile counts; m.
 * @returns         The two functions the right-hand sides call; they allocate nothing.
 * @throws          Nothing.
 * @sign            lateral gust: air moving to the right positive; rates: air turning or rolling to the right positive
 * @source          Flight model, air; 14 CFR 25.341(a) for the shape one minus cosine.
 */
export function createAirFlow(d: number[], profile: WindProfile, groundM: number): AirFlow {
  return {
    windInto(out, timeS, heightM, climbMps) {
      const t0 = d[D.D_WIND_T0];
      const t1 = d[D.D_WIND_T1];
      const north = D.rampAt(d[D.D_WIND_FROM_N], d[D.D_WIND_TO_N], t0, t1, timeS);
      const east = D.rampAt(d[D.D_WIND_FROM_E], d[D.D_WIND_TO_E], t0, t1, timeS);
      const changing = timeS >= t0 && timeS < t1 ? 1 / (t1 - t0) : 0;
      const above = heightM - groundM;
      const factor = profileFactor(profile, above);
      const slope =
        profile === 'none' || above >= PROFILE_TOP_M || above <= PROFILE_FLOOR_M
          ? 0
          : ((PROFILE_EXPONENT * factor) / above) * climbMps;
      out[0] = factor * north;
      out[1] = factor * east;
      out[2] = slope * north + factor * changing * (d[D.D_WIND_TO_N] - d[D.D_WIND_FROM_N]);
      out[3] = slope * east + factor * changing * (d[D.D_WIND_TO_E] - d[D.D_WIND_FROM_E]);
    },
    gustInto(out, timeS, distanceM) {
      out[0] = 0;
      out[1] = 0;
      out[2] = 0;
      const count = d[D.D_GUST_COUNT];
      for (let i = 0, at = D.D_GUSTS; i < count; i++, at += D.GUST_STRIDE) {
        const gone = (d[at + D.G_BY_DISTANCE] !== 0 ? distanceM : timeS) - d[at + D.G_START];
        out[d[at + D.G_AXIS]] += gustValue(d[at + D.G_SHAPE], d[at + D.G_PEAK], gone / d[at + D.G_LENGTH]);
      }
    },
  };
}

/** A gust's value at `share` of its length: ramp up to 1 and held, or one minus cosine with its peak at 1, gone at 2. */
function gustValue(shape: number, peak: number, share: number): number {
  if (share <= 0) return 0;
  if (shape === 1) return share < 1 ? peak * share : peak;
  return share < 2 ? 0.5 * peak * (1 - cos(PI * share)) : 0;
}

export interface GustRequest {
  axis: GustAxis;
  shape: GustShape;
  peak: number;
  gradientDistanceM?: number;
  overS?: number;
}

/** Time over which a ramp grows when neither time nor distance is given (ours). */
const DEFAULT_RAMP_S = 1;
/** Gradient distance when none is given; m (ours). */
const DEFAULT_GRADIENT_M = 60;

/**
 * Adds a gust to a plant's memory.
 *
 * A step acts at once and stays; a ramp reaches its peak in `overS` (or over `gradientDistanceM`) and stays; one minus
 * cosine peaks at `gradientDistanceM` (or `overS` when only that is given) and is gone at twice that.
 *
 * @param d           Memory.
 * @param gust        Axis, shape, signed peak (m/s or rad/s), length.
 * @param timeS       Run time; s.
 * @param distanceM   Air distance flown; m.
 * @returns           Nothing.
 * @throws {ModelError} bad-argument, too-many-gusts.
 * @sign              air moving, rolling or turning to the right positive
 * @source            Flight model, air.
 */
export function addGustTo(d: number[], gust: GustRequest, timeS: number, distanceM: number): void {
  const { axis, shape, peak, gradientDistanceM, overS } = gust;
  const index = axis === 'lateral' ? 0 : axis === 'roll-rate' ? 1 : 2;
  if (!Number.isFinite(peak)) throw new ModelError('bad-argument', `the gust's peak is ${peak}`, 'peak');
  for (const [length, name] of [
    [gradientDistanceM, 'gradientDistanceM'],
    [overS, 'overS'],
  ] as const) {
    if (length !== undefined && !(length > 0 && Number.isFinite(length))) {
      throw new ModelError('bad-argument', `the gust's ${name} is ${length}; it must be above 0`, name);
    }
  }
  if (shape === 'step') {
    d[D.D_GUST_V + index] += peak;
    return;
  }
  const count = d[D.D_GUST_COUNT];
  if (count >= D.MAX_GUSTS) {
    throw new ModelError('too-many-gusts', `more than ${D.MAX_GUSTS} gusts at the same time`, 'events');
  }
  const byDistance =
    shape === 'ramp'
      ? overS === undefined && gradientDistanceM !== undefined
      : overS === undefined || gradientDistanceM !== undefined;
  const at = D.D_GUSTS + count * D.GUST_STRIDE;
  d[at + D.G_AXIS] = index;
  d[at + D.G_SHAPE] = shape === 'ramp' ? 1 : 2;
  d[at + D.G_PEAK] = peak;
  d[at + D.G_LENGTH] = byDistance ? (gradientDistanceM ?? DEFAULT_GRADIENT_M) : (overS ?? DEFAULT_RAMP_S);
  d[at + D.G_BY_DISTANCE] = byDistance ? 1 : 0;
  d[at + D.G_START] = byDistance ? distanceM : timeS;
  d[D.D_GUST_COUNT] = count + 1;
}

/**
 * Drops gusts that have passed and folds ramps that are complete into the constant part.
 *
 * @param d  Memory of the plant.
 * @param timeS  Run time; s.
 * @param distanceM  Air distance flown; m.
 * @returns  Nothing.
 * @throws  Nothing.
 * @sign  none
 * @source  Flight model, air.
 */
export function retireGusts(d: number[], timeS: number, distanceM: number): void {
  let kept = 0;
  const count = d[D.D_GUST_COUNT];
  for (let i = 0; i < count; i++) {
    const at = D.D_GUSTS + i * D.GUST_STRIDE;
    const gone = (d[at + D.G_BY_DISTANCE] !== 0 ? distanceM : timeS) - d[at + D.G_START];
    const share = gone / d[at + D.G_LENGTH];
    if (d[at + D.G_SHAPE] === 1 && share >= 1) d[D.D_GUST_V + d[at + D.G_AXIS]] += d[at + D.G_PEAK];
    else if (share < 2) {
      const to = D.D_GUSTS + kept * D.GUST_STRIDE;
      for (let j = 0; j < D.GUST_STRIDE; j++) d[to + j] = d[at + j];
      kept++;
    }
  }
  d[D.D_GUST_COUNT] = kept;
}
