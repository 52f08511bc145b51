import type { Airframe } from './airframe-format.ts';
import type { DerivativeTable } from './derivatives.ts';

export interface FinData {
  areaM2: number;
  armM: number;
  heightM: number;
  liftSlopePerRad: number;
  sidewash: number;
  rudderTau: number;
  /** The stall angle in force: with or without dorsal fin. */
  stallAngleRad: number;
  stallDrop: number;
}

export interface RudderRatioData {
  mode: 'ratio' | 'limit';
  law: 'inverse' | 'inverse-square' | 'table';
  /** Equivalent airspeed; m/s; NaN for a table. */
  fullUpToMps: number;
  /** Equivalent airspeeds of the table; m/s; ascending. */
  tableMps: Float64Array;
  tableRatio: Float64Array;
}

export interface PedalForceData {
  kind: 'reversible' | 'artificial';
  newtonPerRad: number;
  /** Equivalent airspeed at which a reversible gradient holds; m/s; NaN for artificial. */
  atMps: number;
  /** Infinity where the data states none. */
  limitN: number;
}

export interface ControlData {
  aileronMaxRad: number;
  rudderMaxRad: number;
  aileronRateRadS: number;
  rudderRateRadS: number;
  lagS: number;
  rudderRatio: RudderRatioData | null;
  pedalForce: PedalForceData | null;
}

export interface YawDamperData {
  gainS: number;
  washoutS: number;
  authorityRad: number;
}

export interface EngineData {
  name: string;
  kind: 'propeller' | 'jet';
  yM: number;
  staticThrustN: number;
  /** Power × efficiency; W; 0 for jets. */
  powerW: number;
  /** +1 clockwise seen from behind, −1 counter-clockwise. */
  spin: 1 | -1;
  /** Lateral position of the thrust line: y + spin·bladeOffset; m. */
  yEffectiveM: number;
  slipstreamLift: number;
  torqueArmM: number;
  swirlArmM: number;
  windmillAreaM2: number;
  featheredAreaM2: number;
  spoolDownS: number;
  spoolUpS: number;
  featherTimeS: number;
}

/** One airframe in one configuration and loading, in SI units, ready for computation. Treat as read-only. */
export interface Aircraft {
  readonly name: string;
  readonly class: Airframe['class'];
  readonly configuration: string;
  readonly loading: string | null;
  readonly category: 'A' | 'B' | 'C';
  readonly wingAreaM2: number;
  readonly spanM: number;
  readonly chordM: number;
  readonly massKg: number;
  readonly Ixx: number;
  readonly Iyy: number;
  readonly Izz: number;
  readonly Ixz: number;
  readonly inertiaAxes: 'stability' | 'body';
  readonly CLmax: number;
  readonly CD0: number;
  readonly kInduced: number;
  readonly CDbeta2: number;
  /** NaN where the data gives no lift curve. */
  readonly CLalphaPerRad: number;
  readonly alphaZeroLiftRad: number;
  readonly derivatives: DerivativeTable;
  readonly fin: FinData | null;
  readonly controls: ControlData;
  readonly yawDamper: YawDamperData | null;
  readonly engines: readonly EngineData[];
}
