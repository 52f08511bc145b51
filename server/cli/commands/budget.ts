import { reactionBudget } from '#shared/scenario/reaction-budget.ts';
import type { ReactionBudget } from '#shared/scenario/reaction-budget.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import type { Command } from '../command.ts';
import { fixed, printJson, printText } from '../output.ts';
import { namedScenario, readScenario } from '../scenario-file.ts';

export const command: Command = {
  name: 'budget',
  usage: 'SCENARIO.json [--airframe FILE] [--json]',
  summary: 'How late the reference pilot may wake and still meet every required criterion but those of the reaction.',
  positionals: ['SCENARIO.json'],
  options: { airframe: 'value', json: 'flag' },
  async run(args) {
    const [file] = args.positionals;
    const { scenario, airframe, notes } = await readScenario(args);
    const budget = namedScenario(file, () => reactionBudget({ scenario, airframe, seed: scenario.seed }));
    if (args.flags.has('json')) {
      for (const note of notes) process.stderr.write(`note: ${note}\n`);
      printJson(jsonOf(budget));
    } else printText(textOf(scenario, budget, notes));
    return 0;
  },
};

/** Without criteria to bind nothing can fail hands off either, and the format knows no other word for it. */
function reasonOf({ reason }: ReactionBudget): 'met-hands-off' | 'not-met-at-0' | undefined {
  return reason === 'no-criteria' ? 'met-hands-off' : reason;
}

function jsonOf(budget: ReactionBudget): Record<string, unknown> {
  const reason = reasonOf(budget);
  return {
    budget_s: budget.budgetS,
    ...(reason === undefined ? {} : { reason }),
    ...(budget.capped === true ? { capped: true } : {}),
    binding: budget.binding,
    intervals_s: budget.intervalsS,
    resolution_s: budget.resolutionS,
  };
}

function textOf(scenario: Scenario, budget: ReactionBudget, notes: string[]): string[] {
  const titleOf = (id: string | null): string =>
    scenario.criteria.find((criterion) => criterion.id === id)?.title ?? '–';
  const lines = [`${scenario.title}: reaction budget`, ''];
  if (budget.reason === 'no-criteria') lines.push('None: no required criterion but those of the reaction itself.');
  else if (budget.reason === 'met-hands-off') lines.push('None: every required criterion is met hands off.');
  else if (budget.reason === 'not-met-at-0') {
    lines.push(
      `None: the reference pilot does not meet the criteria even without delay. First: ${titleOf(budget.binding)}.`,
    );
  } else if (budget.capped === true)
    lines.push(`${fixed(budget.budgetS, 2)} s or more: met at every delay that is looked at.`);
  else
    lines.push(
      `${fixed(budget.budgetS, 2)} s (to ${fixed(budget.resolutionS, 2)} s). First to fail beyond it: ${titleOf(budget.binding)}.`,
    );
  const later = budget.intervalsS.filter(([from]) => from > 0);
  for (const [from, to] of later) lines.push(`Met again from ${fixed(from, 2)} s to ${fixed(to, 2)} s (listed only).`);
  return notes.length > 0 ? [...lines, '', ...notes] : lines;
}
