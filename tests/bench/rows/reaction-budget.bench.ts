import { reactionBudget } from '#shared/scenario/reaction-budget.ts';
import type { BudgetMessage, BudgetReply } from '../../../src/runner/workers/budget-desk.ts';
import { budgetOverDesks, searchOverDesks } from '../../../src/runner/workers/budget-search.ts';
import { airframeOf, shippedScenario } from '../../unit/scenario/support/build-scenario.ts';
import { defineBench, median, timeOnce } from '../harness.ts';
import { startThreads } from '../threads/threads.ts';

/** The shipped scenarios of 30 s. */
const SLUGS = [
  'crosswind-gust-on-final',
  'engine-cut-with-frozen-airspeed',
  'partial-power-loss',
  'turboprop-cut-without-autofeather',
  'twin-jet-cut-at-high-speed',
];
const GOAL_S = 0.4;
const ROUNDS = 7;
const always = (): boolean => true;

async function timeOf(action: () => Promise<unknown>): Promise<number> {
  const from = performance.now();
  await action();
  return (performance.now() - from) / 1000;
}

/** The search as the scenario editor runs it, over two workers; against the same search in one place. */
export default defineBench({
  name: 'reaction-budget',
  claim: 'the reaction budget of a 30 s scenario to 0.02 s, over two workers as in the editor; the slowest of five',
  async run({ cleanUp }) {
    const threads = await startThreads<BudgetMessage, BudgetReply>('budget-thread', 2);
    cleanUp(() => threads.close());
    const rows = [];
    for (const slug of SLUGS) {
      const scenario = shippedScenario(slug);
      const question = { scenario, airframe: airframeOf(scenario.airframe.slug) };
      const spec = { ...question, seed: scenario.seed };
      const alone = reactionBudget(spec);
      const spread = await budgetOverDesks(threads.asks, question, always);
      if (JSON.stringify(alone) !== JSON.stringify(spread))
        throw new Error(`${slug}: two workers found another budget`);
      const [two, one, bars]: number[][] = [[], [], []];
      for (let round = 0; round < ROUNDS; round += 1) {
        two.push(await timeOf(() => budgetOverDesks(threads.asks, question, always)));
        one.push(timeOnce(() => reactionBudget(spec)) / 1000);
        bars.push(await timeOf(() => searchOverDesks(threads.asks, question, always)));
      }
      rows.push({ slug, seconds: median(two), one: median(one), bars: median(bars), budgetS: alone.budgetS });
    }
    const slowest = rows.toSorted((a, b) => b.seconds - a.seconds)[0];
    return {
      value: slowest.seconds,
      unit: 's',
      ratio: slowest.seconds / slowest.one,
      baseline: `the same search in one place: ${slowest.one.toFixed(2)} s`,
      goal: `≤ ${GOAL_S} s`,
      met: slowest.seconds <= GOAL_S,
      details: rows.flatMap(({ slug, seconds, bars, budgetS }) => [
        { label: `${slug}, budget ${budgetS?.toFixed(2) ?? 'none'} s`, value: seconds, unit: 's' },
        { label: '… with the latest delay of every criterion', value: bars, unit: 's' },
      ]),
    };
  },
});
