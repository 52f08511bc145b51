/** The rules between members of a scenario, each refusal with field, rule, message and remedy. */
import { checkCriterion } from './criterion-rules.ts';
import { timingsOf } from './event-timing.ts';
import { compileCondition } from './expression/expression.ts';
import { hasEvent, knownEvents, reportExpression, reportUnknownSince, RESERVED_IDS } from './rule-reports.ts';
import type { Report } from './rule-reports.ts';
import { EVENT_KINDS, eventSchema } from './scenario-format.ts';
import type { Scenario, ScenarioEvent } from './scenario-format.ts';
import { FT } from '../units/constants.ts';

/** Reports every broken rule between members; `warn` takes remarks that do not refuse the file. */
export function checkScenario(scenario: Scenario, report: Report, warn: Report): void {
  checkStart(scenario, report);
  checkIds(scenario, report);
  const waitsOn = scenario.events.map((event, i) => checkTrigger(scenario, event, i, report));
  checkCycles(scenario.events, waitsOn, report);
  scenario.events.forEach((event, i) => {
    checkVariation(event, i, report);
    checkShape(event, i, report, warn);
    if (event.kind === 'pitch-mode') needsRunway(scenario, event.mode, `/events/${i}/mode`, report);
  });
  scenario.criteria.forEach((criterion, i) => checkCriterion(scenario, criterion, i, report, warn));
  warnOfLateEvents(scenario, warn);
}

function checkStart(scenario: Scenario, report: Report): void {
  const { start, runway, automation } = scenario;
  needsRunway(scenario, automation.pitch?.mode, '/automation/pitch/mode', report);
  const groundFt = runway ? runway.elevation_ft + runway.gearHeight_m / FT : 0;
  if (start.height_ft > groundFt) return;
  report(
    '/start/height_ft',
    'above-ground',
    `the start at ${start.height_ft} ft is not above ${runway ? `the runway with the wheels (${groundFt.toFixed(1)} ft)` : 'sea level'}`,
    'Raise the start height; heights of the start are above sea level.',
  );
}

function needsRunway(scenario: Scenario, mode: string | undefined, field: string, report: Report): void {
  if (mode !== 'glidepath' || scenario.runway) return;
  report(
    field,
    'needs-runway',
    'the pitch mode glidepath needs a runway',
    'Add "runway", or choose another pitch mode.',
  );
}

function checkIds({ events, criteria }: Scenario, report: Report): void {
  const unique = (list: readonly { id: string }[], name: string, what: string): void => {
    const seen = new Set<string>();
    list.forEach(({ id }, i) => {
      if (seen.has(id)) {
        report(`/${name}/${i}/id`, 'unique', `the ${what} id "${id}" is used twice`, 'Give each its own id.');
      }
      seen.add(id);
    });
  };
  unique(events, 'events', 'event');
  unique(criteria, 'criteria', 'criterion');
  events.forEach(({ id }, i) => {
    if (!RESERVED_IDS.includes(id)) return;
    report(`/events/${i}/id`, 'reserved', `"${id}" names the run's own ${id} in windows`, 'Choose another id.');
  });
}

/** Checks one trigger; returns the ids on which the event waits. */
function checkTrigger(scenario: Scenario, event: ScenarioEvent, i: number, report: Report): string[] {
  const { at } = event;
  if ('after' in at) {
    if (hasEvent(scenario, at.after)) return [at.after];
    report(`/events/${i}/at/after`, 'known-event', `there is no event "${at.after}"`, knownEvents(scenario));
    return [];
  }
  if (!('when' in at)) return [];
  const compiled = compileCondition(at.when);
  if (!compiled.ok) {
    reportExpression(`/events/${i}/at/when`, compiled.problem, report);
    return [];
  }
  const { sinceIds } = compiled.condition;
  reportUnknownSince(scenario, `/events/${i}/at/when`, compiled.condition, report);
  return sinceIds.filter((id) => hasEvent(scenario, id));
}

