import { randomUUID } from 'node:crypto';
import type { z } from 'zod';
import type {
  createScenarioSchema,
  duplicateScenarioSchema,
  saveScenarioDraftSchema,
  ScenarioDraft,
  startScenarioDraftSchema,
} from '#shared/contracts/scenario-editing.ts';
import { SCENARIO_FORMAT } from '#shared/scenario/scenario-schema.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type { ScenarioLineWithDocument } from '../../data/repositories/scenario-editing.repository.ts';
import type { Doing } from '../airframes/airframe-deeds.ts';
import { checkDocument, type Document } from '../airframes/document-check.ts';
import { freeSlug, slugOf } from '../airframes/free-slug.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import { versionText } from '../versions.ts';
import {
  copiesOf,
  documentOf,
  foundLine,
  foundScenario,
  lockedScenario,
  pinOf,
  requireScenarioDraft,
  requireScenarioVersion,
  savedMeanwhile,
  scenarioEntry,
} from './scenario-deeds.ts';

interface Created {
  slug: string;
  revision: number;
}

function draftOf(slug: string, found: ScenarioLineWithDocument): ScenarioDraft {
  return {
    slug,
    revision: found.revision,
    note: found.note,
    createdBy: found.createdBy,
    createdAt: found.createdAt.toISOString(),
    changedBy: found.changedBy,
    changedAt: found.changedAt.toISOString(),
    document: documentOf(found),
    version: versionText(found.id, found.version),
  };
}

/** @throws {ProblemError} validation when the file is of another kind or version: it would be lost on publishing */
function checkScenarioFormat(document: Document): void {
  const { format } = document;
  if (format === SCENARIO_FORMAT) return;
  const message =
    typeof format === 'string' && format.startsWith('sidewash.scenario/')
      ? `the file has the format version "${format.slice(0, 60)}"; this program reads "${SCENARIO_FORMAT}"`
      : `a scenario's format is "${SCENARIO_FORMAT}"`;
  throw new ProblemError('validation', 'This is no scenario that can be read here.', {
    errors: [{ field: '/document/format', rule: 'format-version', message, remedy: 'Choose a scenario file of this version.' }],
  });
}

