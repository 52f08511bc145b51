import { z } from 'zod';
import { reactionBudget } from '#shared/scenario/reaction-budget.ts';
import { storedAirframe, storedScenario } from '../attempts/attempt-data.ts';

export const budgetJobSchema = z.object({ scenario: z.unknown(), airframe: z.unknown() });
export const budgetSchema = z.object({
  budgetS: z.number().nullable(),
  reason: z.enum(['met-hands-off', 'not-met-at-0', 'no-criteria']).nullable(),
  capped: z.boolean(),
  binding: z.string().nullable(),
});
export type StoredBudget = z.infer<typeof budgetSchema>;

/** The reaction budget of a scenario revision, with the seed of its document. */
export function budgetOfJob(job: z.infer<typeof budgetJobSchema>): StoredBudget {
  const scenario = storedScenario(job.scenario);
  const { budgetS, reason, capped, binding } = reactionBudget({
    scenario,
    airframe: storedAirframe(job.airframe),
    seed: scenario.seed,
  });
  const title = scenario.criteria.find(({ id }) => id === binding)?.title ?? null;
  return { budgetS, reason: reason ?? null, capped: capped === true, binding: title };
}
