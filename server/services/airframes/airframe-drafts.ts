import { randomUUID } from 'node:crypto';
import type { z } from 'zod';
import type {
  AirframeDraft,
  createAirframeSchema,
  duplicateAirframeSchema,
  saveDraftSchema,
  startDraftSchema,
} from '#shared/contracts/airframe-editing.ts';
import { documentToTable } from '#shared/model/airframe-table.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type { RevisionWithDocument } from '../../data/repositories/airframe-editing.repository.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import { inWords, versionText } from '../versions.ts';
import {
  airframeEntry,
  foundAirframe,
  foundRevision,
  lockedAirframe,
  requireDraft,
  type Doing,
} from './airframe-deeds.ts';
import { checkDocument, checkFormat, type Document } from './document-check.ts';
import { freeSlug, slugOf } from './free-slug.ts';

export interface CreatedRevision {
  slug: string;
  revision: number;
}

const MOST_FIELDS_IN_AUDIT = 40;

function draftOf(slug: string, found: RevisionWithDocument): AirframeDraft {
  return {
    slug,
    revision: found.revision,
    status: found.status,
    note: found.note,
    createdBy: found.createdBy,
    createdAt: found.createdAt.toISOString(),
    releasedAt: found.releasedAt?.toISOString() ?? null,
    document: documentOf(found),
    version: versionText(found.id, found.version),
    changedBy: found.changedBy,
    changedAt: found.changedAt.toISOString(),
  };
}

function documentOf({ document }: { document: unknown }): Document {
  return typeof document === 'object' && document !== null ? { ...document } : {};
}

/** Pointers of the values that differ, for the audit trail. */
function changedFields(before: unknown, after: unknown): string[] {
  const old = new Map<string, unknown>(documentToTable(before));
  const changed: string[] = [];
  for (const [field, value] of documentToTable(after)) {
    if (!old.has(field) || old.get(field) !== value) changed.push(field);
    old.delete(field);
  }
  return [...changed, ...old.keys()];
}

