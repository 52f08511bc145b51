import type { NewAuditEntry } from '../../data/repositories/audit.repository.ts';
import type { AirframeRecord, RevisionWithDocument } from '../../data/repositories/airframe-editing.repository.ts';
import type { Repositories } from '../../data/database.ts';
import type { Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';

/** Who does a deed, when, from where. */
export interface Doing {
  actor: Actor;
  caller: Caller;
  at: Date;
}

/** Audit entry of a deed on an airframe; its subject is the slug, which addresses carry too. */
export function airframeEntry(
  doing: Doing,
  deed: string,
  slug: string,
  detail: Record<string, unknown>,
): NewAuditEntry {
  return {
    organisationId: doing.actor.organisationId,
    at: doing.at,
    actorId: doing.actor.personId,
    deed: `airframe.${deed}`,
    subjectKind: 'airframe',
    subjectId: slug,
    detail,
    address: doing.caller.address,
  };
}

/** The airframe of the actor's organisation, locked to the end of the transaction. */
export async function lockedAirframe(on: Repositories, actor: Actor, slug: string): Promise<AirframeRecord> {
  const airframe = await on.airframeEditing.lock(actor.organisationId, slug);
  if (airframe === null) throw notFound('airframe');
  return airframe;
}

export async function foundAirframe(on: Repositories, actor: Actor, slug: string): Promise<AirframeRecord> {
  const airframe = await on.airframeEditing.find(actor.organisationId, slug);
  if (airframe === null) throw notFound('airframe');
  return airframe;
}

export async function foundRevision(
  on: Repositories,
  airframe: AirframeRecord,
  number: number,
): Promise<RevisionWithDocument> {
  const revision = await on.airframeEditing.revision(airframe.id, number);
  if (revision === null) throw notFound('airframe revision');
  return revision;
}

/** @throws {ProblemError} conflict when the revision is no draft any more */
export function requireDraft(revision: RevisionWithDocument): void {
  if (revision.status === 'draft') return;
  const by = revision.releasedBy === null ? '' : ` by ${revision.releasedBy}`;
  throw new ProblemError(
    'conflict',
    `Revision ${revision.revision} was released${by} and never changes. Start a draft from it instead.`,
  );
}
