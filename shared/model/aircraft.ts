import { DEG, G0, KT } from '../units/constants.ts';
import type { Aircraft, ControlData, EngineData, FinData } from './aircraft-data.ts';
import type { Airframe, AirframeConfiguration, AirframeDerivativeRow, AirframeLoading } from './airframe-format.ts';
import { buildTable, DERIVATIVE_COUNT, rowAlphaRad, ROLL_BETA, SIDE_BETA, SIDE_R, YAW_BETA } from './derivatives.ts';
import type { DerivativeTable } from './derivatives.ts';
import { ModelError, requireFiniteNumber } from './errors.ts';
import { inertiasBodyToStability } from './inertia.ts';
import type { LateralInertias } from './inertia.ts';

export type {
  Aircraft,
  ControlData,
  EngineData,
  FinData,
  PedalForceData,
  RudderRatioData,
  YawDamperData,
} from './aircraft-data.ts';

/** Shortest time constant of a surface or an engine; s. Shorter ones are lengthened to one tick (ours). */
export const SHORTEST_LAG_S = 1 / 120;

export interface AircraftOptions {
  /** Default: the first. */
  configuration?: string;
  /** Default: none, the base mass. */
  loading?: string | null;
  /** Dorsal fin fitted; default: what the data says. */
  dorsal?: boolean;
}

/**
 * The aircraft of an airframe in one configuration and loading, SI units and radians.
 *
 * Centre-of-gravity shifts of the loading are applied to every row and to the fin arm. The dorsal fin raises the stall
 * angle only where the data gives `stallAngleWithDorsal_deg`. A loading's inertias replace those it names; Iyy absent is
 * the larger of Izz − Ixx and Ixx.
 *
 * @param airframe  Parsed airframe.
 * @param options   Configuration, loading, dorsal fin.
 * @returns         A fresh aircraft.
 * @throws {ModelError} unknown-configuration, unknown-loading.
 * @sign            As this folder's README.
 * @source          Flight model, airframe data.
 */
export function prepareAircraft(airframe: Airframe, options: AircraftOptions = {}): Aircraft {
  const configuration = findConfiguration(airframe, options.configuration);
  const loading = findLoading(airframe, options.loading ?? null);
  const { mass, geometry } = airframe;
  const Ixx = loading?.Ixx_kgm2 ?? mass.Ixx_kgm2;
  const Izz = loading?.Izz_kgm2 ?? mass.Izz_kgm2;
  const shift = loading?.cgAft_m ?? 0;
  return {
    name: airframe.name,
    class: airframe.class,
    configuration: configuration.name,
    loading: loading?.name ?? null,
    category: configuration.category,
    wingAreaM2: geometry.wingArea_m2,
    spanM: geometry.wingSpan_m,
    chordM: geometry.meanChord_m,
    massKg: loading?.mass_kg ?? mass.mass_kg,
    Ixx,
    Iyy: loading?.Iyy_kgm2 ?? mass.Iyy_kgm2 ?? Math.max(Izz - Ixx, Ixx),
    Izz,
    Ixz: loading?.Ixz_kgm2 ?? mass.Ixz_kgm2,
    inertiaAxes: mass.axes,
    CLmax: configuration.CLmax,
    CD0: configuration.CD0,
    kInduced: configuration.kInduced,
    CDbeta2: configuration.CD_beta2,
    CLalphaPerRad: configuration.CL_alpha_per_rad ?? NaN,
    alphaZeroLiftRad: (configuration.alphaZeroLift_deg ?? NaN) * DEG,
    derivatives: tableOf(configuration.derivatives, shift / geometry.wingSpan_m),
    fin: finOf(airframe, options.dorsal, shift),
    controls: controlsOf(airframe),
    yawDamper: airframe.yawDamper
      ? {
          gainS: airframe.yawDamper.gain_s,
          washoutS: airframe.yawDamper.washout_s,
          authorityRad: airframe.yawDamper.authority_deg * DEG,
        }
      : null,
    engines: airframe.engines.map(engineOf),
  };
}

function findConfiguration(airframe: Airframe, name: string | undefined): AirframeConfiguration {
  if (name === undefined) return airframe.configurations[0];
  const found = airframe.configurations.find((configuration) => configuration.name === name);
  if (found) return found;
  const known = airframe.configurations.map((configuration) => configuration.name).join(', ');
  throw new ModelError(
    'unknown-configuration',
    `there is no configuration "${name}" (known: ${known})`,
    'configuration',
  );
}

function findLoading(airframe: Airframe, name: string | null): AirframeLoading | null {
  if (name === null) return null;
  const found = airframe.loadings?.find((loading) => loading.name === name);
  if (found) return found;
  const known = airframe.loadings?.map((loading) => loading.name).join(', ') ?? 'none';
  throw new ModelError('unknown-loading', `there is no loading "${name}" (known: ${known})`, 'loading');
}

