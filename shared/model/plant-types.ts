/**
 * The contract between the aeroplane (model) and whoever flies it (scenario runner, analysis, tests).
 * Types only. SI and radians; signs as in the README of this folder (stability axes, right-handed).
 */
import type { Airframe } from './airframe-schema.ts';
import type { Aircraft } from './aircraft.ts';

/** Ticks per second of the interactive model. */
export const TICK_RATE_HZ = 120;
export const TICK_S = 1 / 120;

export type Fidelity = 'large-angle' | 'small-disturbance';
export type Technique = 'zero-sideslip' | 'ball-centred';
export type WindProfile = 'none' | 'power-law';
export type TurbulenceLevel = 'none' | 'light' | 'moderate' | 'severe';
export type GustShape = 'step' | 'ramp' | 'one-minus-cosine';
export type GustAxis = 'lateral' | 'yaw-rate' | 'roll-rate';

export type PitchMode =
  | { mode: 'hold-lift' }
  | { mode: 'hold-path'; pathRad: number }
  | { mode: 'hold-speed'; targetCasMps: number }
  | { mode: 'decelerate'; rateMps2: number; targetCasMps?: number }
  | { mode: 'glidepath' }
  | { mode: 'manual'; pathRad?: number };

export interface RunwaySetup {
  headingRad: number;
  elevationM: number;
  widthM: number;
  /** Distance of the threshold ahead of the start, on the extended centre line; m. */
  thresholdM: number;
  glidepathRad: number;
  gearHeightM: number;
}

export interface PlantSetup {
  airframe: Airframe;
  configuration?: string;
  loading?: string | null;
  fidelity: Fidelity;
  technique: Technique;
  start: { casMps: number; heightM: number; headingRad: number; pathRad: number; levers: number[] };
  runway?: RunwaySetup | null;
  air: { windFromRad: number; windMps: number; profile: WindProfile; turbulence: TurbulenceLevel };
  automation: { pitch: PitchMode; yawDamper: boolean; rudderRatio: boolean; dorsalFin?: boolean };
  seed: number;
}

/** What the pilot holds over one tick. Cockpit signs: right is positive. Mutable, owned by the plant. */
export interface PlantInputs {
  /** −1 full left … +1 full right. */
  stick: number;
  /** −1 full left … +1 full right. */
  pedal: number;
  /** −1 nose down … +1 nose up; used by pitch mode manual only. */
  pitch: number;
  /** Pilot's rudder trim as a fraction of rudder travel, cockpit sign, added to the start trim. */
  rudderTrim: number;
  /** 0 … 1 per engine. */
  levers: Float64Array;
  /** 1 where the pilot holds the feather switch of that engine on. */
  feather: Uint8Array;
}

/** Contributions to one moment about one axis, N·m, signs of the axis. Their sum is the total of the same name. */
export interface MomentParts {
  beta: number;
  p: number;
  r: number;
  aileron: number;
  rudder: number;
  /** Fin-stall increment (zero when the airframe has no fin data or the fin is not near stall). */
  fin: number;
  thrust: number;
  /** Inertia coupling: what remains between the applied moments and inertia × angular acceleration. */
  inertia: number;
}

/** Everything a picture, trace, measure or criterion may want at the present tick. Filled by `Plant.observeInto`. */
export interface Observation {
  tick: number;
  timeS: number;
  // motion
  betaRad: number;
  pRadS: number;
  rRadS: number;
  phiRad: number;
  thetaRad: number;
  /** Heading, unwrapped, true; rad. */
  psiRad: number;
  tasMps: number;
  casMps: number;
  easMps: number;
  mach: number;
  northM: number;
  eastM: number;
  /** Above sea level; m. */
  heightM: number;
  /** Above the runway elevation (sea level without a runway); m. */
  heightAboveRunwayM: number;
  groundSpeedMps: number;
  trackRad: number;
  verticalSpeedMps: number;
  /** Path + angle of attack where the data has a lift curve, else NaN ("path" is then shown). */
  pitchAttitudeRad: number;
  alphaRad: number;
  CL: number;
  qbarPa: number;
  loadFactor: number;
  /** Slip ball in ball widths of 5°, positive to the right. */
  ballWidths: number;
  // controls
  stick: number;
  pedal: number;
  aileronRad: number;
  rudderRad: number;
  /** Rudder that the pedals could command now, toward each stop; rad, ≥ 0 (ratio changer, pedal force and faults applied). */
  rudderAvailableRad: number;
  rudderMaxRad: number;
  aileronMaxRad: number;
  pedalForceN: number;
  pedalForceLimitN: number;
  rudderRatio: number;
  rudderSaturated: boolean;
  yawDamperRad: number;
  levers: Float64Array;
  // engines, one entry each
  thrustN: Float64Array;
  /** Thrust the same engine would give healthy at this lever, speed and height. */
  thrustAvailableN: Float64Array;
  windmillDragN: Float64Array;
  /** 0 healthy, 1 failed windmilling, 2 feathering or feathered, 3 partial. */
  engineState: Uint8Array;
  /** Engine yawing and rolling moments N_T, L_T; N·m. */
  engineYawNm: number;
  engineRollNm: number;
  // forces drawn, N, magnitudes along their own lines with sign (see flight model "Forces drawn")
  forceRudderN: number; // along +y at the fin
  forceFinN: number; // along +y at the fin, without rudder, stall increment included
  forceSideN: number; // along +y, the rest
  forceLiftLeftN: number; // along −z at the left wing
  forceLiftRightN: number;
  forceDragN: number; // along −V
  forceWeightN: number;
  /** Lever of the half-wing lifts, m (0.4 of the semi-span; ours). */
  liftLeverM: number;
  yawTotalNm: number;
  rollTotalNm: number;
  yawParts: MomentParts;
  rollParts: MomentParts;
  // accelerations of the same instant
  axMps2: number;
  ayMps2: number;
  azMps2: number;
  pDotRadS2: number;
  qDotRadS2: number;
  rDotRadS2: number;
  qRadS: number;
  // air
  windNorthMps: number;
  windEastMps: number;
  gustLateralMps: number;
  gustRollRadS: number;
  gustYawRadS: number;
  // fin
  finAngleRad: number;
  finStallAngleRad: number;
  finStalled: boolean;
  // validity at this tick
  outsideData: boolean;
  stallWarning: boolean;
  assistantLetGo: boolean;
}

