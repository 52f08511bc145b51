/** The members of `sidewash.scenario/1`: what each file may hold, with bounds and defaults. Rules between members: scenario-rules.ts. */
import { z } from 'zod';

export const SCENARIO_FORMAT = 'sidewash.scenario/1';

/** Most events and criteria in one file (ours). */
export const MAX_EVENTS = 500;
export const MAX_CRITERIA = 100;
/** Longest run; s (ours). */
export const MAX_DURATION_S = 3600;

/** Defaults of the format, named once. */
export const SCENARIO_DEFAULTS = {
  heading_deg: 360,
  path_deg: 0,
  lever: 0.6,
  decrab_ft: 20,
  lever_over_s: 0.5,
  wind_over_s: 1,
  turbulence_over_s: 2,
  trim_over_s: 1,
  message_s: 4,
  elevation_ft: 0,
  width_m: 30,
  glidepath_deg: 3,
  gearHeight_m: 1.5,
} as const;

const id = z
  .string()
  .max(64)
  .regex(/^[A-Za-z0-9][A-Za-z0-9_-]*$/u, 'an id is made of letters, digits, "_" and "-"');
const slug = z
  .string()
  .max(80)
  .regex(/^[a-z0-9]+(?:-[a-z0-9]+)*$/u, 'a slug is made of lower-case letters, digits and "-"');
const label = z.string().trim().min(1).max(80);
const seconds = z.number().min(0).max(MAX_DURATION_S);
const lever = z.number().min(0).max(1);
const direction = z.number().min(-360).max(360);
const side = z.enum(['left', 'right']);

export const INDICATIONS = ['airspeed', 'height', 'heading', 'horizon', 'balance'] as const;
export const TURBULENCE_LEVELS = ['none', 'light', 'moderate', 'severe'] as const;
export const LANES = ['engines', 'air', 'controls', 'systems', 'notes'] as const;

const trigger = z.union([
  z.strictObject({ time_s: seconds }),
  z.strictObject({ after: id, delay_s: seconds.default(0) }),
  z.strictObject({ when: z.string() }),
]);

const path = z.number().min(-20).max(20);
const targetSpeed = z.number().gt(0).max(1000);
const fall = z.number().gt(0).max(20);

/** Pitch modes; members left out take the value of the moment in which the mode begins. */
const pitchMembers = {
  'hold-lift': {},
  'hold-path': { path_deg: path.optional() },
  'hold-speed': { target_kt: targetSpeed.optional() },
  decelerate: { rate_kt_s: fall, target_kt: targetSpeed.optional() },
  glidepath: {},
  manual: { path_deg: path.optional() },
} as const;

export const PITCH_MODES = ['hold-lift', 'hold-path', 'hold-speed', 'decelerate', 'glidepath', 'manual'] as const;

const pitchSchema = z.discriminatedUnion('mode', [
  z.strictObject({ mode: z.literal('hold-lift'), ...pitchMembers['hold-lift'] }),
  z.strictObject({ mode: z.literal('hold-path'), ...pitchMembers['hold-path'] }),
  z.strictObject({ mode: z.literal('hold-speed'), ...pitchMembers['hold-speed'] }),
  z.strictObject({ mode: z.literal('decelerate'), ...pitchMembers.decelerate }),
  z.strictObject({ mode: z.literal('glidepath'), ...pitchMembers.glidepath }),
  z.strictObject({ mode: z.literal('manual'), ...pitchMembers.manual }),
]);
export type ScenarioPitch = z.output<typeof pitchSchema>;

const common = {
  id,
  at: trigger,
  vary: z.record(z.string(), z.tuple([z.number(), z.number()])).optional(),
};
const engines = { ...common, lane: z.literal('engines') };
const air = { ...common, lane: z.literal('air') };
const controls = { ...common, lane: z.literal('controls') };
const systems = { ...common, lane: z.literal('systems') };
const notes = { ...common, lane: z.literal('notes') };

