import type { FieldError } from '#shared/contracts/problem.ts';
import { lanesOf } from '#shared/scenario/time-line.ts';
import { parseScenario } from '#shared/scenario/scenario-schema.ts';
import type { Repositories } from '../../data/database.ts';
import type { NewAuditEntry } from '../../data/repositories/audit.repository.ts';
import type {
  PinnedRevision,
  ScenarioCopies,
  ScenarioLineWithDocument,
} from '../../data/repositories/scenario-editing.repository.ts';
import type { Doing } from '../airframes/airframe-deeds.ts';
import type { Document } from '../airframes/document-check.ts';
import type { Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import { inWords, versionText } from '../versions.ts';

export function scenarioEntry(
  doing: Doing,
  deed: string,
  slug: string,
  detail: Record<string, unknown>,
): NewAuditEntry {
  return {
    organisationId: doing.actor.organisationId,
    at: doing.at,
    actorId: doing.actor.personId,
    deed: `scenario.${deed}`,
    subjectKind: 'scenario',
    subjectId: slug,
    detail,
    address: doing.caller.address,
  };
}

export async function lockedScenario(on: Repositories, actor: Actor, slug: string) {
  const scenario = await on.scenarioEditing.lock(actor.organisationId, slug);
  if (scenario === null) throw notFound('scenario');
  return scenario;
}
export async function foundScenario(on: Repositories, actor: Actor, slug: string) {
  const scenario = await on.scenarioEditing.find(actor.organisationId, slug);
  if (scenario === null) throw notFound('scenario');
  return scenario;
}
export async function foundLine(
  on: Repositories,
  scenario: { id: string },
  number: number,
): Promise<ScenarioLineWithDocument> {
  const revision = await on.scenarioEditing.revision(scenario.id, number);
  if (revision === null) throw notFound('scenario revision');
  return revision;
}

/** @throws {ProblemError} conflict when the revision is no draft any more */
export function requireScenarioDraft(revision: ScenarioLineWithDocument): void {
  if (revision.status === 'draft') return;
  const by = revision.publishedBy === null ? '' : ` by ${revision.publishedBy}`;
  throw new ProblemError(
    'conflict',
    `Revision ${revision.revision} was published${by} and never changes. Start a draft from it instead.`,
  );
}

/** @throws {ProblemError} changed-meanwhile */
export function requireScenarioVersion(revision: ScenarioLineWithDocument, version: string): void {
  if (versionText(revision.id, revision.version) !== version) throw savedMeanwhile(revision);
}
export function savedMeanwhile(revision: ScenarioLineWithDocument): ProblemError {
  return new ProblemError(
    'changed-meanwhile',
    `${revision.changedBy ?? 'Someone'} saved this draft on ${inWords(revision.changedAt)}, after you opened it. ` +
      'That version stands and yours was not saved: keep your page open, compare, then save what you need again.',
  );
}

export function documentOf({ document }: { document: unknown }): Document {
  return typeof document === 'object' && document !== null ? { ...document } : {};
}

const text = (value: unknown, longest: number): string => (typeof value === 'string' ? value.slice(0, longest) : '');
const LONGEST_TITLE = 200;
const LONGEST_TEXT = 4000;

/** What lists show of a draft, whether it parses or not. */
export function copiesOf(document: Document): ScenarioCopies {
  const parsed = parseScenario(document);
  const title = text(document['title'], LONGEST_TITLE).trim();
  const duration = document['duration_s'];
  return {
    title: title === '' ? 'Untitled scenario' : title,
    summary: text(document['summary'], LONGEST_TEXT),
    purpose: text(document['purpose'], LONGEST_TEXT),
    durationS: typeof duration === 'number' && Number.isFinite(duration) && duration > 0 ? duration : 30,
    criterionCount: Array.isArray(document['criteria']) ? document['criteria'].length : 0,
    lanes: parsed.ok ? lanesOf(parsed.scenario) : [],
  };
}

/** The airframe revision that a document names, released. @throws {ProblemError} validation */
export async function pinOf(on: Repositories, actor: Actor, document: Document): Promise<PinnedRevision> {
  const pin: unknown = document['airframe'];
  const named = typeof pin === 'object' && pin !== null ? { ...pin } : {};
  const slug: unknown = 'slug' in named ? named.slug : undefined;
  const revision: unknown = 'revision' in named ? named.revision : undefined;
  if (typeof slug !== 'string' || typeof revision !== 'number' || !Number.isInteger(revision))
    throw pinProblem('named', 'the scenario names no airframe revision', 'Choose an airframe and a released revision.');
  const found = await on.scenarioEditing.pinned(actor.organisationId, slug, revision);
  if (found === null)
    throw pinProblem(
      'known-airframe',
      `there is no airframe "${slug}" revision ${revision} here`,
      'Choose one of the released revisions.',
    );
  if (found.status === 'draft')
    throw pinProblem('released', `revision ${revision} of "${slug}" is a draft`, 'Ask an engineer to release it first.');
  return found;
}

export function pinProblem(rule: string, message: string, remedy: string): ProblemError {
  const errors: FieldError[] = [{ field: '/airframe', rule, message, remedy }];
  return new ProblemError('validation', `The airframe cannot be used: ${message}.`, { errors });
}
