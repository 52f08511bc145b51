import type { StudyState } from '#shared/contracts/studies.ts';
import { slugSchema } from '#shared/contracts/paging.ts';
import type { Repositories } from '../../data/database.ts';
import type { RevisionWithDocument } from '../../data/repositories/airframe-editing.repository.ts';
import type { Actor } from '../permissions.ts';
import { ProblemError } from '../problem-error.ts';

export interface Pinned {
  slug: string;
  revision: RevisionWithDocument;
}

const MOST_COMPARED = 3;

/** Refusal of one member of a state, beside its field. */
export function stateProblem(member: string, message: string, remedy: string): ProblemError {
  const error = { field: `/state/${member}`, rule: 'state', message, remedy };
  return new ProblemError('validation', `${message}. ${remedy}`, { errors: [error] });
}

/**
 * The airframe revisions that a state names, the one looked at first, and the state with that one's number written in.
 *
 * @throws {ProblemError} validation
 */
export async function pinnedRevisions(
  on: Repositories,
  actor: Actor,
  state: StudyState,
): Promise<{ pinned: Pinned[]; state: StudyState }> {
  const lead = await revisionOf(on, actor, 'airframe', state['airframe'] ?? '', state['revision'] ?? '');
  const pinned = [lead];
  for (const part of (state['compare'] ?? '').split(',').slice(0, MOST_COMPARED)) {
    if (part === '') continue;
    const [slug = '', number = ''] = part.split(':');
    pinned.push(await revisionOf(on, actor, 'compare', slug, number));
  }
  const { study: _study, ...kept } = state;
  return { pinned, state: { ...kept, airframe: lead.slug, revision: String(lead.revision.revision) } };
}

async function revisionOf(
  on: Repositories,
  actor: Actor,
  member: string,
  slug: string,
  number: string,
): Promise<Pinned> {
  if (slug === '') throw stateProblem(member, 'no airframe is named', 'Choose an airframe.');
  const missing = (): ProblemError =>
    stateProblem(
      member,
      `there is no airframe “${slug.slice(0, 80)}” revision ${number.slice(0, 12) || 'of any number'}`,
      'Choose one of the list.',
    );
  const airframe = slugSchema.safeParse(slug).success
    ? await on.airframeEditing.find(actor.organisationId, slug)
    : null;
  if (airframe === null) throw missing();
  const wanted = number === '' || number === '0' ? await on.airframeEditing.highestNumber(airframe.id) : Number(number);
  const revision = Number.isInteger(wanted) ? await on.airframeEditing.revision(airframe.id, wanted) : null;
  if (revision === null) throw missing();
  return { slug: airframe.slug, revision };
}
