import type { AirframeListQuery, AirframeRevision, AirframeSummary } from '#shared/contracts/airframes.ts';
import { type Airframe, parseAirframe } from '#shared/model/airframe-schema.ts';
import type { Page } from '#shared/contracts/paging.ts';
import type { Database } from '../../data/database.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import { createKeptDocuments } from './kept-documents.ts';

/** The airframe of a draft, which may not be finished. */
function draftAirframe(document: unknown): Airframe {
  const parsed = parseAirframe(document);
  if (parsed.ok) return parsed.airframe;
  throw new ProblemError('validation', 'This draft is not finished: its data has errors. Open it to mend them.', {
    errors: parsed.issues,
  });
}

export function createAirframesService({ database }: { database: Database }) {
  const documents = createKeptDocuments();
  return {
    async list(actor: Actor, query: AirframeListQuery): Promise<Page<AirframeSummary>> {
      requireDeed(actor, 'airframe.read');
      const rows = await database.airframes.list(actor.organisationId, query);
      return { ...rows, page: query.page, pageSize: query.pageSize };
    },

    async revision(actor: Actor, slug: string, number: number): Promise<AirframeRevision> {
      requireDeed(actor, 'airframe.read');
      const found = await database.airframes.findRevision(actor.organisationId, slug, number);
      if (found === null) throw notFound('airframe revision');
      return {
        slug: found.slug,
        revision: found.revision,
        status: found.status,
        note: found.note,
        createdBy: found.createdBy,
        createdAt: found.createdAt.toISOString(),
        releasedAt: found.releasedAt?.toISOString() ?? null,
        airframe:
          found.status === 'draft' ? draftAirframe(found.document) : documents.airframe(found.id, found.document),
      };
    },
  };
}
export type AirframesService = ReturnType<typeof createAirframesService>;