const gustShape = {
  shape: z.enum(['step', 'ramp', 'one-minus-cosine']),
  gradientDistance_m: z.number().gt(0).max(10_000).optional(),
  over_s: z.number().gt(0).max(600).optional(),
};
const rateGust = z.number().min(-90).max(90);
const gust = { ...air, kind: z.literal('gust'), ...gustShape };
const gustSchema = z.discriminatedUnion('axis', [
  z.strictObject({ ...gust, axis: z.literal('lateral'), from: side, peak_kt: z.number().min(0).max(200) }),
  z.strictObject({ ...gust, axis: z.literal('yaw-rate'), peak_deg_s: rateGust }),
  z.strictObject({ ...gust, axis: z.literal('roll-rate'), peak_deg_s: rateGust }),
]);

const pitchEvent = { ...systems, kind: z.literal('pitch-mode') };
const pitchEventSchema = z.discriminatedUnion('mode', [
  z.strictObject({ ...pitchEvent, mode: z.literal('hold-lift'), ...pitchMembers['hold-lift'] }),
  z.strictObject({ ...pitchEvent, mode: z.literal('hold-path'), ...pitchMembers['hold-path'] }),
  z.strictObject({ ...pitchEvent, mode: z.literal('hold-speed'), ...pitchMembers['hold-speed'] }),
  z.strictObject({ ...pitchEvent, mode: z.literal('decelerate'), ...pitchMembers.decelerate }),
  z.strictObject({ ...pitchEvent, mode: z.literal('glidepath'), ...pitchMembers.glidepath }),
  z.strictObject({ ...pitchEvent, mode: z.literal('manual'), ...pitchMembers.manual }),
]);

const surface = z.number().min(-90).max(90);
const noteText = z.string().trim().min(1).max(400);

export const eventSchema = z.discriminatedUnion('kind', [
  z.strictObject({
    ...engines,
    kind: z.literal('engine-failure'),
    engine: label,
    propeller: z.enum(['windmilling', 'feathered']).default('windmilling'),
  }),
  z.strictObject({ ...engines, kind: z.literal('engine-partial'), engine: label, fraction: z.number().min(0).max(1) }),
  z.strictObject({ ...engines, kind: z.literal('engine-restore'), engine: label }),
  z.strictObject({ ...engines, kind: z.literal('feather'), engine: label }),
  z.strictObject({
    ...engines,
    kind: z.literal('lever'),
    engine: label,
    position: lever,
    over_s: z.number().min(0).max(600).default(SCENARIO_DEFAULTS.lever_over_s),
  }),
  gustSchema,
  z.strictObject({
    ...air,
    kind: z.literal('wind-change'),
    windFrom_deg: direction,
    wind_kt: z.number().min(0).max(200),
    over_s: z.number().min(1).max(600).default(SCENARIO_DEFAULTS.wind_over_s),
  }),
  z.strictObject({
    ...air,
    kind: z.literal('turbulence'),
    level: z.enum(TURBULENCE_LEVELS),
    over_s: z.number().min(0).max(600).default(SCENARIO_DEFAULTS.turbulence_over_s),
  }),
  z.strictObject({ ...controls, kind: z.literal('rudder-jam'), at_deg: surface.optional() }),
  z.strictObject({ ...controls, kind: z.literal('aileron-jam'), at_deg: surface.optional() }),
  z.strictObject({ ...controls, kind: z.literal('rudder-hardover'), to: side }),
  z.strictObject({ ...controls, kind: z.literal('aileron-half') }),
  z.strictObject({ ...controls, kind: z.literal('controls-restore') }),
  z.strictObject({
    ...controls,
    kind: z.literal('rudder-trim'),
    deg: surface,
    over_s: z.number().min(0).max(600).default(SCENARIO_DEFAULTS.trim_over_s),
  }),
  z.strictObject({
    ...controls,
    kind: z.literal('input'),
    axis: z.enum(['pedal', 'stick']),
    shape: z.enum(['step', 'pulse', 'doublet', 'ramp']),
    amplitude: z.number().min(-1).max(1),
    duration_s: z.number().gt(0).max(600).optional(),
  }),
  z.strictObject({ ...systems, kind: z.literal('yaw-damper'), on: z.boolean() }),
  z.strictObject({ ...systems, kind: z.literal('rudder-ratio'), state: z.enum(['normal', 'stuck']) }),
  pitchEventSchema,
  z.strictObject({ ...systems, kind: z.literal('configuration'), name: label }),
  z.strictObject({
    ...systems,
    kind: z.literal('display'),
    indication: z.enum(INDICATIONS),
    state: z.enum(['failed', 'frozen', 'normal']),
  }),
  z.strictObject({
    ...notes,
    kind: z.literal('message'),
    text: noteText,
    duration_s: z.number().gt(0).max(600).default(SCENARIO_DEFAULTS.message_s),
  }),
  z.strictObject({ ...notes, kind: z.literal('marker'), text: noteText }),
  z.strictObject({ ...notes, kind: z.literal('freeze'), text: noteText }),
]);

