/** What one revision does in flight, as far as a comparison needs it: modes with levels, control speeds, crosswind. */
import { prepareAircraft, stallTasMps } from '#shared/model/aircraft.ts';
import { densityAt } from '#shared/model/atmosphere.ts';
import { casFromTas } from '#shared/model/airspeeds.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { buildSmallDisturbance } from '#shared/model/small-disturbance.ts';
import { criticalEngine } from '#shared/analysis/critical-engine.ts';
import { modalCriteria, type CriterionResult } from '#shared/analysis/criteria-8785c.ts';
import type { AircraftClass, FlightCategory } from '#shared/analysis/criteria-tables.ts';
import { minimumControlSpeed } from '#shared/analysis/minimum-control-speed.ts';
import { modeShapes } from '#shared/analysis/mode-shapes.ts';
import { lateralModes, type Mode } from '#shared/analysis/modes.ts';
import { crosswindLimit } from '#shared/analysis/sideslip-crosswind.ts';
import { sPlaneBoundaries, type SPlaneBoundary } from '#shared/analysis/s-plane-regions.ts';
import { DEG, KT } from '#shared/units/constants.ts';

export interface Condition {
  configuration: string;
  /** True airspeed, m/s. */
  tasMps: number;
  heightM: number;
}
export interface Consequences {
  modes: Mode[];
  criteria: CriterionResult[];
  /** Worst level of the modal criteria; 4 is below Level 3. */
  level: number;
  klass: AircraftClass;
  category: FlightCategory;
  /** Calibrated, kt, over bank toward the live engine in degrees; null where none was found. */
  bankDeg: number[];
  controlSpeedKt: (number | null)[];
  binding: { wingsLevel: string; banked: string };
  failed: string | null;
  stallKt: number;
  crosswind: { kt: number; withinDataKt: number; binds: string; outside: boolean; sideslipDeg: number } | null;
}

const BANKS = [0, 1, 2, 3, 4, 5];

export function consequencesOf(airframe: Airframe, condition: Condition): Consequences {
  const known = airframe.configurations.some((c) => c.name === condition.configuration);
  const aircraft = prepareAircraft(airframe, known ? { configuration: condition.configuration } : {});
  const { tasMps, heightM } = condition;
  const system = buildSmallDisturbance(aircraft, { tasMps, heightM });
  const found = lateralModes(system.A);
  const sigma = densityAt(heightM) / densityAt(0);
  const shape = modeShapes(system.A, 4, found, tasMps, sigma).find((s) => s.mode.kind === 'dutch-roll');
  const klass: AircraftClass = aircraft.class === 'II' ? 'II-L' : aircraft.class;
  const criteria = modalCriteria(found, shape?.phiOverBeta ?? null, klass, aircraft.category);
  const level = Math.max(1, ...criteria.map((c) => (typeof c.level === 'number' ? c.level : 1)));
  const stallKt = casFromTas(stallTasMps(aircraft, densityAt(heightM)), heightM) / KT;
  const critical = aircraft.engines.length > 0 ? criticalEngine(aircraft, { heightM }) : null;
  const speeds = BANKS.map((deg) =>
    critical
      ? minimumControlSpeed(aircraft, { heightM, failed: [critical.index], bank: { exactlyRad: deg * DEG } })
      : null,
  );
  const limit = crosswindLimit(aircraft, tasMps, heightM);
  const binds = (i: number): string => {
    const speed = speeds[i];
    return speed?.found ? speed.limitedBy : (speed?.message ?? 'no engine');
  };
  return {
    modes: found.modes,
    criteria,
    level,
    klass,
    category: aircraft.category,
    bankDeg: BANKS,
    controlSpeedKt: speeds.map((s) => (s?.found ? s.casMps / KT : null)),
    binding: { wingsLevel: binds(0), banked: binds(BANKS.length - 1) },
    failed: critical?.name ?? null,
    stallKt,
    crosswind: {
      kt: limit.controlPower.crosswindMps / KT,
      withinDataKt: limit.withinData.crosswindMps / KT,
      binds: limit.limitedBy,
      outside: limit.outsideData,
      sideslipDeg: Math.abs(limit.controlPower.betaRad) / DEG,
    },
  };
}

/** Level regions up to a height of the s-plane that shows all given roots. */
export function regionsFor(sets: readonly Consequences[]): { top: number; boundaries: SPlaneBoundary[] } {
  const first = sets[0];
  const top = Math.max(1, ...sets.flatMap((s) => s.modes.map((m) => m.im * 1.3)));
  return { top, boundaries: first ? sPlaneBoundaries(first.klass, first.category, top, null) : [] };
}
