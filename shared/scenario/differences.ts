/** What one scenario has that another has not, in words an instructor would use. */
import { criterionText, eventText, plainNumber, triggerText } from './describe.ts';
import type { Scenario, ScenarioCriterion, ScenarioEvent } from './scenario-format.ts';

export interface ScenarioDifference {
  /** Where it is shown: "Start", "Air", "Events" … */
  part: string;
  /** Id of the event or criterion; null for a member of the scenario itself. */
  id: string | null;
  text: string;
}

const UNIT_OF: Readonly<Record<string, string>> = {
  kt: ' kt',
  ft: ' ft',
  deg: '°',
  deg_s: '°/s',
  m: ' m',
  s: ' s',
  kt_s: ' kt/s',
};
const NAMES: Readonly<Record<string, string>> = {
  ias: 'speed',
  height: 'height',
  heading: 'heading',
  path: 'path',
  levers: 'levers',
  windFrom: 'wind from',
  wind: 'wind',
  profile: 'wind profile',
  turbulence: 'turbulence',
  duration: 'duration',
  peak: 'peak',
  gradientDistance: 'gradient distance',
  over: 'time taken',
  delay: 'delay',
  time: 'time',
  pitch: 'pitch assistant',
  yawDamper: 'yaw damper',
  rudderRatio: 'rudder ratio',
  dorsalFin: 'dorsal fin',
  seed: 'seed of the preview',
  freeze: 'freezing',
  slow: 'slow motion',
  rewind: 'rewinding',
  arrows: 'force arrows',
  elevation: 'runway elevation',
  width: 'runway width',
  threshold: 'threshold',
  glidepath: 'glidepath',
  gearHeight: 'gear height',
};

/** "peak_kt" is the peak in kt: its name in words and the unit behind a value. */
function memberWords(member: string): { name: string; unit: string } {
  const cut = member.indexOf('_');
  const stem = cut < 0 ? member : member.slice(0, cut);
  return { name: NAMES[stem] ?? stem, unit: cut < 0 ? '' : (UNIT_OF[member.slice(cut + 1)] ?? '') };
}

function valueText(value: unknown, unit: string): string {
  if (value === undefined || value === null) return 'none';
  if (typeof value === 'number') return plainNumber(value);
  if (typeof value === 'boolean') return value ? 'on' : 'off';
  if (typeof value === 'string') return value;
  if (Array.isArray(value)) return value.map((each) => valueText(each, unit)).join(', ');
  return Object.entries(value)
    .map(([name, inner]) => `${memberWords(name).name} ${valueText(inner, '')}${memberWords(name).unit}`)
    .join(', ');
}

const same = (a: unknown, b: unknown): boolean => JSON.stringify(a) === JSON.stringify(b);

/** "wind 8 → 12 kt" for every member that differs. */
function members(before: Readonly<Record<string, unknown>>, after: Readonly<Record<string, unknown>>): string[] {
  const names = [...new Set([...Object.keys(before), ...Object.keys(after)])];
  return names
    .filter((name) => !same(before[name], after[name]))
    .map((member) => {
      const { name, unit } = memberWords(member);
      return `${name} ${valueText(before[member], unit)} → ${valueText(after[member], unit)}${unit}`;
    });
}

const quoted = (text: string): string => (text === '' ? 'no text' : `“${text}”`);