const limitBound = z.number();
const unit = z.string().max(10);
const limit = z.union([
  z.strictObject({ max: limitBound, unit }),
  z.strictObject({ min: limitBound, unit }),
  z.strictObject({ within: z.tuple([limitBound, limitBound]), unit }),
]);

const windowEdge = z.union([id, z.strictObject({ after: id, plus_s: seconds })]);

export const MEASURES = [
  'heading-deviation',
  'track-deviation',
  'track-offset',
  'bank',
  'bank-dead-side',
  'sideslip',
  'yaw-rate',
  'roll-rate',
  'ball',
  'height-loss',
  'speed-loss',
  'speed-deviation',
  'first-correct-pedal',
  'wrong-pedal-time',
  'yaw-arrested',
  'pedal-force',
  'rudder-saturation-time',
  'pedal-reversals',
  'lever-reduced',
  'nose-lowered',
  'speed-regained',
  'wrong-engine',
  'feathered-within',
  'climb-rate',
  'touchdown-crab',
  'touchdown-drift',
  'touchdown-bank',
  'touchdown-offset',
  'touchdown-sink',
  'outside-data-time',
  'stall-warning-time',
  'fin-stall-time',
  'expression',
] as const;
export type MeasureName = (typeof MEASURES)[number];

export const criterionSchema = z.strictObject({
  id,
  title: z.string().trim().min(1).max(200),
  measure: z.enum(MEASURES),
  limit,
  required: z.boolean().default(true),
  from: windowEdge.default('start'),
  to: windowEdge.default('end'),
  expression: z.string().optional(),
  value: z.number().optional(),
  unit: unit.optional(),
});

const reference = z.discriminatedUnion('task', [
  z.strictObject({ task: z.literal('hold-heading') }),
  z.strictObject({
    task: z.literal('hold-track'),
    decrab_ft: z.number().min(0).max(2000).default(SCENARIO_DEFAULTS.decrab_ft),
  }),
  z.strictObject({ task: z.literal('turn'), bank_deg: z.number().min(-60).max(60) }),
]);

