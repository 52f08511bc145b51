/** The search for the reaction budget, spread over several workers; it can be given up between any two delays. */
import type { Airframe } from '#shared/model/airframe-schema.ts';
import {
  type CriterionBudget,
  type DelayOutcome,
  type ReactionBudget,
  boundCriteria,
  searchBudget,
  searchCriterionBudgets,
} from '#shared/scenario/reaction-budget.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import type { BudgetMessage, BudgetReply } from './budget-desk.ts';

/** Sends one message to a worker and resolves with its reply; a worker has one message at a time. */
export type BudgetDesk = (message: BudgetMessage) => Promise<BudgetReply>;

export interface BudgetFound {
  budget: ReactionBudget;
  criteria: CriterionBudget[];
}

export interface BudgetQuestion {
  scenario: Scenario;
  airframe: Airframe;
}

export class BudgetRefusal extends Error {
  override readonly name = 'BudgetRefusal';
}

class GivenUp extends Error {
  override readonly name = 'GivenUp';
}

/**
 * @param wanted  Asked between any two delays; the search is given up when it says no.
 * @returns       What was found; null when it was given up.
 * @throws {BudgetRefusal} when a run cannot be flown.
 */
export async function searchOverDesks(
  desks: readonly BudgetDesk[],
  question: BudgetQuestion,
  wanted: () => boolean,
): Promise<BudgetFound | null> {
  try {
    const budget = await budgetOverDesks(desks, question, wanted);
    const ids = boundCriteria(question.scenario).map(({ id }) => id);
    const spread = spreadOver(desks, wanted);
    const criteria =
      ids.length === 0 ? [] : await carryOut(searchCriterionBudgets(ids), (delays) => spread(delays, true));
    return { budget, criteria };
  } catch (error) {
    if (error instanceof GivenUp) return null;
    throw error;
  }
}

/** The first half: the budget alone, from desks that have opened nothing yet. */
export async function budgetOverDesks(
  desks: readonly BudgetDesk[],
  { scenario, airframe }: BudgetQuestion,
  wanted: () => boolean,
): Promise<ReactionBudget> {
  const [{ handsOff, binds }] = await Promise.all(desks.map((desk) => open(desk, scenario, airframe)));
  const spread = spreadOver(desks, wanted);
  return carryOut(searchBudget(handsOff, binds), (delays) => spread(delays, false));
}

async function open(desk: BudgetDesk, scenario: Scenario, airframe: Airframe) {
  const reply = await desk({ kind: 'open', scenario, airframe });
  if (reply.kind === 'opened') return reply;
  throw new BudgetRefusal(reply.kind === 'refused' ? reply.message : 'the search answered out of turn');
}

/** Each worker takes the next delay as soon as it is free; outcomes in the order of the delays. */
function spreadOver(desks: readonly BudgetDesk[], wanted: () => boolean) {
  return async (delays: readonly number[], every: boolean): Promise<DelayOutcome[]> => {
    const outcomes: DelayOutcome[] = [];
    let next = 0;
    const work = async (desk: BudgetDesk): Promise<void> => {
      while (next < delays.length) {
        if (!wanted()) throw new GivenUp();
        const mine = next++;
        const reply = await desk({ kind: 'evaluate', delayS: delays[mine], every });
        if (reply.kind !== 'outcome') {
          throw new BudgetRefusal(reply.kind === 'refused' ? reply.message : 'the search answered out of turn');
        }
        outcomes[mine] = reply.outcome;
      }
    };
    const ends = await Promise.allSettled(desks.slice(0, delays.length).map(work));
    for (const end of ends) if (end.status === 'rejected') throw end.reason;
    return outcomes;
  };
}

async function carryOut<T>(
  search: Generator<number[], T, DelayOutcome[]>,
  evaluate: (delays: readonly number[]) => Promise<DelayOutcome[]>,
): Promise<T> {
  let step = search.next();
  while (!step.done) step = search.next(await evaluate(step.value));
  return step.value;
}