/** Creating scenarios, and the drafts that are written before they are published. */
export function createScenarioDrafts({ database, now }: { database: Database; now: () => Date }) {
  const insertDraft = async (
    on: Repositories,
    { actor, at }: Doing,
    scenario: { id: string },
    number: number,
    document: Document,
    note: string,
  ): Promise<void> => {
    const pin = await pinOf(on, actor, document);
    await on.scenarios.insertRevision({
      ...copiesOf(document),
      id: randomUUID(),
      organisationId: actor.organisationId,
      scenarioId: scenario.id,
      number,
      status: 'draft',
      document,
      airframeRevisionId: pin.id,
      note,
      authorId: actor.personId,
      at,
    });
  };
  const insertScenario = async (
    on: Repositories,
    doing: Doing,
    wanted: string | null,
    document: Document,
    note: string,
  ): Promise<Created> => {
    const { organisationId } = doing.actor;
    const wish = wanted ?? slugOf(copiesOf(document).title);
    const taken = await on.scenarioEditing.slugsLike(organisationId, wish);
    if (wanted !== null && taken.has(wanted)) {
      const message = `there is a scenario "${wanted}" already`;
      throw new ProblemError('conflict', 'There is a scenario of this short name already.', {
        errors: [{ field: '/slug', rule: 'unique', message, remedy: 'Choose another short name, or leave it out.' }],
      });
    }
    const scenario = { id: randomUUID(), organisationId, slug: freeSlug(wish, taken) };
    await on.scenarios.insert({ ...scenario, at: doing.at });
    await insertDraft(on, doing, scenario, 1, document, note);
    return { slug: scenario.slug, revision: 1 };
  };

  return {
    async create(actor: Actor, body: z.output<typeof createScenarioSchema>, caller: Caller): Promise<Created> {
      requireDeed(actor, 'scenario.edit');
      checkDocument(body.document);
      checkScenarioFormat(body.document);
      const doing = { actor, caller, at: now() };
      return database.transaction(async (on) => {
        await on.organisations.takeTurn(actor.organisationId);
        const made = await insertScenario(on, doing, body.slug ?? null, body.document, body.note);
        await on.audit.append(scenarioEntry(doing, 'created', made.slug, { revision: 1 }));
        return made;
      });
    },

    async duplicate(
      actor: Actor,
      slug: string,
      body: z.output<typeof duplicateScenarioSchema>,
      caller: Caller,
    ): Promise<Created> {
      requireDeed(actor, 'scenario.edit');
      const doing = { actor, caller, at: now() };
      return database.transaction(async (on) => {
        await on.organisations.takeTurn(actor.organisationId);
        const from = await foundLine(on, await foundScenario(on, actor, slug), body.revision);
        const document = { ...documentOf(from), title: body.title };
        const made = await insertScenario(on, doing, null, document, `Copy of ${slug}, revision ${body.revision}.`);
        await on.audit.append(
          scenarioEntry(doing, 'duplicated', made.slug, { from: { slug, revision: body.revision }, revision: 1 }),
        );
        return made;
      });
    },

    async start(
      actor: Actor,
      slug: string,
      body: z.output<typeof startScenarioDraftSchema>,
      caller: Caller,
    ): Promise<Created> {
      requireDeed(actor, 'scenario.edit');
      const doing = { actor, caller, at: now() };
      return database.transaction(async (on) => {
        const scenario = await lockedScenario(on, actor, slug);
        const from = await foundLine(on, scenario, body.from);
        const number = (await on.scenarioEditing.highestNumber(scenario.id)) + 1;
        await insertDraft(on, doing, scenario, number, documentOf(from), body.note);
        await on.audit.append(scenarioEntry(doing, 'draft-started', slug, { from: body.from, revision: number }));
        return { slug, revision: number };
      });
    },

    async read(actor: Actor, slug: string, number: number): Promise<ScenarioDraft> {
      requireDeed(actor, 'scenario.read-draft');
      const revision = await foundLine(database, await foundScenario(database, actor, slug), number);
      requireScenarioDraft(revision);
      return draftOf(slug, revision);
    },

    /** Saves over the version that was read; a draft that someone else saved since is left as it is. */
    async save(
      actor: Actor,
      slug: string,
      number: number,
      version: string,
      body: z.output<typeof saveScenarioDraftSchema>,
      caller: Caller,
    ): Promise<ScenarioDraft> {
      requireDeed(actor, 'scenario.edit');
      checkDocument(body.document);
      checkScenarioFormat(body.document);
      const doing = { actor, caller, at: now() };
      return database.transaction(async (on) => {
        const scenario = await lockedScenario(on, actor, slug);
        const before = await foundLine(on, scenario, number);
        requireScenarioDraft(before);
        requireScenarioVersion(before, version);
        const { document, note = before.note } = body;
        if (JSON.stringify(document) === JSON.stringify(before.document) && note === before.note)
          return draftOf(slug, before);
        const pin = await pinOf(on, actor, document);
        const saved = await on.scenarioEditing.saveDraft(
          { ...copiesOf(document), id: before.id, version: before.version, document, note, airframeRevisionId: pin.id },
          actor.personId,
          doing.at,
        );
        if (!saved) throw savedMeanwhile(before);
        await on.audit.append(
          scenarioEntry(doing, 'draft-saved', slug, { revision: number, version: before.version + 1 }),
        );
        return draftOf(slug, await foundLine(on, scenario, number));
      });
    },

    async discard(actor: Actor, slug: string, number: number, caller: Caller): Promise<void> {
      requireDeed(actor, 'scenario.edit');
      const doing = { actor, caller, at: now() };
      await database.transaction(async (on) => {
        const scenario = await lockedScenario(on, actor, slug);
        const revision = await foundLine(on, scenario, number);
        requireScenarioDraft(revision);
        await on.scenarioEditing.removeDraft(revision.id, scenario.id);
        await on.audit.append(scenarioEntry(doing, 'draft-discarded', slug, { revision: number }));
      });
    },
  };
}