export const scenarioSchema = z.strictObject({
  format: z.literal(SCENARIO_FORMAT),
  title: z.string().trim().min(1).max(200),
  summary: z.string().max(2000).default(''),
  purpose: z.string().max(4000).default(''),
  talkingPoint: z.string().max(4000).default(''),
  airframe: z.strictObject({ slug, revision: z.number().int().min(1).default(1) }),
  configuration: label.nullable().default(null),
  loading: label.nullable().default(null),
  fidelity: z.enum(['large-angle', 'small-disturbance']).default('large-angle'),
  technique: z.enum(['zero-sideslip', 'ball-centred']).default('zero-sideslip'),
  start: z.strictObject({
    ias_kt: z.number().gt(0).max(1000),
    height_ft: z.number().min(-2000).max(60_000),
    heading_deg: direction.default(SCENARIO_DEFAULTS.heading_deg),
    path_deg: path.default(SCENARIO_DEFAULTS.path_deg),
    /** One per engine; all 0.6 when absent. */
    levers: z.array(lever).max(16).optional(),
  }),
  runway: z
    .strictObject({
      /** The start heading when absent. */
      heading_deg: direction.optional(),
      elevation_ft: z.number().min(-2000).max(30_000).default(SCENARIO_DEFAULTS.elevation_ft),
      width_m: z.number().gt(0).max(500).default(SCENARIO_DEFAULTS.width_m),
      threshold_m: z.number().min(-10_000).max(200_000),
      glidepath_deg: z.number().gt(0).max(15).default(SCENARIO_DEFAULTS.glidepath_deg),
      gearHeight_m: z.number().min(0).max(50).default(SCENARIO_DEFAULTS.gearHeight_m),
    })
    .nullable()
    .default(null),
  air: z
    .strictObject({
      windFrom_deg: direction.default(360),
      wind_kt: z.number().min(0).max(200).default(0),
      profile: z.enum(['none', 'power-law']).default('none'),
      turbulence: z.enum(TURBULENCE_LEVELS).default('none'),
    })
    .prefault({}),
  reference: reference.default({ task: 'hold-heading' }),
  automation: z
    .strictObject({
      /** hold-path at the start path when absent. */
      pitch: pitchSchema.optional(),
      /** On where the airframe has one, when absent. */
      yawDamper: z.boolean().optional(),
      rudderRatio: z.boolean().optional(),
      /** What the airframe data says, when absent. */
      dorsalFin: z.boolean().optional(),
    })
    .prefault({}),
  allow: z
    .strictObject({
      freeze: z.boolean().default(false),
      slow: z.boolean().default(false),
      rewind: z.boolean().default(false),
      arrows: z.boolean().default(true),
    })
    .prefault({}),
  seed: z.number().int().min(0).max(Number.MAX_SAFE_INTEGER).default(1),
  duration_s: z.number().min(0.1).max(MAX_DURATION_S),
  events: z.array(eventSchema).max(MAX_EVENTS),
  criteria: z.array(criterionSchema).max(MAX_CRITERIA),
});

/** A scenario with every default filled in. */
export type Scenario = z.output<typeof scenarioSchema>;
/** A scenario as a file may hold it, defaults left out. */
export type ScenarioDocument = z.input<typeof scenarioSchema>;
export type ScenarioEvent = z.output<typeof eventSchema>;
export type ScenarioEventKind = ScenarioEvent['kind'];
export type ScenarioTrigger = ScenarioEvent['at'];
export type ScenarioCriterion = z.output<typeof criterionSchema>;
export type WindowEdge = ScenarioCriterion['from'];
export type Lane = (typeof LANES)[number];

/** Lane of every event kind and those of its members that are numbers (and may be varied). */
export const EVENT_KINDS: Readonly<Record<ScenarioEventKind, { lane: Lane; numbers: readonly string[] }>> = {
  'engine-failure': { lane: 'engines', numbers: [] },
  'engine-partial': { lane: 'engines', numbers: ['fraction'] },
  'engine-restore': { lane: 'engines', numbers: [] },
  feather: { lane: 'engines', numbers: [] },
  lever: { lane: 'engines', numbers: ['position', 'over_s'] },
  gust: { lane: 'air', numbers: ['peak_kt', 'peak_deg_s', 'gradientDistance_m', 'over_s'] },
  'wind-change': { lane: 'air', numbers: ['windFrom_deg', 'wind_kt', 'over_s'] },
  turbulence: { lane: 'air', numbers: ['over_s'] },
  'rudder-jam': { lane: 'controls', numbers: ['at_deg'] },
  'aileron-jam': { lane: 'controls', numbers: ['at_deg'] },
  'rudder-hardover': { lane: 'controls', numbers: [] },
  'aileron-half': { lane: 'controls', numbers: [] },
  'controls-restore': { lane: 'controls', numbers: [] },
  'rudder-trim': { lane: 'controls', numbers: ['deg', 'over_s'] },
  input: { lane: 'controls', numbers: ['amplitude', 'duration_s'] },
  'yaw-damper': { lane: 'systems', numbers: [] },
  'rudder-ratio': { lane: 'systems', numbers: [] },
  'pitch-mode': { lane: 'systems', numbers: ['path_deg', 'target_kt', 'rate_kt_s'] },
  configuration: { lane: 'systems', numbers: [] },
  display: { lane: 'systems', numbers: [] },
  message: { lane: 'notes', numbers: ['duration_s'] },
  marker: { lane: 'notes', numbers: [] },
  freeze: { lane: 'notes', numbers: [] },
};
