import type { AirframeDetail, RevisionLine, ValueHistory } from '#shared/contracts/airframe-editing.ts';
import { valueAt } from '#shared/model/field-issue.ts';
import { valueSource } from '#shared/model/value-source.ts';
import type { Database } from '../../data/database.ts';
import type { RevisionRecord } from '../../data/repositories/airframe-editing.repository.ts';
import { may, requireDeed, type Actor } from '../permissions.ts';
import { foundAirframe } from './airframe-deeds.ts';

export function revisionLine(record: RevisionRecord): RevisionLine {
  return {
    revision: record.revision,
    status: record.status,
    name: record.name,
    note: record.note,
    createdBy: record.createdBy,
    createdAt: record.createdAt.toISOString(),
    releasedBy: record.releasedBy,
    releasedAt: record.releasedAt?.toISOString() ?? null,
    retiredAt: record.retiredAt?.toISOString() ?? null,
    changedAt: record.changedAt.toISOString(),
    changedBy: record.changedBy,
    answers: record.answers,
  };
}

/** The page of one airframe, and the history of one of its values. */
export function createAirframeDetail({ database }: { database: Database }) {
  return {
    async detail(actor: Actor, slug: string): Promise<AirframeDetail> {
      requireDeed(actor, 'airframe.read');
      const airframe = await foundAirframe(database, actor, slug);
      const [lines, tags, usedBy, skin] = await Promise.all([
        database.airframeEditing.lines(airframe.id),
        database.airframeEditing.tags(airframe.id),
        database.airframeEditing.uses(airframe.id),
        database.skins.find(airframe.id),
      ]);
      return {
        slug: airframe.slug,
        name: lines[0]?.name ?? airframe.slug,
        tags,
        revisions: lines.map(revisionLine),
        usedBy,
        skin:
          skin === null
            ? null
            : { fileName: skin.fileName, bytes: skin.byteCount, uploadedAt: skin.uploadedAt.toISOString() },
        mayEdit: may(actor, 'airframe.edit'),
      };
    },

    async history(actor: Actor, slug: string, field: string): Promise<ValueHistory> {
      requireDeed(actor, 'airframe.read');
      const airframe = await foundAirframe(database, actor, slug);
      const revisions = await database.airframeEditing.documents(airframe.id);
      let before: string | undefined;
      const entries = revisions.map((revision) => {
        const value = valueAt(revision.document, field);
        const text = value === undefined ? undefined : JSON.stringify(value);
        const changed = text !== before;
        before = text;
        const { text: source, uncertaintyPct } = valueSource(revision.document, field);
        return {
          revision: revision.revision,
          status: revision.status,
          given: value !== undefined,
          value: value ?? null,
          source,
          uncertaintyPct,
          changed,
          by: revision.changedBy ?? revision.createdBy,
          at: (revision.releasedAt ?? revision.changedAt).toISOString(),
          note: revision.note,
        };
      });
      return { field, entries: entries.toReversed() };
    },
  };
}