/** Creating airframes, and the drafts that are edited before a release. */
export function createAirframeDrafts({ database, now }: { database: Database; now: () => Date }) {
  /** A new airframe whose first revision is a draft of the document. */
  const insertAirframe = async (
    on: Repositories,
    doing: Doing,
    airframe: { slug: string | null; document: Document; note: string; tags: readonly string[] },
  ): Promise<CreatedRevision> => {
    const { organisationId } = doing.actor;
    const { document, note, tags } = airframe;
    const name = document['name'];
    const wish = airframe.slug ?? slugOf(typeof name === 'string' ? name : '');
    const taken = await on.airframeEditing.slugsLike(organisationId, wish);
    if (airframe.slug !== null && taken.has(airframe.slug)) {
      const message = `there is an airframe "${airframe.slug}" already`;
      throw new ProblemError('conflict', 'There is an airframe of this short name already.', {
        errors: [{ field: '/slug', rule: 'unique', message, remedy: 'Choose another short name, or leave it out.' }],
      });
    }
    const slug = freeSlug(wish, taken);
    const id = randomUUID();
    await on.airframes.insert({ id, organisationId, slug, tags: [...tags], at: doing.at });
    await insertDraft(on, doing, { id, slug }, 1, document, note);
    return { slug, revision: 1 };
  };

  const insertDraft = async (
    on: Repositories,
    { actor, at }: Doing,
    airframe: { id: string; slug: string },
    number: number,
    document: Document,
    note: string,
  ): Promise<void> => {
    await on.airframes.insertRevision({
      id: randomUUID(),
      organisationId: actor.organisationId,
      airframeId: airframe.id,
      number,
      status: 'draft',
      document,
      note,
      authorId: actor.personId,
      at,
    });
  };

  return {
    async create(actor: Actor, body: z.output<typeof createAirframeSchema>, caller: Caller): Promise<CreatedRevision> {
      requireDeed(actor, 'airframe.edit');
      checkDocument(body.document);
      checkFormat(body.document);
      const doing = { actor, caller, at: now() };
      return database.transaction(async (on) => {
        await on.organisations.takeTurn(actor.organisationId);
        const made = await insertAirframe(on, doing, { ...body, slug: body.slug ?? null });
        await on.audit.append(airframeEntry(doing, 'created', made.slug, { revision: 1, tags: body.tags }));
        return made;
      });
    },

    async duplicate(
      actor: Actor,
      slug: string,
      body: z.output<typeof duplicateAirframeSchema>,
      caller: Caller,
    ): Promise<CreatedRevision> {
      requireDeed(actor, 'airframe.edit');
      const doing = { actor, caller, at: now() };
      return database.transaction(async (on) => {
        await on.organisations.takeTurn(actor.organisationId);
        const airframe = await foundAirframe(on, actor, slug);
        const revision = await foundRevision(on, airframe, body.revision);
        const document = { ...documentOf(revision), name: body.name };
        checkDocument(document, '');
        const tags = await on.airframeEditing.tags(airframe.id);
        const note = `Copy of ${slug}, revision ${body.revision}.`;
        const made = await insertAirframe(on, doing, { slug: null, document, note, tags });
        const from = { slug, revision: body.revision };
        await on.audit.append(airframeEntry(doing, 'duplicated', made.slug, { from, revision: 1 }));
        return made;
      });
    },

    async start(
      actor: Actor,
      slug: string,
      body: z.output<typeof startDraftSchema>,
      caller: Caller,
    ): Promise<CreatedRevision> {
      requireDeed(actor, 'airframe.edit');
      const doing = { actor, caller, at: now() };
      return database.transaction(async (on) => {
        const airframe = await lockedAirframe(on, actor, slug);
        const from = await foundRevision(on, airframe, body.from);
        const number = (await on.airframeEditing.highestNumber(airframe.id)) + 1;
        await insertDraft(on, doing, airframe, number, documentOf(from), body.note);
        await on.audit.append(airframeEntry(doing, 'draft-started', slug, { from: body.from, revision: number }));
        return { slug, revision: number };
      });
    },

    async read(actor: Actor, slug: string, number: number): Promise<AirframeDraft> {
      requireDeed(actor, 'airframe.read');
      const revision = await foundRevision(database, await foundAirframe(database, actor, slug), number);
      requireDraft(revision);
      return draftOf(slug, revision);
    },

    /** Saves over the version that was read; a draft that someone else saved since is left as it is. */
    async save(
      actor: Actor,
      slug: string,
      number: number,
      version: string,
      body: z.output<typeof saveDraftSchema>,
      caller: Caller,
    ): Promise<AirframeDraft> {
      requireDeed(actor, 'airframe.edit');
      checkDocument(body.document);
      const doing = { actor, caller, at: now() };
      return database.transaction(async (on) => {
        const airframe = await lockedAirframe(on, actor, slug);
        const before = await foundRevision(on, airframe, number);
        requireDraft(before);
        requireVersion(before, version);
        const { document, note = before.note } = body;
        const same = JSON.stringify(document) === JSON.stringify(before.document) && note === before.note;
        if (same) return draftOf(slug, before);
        const { id } = before;
        const saved = await on.airframeEditing.saveDraft(
          { id, airframeId: airframe.id, version: before.version, document, note },
          actor.personId,
          doing.at,
        );
        if (!saved) throw changedMeanwhile(before);
        const changed = changedFields(before.document, document);
        await on.audit.append(
          airframeEntry(doing, 'draft-saved', slug, {
            revision: number,
            version: before.version + 1,
            changed: changed.length,
            fields: changed.slice(0, MOST_FIELDS_IN_AUDIT),
          }),
        );
        return draftOf(slug, await foundRevision(on, airframe, number));
      });
    },

    async discard(actor: Actor, slug: string, number: number, caller: Caller): Promise<void> {
      requireDeed(actor, 'airframe.edit');
      const doing = { actor, caller, at: now() };
      await database.transaction(async (on) => {
        const airframe = await lockedAirframe(on, actor, slug);
        const revision = await foundRevision(on, airframe, number);
        requireDraft(revision);
        const uses = await on.airframeEditing.uses(airframe.id, revision.id);
        if (uses.length > 0) {
          const names = uses.slice(0, 3).map((use) => `the ${use.kind} “${use.title}”`);
          const more = uses.length > 3 ? ` and ${uses.length - 3} more` : '';
          throw new ProblemError(
            'conflict',
            `This draft is used by ${names.join(', ')}${more}. Remove ${uses.length === 1 ? 'that' : 'those'} first.`,
          );
        }
        const { airframeRemoved } = await on.airframeEditing.removeDraft({ id: revision.id, airframeId: airframe.id });
        await on.audit.append(airframeEntry(doing, 'draft-discarded', slug, { revision: number, airframeRemoved }));
      });
    },
  };
}

/** @throws {ProblemError} changed-meanwhile */
export function requireVersion(revision: RevisionWithDocument, version: string): void {
  if (versionText(revision.id, revision.version) !== version) throw changedMeanwhile(revision);
}

function changedMeanwhile(revision: RevisionWithDocument): ProblemError {
  return new ProblemError(
    'changed-meanwhile',
    `${revision.changedBy ?? 'Someone'} saved this draft on ${inWords(revision.changedAt)}, after you opened it. ` +
      'That version stands and yours was not saved: keep your page open, compare, then save what you need again.',
  );
}
