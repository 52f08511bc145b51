/** One of the workers that share a search for the reaction budget: holds the scenario, answers one delay at a time. Apart from its worker. */
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { type BudgetEvaluator, type DelayOutcome, createBudgetEvaluator } from '#shared/scenario/reaction-budget.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';

export type BudgetMessage =
  { kind: 'open'; scenario: Scenario; airframe: Airframe } | { kind: 'evaluate'; delayS: number; every: boolean };

export type BudgetReply =
  | { kind: 'opened'; handsOff: DelayOutcome; binds: boolean }
  | { kind: 'outcome'; outcome: DelayOutcome }
  | { kind: 'refused'; message: string };

export function createBudgetDesk(): (message: BudgetMessage) => BudgetReply {
  let evaluator: BudgetEvaluator | null = null;
  return (message) => {
    try {
      if (message.kind === 'open') {
        const { scenario, airframe } = message;
        evaluator = createBudgetEvaluator({ scenario, airframe, seed: scenario.seed });
        return { kind: 'opened', handsOff: evaluator.handsOff, binds: evaluator.binds };
      }
      if (evaluator === null) return { kind: 'refused', message: 'no scenario was opened' };
      return { kind: 'outcome', outcome: evaluator.evaluate(message.delayS, message.every) };
    } catch (error) {
      return { kind: 'refused', message: error instanceof Error ? error.message : 'the search failed' };
    }
  };
}
