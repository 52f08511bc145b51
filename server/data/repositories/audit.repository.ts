import type { EntityManager } from 'typeorm';
import { AuditEntryEntity } from '../entities/audit-entry.entity.ts';

export interface NewAuditEntry {
  organisationId: string | null;
  at: Date;
  actorId: string | null;
  deed: string;
  subjectKind: string;
  subjectId: string | null;
  detail: Record<string, unknown>;
  address: string | null;
}

export function createAuditRepository(manager: EntityManager) {
  return {
    async append(entry: NewAuditEntry): Promise<void> {
      await manager.insert(AuditEntryEntity, entry);
    },
  };
}

export type AuditRepository = ReturnType<typeof createAuditRepository>;
