import type { EntityManager } from 'typeorm';
import { ReportCountEntity } from '../entities/report-count.entity.ts';

export function createReportCountsRepository(manager: EntityManager) {
  return {
    /** The next number of a kind of report, from 1; call it within a transaction. */
    async next(organisationId: string, kind: 'analysis'): Promise<number> {
      await manager.query(
        `INSERT INTO report_count (organisation_id, kind, last_number) VALUES (?, ?, 1)
         ON DUPLICATE KEY UPDATE last_number = last_number + 1`,
        [organisationId, kind],
      );
      const row = await manager.findOneByOrFail(ReportCountEntity, { organisationId, kind });
      return row.lastNumber;
    },
  };
}

export type ReportCountsRepository = ReturnType<typeof createReportCountsRepository>;