/** Refuses events that wait on each other (or on themselves); each cycle is named once. */
function checkCycles(events: readonly ScenarioEvent[], waitsOn: readonly string[][], report: Report): void {
  const indexOf = new Map(events.map(({ id }, i) => [id, i]));
  const state = new Uint8Array(events.length); // 0 new, 1 on the present path, 2 done
  const visit = (start: number): void => {
    const path: number[] = [start];
    const cursor: number[] = [0];
    state[start] = 1;
    while (path.length > 0) {
      const at = path[path.length - 1];
      const next = cursor[cursor.length - 1]++;
      if (next >= waitsOn[at].length) {
        state[at] = 2;
        path.pop();
        cursor.pop();
        continue;
      }
      const to = indexOf.get(waitsOn[at][next]);
      if (to === undefined || state[to] === 2) continue;
      if (state[to] === 1) {
        const round = [...path.slice(path.indexOf(to)), to].map((k) => events[k].id);
        report(
          `/events/${at}/at`,
          'cycle',
          `the events wait on each other: ${round.join(' waits on ')}`,
          'Let one of them start at a time or on a condition that does not wait on the others.',
        );
        continue;
      }
      state[to] = 1;
      path.push(to);
      cursor.push(0);
    }
  };
  events.forEach((_, i) => {
    if (state[i] === 0) visit(i);
  });
}

function checkVariation(event: ScenarioEvent, i: number, report: Report): void {
  const inTrigger = 'time_s' in event.at ? ['time_s'] : 'after' in event.at ? ['delay_s'] : [];
  const own = EVENT_KINDS[event.kind].numbers;
  const allowed = [...inTrigger, ...own];
  for (const [member, range] of Object.entries(event.vary ?? {})) {
    const field = `/events/${i}/vary/${member}`;
    if (!allowed.includes(member)) {
      report(
        field,
        'variable-member',
        `"${member}" is not a number of this event that can vary`,
        allowed.length > 0 ? `Vary ${allowed.join(', ')}.` : 'Nothing of this event can vary; remove "vary".',
      );
      continue;
    }
    if (range[0] > range[1]) {
      report(field, 'ascending', `the range ${range[0]} … ${range[1]} falls`, 'Write the lower value first.');
    }
    for (const value of range) {
      const tried = eventSchema.safeParse(withMember(event, member, value));
      const issue = tried.success ? null : tried.error.issues[0];
      if (!issue) continue;
      report(
        field,
        'range',
        `${value} is not allowed for ${member}: ${issue.message.toLowerCase()}`,
        'Keep the range inside what the member allows.',
      );
      break;
    }
  }
}

/** The event with one number replaced, in itself or in its trigger. */
export function withMember(event: ScenarioEvent, member: string, value: number): ScenarioEvent {
  if (member === 'time_s' && 'time_s' in event.at) return { ...event, at: { time_s: value } };
  if (member === 'delay_s' && 'after' in event.at) return { ...event, at: { after: event.at.after, delay_s: value } };
  // The member is one of EVENT_KINDS[kind].numbers, so the result is the same kind of event.
  return { ...event, [member]: value } as ScenarioEvent;
}

/** Members that belong to a shape. */
function checkShape(event: ScenarioEvent, i: number, report: Report, warn: Report): void {
  const field = `/events/${i}`;
  if (event.kind === 'input' && event.shape !== 'step' && event.duration_s === undefined) {
    report(`${field}/duration_s`, 'required', `a ${event.shape} needs duration_s`, 'Add its duration in seconds.');
  }
  if (event.kind === 'input' && event.shape === 'step' && event.duration_s !== undefined) {
    warn(
      `${field}/duration_s`,
      'unused',
      'a step stays: its duration_s has no effect',
      'Remove duration_s, or choose a pulse.',
    );
  }
  if (event.kind !== 'gust') return;
  const both = event.gradientDistance_m !== undefined && event.over_s !== undefined;
  const neither = event.gradientDistance_m === undefined && event.over_s === undefined;
  if (event.shape === 'step') {
    if (neither) return;
    warn(
      `${field}/shape`,
      'unused',
      'a step gust comes at once: its length has no effect',
      'Choose ramp or one-minus-cosine.',
    );
  } else if (neither) {
    const wanted = event.shape === 'ramp' ? 'over_s' : 'gradientDistance_m';
    report(
      `${field}/${wanted}`,
      'required',
      `a ${event.shape} gust needs ${wanted}`,
      `Add ${wanted}: the peak is reached there.`,
    );
  } else if (both) {
    report(`${field}/over_s`, 'one-of', 'a gust has gradientDistance_m or over_s, not both', 'Remove one of them.');
  }
}

function warnOfLateEvents({ events, duration_s }: Scenario, warn: Report): void {
  const timings = timingsOf(events);
  events.forEach((event, i) => {
    const timing = timings.get(event.id);
    if (!timing || timing.root !== 'start' || timing.lowS < duration_s) return;
    warn(
      `/events/${i}/at`,
      'never-fires',
      `the event "${event.id}" comes at ${timing.lowS} s, not before the run ends at ${duration_s} s`,
      'Bring it forward or lengthen the run.',
    );
  });
}
