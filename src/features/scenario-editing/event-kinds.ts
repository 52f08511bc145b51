/** What a form asks of each kind of event, and what a new one starts with. */
import type { Dimension } from '#shared/units/quantity.ts';
import { INDICATIONS, PITCH_MODES, TURBULENCE_LEVELS } from '#shared/scenario/scenario-format.ts';
import type { Lane, ScenarioEventKind } from '#shared/scenario/scenario-schema.ts';
import type { Json } from '../airframe-editing/draft-document.ts';

export interface Choice {
  value: string;
  text: string;
}
export type FieldSpec =
  | {
      kind: 'number';
      member: string;
      label: string;
      dimension: Dimension;
      unit: string;
      optional?: boolean;
    }
  | { kind: 'choice'; member: string; label: string; options: readonly Choice[] }
  | { kind: 'engine'; member: string; label: string; all?: boolean }
  | { kind: 'configuration'; member: string; label: string }
  | { kind: 'text'; member: string; label: string }
  | { kind: 'switch'; member: string; label: string; on: string; off: string };

export interface EventKindSpec {
  kind: ScenarioEventKind;
  lane: Lane;
  name: string;
  /** Members beside id, lane, at and kind. */
  fresh: Readonly<Record<string, Json>>;
  fields: (event: Readonly<Record<string, Json>>) => readonly FieldSpec[];
}

const words = (values: readonly string[]): Choice[] =>
  values.map((value) => ({ value, text: value.replace(/-/g, ' ') }));
const SIDES = words(['left', 'right']);
const over = (label = 'Time taken'): FieldSpec => ({
  kind: 'number',
  member: 'over_s',
  label,
  dimension: 'time',
  unit: 's',
  optional: true,
});
const engine: FieldSpec = { kind: 'engine', member: 'engine', label: 'Engine' };
const text: FieldSpec = { kind: 'text', member: 'text', label: 'Text' };
const surface = (label: string): FieldSpec => ({
  kind: 'number',
  member: 'at_deg',
  label,
  dimension: 'angle',
  unit: 'deg',
  optional: true,
});

const spec = (
  kind: ScenarioEventKind,
  lane: Lane,
  name: string,
  fresh: Readonly<Record<string, Json>>,
  fields: readonly FieldSpec[] | EventKindSpec['fields'],
): EventKindSpec => ({ kind, lane, name, fresh, fields: typeof fields === 'function' ? fields : () => fields });

function gustFields(event: Readonly<Record<string, Json>>): readonly FieldSpec[] {
  const lateral = event['axis'] === 'lateral';
  const fields: FieldSpec[] = [
    { kind: 'choice', member: 'axis', label: 'Acts on', options: words(['lateral', 'yaw-rate', 'roll-rate']) },
    { kind: 'choice', member: 'shape', label: 'Shape', options: words(['one-minus-cosine', 'ramp', 'step']) },
  ];
  if (lateral)
    fields.push(
      { kind: 'choice', member: 'from', label: 'From the', options: SIDES },
      { kind: 'number', member: 'peak_kt', label: 'Peak', dimension: 'speed', unit: 'kt' },
    );
  else
    fields.push({
      kind: 'number',
      member: 'peak_deg_s',
      label: 'Peak, right positive',
      dimension: 'angular-rate',
      unit: 'deg/s',
    });
  if (event['shape'] !== 'step')
    fields.push({
      kind: 'number',
      member: 'gradientDistance_m',
      label: 'Gradient distance',
      dimension: 'distance',
      unit: 'm',
      optional: true,
    });
  if (event['shape'] !== 'step') fields.push(over('Or time to the peak'));
  return fields;
}

function pitchFields(event: Readonly<Record<string, Json>>): readonly FieldSpec[] {
  const mode = event['mode'];
  const fields: FieldSpec[] = [{ kind: 'choice', member: 'mode', label: 'Mode', options: words(PITCH_MODES) }];
  if (mode === 'hold-path' || mode === 'manual')
    fields.push({ kind: 'number', member: 'path_deg', label: 'Path', dimension: 'angle', unit: 'deg', optional: true });
  if (mode === 'decelerate')
    fields.push({ kind: 'number', member: 'rate_kt_s', label: 'Knots a second', dimension: 'ratio', unit: '' });
  if (mode === 'decelerate' || mode === 'hold-speed')
    fields.push({
      kind: 'number',
      member: 'target_kt',
      label: 'Down to',
      dimension: 'speed',
      unit: 'kt',
      optional: true,
    });
  return fields;
}

