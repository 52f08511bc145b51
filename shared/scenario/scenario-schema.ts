/** `sidewash.scenario/1`: parsing with clear refusals. Members in scenario-format.ts, rules between them in scenario-rules.ts. */
import { issuesFromSchema, valueAt } from '../model/field-issue.ts';
import type { FieldIssue } from '../model/field-issue.ts';
import { EVENT_KINDS, MAX_EVENTS, SCENARIO_DEFAULTS, SCENARIO_FORMAT, scenarioSchema } from './scenario-format.ts';
import type { Scenario, ScenarioDocument } from './scenario-format.ts';
import { checkScenario } from './scenario-rules.ts';

export { checkAgainstAirframe } from './airframe-rules.ts';
export { eventSchema, LANES, MAX_EVENTS, SCENARIO_FORMAT, scenarioSchema } from './scenario-format.ts';
export type {
  Lane,
  MeasureName,
  Scenario,
  ScenarioCriterion,
  ScenarioDocument,
  ScenarioEvent,
  ScenarioEventKind,
  ScenarioPitch,
  ScenarioTrigger,
  WindowEdge,
} from './scenario-format.ts';

export type ParsedScenario =
  | {
      ok: true;
      /** With every default filled in: what runs. */
      scenario: Scenario;
      /** As it was given: what exports and stores write, so that a round trip changes nothing. */
      document: ScenarioDocument;
      warnings: FieldIssue[];
    }
  | { ok: false; issues: FieldIssue[] };

/**
 * The scenario of a file's content, or what is wrong with it.
 *
 * @param input  Anything: what JSON.parse returned, a form's value, a row of the database.
 * @returns      The scenario with its warnings, or at least one issue naming field, rule and remedy. Never throws.
 */
export function parseScenario(input: unknown): ParsedScenario {
  const early = refuseEarly(input);
  if (early) return { ok: false, issues: [early] };
  const parsed = scenarioSchema.safeParse(input);
  if (!parsed.success) {
    const issues = issuesFromSchema(parsed.error, input).map((issue) => explained(issue, input));
    return {
      ok: false,
      issues: issues.filter((issue, i) => !issues.slice(0, i).some((other) => sameIssue(issue, other))),
    };
  }
  const issues: FieldIssue[] = [];
  const warnings: FieldIssue[] = [];
  checkScenario(
    parsed.data,
    (field, rule, message, remedy) => void issues.push({ field, rule, message, remedy }),
    (field, rule, message, remedy) => void warnings.push({ field, rule, message, remedy }),
  );
  if (issues.length > 0) return { ok: false, issues };
  // The schema accepted it, so the input has the document's type.
  return { ok: true, scenario: parsed.data, document: input as ScenarioDocument, warnings };
}

function sameIssue(a: FieldIssue, b: FieldIssue): boolean {
  return a.field === b.field && a.rule === b.rule && a.message === b.message;
}

/** Refusals that would drown in followers: another version, thousands of events. */
function refuseEarly(input: unknown): FieldIssue | null {
  const format = valueAt(input, '/format');
  if (typeof format === 'string' && format !== SCENARIO_FORMAT) {
    const other = format.startsWith('sidewash.scenario/');
    return {
      field: '/format',
      rule: other ? 'format-version' : 'format',
      message: other
        ? `the file has the format version "${format}"; this program reads "${SCENARIO_FORMAT}"`
        : `"${format}" is not a scenario; a scenario's format is "${SCENARIO_FORMAT}"`,
      remedy: other ? 'Export it again from a program of the same version.' : 'Choose a scenario file.',
    };
  }
  const events = valueAt(input, '/events');
  if (Array.isArray(events) && events.length > MAX_EVENTS) {
    return {
      field: '/events',
      rule: 'maximum',
      message: `the scenario has ${events.length} events; at most ${MAX_EVENTS} are allowed`,
      remedy: 'Remove events, or split the scenario.',
    };
  }
  // Zod's records pass over this one name without a word.
  const strange = Array.isArray(events)
    ? events.findIndex((_, i) => hasOwn(input, `/events/${i}/vary`, '__proto__'))
    : -1;
  if (strange >= 0) {
    const field = `/events/${strange}/vary/__proto__`;
    return {
      field,
      rule: 'variable-member',
      message: '"__proto__" is not a number that can vary',
      remedy: 'Remove it.',
    };
  }
  return null;
}

