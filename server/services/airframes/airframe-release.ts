import type { z } from 'zod';
import type { releaseSchema, RevisionLine, setTagsSchema } from '#shared/contracts/airframe-editing.ts';
import type { AirframeRevision } from '#shared/contracts/airframes.ts';
import type { FieldError } from '#shared/contracts/problem.ts';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import type { Database } from '../../data/database.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import { airframeEntry, foundRevision, lockedAirframe, requireDraft } from './airframe-deeds.ts';
import { revisionLine } from './airframe-detail.ts';
import { requireVersion } from './airframe-drafts.ts';

/** Releasing and retiring revisions, and the tags of an airframe. */
export function createAirframeRelease({ database, now }: { database: Database; now: () => Date }) {
  return {
    /**
     * Makes a draft a released revision, for good. The data must parse and each of its warnings must be answered; no level
     * or limit is asked for.
     *
     * @param version  Refused when the draft was saved since this version was read; null does not ask.
     */
    async release(
      actor: Actor,
      slug: string,
      number: number,
      body: z.output<typeof releaseSchema>,
      version: string | null,
      caller: Caller,
    ): Promise<AirframeRevision> {
      requireDeed(actor, 'airframe.edit');
      const doing = { actor, caller, at: now() };
      return database.transaction(async (on) => {
        const airframe = await lockedAirframe(on, actor, slug);
        const draft = await foundRevision(on, airframe, number);
        requireDraft(draft);
        if (version !== null) requireVersion(draft, version);
        const parsed = parseAirframe(draft.document);
        if (!parsed.ok) {
          throw new ProblemError('validation', 'The draft cannot be released before its errors are mended.', {
            errors: parsed.issues,
          });
        }
        const given = new Map(body.answers.map(({ field, rule, answer }) => [`${field} ${rule}`, answer]));
        const open: FieldError[] = [];
        const answers = parsed.warnings.map(({ field, rule, message }) => {
          const answer = given.get(`${field} ${rule}`);
          if (answer === undefined)
            open.push({ field, rule, message, remedy: 'Answer this warning in a few words, or mend the value.' });
          return { field, rule, message, answer: answer ?? '' };
        });
        if (open.length > 0) {
          const many = open.length === 1 ? 'One warning is' : `${open.length} warnings are`;
          throw new ProblemError('validation', `${many} not answered yet.`, { errors: open });
        }
        await on.airframeEditing.release(
          { id: draft.id, airframeId: airframe.id, note: body.note, answers },
          actor.personId,
          doing.at,
        );
        await on.audit.append(
          airframeEntry(doing, 'released', slug, {
            revision: number,
            note: body.note,
            draftNote: draft.note,
            answers: answers.map(({ field, rule, answer }) => ({ field, rule, answer })),
          }),
        );
        return {
          slug,
          revision: number,
          status: 'released',
          note: body.note,
          createdBy: draft.createdBy,
          createdAt: draft.createdAt.toISOString(),
          releasedAt: doing.at.toISOString(),
          airframe: parsed.airframe,
        };
      });
    },

    /** What uses a retired revision keeps it; new scenarios are no longer offered it. */
    async retire(actor: Actor, slug: string, number: number, caller: Caller): Promise<RevisionLine> {
      requireDeed(actor, 'airframe.edit');
      const doing = { actor, caller, at: now() };
      return database.transaction(async (on) => {
        const airframe = await lockedAirframe(on, actor, slug);
        const revision = await foundRevision(on, airframe, number);
        if (revision.status === 'draft')
          throw new ProblemError('conflict', 'A draft is not retired; discard it instead.');
        if (revision.status === 'retired') throw new ProblemError('conflict', `Revision ${number} is retired already.`);
        await on.airframeEditing.retire({ id: revision.id, airframeId: airframe.id }, doing.at);
        const uses = await on.airframeEditing.uses(airframe.id, revision.id);
        await on.audit.append(airframeEntry(doing, 'retired', slug, { revision: number, uses: uses.length }));
        return revisionLine(await foundRevision(on, airframe, number));
      });
    },

    async setTags(
      actor: Actor,
      slug: string,
      body: z.output<typeof setTagsSchema>,
      caller: Caller,
    ): Promise<{ tags: string[] }> {
      requireDeed(actor, 'airframe.edit');
      const doing = { actor, caller, at: now() };
      return database.transaction(async (on) => {
        const airframe = await lockedAirframe(on, actor, slug);
        const before = await on.airframeEditing.tags(airframe.id);
        await on.airframeEditing.setTags(airframe.id, body.tags);
        const tags = await on.airframeEditing.tags(airframe.id);
        await on.audit.append(airframeEntry(doing, 'tagged', slug, { before, after: tags }));
        return { tags };
      });
    },
  };
}