/** Wanted values of the balance strip: trim of the technique at the present speed, thrust and failure. */
export interface WantedValues {
  found: boolean;
  betaRad: number;
  phiRad: number;
  /** Pedal, cockpit sign, −1 … 1 (may exceed 1 when travel does not suffice). */
  pedal: number;
  stick: number;
  aileronRad: number;
  rudderRad: number;
  ballWidths: number;
}

/** Opaque copy of everything that the next tick depends on. */
export interface PlantSnapshot {
  readonly tick: number;
  readonly data: Float64Array;
}

export interface Plant {
  readonly setup: PlantSetup;
  readonly aircraft: Aircraft;
  readonly engineCount: number;
  readonly inputs: PlantInputs;
  /** Present state; layout in `state-layout.ts`. Read only for callers. */
  readonly x: Float64Array;
  readonly tick: number;
  /** Trimmed start: surfaces of the centred controls, rad. */
  readonly startTrim: { aileronRad: number; rudderRad: number; betaRad: number; phiRad: number; CL: number };

  /** Advances one tick with `inputs` and all faults held. Returns false (and stays at the last good tick) when the next state is not finite; `fault` then names it. */
  step(): boolean;
  readonly fault: string | null;
  observeInto(out: Observation): void;
  wantedInto(out: WantedValues, technique?: Technique): void;

  // events; effective from the next step
  failEngine(index: number, propeller: 'windmilling' | 'feathered'): void;
  failEnginePartial(index: number, fraction: number): void;
  restoreEngine(index: number): void;
  featherEngine(index: number): void;
  /** Overrides the pilot's lever over `overS`; the pilot's next lever movement takes it back. */
  setLever(index: number | 'all', position: number, overS: number): void;
  addGust(gust: { axis: GustAxis; shape: GustShape; peak: number; gradientDistanceM?: number; overS?: number }): void;
  changeWind(windFromRad: number, windMps: number, overS: number): void;
  setTurbulence(level: TurbulenceLevel, overS: number): void;
  jamRudder(rad?: number): void;
  jamAileron(rad?: number): void;
  hardoverRudder(toCockpitSide: -1 | 1): void;
  halveAileron(): void;
  restoreControls(): void;
  setRudderTrim(rad: number, overS: number): void;
  setYawDamper(on: boolean): void;
  setRudderRatio(state: 'normal' | 'stuck'): void;
  setPitchMode(mode: PitchMode): void;
  setConfiguration(name: string): void;

  /** Writes the time derivative at the start of the present tick into `out`, of the present state or of another. */
  derivativeInto(out: Float64Array, state?: Float64Array): void;

  save(): PlantSnapshot;
  restore(snapshot: PlantSnapshot): void;
  /** Folds the whole present state into a running hash (see numerics/state-hash.ts). */
  hashInto(hash: { add(x: number): void }): void;
}

export interface PlantOptions {
  /** Integrates one tick in place of the fixed step: state after `stepS` from `x`, time counting from the tick's start. */
  integrate?: (
    out: Float64Array,
    rhs: (out: Float64Array, tauS: number, x: Float64Array) => void,
    x: Float64Array,
    stepS: number,
  ) => void;
}

/** Signature of `createPlant` in plant.ts. Throws a named ModelError (singular trim, unknown configuration, …). */
export type CreatePlant = (setup: PlantSetup, options?: PlantOptions) => Plant;
