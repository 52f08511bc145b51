/**
 * Reaction budget: how late the reference pilot may wake and still meet every required criterion that does not measure the
 * reaction itself. The part of the run before it wakes is flown once; every delay starts from a snapshot of it.
 */
import { TICK_RATE_HZ } from '../model/plant-types.ts';
import { createRun } from './run.ts';
import { createReferencePilot, delayTicks, firstEventTick, flyRun, handsOff, pilotTask } from './reference-pilot.ts';
import type { CriterionResult, Run, RunSnapshot, RunSpec, RunningCriterion } from './run-types.ts';
import type { MeasureName, Scenario, ScenarioCriterion } from './scenario-format.ts';

/** Longest delay looked at, grid of the search and resolution of each change; s. */
export const LONGEST_DELAY_S = 5;
export const DELAY_GRID_S = 0.25;
export const DELAY_RESOLUTION_S = 0.02;

/** Criteria of these measures judge the reaction itself and do not bind the budget. */
export const REACTION_MEASURES: readonly MeasureName[] = ['first-correct-pedal', 'wrong-pedal-time'];
/** Values that may come back inside their limit while the run goes on. */
const NOT_FINAL: readonly string[] = [
  'climb-rate',
  'speed-regained',
  'lever-reduced',
  'nose-lowered',
  'feathered-within',
  'yaw-arrested',
];
/** How often a run is looked at for a criterion that has already failed; ticks. */
const LOOK_TICKS = 30;

export interface DelayOutcome {
  delayS: number;
  met: boolean;
  /** Required criteria that were not met, in the order of the scenario; with early stop only the first found. */
  failed: string[];
}

export interface BudgetEvaluator {
  /** Whether the scenario has anything for the budget to bind: required criteria besides those of the reaction. */
  readonly binds: boolean;
  /** Outcome without any pilot. */
  readonly handsOff: DelayOutcome;
  /** Outcome of one delay; `every` flies on after the first failure so that all failures are known. */
  evaluate(delayS: number, every?: boolean): DelayOutcome;
}

/**
 * Prepares a scenario for the search: flies it hands off once, with snapshots.
 *
 * @throws what `createRun` and `createReferencePilot` throw.
 */
export function createBudgetEvaluator(spec: RunSpec): BudgetEvaluator {
  const run = createRun(spec, { lean: true });
  const counted = new Set(boundCriteria(spec.scenario).map(({ id }) => id));
  const start = run.save();
  const snapshots: RunSnapshot[] = [start];
  const byEvent = pilotTask(spec.scenario).kind === 'hold-heading';
  const longest = delayTicks(LONGEST_DELAY_S);
  const spacing = delayTicks(DELAY_GRID_S);
  flyRun(run, handsOff(), Infinity, (now) => {
    const first = byEvent ? firstEventTick(now) : 0;
    if (now.ended !== null) return;
    // One snapshot at the first event, then one a grid step as far as a delay can reach.
    if (
      first !== null &&
      now.tick > first &&
      now.tick - first <= longest + spacing &&
      (now.tick - first - 1) % spacing === 0
    ) {
      snapshots.push(now.save());
    }
  });
  const without = failures(run.results(), counted);
  const first = byEvent ? firstEventTick(run) : 0;
  const noPilot: DelayOutcome = { delayS: Infinity, met: without.length === 0, failed: without };

  return {
    binds: counted.size > 0,
    handsOff: noPilot,
    evaluate(delayS, every = false) {
      if (first === null) return { ...noPilot, delayS };
      const wake = first + delayTicks(delayS);
      let from = start;
      for (const snapshot of snapshots) if (snapshot.tick <= wake && snapshot.tick > from.tick) from = snapshot;
      run.restore(from);
      const pilot = createPilotFor(run, start, from, delayS);
      let failed: string[] = [];
      const sample = run.neutralSample();
      while (run.ended === null) {
        const before = run.tick;
        pilot.sampleInto(sample);
        run.step(sample);
        if (run.tick === before) break;
        if (!every && run.tick % LOOK_TICKS === 0) {
          failed = finalFailures(run.criteria(), counted);
          if (failed.length > 0) return { delayS, met: false, failed: failed.slice(0, 1) };
        }
      }
      failed = failures(run.results(), counted);
      return { delayS, met: failed.length === 0, failed };
    },
  };
}