/** In the order of the lanes. */
export const EVENT_KIND_SPECS: readonly EventKindSpec[] = [
  spec('engine-failure', 'engines', 'Engine fails', { engine: '' }, [
    engine,
    { kind: 'choice', member: 'propeller', label: 'Propeller', options: words(['windmilling', 'feathered']) },
  ]),
  spec('engine-partial', 'engines', 'Engine loses part of its thrust', { engine: '', fraction: 0.5 }, [
    engine,
    { kind: 'number', member: 'fraction', label: 'Thrust left', dimension: 'ratio', unit: '' },
  ]),
  spec('engine-restore', 'engines', 'Engine restored', { engine: '' }, [engine]),
  spec('feather', 'engines', 'Propeller feathered', { engine: '' }, [engine]),
  spec('lever', 'engines', 'Lever moves', { engine: 'all', position: 1 }, [
    { kind: 'engine', member: 'engine', label: 'Engine', all: true },
    { kind: 'number', member: 'position', label: 'To', dimension: 'ratio', unit: '' },
    over(),
  ]),
  spec(
    'gust',
    'air',
    'Gust',
    { axis: 'lateral', shape: 'one-minus-cosine', from: 'right', peak_kt: 15, gradientDistance_m: 60 },
    gustFields,
  ),
  spec('wind-change', 'air', 'Wind changes', { windFrom_deg: 90, wind_kt: 10, over_s: 5 }, [
    { kind: 'number', member: 'windFrom_deg', label: 'From', dimension: 'angle', unit: 'deg' },
    { kind: 'number', member: 'wind_kt', label: 'Speed', dimension: 'speed', unit: 'kt' },
    over(),
  ]),
  spec('turbulence', 'air', 'Turbulence', { level: 'moderate' }, [
    { kind: 'choice', member: 'level', label: 'Level', options: words(TURBULENCE_LEVELS) },
    over('Growing over'),
  ]),
  spec('rudder-jam', 'controls', 'Rudder jams', {}, [surface('At, where it is when empty')]),
  spec('aileron-jam', 'controls', 'Ailerons jam', {}, [surface('At, where they are when empty')]),
  spec('rudder-hardover', 'controls', 'Rudder runs hard over', { to: 'right' }, [
    { kind: 'choice', member: 'to', label: 'To the', options: SIDES },
  ]),
  spec('aileron-half', 'controls', 'Ailerons lose half their effect', {}, []),
  spec('controls-restore', 'controls', 'Controls restored', {}, []),
  spec('rudder-trim', 'controls', 'Rudder trim', { deg: 0 }, [
    { kind: 'number', member: 'deg', label: 'Rudder', dimension: 'angle', unit: 'deg' },
    over(),
  ]),
  spec(
    'input',
    'controls',
    'Scripted input',
    { axis: 'pedal', shape: 'pulse', amplitude: 0.3, duration_s: 2 },
    (event) => [
      { kind: 'choice', member: 'axis', label: 'Control', options: words(['pedal', 'stick']) },
      { kind: 'choice', member: 'shape', label: 'Shape', options: words(['step', 'pulse', 'doublet', 'ramp']) },
      {
        kind: 'number',
        member: 'amplitude',
        label: 'Share of travel, right positive',
        dimension: 'ratio',
        unit: '',
      },
      ...(event['shape'] === 'step'
        ? []
        : [{ kind: 'number', member: 'duration_s', label: 'Lasts', dimension: 'time', unit: 's' } as const]),
    ],
  ),
  spec('yaw-damper', 'systems', 'Yaw damper', { on: false }, [
    { kind: 'switch', member: 'on', label: 'Yaw damper', on: 'on', off: 'off' },
  ]),
  spec('rudder-ratio', 'systems', 'Rudder ratio', { state: 'stuck' }, [
    { kind: 'choice', member: 'state', label: 'State', options: words(['stuck', 'normal']) },
  ]),
  spec('pitch-mode', 'systems', 'Pitch assistant', { mode: 'hold-path' }, pitchFields),
  spec('configuration', 'systems', 'Configuration changes', { name: '' }, [
    { kind: 'configuration', member: 'name', label: 'To' },
  ]),
  spec('display', 'systems', 'Indication fails', { indication: 'airspeed', state: 'failed' }, [
    { kind: 'choice', member: 'indication', label: 'Indication', options: words(INDICATIONS) },
    { kind: 'choice', member: 'state', label: 'State', options: words(['failed', 'frozen', 'normal']) },
  ]),
  spec('message', 'notes', 'Message to the trainee', { text: 'Message' }, [
    text,
    { kind: 'number', member: 'duration_s', label: 'Shown for', dimension: 'time', unit: 's', optional: true },
  ]),
  spec('marker', 'notes', 'Marker in the record', { text: 'Marker' }, [text]),
  spec('freeze', 'notes', 'Clock stops for a talking point', { text: 'Talking point' }, [text]),
];

