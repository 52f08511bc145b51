import type { z } from 'zod';
import type { publishScenarioSchema, ScenarioDetail, ScenarioFile, ScenarioLine } from '#shared/contracts/scenario-editing.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { ModelError } from '#shared/model/errors.ts';
import { createRun } from '#shared/scenario/run.ts';
import { checkAgainstAirframe, parseScenario, type Scenario } from '#shared/scenario/scenario-schema.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type { ScenarioLineRecord } from '../../data/repositories/scenario-editing.repository.ts';
import { storedAirframe } from '../attempts/attempt-data.ts';
import { may, requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import {
  documentOf,
  foundLine,
  foundScenario,
  lockedScenario,
  pinOf,
  pinProblem,
  requireScenarioDraft,
  requireScenarioVersion,
  scenarioEntry,
} from './scenario-deeds.ts';

function lineOf(line: ScenarioLineRecord): ScenarioLine {
  return {
    revision: line.revision,
    status: line.status,
    title: line.title,
    note: line.note,
    airframeSlug: line.airframe.slug,
    airframeRevision: line.airframe.revision,
    createdBy: line.createdBy,
    createdAt: line.createdAt.toISOString(),
    publishedBy: line.publishedBy,
    publishedAt: line.publishedAt?.toISOString() ?? null,
    archivedAt: line.archivedAt?.toISOString() ?? null,
    changedBy: line.changedBy,
    changedAt: line.changedAt.toISOString(),
  };
}

/** @throws {ProblemError} validation when no run of the scenario can begin: its start cannot be trimmed */
function requireStart(scenario: Scenario, airframe: Airframe): void {
  try {
    createRun({ scenario, airframe, seed: scenario.seed }, { lean: true });
  } catch (error) {
    if (!(error instanceof ModelError)) throw error;
    const { code: rule, message } = error;
    const remedy = 'Change speed, levers, wind or configuration of the start.';
    throw new ProblemError('validation', 'The scenario cannot be started.', {
      errors: [{ field: '/start', rule, message, remedy }],
    });
  }
}

/** Publishing and archiving, and what a scenario's own page shows. */
export function createScenarioPublishing({ database, now }: { database: Database; now: () => Date }) {
  const detailOn = async (on: Repositories, actor: Actor, slug: string): Promise<ScenarioDetail> => {
    const scenario = await foundScenario(on, actor, slug);
    const all = await on.scenarioEditing.lines(scenario.id);
    const lines = may(actor, 'scenario.read-draft') ? all : all.filter(({ status }) => status !== 'draft');
    const [newest] = lines;
    const newer =
      newest === undefined
        ? null
        : await on.scenarioEditing.newestReleased(actor.organisationId, newest.airframe.slug);
    return {
      slug,
      title: newest?.title ?? slug,
      revisions: lines.map(lineOf),
      newerAirframe:
        newest !== undefined && newer !== null && newer.revision > newest.airframe.revision
          ? { slug: newer.slug, revision: newer.revision }
          : null,
      mayEdit: may(actor, 'scenario.edit'),
      mayExport: may(actor, 'scenario.export'),
    };
  };
  /** Archives or restores all published revisions at once. */
  const turn = async (
    actor: Actor,
    slug: string,
    caller: Caller,
    deed: 'archived' | 'restored',
    nothing: string,
  ): Promise<ScenarioDetail> => {
    requireDeed(actor, 'scenario.edit');
    const doing = { actor, caller, at: now() };
    return database.transaction(async (on) => {
      const scenario = await lockedScenario(on, actor, slug);
      const { archive, restore } = on.scenarioEditing;
      const revisions = await (deed === 'archived' ? archive : restore)(scenario.id, doing.at);
      if (revisions === 0) throw new ProblemError('conflict', nothing);
      await on.audit.append(scenarioEntry(doing, deed, slug, { revisions }));
      return detailOn(on, actor, slug);
    });
  };

  return {
    detail: async (actor: Actor, slug: string): Promise<ScenarioDetail> => {
      requireDeed(actor, 'scenario.read-published');
      return detailOn(database, actor, slug);
    },

    /** The document of a revision exactly as it was given: what an export holds. */
    file: async (actor: Actor, slug: string, number: number): Promise<ScenarioFile> => {
      requireDeed(actor, 'scenario.export');
      const line = await foundLine(database, await foundScenario(database, actor, slug), number);
      if (line.status === 'draft' && !may(actor, 'scenario.read-draft')) throw notFound('scenario revision');
      return { document: documentOf(line) };
    },

    /** Makes a draft a published revision, for good, pinned to the airframe revision it names. */
    async publish(
      actor: Actor,
      slug: string,
      number: number,
      body: z.output<typeof publishScenarioSchema>,
      version: string | null,
      caller: Caller,
    ): Promise<ScenarioLine> {
      requireDeed(actor, 'scenario.edit');
      const doing = { actor, caller, at: now() };
      return database.transaction(async (on) => {
        const scenario = await lockedScenario(on, actor, slug);
        const draft = await foundLine(on, scenario, number);
        requireScenarioDraft(draft);
        if (version !== null) requireScenarioVersion(draft, version);
        const parsed = parseScenario(draft.document);
        if (!parsed.ok)
          throw new ProblemError('validation', 'The draft cannot be published before its errors are mended.', {
            errors: parsed.issues,
          });
        const pin = await pinOf(on, actor, documentOf(draft));
        if (pin.status === 'retired')
          throw pinProblem(
            'not-retired',
            `revision ${pin.revision} of "${pin.slug}" is retired`,
            'Pin a released revision, then publish.',
          );
        const airframe = storedAirframe(pin.document);
        const { issues } = checkAgainstAirframe(parsed.scenario, airframe);
        if (issues.length > 0)
          throw new ProblemError('validation', 'The scenario does not fit its airframe.', { errors: issues });
        requireStart(parsed.scenario, airframe);
        await on.scenarioEditing.publish(draft.id, body.note, actor.personId, doing.at);
        await on.audit.append(
          scenarioEntry(doing, 'published', slug, {
            revision: number,
            note: body.note,
            airframe: { slug: pin.slug, revision: pin.revision },
          }),
        );
        return lineOf(await foundLine(on, scenario, number));
      });
    },

    archive: (actor: Actor, slug: string, caller: Caller) =>
      turn(actor, slug, caller, 'archived', 'Nothing of this scenario is published.'),
    restore: (actor: Actor, slug: string, caller: Caller) =>
      turn(actor, slug, caller, 'restored', 'Nothing of this scenario is archived.'),
  };
}
