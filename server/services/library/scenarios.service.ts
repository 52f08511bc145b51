import type { Page } from '#shared/contracts/paging.ts';
import type { ScenarioListQuery, ScenarioRevision, ScenarioSummary } from '#shared/contracts/scenarios.ts';
import type { Database } from '../../data/database.ts';
import { readableBy, storedScenario } from '../attempts/attempt-data.ts';
import { may, requireDeed, type Actor } from '../permissions.ts';
import { notFound } from '../problem-error.ts';
import { createKeptDocuments } from './kept-documents.ts';

export function createScenariosService({ database }: { database: Database }) {
  const documents = createKeptDocuments();
  return {
    async list(actor: Actor, query: ScenarioListQuery): Promise<Page<ScenarioSummary>> {
      requireDeed(actor, 'scenario.read-published');
      if (query.status === 'draft') requireDeed(actor, 'scenario.read-draft');
      const rows = await database.scenarios.list(actor.organisationId, actor.personId, query);
      return { ...rows, page: query.page, pageSize: query.pageSize };
    },

    /** The revision named, or the latest published one. */
    async revision(actor: Actor, slug: string, wanted: number | null): Promise<ScenarioRevision> {
      requireDeed(actor, 'scenario.read-published');
      const latest = await database.scenarios.latestPublishedNumber(actor.organisationId, slug);
      const number = wanted ?? latest;
      const found = number === null ? null : await database.scenarios.findRevision(actor.organisationId, slug, number);
      if (found === null || (found.status === 'draft' && !may(actor, 'scenario.read-draft')))
        throw notFound('scenario');
      return {
        slug: found.slug,
        revision: found.revision,
        latest: latest === null || found.revision >= latest,
        status: found.status,
        note: found.note,
        createdBy: found.createdBy,
        createdAt: found.createdAt.toISOString(),
        publishedAt: found.publishedAt?.toISOString() ?? null,
        scenario: readableBy(
          actor,
          found.status === 'draft' ? storedScenario(found.document) : documents.scenario(found.id, found.document),
        ),
        airframe: {
          slug: found.airframe.slug,
          revision: found.airframe.revision,
          airframe: documents.airframe(found.airframe.revisionId, found.airframe.document),
        },
      };
    },
  };
}
export type ScenariosService = ReturnType<typeof createScenariosService>;
