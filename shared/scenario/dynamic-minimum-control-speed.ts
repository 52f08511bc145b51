import type { Airframe } from '../model/airframe-schema.ts';
import { stallTasMps } from '../model/aircraft.ts';
import { casFromTas, tasFromCas } from '../model/airspeeds.ts';
import { densityAt } from '../model/atmosphere.ts';
import { createPlant } from '../model/plant.ts';
import { TICK_RATE_HZ } from '../model/plant-types.ts';
import type { Plant } from '../model/plant-types.ts';
import { ModelError } from '../model/errors.ts';
import * as X from '../model/state-layout.ts';
import { NumericsError } from '../numerics/errors.ts';
import { DEG, KT } from '../units/constants.ts';
import { createPilotCore } from './pilot-core.ts';
import { delayTicks } from './reference-pilot.ts';

/** What a sudden cut must stay within, and for how long (14 CFR 25.149: heading; bank and time ours). */
export const DYNAMIC_LIMITS = { headingRad: 20 * DEG, bankRad: 45 * DEG, lastsS: 10, delayS: 1 } as const;
/** Search: steps upward from the stall, then bisection to this; m/s, calibrated. */
const COARSE_MPS = 2 * KT;
const FINE_MPS = 0.02 * KT;
/** Not looked for beyond this many stall speeds. */
const HIGHEST_STALLS = 4;
const FULL = 32767;

export interface DynamicSpeed {
  found: true;
  casMps: number;
  tasMps: number;
  stallCasMps: number;
  /** True when the cut is survived at the stall already: the dynamic limit lies below it. */
  belowStall: boolean;
  failed: string;
}
export interface NoDynamicSpeed {
  found: false;
  reason: 'not-held-at-any-speed' | 'no-engine' | 'cannot-be-trimmed';
  message: string;
  stallCasMps: number;
}

/**
 * Dynamic minimum control speed: the lowest speed at which a sudden cut from wings-level trim at full lever, met by the
 * reference pilot after 1 s, stays within 20° of heading and 45° of bank for 10 s.
 *
 * Path 0, hold-path, zero-sideslip technique; searched from the 1 g stall upward.
 *
 * @param airframe  Parsed airframe.
 * @param request   Failed engine (index), height (m), configuration, loading, delay (s; default 1).
 * @returns         The speed, or the reason why there is none.
 * @throws {ModelError} unknown-configuration, unknown-loading, unknown-engine.
 * @sign            none
 * @source          Flight model, minimum control speed (dynamic); 14 CFR 25.149 for the heading; MIL-F-8785C 3.3.9.3 for
 *                  the second of delay (memory).
 */
export function dynamicMinimumControlSpeed(
  airframe: Airframe,
  request: { failed: number; heightM: number; configuration?: string; loading?: string | null; delayS?: number },
): DynamicSpeed | NoDynamicSpeed {
  const { heightM } = request;
  const probe = plantAt(airframe, request, 60);
  const stallTas = stallTasMps(probe?.aircraft ?? prepared(airframe, request), densityAt(heightM));
  const stallCasMps = casFromTas(stallTas, heightM);
  if (airframe.engines.length === 0)
    return { found: false, reason: 'no-engine', message: 'the airframe has no engine', stallCasMps };
  const name = airframe.engines[request.failed]?.name;
  if (name === undefined)
    throw new ModelError('unknown-engine', `there is no engine number ${request.failed}`, 'failed');
  const held = (casMps: number): boolean | null => heldAt(airframe, request, casMps);
  const atStall = held(stallCasMps);
  const answer = (casMps: number, belowStall: boolean): DynamicSpeed => ({
    found: true,
    casMps,
    tasMps: tasFromCas(casMps, heightM),
    stallCasMps,
    belowStall,
    failed: name,
  });
  if (atStall === true) return answer(stallCasMps, true);
  let low = stallCasMps;
  let trimmed = atStall !== null;
  for (let cas = stallCasMps + COARSE_MPS; cas <= HIGHEST_STALLS * stallCasMps; cas += COARSE_MPS) {
    const result = held(cas);
    trimmed ||= result !== null;
    if (result === true) {
      let high = cas;
      while (high - low > FINE_MPS) {
        const middle = 0.5 * (low + high);
        if (held(middle) === true) high = middle;
        else low = middle;
      }
      return answer(high, false);
    }
    low = cas;
  }
  return trimmed
    ? {
        found: false,
        reason: 'not-held-at-any-speed',
        message: `the cut is not held at any speed up to ${HIGHEST_STALLS} stall speeds`,
        stallCasMps,
      }
    : {
        found: false,
        reason: 'cannot-be-trimmed',
        message: 'straight flight at full lever cannot be trimmed',
        stallCasMps,
      };
}

type Request = Parameters<typeof dynamicMinimumControlSpeed>[1];

function prepared(airframe: Airframe, request: Request) {
  const plant = plantAt(airframe, request, 200);
  if (plant) return plant.aircraft;
  throw new ModelError('singular-trim', 'straight flight at full lever cannot be trimmed at any speed tried');
}

/** The aeroplane trimmed at full lever; null when it cannot be trimmed there. */
function plantAt(airframe: Airframe, request: Request, casMps: number): Plant | null {
  try {
    return createPlant({
      airframe,
      configuration: request.configuration,
      loading: request.loading ?? null,
      fidelity: 'large-angle',
      technique: 'zero-sideslip',
      start: { casMps, heightM: request.heightM, headingRad: 0, pathRad: 0, levers: airframe.engines.map(() => 1) },
      runway: null,
      air: { windFromRad: 0, windMps: 0, profile: 'none', turbulence: 'none' },
      automation: { pitch: { mode: 'hold-path', pathRad: 0 }, yawDamper: false, rudderRatio: true },
      seed: 1,
    });
  } catch (error) {
    if (error instanceof ModelError && (error.code === 'singular-trim' || error.code === 'trim-beyond-travel'))
      return null;
    throw error;
  }
}

function heldAt(airframe: Airframe, request: Request, casMps: number): boolean | null {
  const plant = plantAt(airframe, request, casMps);
  if (!plant) return null;
  let pilot;
  try {
    pilot = createPilotCore(plant, { kind: 'hold-heading' }, 'zero-sideslip', {
      tasMps: plant.x[X.X_V],
      heightM: request.heightM,
      thetaRad: 0,
    });
  } catch (error) {
    if (error instanceof NumericsError) return false;
    throw error;
  }
  plant.failEngine(request.failed, 'windmilling');
  const wake = delayTicks(request.delayS ?? DYNAMIC_LIMITS.delayS);
  const ticks = DYNAMIC_LIMITS.lastsS * TICK_RATE_HZ;
  for (let tick = 0; tick < ticks; tick++) {
    if (tick >= wake) {
      pilot.step();
      plant.inputs.stick = Math.round(pilot.stick * FULL) / FULL;
      plant.inputs.pedal = Math.round(pilot.pedal * FULL) / FULL;
    }
    if (!plant.step()) return false;
    if (Math.abs(plant.x[X.X_PSI]) > DYNAMIC_LIMITS.headingRad || Math.abs(plant.x[X.X_PHI]) > DYNAMIC_LIMITS.bankRad)
      return false;
  }
  return true;
}