/** Rows in ascending CL, shifted to a centre of gravity `aft` spans behind the reference. */
function tableOf(rows: readonly AirframeDerivativeRow[], aft: number): DerivativeTable {
  const sorted = [...rows].sort((a, b) => a.CL - b.CL);
  const values = new Float64Array(sorted.length * DERIVATIVE_COUNT);
  sorted.forEach((row, i) => {
    const v = values.subarray(i * DERIVATIVE_COUNT, (i + 1) * DERIVATIVE_COUNT);
    v.set([row.CY_beta, row.CY_p, row.CY_r, row.CY_da, row.CY_dr]);
    v.set([row.Cl_beta, row.Cl_p, row.Cl_r, row.Cl_da, row.Cl_dr], ROLL_BETA);
    v.set([row.Cn_beta, row.Cn_p, row.Cn_r, row.Cn_da, row.Cn_dr], YAW_BETA);
    if (aft === 0) return;
    // beta at the old reference = beta + 2(aft) r b/2V; then moments about the new centre of gravity.
    for (const family of [SIDE_BETA, ROLL_BETA, YAW_BETA]) v[family + SIDE_R] += 2 * aft * v[family];
    for (let k = 0; k < ROLL_BETA; k++) v[YAW_BETA + k] += aft * v[SIDE_BETA + k];
  });
  return buildTable(
    Float64Array.from(sorted, (row) => row.CL),
    values,
    Float64Array.from(sorted, (row) => (row.alpha_deg ?? NaN) * DEG),
  );
}

function finOf({ fin }: Airframe, dorsal: boolean | undefined, aftM: number): FinData | null {
  if (!fin) return null;
  const fitted = dorsal ?? fin.dorsal;
  return {
    areaM2: fin.area_m2,
    armM: fin.arm_m - aftM,
    heightM: fin.height_m,
    liftSlopePerRad: fin.liftSlope_per_rad,
    sidewash: fin.sidewash,
    rudderTau: fin.rudderTau,
    stallAngleRad: (fitted ? (fin.stallAngleWithDorsal_deg ?? fin.stallAngle_deg) : fin.stallAngle_deg) * DEG,
    stallDrop: fin.stallDrop,
  };
}

function controlsOf({ controls }: Airframe): ControlData {
  const { rudderRatio, pedalForce } = controls;
  const table = rudderRatio?.table ?? [];
  return {
    aileronMaxRad: controls.aileronMax_deg * DEG,
    rudderMaxRad: controls.rudderMax_deg * DEG,
    aileronRateRadS: controls.aileronRate_deg_s * DEG,
    rudderRateRadS: controls.rudderRate_deg_s * DEG,
    lagS: Math.max(controls.lag_s, SHORTEST_LAG_S),
    rudderRatio: rudderRatio
      ? {
          mode: rudderRatio.mode,
          law: rudderRatio.law,
          fullUpToMps: (rudderRatio.fullUpTo_kt ?? NaN) * KT,
          tableMps: Float64Array.from(table, ([kt]) => kt * KT),
          tableRatio: Float64Array.from(table, ([, k]) => k),
        }
      : null,
    pedalForce: pedalForce
      ? {
          kind: pedalForce.kind,
          newtonPerRad: pedalForce.N_per_deg / DEG,
          atMps: (pedalForce.at_kt ?? NaN) * KT,
          limitN: pedalForce.limit_N ?? Infinity,
        }
      : null,
  };
}

function engineOf(engine: Airframe['engines'][number]): EngineData {
  const spin = engine.rotation === 'clockwise' ? 1 : -1;
  return {
    name: engine.name,
    kind: engine.kind,
    yM: engine.y_m,
    staticThrustN: engine.staticThrust_N,
    powerW: engine.kind === 'propeller' ? (engine.power_W ?? 0) * engine.efficiency : 0,
    spin,
    yEffectiveM: engine.y_m + spin * engine.bladeOffset_m,
    slipstreamLift: engine.slipstreamLift,
    torqueArmM: engine.torqueArm_m,
    swirlArmM: engine.swirlArm_m,
    windmillAreaM2: engine.windmillDragArea_m2,
    featheredAreaM2: engine.featheredDragArea_m2,
    spoolDownS: Math.max(engine.spoolDown_s, SHORTEST_LAG_S),
    spoolUpS: Math.max(engine.spoolUp_s, SHORTEST_LAG_S),
    featherTimeS: engine.featherTime_s,
  };
}

/**
 * Inertias about the stability axes of a trimmed condition.
 *
 * Data in stability axes is returned as it is (held constant over conditions); data in body axes is rotated by the rows'
 * angle of attack at the trim lift coefficient.
 *
 * @param aircraft  Prepared aircraft.
 * @param CL        Trim lift coefficient.
 * @returns         Ixx, Izz, Ixz; kg·m².
 * @throws          Nothing.
 * @sign            Ixz = ∫xz dm.
 * @source          Flight model, airframe data.
 */
export function stabilityInertias(aircraft: Aircraft, CL: number): LateralInertias {
  const { Ixx, Izz, Ixz } = aircraft;
  if (aircraft.inertiaAxes === 'stability') return { Ixx, Izz, Ixz };
  return inertiasBodyToStability({ Ixx, Izz, Ixz }, rowAlphaRad(aircraft.derivatives, CL));
}

/**
 * True airspeed of the 1 g stall; m/s.
 *
 * @param aircraft    Prepared aircraft.
 * @param densityKgM3 Air density; kg/m³.
 * @returns           √(2mg/(ρ S CLmax)); m/s.
 * @throws {ModelError} non-finite-input.
 * @sign              none
 * @source            Definition; power off.
 */
export function stallTasMps(aircraft: Aircraft, densityKgM3: number): number {
  requireFiniteNumber(densityKgM3, 'density');
  return Math.sqrt((2 * aircraft.massKg * G0) / (densityKgM3 * aircraft.wingAreaM2 * aircraft.CLmax));
}