/** One line for each thing that differs, in the order of the editor; empty when the two run alike and read alike. */
export function scenarioDifferences(before: Scenario, after: Scenario): ScenarioDifference[] {
  const found: ScenarioDifference[] = [];
  const say = (part: string, text: string, id: string | null = null): void => void found.push({ part, id, text });
  const texts = [
    ['title', 'Title'],
    ['summary', 'Summary'],
    ['purpose', 'Purpose'],
    ['talkingPoint', 'Talking point'],
  ] as const;
  for (const [member, name] of texts)
    if (before[member] !== after[member]) say(name, `${quoted(before[member])} → ${quoted(after[member])}`);
  if (!same(before.airframe, after.airframe)) {
    const named = ({ airframe }: Scenario): string => `${airframe.slug}, revision ${airframe.revision}`;
    say('Airframe', `${named(before)} → ${named(after)}`);
  }
  const plain = [
    ['configuration', 'Configuration'],
    ['loading', 'Loading'],
    ['fidelity', 'Model'],
    ['technique', 'Technique'],
  ] as const;
  for (const [member, name] of plain)
    if (before[member] !== after[member])
      say(name, `${valueText(before[member], '')} → ${valueText(after[member], '')}`);
  const groups = [
    ['start', 'Start'],
    ['air', 'Air'],
    ['automation', 'Automation'],
    ['allow', 'Allowed'],
    ['reference', 'Reference pilot'],
  ] as const;
  for (const [member, name] of groups) for (const text of members(before[member], after[member])) say(name, text);
  if (before.runway === null || after.runway === null) {
    if (before.runway !== after.runway) say('Runway', after.runway === null ? 'removed' : 'added');
  } else for (const text of members(before.runway, after.runway)) say('Runway', text);
  for (const text of members(
    { duration_s: before.duration_s, seed: before.seed },
    { duration_s: after.duration_s, seed: after.seed },
  ))
    say('Run', text);
  list(before.events, after.events, eventText, 'Events', eventMembers, say);
  list(before.criteria, after.criteria, criterionText, 'Criteria', criterionMembers, say);
  return found;
}

type Say = (part: string, text: string, id: string | null) => void;

function list<T extends { id: string }>(
  before: readonly T[],
  after: readonly T[],
  words: (item: T) => string,
  part: string,
  changes: (a: T, b: T) => string[],
  say: Say,
): void {
  for (const item of before) if (!after.some(({ id }) => id === item.id)) say(part, `${words(item)}: removed`, item.id);
  for (const item of after) {
    const old = before.find(({ id }) => id === item.id);
    if (old === undefined) say(part, `${words(item)}: added`, item.id);
    else if (!same(old, item)) say(part, `${words(old)}: ${changes(old, item).join('; ')}`, item.id);
  }
  const order = (items: readonly T[], others: readonly T[]): string =>
    items
      .filter(({ id }) => others.some((other) => other.id === id))
      .map(({ id }) => id)
      .join(' ');
  if (order(before, after) !== order(after, before)) say(part, 'order changed', null);
}

function eventMembers(a: ScenarioEvent, b: ScenarioEvent): string[] {
  const { id: _a, at: atA, lane: _la, vary: varyA, ...restA } = a;
  const { id: _b, at: atB, lane: _lb, vary: varyB, ...restB } = b;
  const out = same(atA, atB) ? [] : [`${triggerText(atA)} → ${triggerText(atB)}`];
  out.push(...members(restA, restB));
  if (!same(varyA, varyB)) {
    const ranges = (vary: typeof varyA): string =>
      vary === undefined || Object.keys(vary).length === 0
        ? 'nothing drawn'
        : Object.entries(vary)
            .map(([member, [low, high]]) => {
              const { name, unit } = memberWords(member);
              return `${name} drawn from ${plainNumber(low)} to ${plainNumber(high)}${unit}`;
            })
            .join(', ');
    out.push(`${ranges(varyA)} → ${ranges(varyB)}`);
  }
  return out;
}

function criterionMembers(a: ScenarioCriterion, b: ScenarioCriterion): string[] {
  const { id: _a, limit: limitA, ...restA } = a;
  const { id: _b, limit: limitB, ...restB } = b;
  const out = same(limitA, limitB) ? [] : [`${limitWords(limitA)} → ${limitWords(limitB)}`];
  const words = ({ required, ...rest }: typeof restA): Record<string, unknown> => ({
    ...rest,
    required: required ? 'required' : 'wished',
  });
  return [...out, ...members(words(restA), words(restB))];
}

function limitWords(limit: ScenarioCriterion['limit']): string {
  if ('max' in limit) return `at most ${plainNumber(limit.max)} ${limit.unit}`;
  if ('min' in limit) return `at least ${plainNumber(limit.min)} ${limit.unit}`;
  return `${plainNumber(limit.within[0])} to ${plainNumber(limit.within[1])} ${limit.unit}`;
}
