import { describe, expect, it } from 'vitest';
import {
  boundCriteria,
  createBudgetEvaluator,
  criterionBudgets,
  reactionBudget,
} from '#shared/scenario/reaction-budget.ts';
import { createBudgetDesk } from '../../../src/runner/workers/budget-desk.ts';
import { type BudgetDesk, BudgetRefusal, searchOverDesks } from '../../../src/runner/workers/budget-search.ts';
import { airframeOf, shippedScenario } from '../scenario/support/build-scenario.ts';

const scenario = shippedScenario('engine-cut-in-the-climb');
const airframe = airframeOf('light-twin');
const spec = { scenario, airframe, seed: scenario.seed };

/** A desk without a worker; `asked` counts what it was asked. */
function desk(asked: string[] = []): BudgetDesk {
  const answer = createBudgetDesk();
  return (message) => {
    asked.push(message.kind);
    return new Promise((resolve) => setTimeout(() => resolve(answer(message)), 0));
  };
}

describe('a search for the reaction budget over several workers', () => {
  it.each([1, 3])('finds with %i what a search in one place finds, to the last digit', async (count) => {
    const asked = Array.from({ length: count }, () => [] as string[]);
    const found = await searchOverDesks(
      asked.map((list) => desk(list)),
      { scenario, airframe },
      () => true,
    );
    const evaluator = createBudgetEvaluator(spec);
    const ids = boundCriteria(scenario).map(({ id }) => id);
    expect(ids.length).toBeGreaterThan(0);
    expect(found).toEqual({ budget: reactionBudget(spec), criteria: criterionBudgets(evaluator, ids) });
    for (const list of asked) expect(list.filter((kind) => kind === 'evaluate').length).toBeGreaterThan(5);
  });

  it('per criterion ends where that criterion begins to fail', () => {
    const evaluator = createBudgetEvaluator(spec);
    const budgets = criterionBudgets(evaluator, ['heading', 'bank']);
    expect(budgets.map(({ id }) => id)).toEqual(['heading', 'bank']);
    const ends = budgets.filter(({ latestS, capped }) => latestS !== null && !capped);
    expect(ends.length).toBeGreaterThan(0);
    for (const { id, latestS } of ends) {
      expect(evaluator.evaluate(latestS ?? 0, true).failed).not.toContain(id);
      expect(evaluator.evaluate((latestS ?? 0) + 0.02, true).failed).toContain(id);
    }
  });

  it('is given up between two delays when nobody wants it any more', async () => {
    const asked: string[] = [];
    let left = 5;
    expect(await searchOverDesks([desk(asked)], { scenario, airframe }, () => left-- > 0)).toBeNull();
    expect(asked).toEqual(['open', 'evaluate', 'evaluate', 'evaluate', 'evaluate', 'evaluate']);
  });

  it('refuses what cannot be flown with the reason', async () => {
    const misfit = { scenario: { ...scenario, configuration: 'none such' }, airframe };
    await expect(searchOverDesks([desk(), desk()], misfit, () => true)).rejects.toThrow(BudgetRefusal);
  });
});
