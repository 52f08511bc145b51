import type { EntityManager } from 'typeorm';
import { z } from 'zod';

const rowsSchema = z.array(
  z.object({ budget: z.union([z.string().transform((text): unknown => JSON.parse(text)), z.unknown()]) }),
);

/** Computed reaction budgets, kept by scenario revision and model version. */
export function createBudgetsRepository(manager: EntityManager) {
  return {
    async find(revisionId: string, modelVersion: string): Promise<unknown> {
      const rows: unknown = await manager.query(
        'SELECT budget FROM budget_result WHERE scenario_revision_id = ? AND model_version = ?',
        [revisionId, modelVersion],
      );
      return rowsSchema.parse(rows)[0]?.budget ?? null;
    },

    async keep(revisionId: string, modelVersion: string, budget: unknown, at: Date): Promise<void> {
      await manager.query(
        'INSERT IGNORE INTO budget_result (scenario_revision_id, model_version, budget, computed_at) VALUES (?, ?, ?, ?)',
        [revisionId, modelVersion, JSON.stringify(budget), at],
      );
    },
  };
}
export type BudgetsRepository = ReturnType<typeof createBudgetsRepository>;
