import type { AuditCheck, AuditEntry, AuditPage, AuditQuery } from '#shared/contracts/administration.ts';
import { MAX_PAGE_SIZE } from '#shared/contracts/paging.ts';
import type { Database } from '../../data/database.ts';
import type { AuditRecord } from '../../data/repositories/audit.repository.ts';
import { csvLine } from '../../reports/csv-text.ts';
import { type Actor, requireDeed } from '../permissions.ts';
import type { AuditChain } from './audit-chain.ts';

const HEADING = ['entry', 'time', 'who', 'kind', 'what', 'which', 'detail', 'from', 'seal'];
const MOST_PAGES = 2000;

const entryOf = ({ at, ...entry }: AuditRecord): AuditEntry => ({ ...entry, at: at.toISOString() });

export function createAuditService({ database, chain }: { database: Database; chain: AuditChain }) {
  return {
    async list(actor: Actor, query: AuditQuery): Promise<AuditPage> {
      requireDeed(actor, 'audit.read');
      const { items, total } = await database.audit.list(actor.organisationId, query);
      const kinds = await database.audit.kinds(actor.organisationId);
      return { items: items.map(entryOf), page: query.page, pageSize: query.pageSize, total, kinds };
    },

    /** Lines of a CSV (RFC 4180) of all entries that fit, newest first, page by page. */
    async *csv(actor: Actor, query: AuditQuery): AsyncGenerator<string> {
      requireDeed(actor, 'audit.read');
      yield csvLine(HEADING);
      let newest: string | null = null;
      for (let page = 1; page <= MOST_PAGES; page++) {
        const asked = { ...query, page, pageSize: MAX_PAGE_SIZE };
        const { items } = await database.audit.list(actor.organisationId, asked, newest);
        newest ??= items[0]?.id ?? null;
        for (const item of items) {
          const { id, at, actor: who, kind, deed, subject, detail, address, seal } = entryOf(item);
          const cells = [id, at, who ?? 'Sidewash', kind, deed, subject ?? '', JSON.stringify(detail)];
          yield csvLine([...cells, address ?? '', seal ?? '']);
        }
        if (items.length < MAX_PAGE_SIZE) return;
      }
    },

    async check(actor: Actor): Promise<AuditCheck> {
      requireDeed(actor, 'audit.read');
      return chain.check();
    },
  };
}
export type AuditService = ReturnType<typeof createAuditService>;