export const specOfKind = (kind: unknown): EventKindSpec | null =>
  EVENT_KIND_SPECS.find((one) => one.kind === kind) ?? null;

/** An id of its own among those taken: "gust", "gust-2". */
export function freshId(kind: string, taken: ReadonlySet<string>): string {
  const stem = kind === 'engine-failure' ? 'cut' : kind;
  if (!taken.has(stem)) return stem;
  for (let n = 2; ; n += 1) if (!taken.has(`${stem}-${n}`)) return `${stem}-${n}`;
}

/** A new event of a kind; engines and configurations take the first that the airframe has. */
export function freshEvent(
  kind: ScenarioEventKind,
  setup: { timeS: number; taken: ReadonlySet<string>; engines: readonly string[]; configurations: readonly string[] },
): Json {
  const found = specOfKind(kind);
  const members: Record<string, Json> = { ...found?.fresh };
  if (members['engine'] === '') members['engine'] = setup.engines[0] ?? '';
  if (kind === 'configuration') members['name'] = setup.configurations.at(-1) ?? '';
  return {
    id: freshId(kind, setup.taken),
    lane: found?.lane ?? 'notes',
    at: { time_s: setup.timeS },
    kind,
    ...members,
  };
}

/** The event with another value of a member that decides which others it has; members that no longer belong go. */
export function withDecisive(event: Readonly<Record<string, Json>>, member: string, value: string): Json {
  const next: Record<string, Json> = { ...event, [member]: value };
  if (event['kind'] === 'gust') {
    if (value === 'lateral') {
      delete next['peak_deg_s'];
      next['from'] ??= 'right';
      next['peak_kt'] ??= 15;
    } else if (member === 'axis') {
      delete next['peak_kt'];
      delete next['from'];
      next['peak_deg_s'] ??= 5;
    }
    if (next['shape'] === 'step') {
      delete next['gradientDistance_m'];
      delete next['over_s'];
    } else if (next['over_s'] === undefined) {
      if (next['shape'] === 'ramp' && event['shape'] === 'step') next['over_s'] = 2;
      else next['gradientDistance_m'] ??= 60;
    }
  }
  if (event['kind'] === 'pitch-mode') {
    for (const name of ['path_deg', 'rate_kt_s', 'target_kt']) delete next[name];
    if (value === 'decelerate') next['rate_kt_s'] = 1;
  }
  if (event['kind'] === 'input') {
    if (next['shape'] === 'step') delete next['duration_s'];
    else next['duration_s'] ??= 2;
  }
  const vary = next['vary'];
  if (typeof vary === 'object' && vary !== null && !Array.isArray(vary)) {
    const kept = Object.entries(vary).filter(([name]) => name in next || name === 'time_s' || name === 'delay_s');
    if (kept.length === 0) delete next['vary'];
    else next['vary'] = Object.fromEntries(kept);
  }
  return next;
}
