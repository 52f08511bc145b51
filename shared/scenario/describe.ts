/** Events, triggers, criteria and differences of scenarios as plain sentences. */
import { MEASURE_TABLE } from './measures/measure-table.ts';
import type { ScenarioCriterion, ScenarioEvent, ScenarioTrigger, WindowEdge } from './scenario-format.ts';

/** A number without needless digits, with a true minus sign. */
export function plainNumber(value: number): string {
  return Number(value.toFixed(3)).toString().replace('-', '−');
}

function capital(text: string): string {
  return text === '' ? text : text[0].toUpperCase() + text.slice(1);
}

function percent(share: number): string {
  return `${plainNumber(Math.round(share * 1000) / 10)} %`;
}

/** "left engine", but "engine 2" for a name that is no word of its own place. */
function engineName(name: string): string {
  return /engine/iu.test(name) ? name : `${name} engine`;
}

function direction(deg: number): string {
  const turned = Math.round(((deg % 360) + 360) % 360);
  return `${String(turned === 0 ? 360 : turned).padStart(3, '0')}°`;
}

const OVER = (seconds: number): string => (seconds > 0 ? ` over ${plainNumber(seconds)} s` : ' at once');

/** What an event does, in one line, as "Left engine fails". */
export function eventText(event: ScenarioEvent): string {
  switch (event.kind) {
    case 'engine-failure':
      return `${capital(engineName(event.engine))} fails${event.propeller === 'feathered' ? ', propeller feathers' : ''}`;
    case 'engine-partial':
      return `${capital(engineName(event.engine))} drops to ${percent(event.fraction)} of its thrust`;
    case 'engine-restore':
      return `${capital(engineName(event.engine))} restored`;
    case 'feather':
      return `${capital(engineName(event.engine))} feathered`;
    case 'lever':
      return `${event.engine === 'all' ? 'All levers' : `Lever of the ${engineName(event.engine)}`} to ${percent(event.position)}${OVER(event.over_s)}`;
    case 'gust':
      return gustText(event);
    case 'wind-change':
      return `Wind changes to ${direction(event.windFrom_deg)}, ${plainNumber(event.wind_kt)} kt${OVER(event.over_s)}`;
    case 'turbulence':
      return event.level === 'none' ? 'Turbulence ends' : `${capital(event.level)} turbulence begins`;
    case 'rudder-jam':
      return event.at_deg === undefined
        ? 'Rudder jams where it is'
        : `Rudder jams at ${surface(event.at_deg, 'rudder')}`;
    case 'aileron-jam':
      return event.at_deg === undefined
        ? 'Ailerons jam where they are'
        : `Ailerons jam at ${surface(event.at_deg, 'aileron')}`;
    case 'rudder-hardover':
      return `Rudder runs hard over to the ${event.to}`;
    case 'aileron-half':
      return 'Ailerons lose half their effect';
    case 'controls-restore':
      return 'Controls restored';
    case 'rudder-trim':
      return `Rudder trim to ${surface(event.deg, 'rudder')}${OVER(event.over_s)}`;
    case 'input':
      return inputText(event);
    case 'yaw-damper':
      return `Yaw damper ${event.on ? 'on' : 'off'}`;
    case 'rudder-ratio':
      return event.state === 'stuck' ? 'Rudder ratio sticks' : 'Rudder ratio normal again';
    case 'pitch-mode':
      return `Pitch: ${pitchText(event)}`;
    case 'configuration':
      return `Configuration changes to ${event.name}`;
    case 'display':
      return `${capital(event.indication)} indication ${event.state === 'normal' ? 'normal again' : event.state}`;
    case 'message':
    case 'marker':
      return event.text;
    case 'freeze':
      return `Freeze: ${event.text}`;
  }
}

/** Degrees of a surface in cockpit words: files carry model signs (rudder left positive, aileron right positive). */
function surface(deg: number, which: 'rudder' | 'aileron'): string {
  if (deg === 0) return 'neutral';
  const right = which === 'rudder' ? deg < 0 : deg > 0;
  return `${plainNumber(Math.abs(deg))}° ${right ? 'right' : 'left'}`;
}

