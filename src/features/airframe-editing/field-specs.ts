/** Which members of an airframe file are edited as plain fields, in which unit they are stored, and what they mean. */
import type { Dimension } from '#shared/units/quantity.ts';

export interface FieldSpec {
  /** JSON Pointer, relative to the group's base. */
  at: string;
  label: string;
  dimension: Dimension;
  /** Unit of the stored number. */
  unit: string;
  optional?: boolean;
  hint?: string;
}

export const GEOMETRY_FIELDS: readonly FieldSpec[] = [
  { at: '/geometry/wingArea_m2', label: 'Wing area', dimension: 'area', unit: 'm²' },
  { at: '/geometry/wingSpan_m', label: 'Span', dimension: 'distance', unit: 'm' },
  { at: '/geometry/meanChord_m', label: 'Mean chord', dimension: 'distance', unit: 'm' },
  { at: '/mass/mass_kg', label: 'Mass', dimension: 'mass', unit: 'kg' },
  { at: '/mass/Ixx_kgm2', label: 'Ixx', dimension: 'inertia', unit: 'kg·m²' },
  { at: '/mass/Iyy_kgm2', label: 'Iyy', dimension: 'inertia', unit: 'kg·m²', optional: true },
  { at: '/mass/Izz_kgm2', label: 'Izz', dimension: 'inertia', unit: 'kg·m²' },
  { at: '/mass/Ixz_kgm2', label: 'Ixz', dimension: 'inertia', unit: 'kg·m²', optional: true },
];

export const CONFIGURATION_FIELDS: readonly FieldSpec[] = [
  { at: '/CLmax', label: 'Greatest lift coefficient', dimension: 'ratio', unit: '' },
  { at: '/CD0', label: 'Drag at no lift', dimension: 'ratio', unit: '', optional: true, hint: '0.03 when empty' },
  {
    at: '/kInduced',
    label: 'Induced drag factor',
    dimension: 'ratio',
    unit: '',
    optional: true,
    hint: '0.05 when empty',
  },
  {
    at: '/CD_beta2',
    label: 'Drag by sideslip squared',
    dimension: 'ratio',
    unit: '',
    optional: true,
    hint: '0 when empty',
  },
  {
    at: '/CL_alpha_per_rad',
    label: 'Lift slope, per rad',
    dimension: 'ratio',
    unit: '',
    optional: true,
    hint: 'gives the pitch attitude',
  },
  { at: '/alphaZeroLift_deg', label: 'Angle of no lift', dimension: 'angle', unit: 'deg', optional: true },
];

export const FIN_FIELDS: readonly FieldSpec[] = [
  { at: '/area_m2', label: 'Area', dimension: 'area', unit: 'm²' },
  { at: '/arm_m', label: 'Arm behind the mass centre', dimension: 'distance', unit: 'm' },
  { at: '/height_m', label: 'Height above the mass centre', dimension: 'distance', unit: 'm' },
  { at: '/liftSlope_per_rad', label: 'Lift slope, per rad', dimension: 'ratio', unit: '' },
  { at: '/sidewash', label: 'Sidewash', dimension: 'ratio', unit: '' },
  { at: '/rudderTau', label: 'Rudder effectiveness', dimension: 'ratio', unit: '' },
  { at: '/stallAngle_deg', label: 'Stall angle', dimension: 'angle', unit: 'deg' },
  {
    at: '/stallAngleWithDorsal_deg',
    label: 'Stall angle with dorsal fin',
    dimension: 'angle',
    unit: 'deg',
    optional: true,
  },
  { at: '/stallDrop', label: 'Loss past the stall', dimension: 'ratio', unit: '' },
];

export const CONTROL_FIELDS: readonly FieldSpec[] = [
  { at: '/controls/aileronMax_deg', label: 'Aileron travel', dimension: 'angle', unit: 'deg' },
  { at: '/controls/rudderMax_deg', label: 'Rudder travel', dimension: 'angle', unit: 'deg' },
  { at: '/controls/aileronRate_deg_s', label: 'Aileron rate', dimension: 'angular-rate', unit: 'deg/s' },
  { at: '/controls/rudderRate_deg_s', label: 'Rudder rate', dimension: 'angular-rate', unit: 'deg/s' },
  { at: '/controls/lag_s', label: 'Lag', dimension: 'time', unit: 's' },
];

export const PEDAL_FIELDS: readonly FieldSpec[] = [
  { at: '/controls/pedalForce/N_per_deg', label: 'Force per degree, N', dimension: 'ratio', unit: '' },
  { at: '/controls/pedalForce/at_kt', label: 'At equivalent airspeed', dimension: 'speed', unit: 'kt', optional: true },
  { at: '/controls/pedalForce/limit_N', label: 'Greatest force', dimension: 'force', unit: 'N', optional: true },
];

