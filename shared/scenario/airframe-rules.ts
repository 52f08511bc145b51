/** What a scenario asks of its airframe: engines, configurations, loadings, systems. */
import type { Airframe } from '../model/airframe-schema.ts';
import type { FieldIssue } from '../model/field-issue.ts';
import { compileCondition, compileQuantity } from './expression/expression.ts';
import type { Scenario, ScenarioEvent } from './scenario-format.ts';

type Add = (field: string, rule: string, message: string, remedy: string) => void;

/** Refusals and remarks of a scenario flown on an airframe. */
export function checkAgainstAirframe(
  scenario: Scenario,
  airframe: Airframe,
): { issues: FieldIssue[]; warnings: FieldIssue[] } {
  const issues: FieldIssue[] = [];
  const warnings: FieldIssue[] = [];
  const refuse: Add = (field, rule, message, remedy) => void issues.push({ field, rule, message, remedy });
  const warn: Add = (field, rule, message, remedy) => void warnings.push({ field, rule, message, remedy });
  const configurations = airframe.configurations.map(({ name }) => name);
  const loadings = (airframe.loadings ?? []).map(({ name }) => name);

  named(scenario.configuration, configurations, '/configuration', 'configuration', airframe, refuse);
  named(scenario.loading, loadings, '/loading', 'loading', airframe, refuse);
  const levers = scenario.start.levers;
  if (levers && levers.length !== airframe.engines.length) {
    refuse(
      '/start/levers',
      'engine-count',
      `${levers.length} levers are given; "${airframe.name}" has ${airframe.engines.length} engines`,
      `Give ${airframe.engines.length} levers, or leave them out (all 0.6).`,
    );
  }
  scenario.events.forEach((event, i) => {
    checkEngine(event, i, airframe, refuse, warn);
    if (event.kind === 'configuration') {
      named(event.name, configurations, `/events/${i}/name`, 'configuration', airframe, refuse);
    }
    checkSystems(event, i, airframe, warn);
  });
  warnOfControlSpeed(scenario, airframe, warn);
  return { issues, warnings };
}

function named(
  name: string | null,
  known: readonly string[],
  field: string,
  what: string,
  airframe: Airframe,
  refuse: Add,
): void {
  if (name === null || known.includes(name)) return;
  refuse(
    field,
    `known-${what}`,
    `"${airframe.name}" has no ${what} "${name}"`,
    known.length > 0 ? `Use one of ${known.join(', ')}.` : `Leave it out: the airframe has no ${what}s.`,
  );
}

function checkEngine(event: ScenarioEvent, i: number, airframe: Airframe, refuse: Add, warn: Add): void {
  if (!('engine' in event)) return;
  if (event.kind === 'lever' && event.engine === 'all') return;
  const engine = airframe.engines.find(({ name }) => name === event.engine);
  const names = airframe.engines.map(({ name }) => name);
  if (!engine) {
    refuse(
      `/events/${i}/engine`,
      'known-engine',
      `"${airframe.name}" has no engine "${event.engine}"`,
      names.length > 0
        ? `Use one of ${names.join(', ')}${event.kind === 'lever' ? ', or all' : ''}.`
        : 'Remove the event: the airframe has no engines.',
    );
    return;
  }
  const feathers = event.kind === 'feather' || (event.kind === 'engine-failure' && event.propeller === 'feathered');
  if (feathers && engine.kind === 'jet') {
    warn(
      `/events/${i}/engine`,
      'jet-feather',
      `the engine "${event.engine}" is a jet and cannot feather: its drag stays`,
      event.kind === 'feather' ? 'Remove the event.' : 'Leave "propeller" out.',
    );
  }
}

function checkSystems(event: ScenarioEvent, i: number, airframe: Airframe, warn: Add): void {
  const { controls } = airframe;
  if (event.kind === 'yaw-damper' && !airframe.yawDamper) {
    warn(
      `/events/${i}`,
      'no-yaw-damper',
      `"${airframe.name}" has no yaw damper: the event has no effect`,
      'Remove it.',
    );
  }
  if (event.kind === 'rudder-ratio' && !controls.rudderRatio) {
    warn(
      `/events/${i}`,
      'no-rudder-ratio',
      `"${airframe.name}" has no rudder ratio: the event has no effect`,
      'Remove it.',
    );
  }
  const travel = event.kind === 'aileron-jam' ? controls.aileronMax_deg : controls.rudderMax_deg;
  const deg =
    event.kind === 'rudder-trim'
      ? event.deg
      : event.kind === 'rudder-jam' || event.kind === 'aileron-jam'
        ? event.at_deg
        : undefined;
  if (deg !== undefined && Math.abs(deg) > travel) {
    warn(
      `/events/${i}`,
      'beyond-travel',
      `${deg}° lies beyond the travel of ${travel}°: the surface stops there`,
      'Lower it.',
    );
  }
}

/** "vmc" needs an engine whose failure yaws; without one the expression is never true. */
function warnOfControlSpeed(scenario: Scenario, airframe: Airframe, warn: Add): void {
  if (airframe.engines.length > 1) return;
  const reads = (field: string, names: readonly string[]): void => {
    if (!names.includes('vmc')) return;
    warn(
      field,
      'no-control-speed',
      `"${airframe.name}" has no minimum control speed: the expression has no value`,
      'Leave vmc out.',
    );
  };
  scenario.events.forEach(({ at }, i) => {
    const compiled = 'when' in at ? compileCondition(at.when) : null;
    if (compiled?.ok) reads(`/events/${i}/at/when`, compiled.condition.names);
  });
  scenario.criteria.forEach(({ expression }, i) => {
    const compiled = expression === undefined ? null : compileQuantity(expression);
    if (compiled?.ok) reads(`/criteria/${i}/expression`, compiled.quantity.names);
  });
}
