import type { ClassScenario } from '#shared/contracts/classes.ts';
import type { PlaylistItem } from '#shared/scenario/class-log.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type { ScenarioRevisionRecord } from '../../data/repositories/scenarios.repository.ts';
import { storedAirframe, storedScenario } from '../attempts/attempt-data.ts';
import { notFound } from '../problem-error.ts';

const REMEMBERED = 50;

/** Scenario revisions of playlists; published ones never change, so a few are kept. */
export function createClassScenarios({ database }: { database: Database }) {
  const kept = new Map<string, ScenarioRevisionRecord>();

  async function revision(
    organisationId: string,
    item: PlaylistItem | undefined,
    on: Repositories = database,
  ): Promise<ScenarioRevisionRecord> {
    if (item === undefined) throw notFound('scenario in this playlist');
    const key = `${organisationId} ${item.slug} ${item.revision}`;
    const known = kept.get(key);
    if (known) return known;
    const found = await on.scenarios.findRevision(organisationId, item.slug, item.revision);
    if (found === null) throw notFound('scenario');
    if (kept.size >= REMEMBERED) kept.clear();
    kept.set(key, found);
    return found;
  }

  return {
    revision,
    async read(organisationId: string, item: PlaylistItem | undefined): Promise<ClassScenario> {
      const found = await revision(organisationId, item);
      return {
        slug: found.slug,
        revision: found.revision,
        scenario: storedScenario(found.document),
        airframe: {
          slug: found.airframe.slug,
          revision: found.airframe.revision,
          airframe: storedAirframe(found.airframe.document),
        },
      };
    },
  };
}
export type ClassScenarios = ReturnType<typeof createClassScenarios>;
