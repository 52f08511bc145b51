/** Steady-heading sideslip and crosswind of up to four revisions at the condition, and over speed. */
import { stallTasMps } from '../model/aircraft.ts';
import { casFromTas } from '../model/airspeeds.ts';
import { densityAt } from '../model/atmosphere.ts';
import { crosswindLimit, steadySideslips } from './sideslip-crosswind.ts';
import { DEG, KT } from '../units/constants.ts';
import { prepareSubject, type BenchCondition, type BenchSubject, type PreparedSubject } from './bench-condition.ts';

export interface CrosswindRequest {
  kind: 'crosswind';
  condition: BenchCondition;
  subjects: readonly BenchSubject[];
}
export interface CrosswindOfSubject {
  label: string;
  betaDeg: number[];
  bankDeg: (number | null)[];
  aileronDeg: (number | null)[];
  rudderDeg: (number | null)[];
  withinDataKt: number;
  controlPowerKt: number;
  binds: string;
  outside: boolean;
  at: { betaDeg: number; bankDeg: number; aileronDeg: number; rudderDeg: number };
  /** 0.2 of the stall speed, and the greater of that and 20 kt. */
  fifthOfStallKt: number;
  transportKt: number;
  speedKt: number[];
  speedWithinKt: (number | null)[];
  speedPowerKt: (number | null)[];
}
export interface CrosswindPicture {
  subjects: CrosswindOfSubject[];
  problems: string[];
}

/**
 * Steady-heading sideslips and the crosswind limit of up to four revisions at the condition, and the limit over speed.
 *
 * @param request  Condition and revisions.
 * @returns        What the figures show, in kt and degrees; a revision that cannot be computed is named in `problems`.
 * @throws         Nothing that the model names: those become problems.
 * @sign           Sideslip positive with the wind from the right.
 * @source         Flight model, static limits.
 */
export function crosswindPicture(request: CrosswindRequest): CrosswindPicture {
  const picture: CrosswindPicture = { subjects: [], problems: [] };
  request.subjects.forEach((subject, i) => {
    try {
      picture.subjects.push(crosswindOf(prepareSubject(subject, request.condition, i === 0), request.condition));
    } catch (error) {
      picture.problems.push(`${subject.label}: ${error instanceof Error ? error.message : 'could not be computed'}`);
    }
  });
  return picture;
}

function crosswindOf(ready: PreparedSubject, condition: BenchCondition): CrosswindOfSubject {
  const { aircraft } = ready;
  const { tasMps, heightM } = condition;
  const betas = Array.from({ length: 41 }, (_, i) => i * 0.5 * DEG);
  const points = steadySideslips(aircraft, tasMps, heightM, betas);
  const pick = (of: 'phiRad' | 'aileronRad' | 'rudderRad'): (number | null)[] =>
    betas.map((_, i) => {
      const point = points[i];
      return point ? point[of] / DEG : null;
    });
  const limit = crosswindLimit(aircraft, tasMps, heightM);
  const stallTas = stallTasMps(aircraft, densityAt(heightM));
  const stall = casFromTas(stallTas, heightM) / KT;
  const speeds = Array.from({ length: 29 }, (_, i) => stallTas * (1.05 + i * 0.05));
  const over = speeds.map((v) => {
    try {
      return crosswindLimit(aircraft, v, heightM);
    } catch {
      // A speed that cannot be trimmed leaves a gap in the curve.
      return null;
    }
  });
  return {
    label: ready.label,
    betaDeg: betas.map((b) => b / DEG),
    bankDeg: pick('phiRad'),
    aileronDeg: pick('aileronRad'),
    rudderDeg: pick('rudderRad'),
    withinDataKt: limit.withinData.crosswindMps / KT,
    controlPowerKt: limit.controlPower.crosswindMps / KT,
    binds: limit.limitedBy,
    outside: limit.outsideData,
    at: {
      betaDeg: limit.withinData.betaRad / DEG,
      bankDeg: limit.withinData.phiRad / DEG,
      aileronDeg: limit.withinData.aileronRad / DEG,
      rudderDeg: limit.withinData.rudderRad / DEG,
    },
    fifthOfStallKt: 0.2 * stall,
    transportKt: Math.max(20, 0.2 * stall),
    speedKt: speeds.map((v) => casFromTas(v, heightM) / KT),
    speedWithinKt: over.map((o) => (o ? o.withinData.crosswindMps / KT : null)),
    speedPowerKt: over.map((o) => (o ? o.controlPower.crosswindMps / KT : null)),
  };
}