function hasOwn(input: unknown, pointer: string, name: string): boolean {
  const value = valueAt(input, pointer);
  return typeof value === 'object' && value !== null && Object.hasOwn(value, name);
}

const EVENT_AT = /^\/events\/\d+$/u;

/** Better words for the issues of choices between several forms. */
function explained(issue: FieldIssue, input: unknown): FieldIssue {
  const { field } = issue;
  const kindOf = (pointer: string): string => String(valueAt(input, `${pointer}/kind`));
  const parent = field.slice(0, field.lastIndexOf('/'));
  if (EVENT_AT.test(parent) && field.endsWith('/kind') && !Object.hasOwn(EVENT_KINDS, kindOf(parent))) {
    const given = valueAt(input, field);
    return {
      field,
      rule: given === undefined ? 'required' : 'one-of',
      message: given === undefined ? 'the event has no kind' : `"${String(given)}" is not a kind of event`,
      remedy: `Use one of ${Object.keys(EVENT_KINDS).join(', ')}.`,
    };
  }
  if (EVENT_AT.test(parent) && field.endsWith('/lane')) {
    const kind = kindOf(parent);
    const lane = Object.entries(EVENT_KINDS).find(([name]) => name === kind)?.[1].lane;
    if (lane)
      return {
        field,
        rule: 'lane',
        message: `the kind "${kind}" belongs to the lane "${lane}"`,
        remedy: `Write "lane": "${lane}".`,
      };
  }
  if (
    /^\/events\/\d+\/at$/u.test(field) ||
    (/^\/events\/\d+\/at\//u.test(field) && issue.rule !== 'minimum' && issue.rule !== 'maximum')
  ) {
    return explainedTrigger(issue, input);
  }
  const limit = /^\/criteria\/\d+\/limit/u.exec(field)?.[0];
  if (limit !== undefined && membersOf(valueAt(input, limit), ['max', 'min', 'within']).length !== 1) {
    return {
      field: limit,
      rule: 'limit',
      message: 'a limit is {"max", "unit"}, {"min", "unit"} or {"within": [a, b], "unit"}',
      remedy: 'Give exactly one of max, min and within, and the unit.',
    };
  }
  return issue;
}

/** Which of some members an unknown value has. */
function membersOf(value: unknown, names: readonly string[]): string[] {
  return typeof value === 'object' && value !== null ? names.filter((name) => Object.hasOwn(value, name)) : [];
}

function explainedTrigger(issue: FieldIssue, input: unknown): FieldIssue {
  const at = /^\/events\/\d+\/at/u.exec(issue.field)?.[0] ?? issue.field;
  const forms = membersOf(valueAt(input, at), ['time_s', 'after', 'when']);
  if (forms.length === 1) return issue;
  return {
    field: at,
    rule: 'trigger',
    message:
      forms.length > 1
        ? `a trigger has one of time_s, after and when, not ${forms.join(' and ')}`
        : 'the event has no trigger: time_s, after or when',
    remedy: 'Write {"time_s": 3}, {"after": "id", "delay_s": 4} or {"when": "ias < 85 kt"}.',
  };
}

/** The start levers of a scenario for an airframe with so many engines. */
export function startLevers(scenario: Scenario, engineCount: number): number[] {
  return scenario.start.levers
    ? [...scenario.start.levers]
    : new Array<number>(engineCount).fill(SCENARIO_DEFAULTS.lever);
}
