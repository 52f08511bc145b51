/** What a scenario does hands off and with the reference pilot, and how much time a trainee has. Apart from its worker. */
import type { Airframe } from '#shared/model/airframe-schema.ts';
import {
  type CriterionBudget,
  type ReactionBudget,
  createBudgetEvaluator,
  criterionBudgets,
  reactionBudget,
  REACTION_MEASURES,
} from '#shared/scenario/reaction-budget.ts';
import { createReferencePilot, flyRun, handsOff } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { CriterionResult, FiredEvent, Run } from '#shared/scenario/run-types.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import type { ReferenceRun } from './reference-types.ts';
import { createRunSampler } from './run-sampler.ts';

export interface PreviewQuestion {
  id: number;
  scenario: Scenario;
  airframe: Airframe;
  delayS: number;
}

export interface PreviewRun {
  run: ReferenceRun;
  results: CriterionResult[];
  fired: FiredEvent[];
  warnings: string[];
  deadSide: -1 | 0 | 1;
}

/** When a waiting event fired over the test runs; null where it never did. */
export interface EventWindow {
  id: string;
  firstS: number | null;
  lastS: number | null;
  fired: number;
  runs: number;
}

export type PreviewAnswer =
  | { id: number; part: 'runs'; handsOff: PreviewRun; reference: PreviewRun; warnings: string[] }
  | { id: number; part: 'windows'; windows: EventWindow[] }
  | { id: number; part: 'budget'; budget: ReactionBudget; criteria: CriterionBudget[] }
  | { id: number; part: 'refused'; message: string };

const FURTHER_SEEDS = 20;

function flown({ scenario, airframe, delayS }: PreviewQuestion, reference: boolean): PreviewRun {
  const run = createRun({ scenario, airframe, seed: scenario.seed });
  const sampler = createRunSampler(run, run.durationTicks);
  sampler.take();
  flyRun(run, reference ? createReferencePilot(run, delayS) : handsOff(), Infinity, sampler.take);
  return {
    run: sampler.finish(),
    results: run.results(),
    fired: [...run.fired],
    warnings: [...run.warnings],
    deadSide: run.deadSide,
  };
}

export function previewRuns(question: PreviewQuestion): Extract<PreviewAnswer, { part: 'runs' }> {
  const hands = flown(question, false);
  const reference = flown(question, true);
  return {
    id: question.id,
    part: 'runs',
    handsOff: hands,
    reference,
    warnings: previewWarnings(question.scenario, hands, reference),
  };
}

const passed = ({ results }: PreviewRun): boolean =>
  results.every(({ required, verdict }) => !required || verdict === 'met' || verdict === 'near');

/** What an author should know before publishing; each in one sentence. */
export function previewWarnings(scenario: Scenario, hands: PreviewRun, reference: PreviewRun): string[] {
  const out: string[] = [];
  const required = scenario.criteria.some((criterion) => criterion.required);
  if (required && passed(hands)) out.push('Met hands off: nobody has to do anything to pass.');
  if (required && !passed(reference)) {
    const open = reference.results.filter((r) => r.required && r.verdict !== 'met' && r.verdict !== 'near');
    out.push(`Not met by the reference pilot: ${open.map(({ title }) => title).join(', ')}.`);
  }
  for (const event of scenario.events) {
    const fired = [hands, reference].some((run) => run.fired.some(({ id }) => id === event.id));
    if (!fired) out.push(`Event “${event.id}” never happens in either run.`);
  }
  for (const criterion of scenario.criteria) {
    const reached = [hands, reference].some((run) =>
      run.results.some(({ id, verdict }) => id === criterion.id && verdict !== 'not-reached'),
    );
    if (!reached) out.push(`The window of “${criterion.title}” never opens in either run.`);
  }
  const outside = reference.warnings.find((text) => /outside the data/i.test(text));
  if (outside) out.push(`Reference pilot: ${outside}`);
  return out;
}

/** Spread of the events that wait, over the scenario's own draw and twenty further seeds, flown by the reference pilot. */
export function eventWindows(question: PreviewQuestion): EventWindow[] {
  const { scenario, airframe, delayS } = question;
  const waiting = scenario.events.filter(({ at, vary }) => !('time_s' in at) || vary !== undefined);
  if (waiting.length === 0) return [];
  const times = new Map<string, number[]>(waiting.map(({ id }) => [id, []]));
  for (let i = 0; i <= FURTHER_SEEDS; i += 1) {
    const run: Run = createRun({ scenario, airframe, seed: scenario.seed + i });
    flyRun(run, createReferencePilot(run, delayS));
    for (const { id, timeS } of run.fired) times.get(id)?.push(timeS);
  }
  return waiting.map(({ id }) => {
    const found = times.get(id) ?? [];
    const some = found.length > 0;
    return {
      id,
      firstS: some ? Math.min(...found) : null,
      lastS: some ? Math.max(...found) : null,
      fired: found.length,
      runs: FURTHER_SEEDS + 1,
    };
  });
}

export function previewBudget(question: PreviewQuestion): Extract<PreviewAnswer, { part: 'budget' }> {
  const spec = { scenario: question.scenario, airframe: question.airframe, seed: question.scenario.seed };
  const budget = reactionBudget(spec);
  const ids = question.scenario.criteria
    .filter(({ required, measure }) => required && !REACTION_MEASURES.includes(measure))
    .map(({ id }) => id);
  return {
    id: question.id,
    part: 'budget',
    budget,
    criteria: ids.length === 0 ? [] : criterionBudgets(createBudgetEvaluator(spec), ids),
  };
}