/** The pilot reads its start heading when it is made: it is made at the start, then the run goes back to where it was. */
function createPilotFor(run: Run, start: RunSnapshot, from: RunSnapshot, delayS: number) {
  run.restore(start);
  const pilot = createReferencePilot(run, delayS);
  run.restore(from);
  return pilot;
}

function failures(results: readonly CriterionResult[], counted: ReadonlySet<string>): string[] {
  return results.filter((r) => counted.has(r.id) && r.verdict !== 'met' && r.verdict !== 'near').map((r) => r.id);
}

function finalFailures(criteria: readonly RunningCriterion[], counted: ReadonlySet<string>): string[] {
  return criteria
    .filter((c) => {
      if (!counted.has(c.id) || c.value === null || c.limit.max === undefined || NOT_FINAL.includes(c.measure))
        return false;
      return c.phase !== 'waiting' && c.value > c.limit.max;
    })
    .map((c) => c.id);
}

export interface ReactionBudget {
  /** End of the interval of success that starts at delay 0; null with a reason. */
  budgetS: number | null;
  reason?: 'met-hands-off' | 'not-met-at-0' | 'no-criteria';
  /** True when even the longest delay succeeds. */
  capped?: boolean;
  /** Criterion that fails first beyond the budget; null when none does. */
  binding: string | null;
  /** All intervals of delays that succeed; s. */
  intervalsS: [number, number][];
  resolutionS: number;
}

/** Delays of the first look, in seconds: 0, 0.25 … 5. */
export function budgetGrid(): number[] {
  return Array.from({ length: Math.round(LONGEST_DELAY_S / DELAY_GRID_S) + 1 }, (_, i) => i * DELAY_GRID_S);
}

/**
 * The search as a dialogue: yields delays to evaluate (any order, any number of workers), receives their outcomes.
 * The first round is the grid, each further round halves every change that is still wider than the resolution.
 */
export function* searchBudget(
  withoutPilot: DelayOutcome,
  binds: boolean,
): Generator<number[], ReactionBudget, DelayOutcome[]> {
  const plain = { binding: null, intervalsS: [] as [number, number][], resolutionS: DELAY_RESOLUTION_S };
  if (!binds) return { budgetS: null, reason: 'no-criteria', ...plain };
  if (withoutPilot.met) return { budgetS: null, reason: 'met-hands-off', ...plain };
  const known = new Map<number, DelayOutcome>();
  const take = (outcomes: readonly DelayOutcome[]): void => {
    for (const outcome of outcomes) known.set(delayTicks(outcome.delayS), outcome);
  };
  take(yield budgetGrid());
  const ordered = (): DelayOutcome[] => [...known.entries()].sort(([a], [b]) => a - b).map(([, outcome]) => outcome);
  for (;;) {
    const now = ordered();
    const wanted: number[] = [];
    for (let i = 1; i < now.length; i++) {
      const from = delayTicks(now[i - 1].delayS);
      const to = delayTicks(now[i].delayS);
      if (now[i].met === now[i - 1].met || to - from <= RESOLUTION_TICKS) continue;
      wanted.push(Math.round((from + to) / 2) / TICK_RATE_HZ);
    }
    if (wanted.length === 0) break;
    take(yield wanted);
  }
  return summary(ordered());
}

const RESOLUTION_TICKS = Math.floor(DELAY_RESOLUTION_S * TICK_RATE_HZ);

function summary(outcomes: readonly DelayOutcome[]): ReactionBudget {
  const intervalsS: [number, number][] = [];
  let open: number | null = null;
  let last = 0;
  for (const outcome of outcomes) {
    if (outcome.met) {
      open ??= outcome.delayS;
      last = outcome.delayS;
    } else if (open !== null) {
      intervalsS.push([open, last]);
      open = null;
    }
  }
  if (open !== null) intervalsS.push([open, last]);
  const first = outcomes[0];
  const base = { intervalsS, resolutionS: DELAY_RESOLUTION_S };
  if (!first.met) return { budgetS: null, reason: 'not-met-at-0', binding: first.failed[0] ?? null, ...base };
  const firstFailure = outcomes.find((o) => !o.met);
  if (!firstFailure) return { budgetS: LONGEST_DELAY_S, capped: true, binding: null, ...base };
  return { budgetS: intervalsS[0][1], binding: firstFailure.failed[0] ?? null, ...base };
}