export const DAMPER_FIELDS: readonly FieldSpec[] = [
  { at: '/yawDamper/gain_s', label: 'Gain', dimension: 'time', unit: 's' },
  { at: '/yawDamper/washout_s', label: 'Washout', dimension: 'time', unit: 's' },
  { at: '/yawDamper/authority_deg', label: 'Authority', dimension: 'angle', unit: 'deg' },
];

const ENGINE_COMMON: readonly FieldSpec[] = [
  { at: '/y_m', label: 'Distance right of centre', dimension: 'distance', unit: 'm', hint: 'negative on the left' },
  { at: '/staticThrust_N', label: 'Static thrust', dimension: 'force', unit: 'N' },
  { at: '/windmillDragArea_m2', label: 'Windmilling drag area', dimension: 'area', unit: 'm²', optional: true },
  { at: '/spoolDown_s', label: 'Spool down', dimension: 'time', unit: 's', optional: true, hint: '0.5 s when empty' },
  { at: '/spoolUp_s', label: 'Spool up', dimension: 'time', unit: 's', optional: true, hint: '1 s when empty' },
];

const ENGINE_PROPELLER: readonly FieldSpec[] = [
  { at: '/power_W', label: 'Power', dimension: 'power', unit: 'W' },
  {
    at: '/efficiency',
    label: 'Propeller efficiency',
    dimension: 'ratio',
    unit: '',
    optional: true,
    hint: '0.8 when empty',
  },
  { at: '/bladeOffset_m', label: 'Blade offset', dimension: 'distance', unit: 'm', optional: true },
  { at: '/slipstreamLift', label: 'Slipstream lift', dimension: 'ratio', unit: '', optional: true },
  { at: '/torqueArm_m', label: 'Torque arm', dimension: 'distance', unit: 'm', optional: true },
  { at: '/swirlArm_m', label: 'Swirl arm', dimension: 'distance', unit: 'm', optional: true },
  { at: '/featheredDragArea_m2', label: 'Feathered drag area', dimension: 'area', unit: 'm²', optional: true },
  {
    at: '/featherTime_s',
    label: 'Feathering takes',
    dimension: 'time',
    unit: 's',
    optional: true,
    hint: '5 s when empty',
  },
];

/** Fields of one engine by its kind. */
export function engineFields(kind: 'propeller' | 'jet'): readonly FieldSpec[] {
  return kind === 'propeller' ? [...ENGINE_COMMON, ...ENGINE_PROPELLER] : ENGINE_COMMON;
}

export const LOADING_FIELDS: readonly FieldSpec[] = [
  { at: '/mass_kg', label: 'Mass', dimension: 'mass', unit: 'kg' },
  { at: '/cgAft_m', label: 'Mass centre shift, aft positive', dimension: 'distance', unit: 'm' },
  { at: '/Ixx_kgm2', label: 'Ixx', dimension: 'inertia', unit: 'kg·m²', optional: true },
  { at: '/Iyy_kgm2', label: 'Iyy', dimension: 'inertia', unit: 'kg·m²', optional: true },
  { at: '/Izz_kgm2', label: 'Izz', dimension: 'inertia', unit: 'kg·m²', optional: true },
  { at: '/Ixz_kgm2', label: 'Ixz', dimension: 'inertia', unit: 'kg·m²', optional: true },
];

/** What a new engine, loading, fin or damper starts from. */
export const STARTING_POINTS = {
  propeller: { name: 'new', kind: 'propeller', y_m: 0, staticThrust_N: 3000, power_W: 120_000 },
  jet: { name: 'new', kind: 'jet', y_m: 0, staticThrust_N: 50_000 },
  loading: { name: 'new loading', mass_kg: 1000, cgAft_m: 0 },
  fin: {
    area_m2: 2,
    arm_m: 5,
    height_m: 0.8,
    liftSlope_per_rad: 2.8,
    sidewash: 0.1,
    rudderTau: 0.5,
    stallAngle_deg: 20,
    stallDrop: 0.4,
    dorsal: false,
  },
  yawDamper: { gain_s: 0.5, washout_s: 3, authority_deg: 3 },
  pedalForce: { kind: 'reversible', N_per_deg: 15, at_kt: 80, limit_N: 667 },
  rudderRatio: { fullUpTo_kt: 160, law: 'inverse', mode: 'ratio' },
} as const;