function gustText(event: Extract<ScenarioEvent, { kind: 'gust' }>): string {
  const shape = event.shape === 'one-minus-cosine' ? 'one-minus-cosine' : event.shape;
  const length =
    event.shape === 'step'
      ? ''
      : event.gradientDistance_m === undefined
        ? `, peak after ${plainNumber(event.over_s ?? 0)} s`
        : `, peak after ${plainNumber(event.gradientDistance_m)} m`;
  if (event.axis === 'lateral')
    return `Gust from the ${event.from}, ${plainNumber(event.peak_kt)} kt, ${shape}${length}`;
  const side = event.peak_deg_s < 0 ? 'left' : 'right';
  const word = event.axis === 'yaw-rate' ? 'Yawing' : 'Rolling';
  return `${word} gust to the ${side}, ${plainNumber(Math.abs(event.peak_deg_s))}°/s, ${shape}${length}`;
}

function inputText(event: Extract<ScenarioEvent, { kind: 'input' }>): string {
  const side = event.amplitude < 0 ? 'left' : 'right';
  const size = `${percent(Math.abs(event.amplitude))} ${side}`;
  const duration = plainNumber(event.duration_s ?? 0);
  const name = capital(event.axis);
  switch (event.shape) {
    case 'step':
      return `${name} ${size}, held`;
    case 'pulse':
      return `${name} ${size} for ${duration} s`;
    case 'doublet':
      return `${name} ${size} for ${duration} s, then as much the other way`;
    case 'ramp':
      return `${name} to ${size} over ${duration} s, held`;
  }
}

type PitchText = { mode: string; path_deg?: number; target_kt?: number; rate_kt_s?: number };

function pitchText(pitch: PitchText): string {
  const path = pitch.path_deg === undefined ? 'the present path' : `${plainNumber(pitch.path_deg)}°`;
  const speed = pitch.target_kt === undefined ? 'the present speed' : `${plainNumber(pitch.target_kt)} kt`;
  switch (pitch.mode) {
    case 'hold-path':
      return `hold the path, ${path}`;
    case 'hold-speed':
      return `hold the speed, ${speed}`;
    case 'decelerate':
      return `decelerate by ${plainNumber(pitch.rate_kt_s ?? 0)} kt/s${pitch.target_kt === undefined ? '' : ` to ${speed}`}`;
    case 'glidepath':
      return 'follow the glidepath and flare';
    case 'manual':
      return 'handed to the pilot';
    default:
      return 'hold the lift';
  }
}

/** When an event happens, as "at 3 s" or "4 s after cut". */
export function triggerText(at: ScenarioTrigger): string {
  if ('time_s' in at) return `at ${plainNumber(at.time_s)} s`;
  if ('after' in at)
    return at.delay_s === 0 ? `right after ${at.after}` : `${plainNumber(at.delay_s)} s after ${at.after}`;
  return `when ${at.when}`;
}

function edgeText(edge: WindowEdge): string {
  if (typeof edge !== 'string')
    return `${plainNumber(edge.plus_s)} s after ${edge.after === 'start' ? 'the start' : edge.after}`;
  return edge === 'start' || edge === 'end' ? `the ${edge}` : edge;
}

/** The window of a criterion, as "from cut to the end". */
export function windowText(criterion: Pick<ScenarioCriterion, 'from' | 'to'>): string {
  return `from ${edgeText(criterion.from)} to ${edgeText(criterion.to)}`;
}

function withUnit(value: number, unit: string): string {
  if (unit === 'deg') return `${plainNumber(value)}°`;
  if (unit === 'deg/s') return `${plainNumber(value)}°/s`;
  if (unit === 'count') return plainNumber(value);
  return `${plainNumber(value)} ${unit}`;
}

/** A limit in words, as "at most 20°". */
export function limitText(limit: ScenarioCriterion['limit']): string {
  if ('max' in limit) return `at most ${withUnit(limit.max, limit.unit)}`;
  if ('min' in limit) return `at least ${withUnit(limit.min, limit.unit)}`;
  return `between ${withUnit(limit.within[0], limit.unit)} and ${withUnit(limit.within[1], limit.unit)}`;
}

/** A criterion as one sentence, as "Heading change at most 20°, from cut to the end." */
export function criterionText(criterion: ScenarioCriterion): string {
  const name =
    criterion.measure === 'expression'
      ? `“${criterion.expression ?? ''}”`
      : criterion.measure === 'speed-regained'
        ? `Speed above ${withUnit(criterion.value ?? 0, criterion.unit ?? 'kt')} again within`
        : MEASURE_TABLE[criterion.measure].label;
  const limit = limitText(criterion.limit);
  const joined = criterion.measure === 'speed-regained' ? limit.replace(/^at most /u, '') : limit;
  return `${name} ${joined}, ${windowText(criterion)}${criterion.required ? '' : ' (not required)'}.`;
}