/**
 * The reaction budget of a scenario, computed here and now.
 *
 * @param spec  Scenario, airframe, seed.
 * @throws what `createRun` and `createReferencePilot` throw.
 */
export function reactionBudget(spec: RunSpec): ReactionBudget {
  const evaluator = createBudgetEvaluator(spec);
  const search = searchBudget(evaluator.handsOff, evaluator.binds);
  let step = search.next();
  while (!step.done) step = search.next(step.value.map((delayS) => evaluator.evaluate(delayS)));
  return step.value;
}

export interface CriterionBudget {
  id: string;
  /** Latest delay at which this criterion alone is met, from 0 on; null when it is not met at 0. */
  latestS: number | null;
  /** True when it is met at every delay up to the longest. */
  capped: boolean;
  /** All intervals of delays at which it is met; s. More than one, or one that does not begin at 0: not monotonic. */
  intervalsS: [number, number][];
}

/** Criteria that the budget looks at: all required ones besides those of the reaction. */
export function boundCriteria({ criteria }: Pick<Scenario, 'criteria'>): ScenarioCriterion[] {
  return criteria.filter(({ required, measure }) => required && !REACTION_MEASURES.includes(measure));
}

/** Budget per criterion, for the bars of the editor: on the grid, each change halved down to the resolution. */
export function criterionBudgets(evaluator: BudgetEvaluator, ids: readonly string[]): CriterionBudget[] {
  const search = searchCriterionBudgets(ids);
  let step = search.next();
  while (!step.done) step = search.next(step.value.map((delayS) => evaluator.evaluate(delayS, true)));
  return step.value;
}

/** The search for `criterionBudgets` as a dialogue like `searchBudget`; every outcome names all that failed. */
export function* searchCriterionBudgets(
  ids: readonly string[],
): Generator<number[], CriterionBudget[], DelayOutcome[]> {
  const grid = budgetGrid();
  const outcomes = yield grid;
  const isMet = (id: string, outcome: DelayOutcome): boolean => !outcome.failed.includes(id);
  const changes = ids.flatMap((id) =>
    outcomes.slice(1).flatMap((outcome, i): Change[] => {
      const metBefore = isMet(id, outcomes[i]);
      return metBefore === isMet(id, outcome)
        ? []
        : [{ id, metBefore, before: delayTicks(grid[i]), after: delayTicks(grid[i + 1]) }];
    }),
  );
  const middle = ({ before, after }: Change): number => Math.round((before + after) / 2);
  const isOpen = ({ before, after }: Change): boolean => after - before > RESOLUTION_TICKS;
  for (;;) {
    const wanted = [...new Set(changes.filter(isOpen).map(middle))];
    if (wanted.length === 0) break;
    const found = new Map<number, DelayOutcome>();
    for (const outcome of yield wanted.map((ticks) => ticks / TICK_RATE_HZ))
      found.set(delayTicks(outcome.delayS), outcome);
    for (const change of changes.filter(isOpen)) {
      const at = middle(change);
      const outcome = found.get(at);
      if (outcome !== undefined && isMet(change.id, outcome) === change.metBefore) change.before = at;
      else change.after = at;
    }
  }
  return ids.map((id) => {
    const intervalsS: [number, number][] = [];
    let open: number | null = isMet(id, outcomes[0]) ? delayTicks(grid[0]) : null;
    for (const { before, after, id: of } of changes) {
      if (of !== id) continue;
      if (open === null) open = after;
      else {
        intervalsS.push([open / TICK_RATE_HZ, before / TICK_RATE_HZ]);
        open = null;
      }
    }
    if (open !== null) intervalsS.push([open / TICK_RATE_HZ, grid[grid.length - 1]]);
    const [first] = intervalsS;
    const latestS = first !== undefined && first[0] === 0 ? first[1] : null;
    return { id, latestS, capped: latestS === LONGEST_DELAY_S, intervalsS };
  });
}

/** Between two delays a criterion changes from met to failed, or back; ticks. */
interface Change {
  id: string;
  metBefore: boolean;
  before: number;
  after: number;
}
