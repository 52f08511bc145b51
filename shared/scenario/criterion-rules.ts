/** The rules of one criterion: its measure, limit, unit and window. */
import { emptyWindow, endsBeforeStart } from './event-timing.ts';
import { compileQuantity } from './expression/expression.ts';
import { dimensionWords, sameDimension, UNITS, unitsOf } from './expression/units.ts';
import type { Dimension } from './expression/units.ts';
import { MEASURE_TABLE } from './measures/measure-table.ts';
import { hasEvent, knownEvents, reportExpression, reportUnknownSince, RESERVED_IDS } from './rule-reports.ts';
import type { Report } from './rule-reports.ts';
import type { Scenario, ScenarioCriterion, WindowEdge } from './scenario-format.ts';

/** Reports what is wrong with a criterion; `warn` takes remarks that do not refuse it. */
export function checkCriterion(
  scenario: Scenario,
  criterion: ScenarioCriterion,
  i: number,
  report: Report,
  warn: Report,
): void {
  const field = `/criteria/${i}`;
  const dimension = measuredDimension(scenario, criterion, field, report);
  checkLimit(criterion, dimension, field, report);
  checkRegained(criterion, field, report);
  checkEdge(scenario, criterion.from, `${field}/from`, report);
  checkEdge(scenario, criterion.to, `${field}/to`, report);
  if (endsBeforeStart(criterion.from, criterion.to, scenario)) {
    report(
      `${field}/to`,
      'window',
      'the window ends before it starts',
      'Exchange "from" and "to", or lengthen the window.',
    );
  } else warnOfEmptyWindow(scenario, criterion, field, warn);
  if (criterion.measure.startsWith('touchdown-') && !scenario.runway) {
    warn(
      `${field}/measure`,
      'needs-runway',
      'without a runway there is no touchdown: this is never reached',
      'Add "runway".',
    );
  }
}

function warnOfEmptyWindow(
  scenario: Scenario,
  { title, from, to }: ScenarioCriterion,
  field: string,
  warn: Report,
): void {
  const empty = emptyWindow(from, to, scenario);
  if (empty === 'opens-too-late') {
    warn(
      `${field}/from`,
      'empty-window',
      `the window of "${title}" does not open before the run ends at ${scenario.duration_s} s`,
      'Let it begin earlier, or lengthen the run.',
    );
  } else if (empty === 'no-length') {
    warn(
      `${field}/to`,
      'empty-window',
      `the window of "${title}" closes in the moment in which it opens`,
      'Lengthen the window.',
    );
  }
}

/** Dimension of the measured value; null when it cannot be told. */
function measuredDimension(
  scenario: Scenario,
  criterion: ScenarioCriterion,
  field: string,
  report: Report,
): Dimension | null {
  if (criterion.measure !== 'expression') {
    if (criterion.expression !== undefined) {
      report(
        `${field}/expression`,
        'unused',
        `the measure ${criterion.measure} takes no expression`,
        'Remove it, or choose the measure "expression".',
      );
    }
    return MEASURE_TABLE[criterion.measure].dimension;
  }
  if (criterion.expression === undefined) {
    report(
      `${field}/expression`,
      'required',
      'the measure "expression" needs an expression',
      'Add it, as "abs(bank)".',
    );
    return null;
  }
  const compiled = compileQuantity(criterion.expression);
  if (!compiled.ok) {
    reportExpression(`${field}/expression`, compiled.problem, report);
    return null;
  }
  reportUnknownSince(scenario, `${field}/expression`, compiled.quantity, report);
  return compiled.quantity.dimension;
}

function checkLimit(criterion: ScenarioCriterion, dimension: Dimension | null, field: string, report: Report): void {
  const { limit, measure } = criterion;
  const known = Object.hasOwn(UNITS, limit.unit) ? UNITS[limit.unit] : null;
  const units = dimension ? unitsOf(dimension) : [];
  if (!known) {
    report(
      `${field}/limit/unit`,
      'unit',
      `"${limit.unit}" is not a known unit`,
      `Use ${units.length > 0 ? units.join(' or ') : Object.keys(UNITS).join(', ')}.`,
    );
  } else if (dimension && !sameDimension(known.dimension, dimension)) {
    report(
      `${field}/limit/unit`,
      'unit',
      `the measure ${measure} is ${dimensionWords(dimension)}; "${limit.unit}" does not fit`,
      units.length > 0 ? `Use ${units.join(' or ')}.` : 'Change the expression so that its unit can be written.',
    );
  }
  if ('within' in limit && limit.within[0] > limit.within[1]) {
    report(
      `${field}/limit/within`,
      'ascending',
      'the lower end lies above the upper end',
      'Write the lower value first.',
    );
  }
  if (measure === 'pedal-reversals' && !('max' in limit)) {
    report(
      `${field}/limit`,
      'lower-is-better',
      'pedal reversals are a structural hazard: only {"max", "unit"} is a limit for them',
      'Write {"max": 0, "unit": "count"}.',
    );
  }
}

function checkRegained(criterion: ScenarioCriterion, field: string, report: Report): void {
  const { measure, value, unit } = criterion;
  if (measure !== 'speed-regained') {
    for (const [member, given] of Object.entries({ value, unit })) {
      if (given === undefined) continue;
      report(`${field}/${member}`, 'unused', `only speed-regained has "${member}"`, `Remove ${member}.`);
    }
    return;
  }
  if (value === undefined)
    report(`${field}/value`, 'required', 'speed-regained needs the speed "value"', 'Add value and unit.');
  const speed = unitsOf(UNITS.kt.dimension);
  if (unit === undefined)
    report(
      `${field}/unit`,
      'required',
      'speed-regained needs the unit of its value',
      `Add one of ${speed.join(', ')}.`,
    );
  else if (!speed.includes(unit)) {
    report(`${field}/unit`, 'unit', `"${unit}" is not a unit of speed`, `Use ${speed.join(' or ')}.`);
  }
}

function checkEdge(scenario: Scenario, edge: WindowEdge, field: string, report: Report): void {
  const id = typeof edge === 'string' ? edge : edge.after;
  const at = typeof edge === 'string' ? field : `${field}/after`;
  if (id === 'end' && typeof edge !== 'string') {
    report(at, 'window', 'nothing follows the end of the run', 'Name an event or "start".');
    return;
  }
  if (RESERVED_IDS.includes(id) || hasEvent(scenario, id)) return;
  report(at, 'known-event', `there is no event "${id}"`, `${knownEvents(scenario)} "start" and "end" are allowed too.`);
}
