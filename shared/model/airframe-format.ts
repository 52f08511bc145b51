import { z } from 'zod';

/** The format name every airframe file carries. */
export const AIRFRAME_FORMAT = 'sidewash.airframe/1';

/** Defaults of the format, named once (flight model, airframe data). */
export const AIRFRAME_DEFAULTS = {
  CD0: 0.03,
  kInduced: 0.05,
  CD_beta2: 0,
  efficiency: 0.8,
  spoolDown_s: 0.5,
  spoolUp_s: 1,
  featherTime_s: 5,
} as const;

/** Upper bound of any number in a file: keeps products of four members finite. */
const LARGEST = 1e12;

const real = z.number().min(-LARGEST).max(LARGEST);
const positive = z.number().gt(0).max(LARGEST);
const notNegative = z.number().min(0).max(LARGEST);
const travel = z.number().gt(0).max(90);
const label = z.string().trim().min(1).max(80);

const derivativeRow = z.strictObject({
  CL: real,
  alpha_deg: z.number().min(-90).max(90).optional(),
  CY_beta: real,
  CY_p: real.default(0),
  CY_r: real.default(0),
  CY_da: real.default(0),
  CY_dr: real,
  Cl_beta: real,
  Cl_p: real,
  Cl_r: real,
  Cl_da: real,
  Cl_dr: real,
  Cn_beta: real,
  Cn_p: real,
  Cn_r: real,
  Cn_da: real,
  Cn_dr: real,
});

const speed = z.strictObject({ name: label, kt: positive, source: z.string().max(400).optional() });

const configuration = z.strictObject({
  name: label,
  CLmax: positive,
  CD0: notNegative.default(AIRFRAME_DEFAULTS.CD0),
  kInduced: notNegative.default(AIRFRAME_DEFAULTS.kInduced),
  CD_beta2: notNegative.default(AIRFRAME_DEFAULTS.CD_beta2),
  CL_alpha_per_rad: positive.optional(),
  alphaZeroLift_deg: z.number().min(-90).max(90).optional(),
  category: z.enum(['A', 'B', 'C']).default('C'),
  speeds: z.array(speed).max(40).optional(),
  derivatives: z.array(derivativeRow).min(1).max(60),
});

const fin = z.strictObject({
  area_m2: positive,
  arm_m: real,
  height_m: real,
  liftSlope_per_rad: positive,
  sidewash: real,
  rudderTau: z.number().min(0).max(2),
  stallAngle_deg: travel,
  stallAngleWithDorsal_deg: travel.optional(),
  stallDrop: z.number().min(0).max(1),
  dorsal: z.boolean().default(false),
});

const rudderRatio = z.strictObject({
  mode: z.enum(['ratio', 'limit']).default('ratio'),
  law: z.enum(['inverse', 'inverse-square', 'table']),
  fullUpTo_kt: positive.optional(),
  table: z
    .array(z.tuple([notNegative, z.number().gt(0).max(1)]))
    .min(1)
    .max(60)
    .optional(),
});

const pedalForce = z.strictObject({
  kind: z.enum(['reversible', 'artificial']),
  N_per_deg: positive,
  at_kt: positive.optional(),
  limit_N: positive.optional(),
});

const controls = z.strictObject({
  aileronMax_deg: travel,
  rudderMax_deg: travel,
  aileronRate_deg_s: positive,
  rudderRate_deg_s: positive,
  lag_s: notNegative,
  rudderRatio: rudderRatio.optional(),
  pedalForce: pedalForce.optional(),
});

const engine = z.strictObject({
  name: label,
  kind: z.enum(['propeller', 'jet']),
  y_m: real,
  staticThrust_N: positive,
  power_W: positive.optional(),
  efficiency: z.number().gt(0).max(1).default(AIRFRAME_DEFAULTS.efficiency),
  rotation: z.enum(['clockwise', 'counter-clockwise']).default('clockwise'),
  bladeOffset_m: real.default(0),
  slipstreamLift: real.default(0),
  torqueArm_m: real.default(0),
  swirlArm_m: real.default(0),
  windmillDragArea_m2: notNegative.default(0),
  featheredDragArea_m2: notNegative.default(0),
  spoolDown_s: notNegative.default(AIRFRAME_DEFAULTS.spoolDown_s),
  spoolUp_s: notNegative.default(AIRFRAME_DEFAULTS.spoolUp_s),
  featherTime_s: notNegative.default(AIRFRAME_DEFAULTS.featherTime_s),
});

const loading = z.strictObject({
  name: label,
  mass_kg: positive,
  cgAft_m: real,
  Ixx_kgm2: positive.optional(),
  Iyy_kgm2: positive.optional(),
  Izz_kgm2: positive.optional(),
  Ixz_kgm2: real.optional(),
});

const source = z.strictObject({
  field: z.string().min(1).max(200),
  text: z.string().min(1).max(2000),
  uncertainty_pct: z.number().min(0).max(1000).optional(),
});

/** Members of `sidewash.airframe/1`, each on its own; unknown members are refused, defaults filled in. */
export const airframeMembers = z.strictObject({
  format: z.literal(AIRFRAME_FORMAT),
  name: label,
  description: z.string().max(4000).optional(),
  class: z.enum(['I', 'II', 'II-L', 'II-C', 'III', 'IV']),
  geometry: z.strictObject({ wingArea_m2: positive, wingSpan_m: positive, meanChord_m: positive }),
  mass: z.strictObject({
    mass_kg: positive,
    Ixx_kgm2: positive,
    Iyy_kgm2: positive.optional(),
    Izz_kgm2: positive,
    Ixz_kgm2: real.default(0),
    axes: z.enum(['stability', 'body']).default('stability'),
  }),
  configurations: z.array(configuration).min(1).max(20),
  fin: fin.optional(),
  controls,
  yawDamper: z
    .strictObject({ gain_s: notNegative, washout_s: positive, authority_deg: z.number().min(0).max(90) })
    .optional(),
  engines: z.array(engine).default([]),
  loadings: z.array(loading).max(40).optional(),
  /** Speeds of the whole airframe, or of the configuration that an entry names. */
  speeds: z
    .array(z.strictObject({ ...speed.shape, configuration: label.optional() }))
    .max(80)
    .optional(),
  sources: z.array(source).max(2000).optional(),
});

export type Airframe = z.output<typeof airframeMembers>;
export type AirframeConfiguration = Airframe['configurations'][number];
export type AirframeDerivativeRow = AirframeConfiguration['derivatives'][number];
export type AirframeEngine = Airframe['engines'][number];
export type AirframeLoading = NonNullable<Airframe['loadings']>[number];
