import { type EntityManager, In } from 'typeorm';
import { AirframeListingEntity } from '../entities/airframe-listing.entity.ts';
import { AirframeRevisionEntity } from '../entities/airframe-revision.entity.ts';
import { AirframeTagEntity } from '../entities/airframe-tag.entity.ts';
import { AirframeEntity } from '../entities/airframe.entity.ts';
import { comparisonKey, engineKindOf, searchTextOf } from './airframe-copies.ts';

const LONGEST_SEARCH_KEY = 6000;

/** Writes anew what lists show of an airframe; within the transaction of every change of a revision or a tag. */
export async function refreshListing(manager: EntityManager, airframeId: string): Promise<void> {
  const airframe = await manager.findOneByOrFail(AirframeEntity, { id: airframeId });
  const numbers = await manager.find(AirframeRevisionEntity, {
    select: { id: true, number: true, status: true },
    where: { airframeId },
    order: { number: 'DESC' },
  });
  const newest = new Map<AirframeListingEntity['listedAs'], string>();
  for (const { id, status } of numbers) {
    if (!newest.has('any')) newest.set('any', id);
    if (!newest.has(status)) newest.set(status, id);
  }
  const shown = await manager.find(AirframeRevisionEntity, {
    select: {
      ...{ id: true, number: true, status: true, name: true, airplaneClass: true, engineCount: true, changedAt: true },
      document: true,
    },
    where: { id: In([...newest.values()]) },
  });
  const tags = (await manager.find(AirframeTagEntity, { where: { airframeId }, order: { tag: 'ASC' } })).map(
    ({ tag }) => tag,
  );
  const rows = [...newest].flatMap(([listedAs, id]) => {
    const revision = shown.find((one) => one.id === id);
    if (revision === undefined) return [];
    const { number, status, name, airplaneClass, engineCount, changedAt, document } = revision;
    const searched = [searchTextOf(document), airframe.slug, ...tags].join(' ');
    return {
      ...{ organisationId: airframe.organisationId, airframeId, slug: airframe.slug, listedAs },
      ...{ number, status, name, airplaneClass, engineCount, changedAt },
      engineKind: engineKindOf(document),
      tags: tags.join('\n'),
      tagKeys: tags.length === 0 ? '' : `\n${tags.map(comparisonKey).join('\n')}\n`,
      searchKey: comparisonKey(searched).slice(0, LONGEST_SEARCH_KEY),
    };
  });
  // Only rows that are there are deleted: deleting none would lock the gap in which another airframe is being inserted.
  const before = await manager.find(AirframeListingEntity, { select: { listedAs: true }, where: { airframeId } });
  for (const { listedAs } of before)
    if (!newest.has(listedAs))
      await manager.delete(AirframeListingEntity, { organisationId: airframe.organisationId, listedAs, airframeId });
  await manager.upsert(AirframeListingEntity, rows, ['organisationId', 'listedAs', 'airframeId']);
}
