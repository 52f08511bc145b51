import type { Distribution, DistributionQuery } from '#shared/contracts/records.ts';
import { MODEL_VERSION } from '#shared/scenario/run-types.ts';
import type { Database } from '../../data/database.ts';
import type { ScenarioRevisionRecord } from '../../data/repositories/scenarios.repository.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { notFound } from '../problem-error.ts';
import type { WorkerPool } from '../workers/worker-pool.ts';
import { budgetSchema, type StoredBudget } from './budget-job.ts';

const BIN_S = 0.25;
const BINS = 20;
const LONGEST_SERIES = 12;

export const median = (values: readonly number[]): number => {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
};

/** Reaction times of a group beside the budget computed for the scenario. */
export function createDistributions(setup: { database: Database; budgets: WorkerPool; now: () => Date }) {
  const { database, budgets, now } = setup;
  const computing = new Map<string, Promise<StoredBudget>>();

  /** Computed once a revision and model version; who asks meanwhile waits for the same computation. */
  const budgetOf = async (revision: ScenarioRevisionRecord): Promise<StoredBudget> => {
    const kept = budgetSchema.safeParse(await database.budgets.find(revision.id, MODEL_VERSION));
    if (kept.success) return kept.data;
    let running = computing.get(revision.id);
    if (running === undefined) {
      running = (async () => {
        const job = { scenario: revision.document, airframe: revision.airframe.document };
        const budget = budgetSchema.parse(await budgets.run(job, { withinMs: 120_000 }));
        await database.budgets.keep(revision.id, MODEL_VERSION, budget, now());
        return budget;
      })().finally(() => computing.delete(revision.id));
      computing.set(revision.id, running);
    }
    return running;
  };

  return {
    async distribution(actor: Actor, query: DistributionQuery): Promise<Distribution> {
      requireDeed(actor, 'record.read');
      const { organisationId } = actor;
      const [scenario] = await database.playlists.choose(organisationId, [query.scenario]);
      const number = await database.scenarios.latestPublishedNumber(organisationId, query.scenario);
      const revision =
        number === null ? null : await database.scenarios.findRevision(organisationId, query.scenario, number);
      if (scenario === undefined || revision === null) throw notFound('published scenario');
      const [budget, rows, profile] = await Promise.all([
        budgetOf(revision),
        database.records.reactions(organisationId, query, scenario.scenarioId),
        database.people.findProfile(organisationId, actor.personId),
      ]);
      const series = new Map<string, (number | null)[]>();
      for (const { personId, firstPedalS } of rows) {
        const list = series.get(personId);
        if (list) list.push(firstPedalS);
        else series.set(personId, [firstPedalS]);
      }
      const bins = new Array<number>(BINS + 1).fill(0);
      const counts = { within: 0, beyond: 0, never: 0 };
      const limit = budget.budgetS ?? Infinity;
      for (const list of series.values()) {
        const last = list.at(-1) ?? null;
        if (last === null) {
          counts.never += 1;
          continue;
        }
        bins[Math.min(BINS, Math.floor(last / BIN_S))] += 1;
        counts[last <= limit ? 'within' : 'beyond'] += 1;
      }
      const byNumber = Array.from({ length: LONGEST_SERIES }, (_, i) =>
        [...series.values()].map((list) => list[i]).filter((value) => typeof value === 'number'),
      ).flatMap((values, i) =>
        values.length === 0 ? [] : [{ number: i + 1, people: values.length, medianS: median(values) }],
      );
      return {
        revision: revision.revision,
        budget,
        recognitionTimeS: profile?.organisation.settings.recognitionTimeS ?? null,
        binS: BIN_S,
        bins,
        ...counts,
        byNumber,
      };
    },
  };
}
