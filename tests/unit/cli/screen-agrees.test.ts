/** What the command line prints of a scenario is what the editor shows, to the last digit: one code under both. */
import { readdirSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { parseScenario } from '#shared/scenario/scenario-schema.ts';
import {
  boundCriteria,
  createBudgetEvaluator,
  criterionBudgets,
  reactionBudget,
} from '#shared/scenario/reaction-budget.ts';
import { previewParts, type PreviewQuestion, type PreviewRun } from '../../../src/runner/workers/scenario-preview.ts';
import { airframeOf, jsonOf } from '../scenario/support/build-scenario.ts';
import { sidewashJson } from './run-command.ts';

const root = new URL('../../../', import.meta.url);
/** Every fourth of the library: all five airframes are among them. */
const FILES = readdirSync(new URL('scenarios/', root))
  .filter((name) => name.endsWith('.json'))
  .filter((_name, i) => i % 4 === 0);

function questionOf(file: string, delayS: number) {
  const parsed = parseScenario(jsonOf(`scenarios/${file}`));
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.issues));
  const { scenario } = parsed;
  return { id: 1, scenario, airframe: airframeOf(scenario.airframe.slug), delayS };
}
function previewRuns(question: PreviewQuestion) {
  for (const part of previewParts(question)) if (part?.part === 'runs') return part;
  throw new Error('the preview gave no runs');
}
/** What the editor's workers find between them; that they find it together is tested beside them. */
function previewBudget({ scenario, airframe }: PreviewQuestion) {
  const spec = { scenario, airframe, seed: scenario.seed };
  const ids = boundCriteria(scenario).map(({ id }) => id);
  return { budget: reactionBudget(spec), criteria: criterionBudgets(createBudgetEvaluator(spec), ids) };
}
/** The members of a result that the command line prints. */
const asPrinted = ({ run, results }: PreviewRun) => ({
  duration_s: run.durationS,
  criteria: results.map(({ id, value, limit, margin, atS, verdict, note }) => ({
    id,
    value,
    limit,
    margin,
    at_s: atS,
    verdict,
    ...(note !== undefined && { note }),
  })),
});
const printed = async (file: string, ...rest: string[]) => {
  const { duration_s, criteria } = await sidewashJson('run', `scenarios/${file}`, ...rest);
  return { duration_s, criteria };
};

describe('a run', () => {
  it.each(FILES)('of %s has the same results, hands off and by the reference pilot', async (file) => {
    const { handsOff, reference } = previewRuns(questionOf(file, 1.3));
    expect(await printed(file)).toEqual(asPrinted(handsOff));
    expect(await printed(file, '--pilot', 'reference', '--delay', '1.3s')).toEqual(asPrinted(reference));
  });
});

describe('a reaction budget', () => {
  it.each([
    'left-engine-cut-after-lift-off.json', // bank binds
    'wrong-engine-shut-down.json', // heading binds
    'go-around-on-one-engine.json', // capped
    'adverse-yaw-in-a-roll.json', // nothing to bind
    'recovery-below-minimum-control-speed.json', // not met at 0
  ])('of %s is the same, and the tightest criterion is the one that binds', async (file) => {
    const { budget, criteria } = previewBudget(questionOf(file, 1));
    const out = await sidewashJson('budget', `scenarios/${file}`);
    expect(out).toMatchObject({
      budget_s: budget.budgetS,
      binding: budget.binding,
      intervals_s: budget.intervalsS,
      resolution_s: budget.resolutionS,
    });
    if (budget.budgetS === null) return;
    const tightest = Math.min(...criteria.map(({ latestS }) => latestS ?? -1));
    expect(tightest).toBe(budget.budgetS);
    if (budget.binding !== null)
      expect(criteria.filter(({ latestS }) => latestS === tightest).map(({ id }) => id)).toContain(budget.binding);
    for (const { latestS, intervalsS } of criteria) expect(intervalsS[0]).toEqual([0, latestS]);
  });
});
