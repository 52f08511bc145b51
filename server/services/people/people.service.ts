import { createHash, randomBytes, randomUUID } from 'node:crypto';
import type { PeopleQuery, Person, Roster, RosterAnswer } from '#shared/contracts/administration.ts';
import type { Page } from '#shared/contracts/paging.ts';
import type { OrganisationSettings, Role } from '#shared/contracts/session.ts';
import type { Database, Repositories } from '../../data/database.ts';
import { isDuplicateKey } from '../../data/duplicate-key.ts';
import { emailKey, type ListedPerson, type PersonStatus } from '../../data/repositories/people.repository.ts';
import { type Actor, requireDeed } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import { requireEdition } from '../versions.ts';
import type { SessionNotices } from '../sessions/session-notices.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import { invitationText } from './account-messages.ts';
import { cohortName, judgeRoster } from './roster-verdict.ts';

export const INVITATION_DAYS = 7;
const DAY_MS = 24 * 3600 * 1000;
const TOKEN_BYTES = 32;

/** A token for a link and the digest that is kept of it. */
export function newLinkToken(): { token: string; tokenHash: string } {
  const token = randomBytes(TOKEN_BYTES).toString('base64url');
  return { token, tokenHash: linkHash(token) };
}
export const linkHash = (token: string): string => createHash('sha256').update(token).digest('hex');

export interface PeopleSetup {
  database: Database;
  notices: SessionNotices;
  /** Address under which people reach this product. */
  address: () => string;
  now: () => Date;
}

const asSent = (person: ListedPerson): Person => ({
  ...person,
  invitationEndsAt: person.invitationEndsAt?.toISOString() ?? null,
  lastSeenAt: person.lastSeenAt?.toISOString() ?? null,
});

export function createPeopleService({ database, notices, address, now }: PeopleSetup) {
  const entry = (
    actor: Actor,
    caller: Caller,
    deed: string,
    personId: string,
    detail: Record<string, unknown> = {},
  ) => ({
    organisationId: actor.organisationId,
    at: now(),
    actorId: actor.personId,
    deed,
    subjectKind: 'person',
    subjectId: personId,
    detail,
    address: caller.address,
  });

  const invite = async (
    on: Repositories,
    actor: Actor,
    person: { id: string; name: string; email: string },
    at: Date,
  ): Promise<void> => {
    const profile = await on.people.findProfile(actor.organisationId, actor.personId);
    const { token, tokenHash } = newLinkToken();
    const expiresAt = new Date(at.getTime() + INVITATION_DAYS * DAY_MS);
    await on.accountLinks.replace({ tokenHash, kind: 'invitation', personId: person.id, at, expiresAt });
    const { subject, text } = invitationText({
      name: person.name,
      organisation: profile?.organisation.name ?? 'your school',
      inviter: profile?.person.displayName ?? 'An administrator',
      link: `${address()}/welcome/${token}`,
      days: INVITATION_DAYS,
      caution: profile?.organisation.settings.caution ?? '',
    });
    await on.outbox.insert({
      id: randomUUID(),
      organisationId: actor.organisationId,
      email: person.email,
      name: person.name,
      subject,
      text,
      calendarMethod: null,
      calendar: null,
      createdAt: at,
    });
  };

  /** @throws {ProblemError} conflict when nobody would be left who can look after people. */
  const keepOneAdministrator = async (on: Repositories, actor: Actor, personId: string): Promise<void> => {
    const administrators = await on.people.holdAdministrators(actor.organisationId);
    if (administrators.some((id) => id !== personId) || !administrators.includes(personId)) return;
    throw new ProblemError(
      'conflict',
      'This is the last administrator. Make someone else administrator first; then this can be done.',
    );
  };

  const need = async (on: Repositories, actor: Actor, personId: string): Promise<PersonStatus> => {
    const status = await on.people.status(actor.organisationId, personId);
    if (status === null) throw notFound('person');
    return status;
  };

  return {
    async list(actor: Actor, query: PeopleQuery): Promise<Page<Person>> {
      requireDeed(actor, 'people.look-after');
      const { items, total } = await database.people.list(actor.organisationId, query);
      return {
        items: items.map(asSent),
        page: query.page,
        pageSize: query.pageSize,
        total,
      };
    },

    async read(actor: Actor, personId: string): Promise<Person> {
      requireDeed(actor, 'people.look-after');
      const person = await database.people.listed(actor.organisationId, personId);
      if (person === null) throw notFound('person');
      return asSent(person);
    },

    /** Judges a roster, and with `invite` adds the good rows as invited people and queues their messages, all or none. */
    async roster(actor: Actor, { rows, invite: doInvite }: Roster, caller: Caller): Promise<RosterAnswer> {
      requireDeed(actor, 'people.look-after');
      const work = async (on: Repositories): Promise<RosterAnswer> => {
        await on.organisations.takeTurn(actor.organisationId);
        const known = new Map<string, 'here' | 'elsewhere'>();
        for (const row of rows) {
          const key = emailKey(row.email);
          const found = await on.people.findForSignIn(row.email);
          if (found) known.set(key, found.organisationId === actor.organisationId ? 'here' : 'elsewhere');
        }
        const cohorts = [...new Set(rows.map(cohortName))].filter(Boolean);
        const archived = new Set(await on.cohorts.archivedAmong(actor.organisationId, cohorts));
        const judged = judgeRoster(rows, known, archived);
        const good = judged.flatMap((row) => (row.good ? [row.good] : []));
        const verdicts = judged.map(({ verdict }) => verdict);
        if (!doInvite) return { rows: verdicts, invited: 0 };
        const at = now();
        for (const { name, email, roles, cohort } of good) {
          const id = randomUUID();
          const { organisationId } = actor;
          const person = { id, organisationId, email, displayName: name, fullName: name, passwordHash: null };
          await on.people.insert({ ...person, status: 'invited', roles, at });
          if (cohort !== null) {
            let cohortId = await on.organisations.cohortNamed(organisationId, cohort);
            if (cohortId === null) {
              cohortId = randomUUID();
              await on.organisations.insertCohort({ id: cohortId, organisationId, name: cohort, memberIds: [], at });
            }
            await on.organisations.joinCohort(cohortId, id, at);
          }
          await invite(on, actor, { id, name, email }, at);
          await on.audit.append(entry(actor, caller, 'person.invited', id, { email, roles, cohort }));
        }
        return { rows: verdicts, invited: good.length };
      };
      try {
        return await database.transaction(work);
      } catch (error) {
        // Another organisation invited one of the addresses in between; judged again, that row is left out.
        if (!isDuplicateKey(error)) throw error;
        return await database.transaction(work);
      }
    },

    async inviteAgain(actor: Actor, personId: string, caller: Caller): Promise<void> {
      requireDeed(actor, 'people.look-after');
      await database.transaction(async (on) => {
        const status = await need(on, actor, personId);
        if (status !== 'invited') {
          throw new ProblemError('conflict', 'This person is not waiting for an invitation; nothing was sent.');
        }
        const profile = await on.people.findProfile(actor.organisationId, personId);
        if (profile === null) throw notFound('person');
        const { displayName: name, email } = profile.person;
        await invite(on, actor, { id: personId, name, email }, now());
        await on.audit.append(entry(actor, caller, 'person.invited-again', personId, { email }));
      });
    },

    async setRoles(
      actor: Actor,
      personId: string,
      roles: readonly Role[],
      caller: Caller,
      version: string | null = null,
    ): Promise<void> {
      requireDeed(actor, 'people.look-after');
      await database.transaction(async (on) => {
        await on.organisations.takeTurn(actor.organisationId);
        await need(on, actor, personId);
        if (!roles.includes('administrator')) await keepOneAdministrator(on, actor, personId);
        const before = (await on.people.findProfile(actor.organisationId, personId))?.roles ?? [];
        requireEdition(version, [...before].sort(), 'these roles');
        const after = [...new Set(roles)].sort();
        await on.people.setRoles(personId, after, now());
        await on.audit.append(entry(actor, caller, 'person.roles-changed', personId, { before, after }));
      });
      notices.announce({ sessionId: null, personId, reason: 'roles-changed' });
    },

    /** Ends all sessions and open links; records stay. Undone by {@link restore}. */
    async deactivate(actor: Actor, personId: string, caller: Caller): Promise<void> {
      requireDeed(actor, 'people.look-after');
      await database.transaction(async (on) => {
        await on.organisations.takeTurn(actor.organisationId);
        if ((await need(on, actor, personId)) === 'deactivated') return;
        await keepOneAdministrator(on, actor, personId);
        await on.people.setStatus(actor.organisationId, personId, 'deactivated', now());
        await on.sessions.revokeAllOf(personId, 'deactivated', now());
        await on.accountLinks.endAllOf(personId, now());
        await on.audit.append(entry(actor, caller, 'person.deactivated', personId));
      });
      notices.announce({ sessionId: null, personId, reason: 'deactivated' });
    },

    async restore(actor: Actor, personId: string, caller: Caller): Promise<void> {
      requireDeed(actor, 'people.look-after');
      await database.transaction(async (on) => {
        if ((await need(on, actor, personId)) !== 'deactivated') return;
        const status = (await on.people.passwordHash(personId)) === null ? 'invited' : 'active';
        await on.people.setStatus(actor.organisationId, personId, status, now());
        await on.audit.append(entry(actor, caller, 'person.restored', personId));
      });
    },

    async signOut(actor: Actor, personId: string, caller: Caller): Promise<void> {
      requireDeed(actor, 'people.look-after');
      await database.transaction(async (on) => {
        await need(on, actor, personId);
        await on.sessions.revokeAllOf(personId, 'signed-out-everywhere', now());
        await on.audit.append(entry(actor, caller, 'person.signed-out', personId));
      });
      notices.announce({ sessionId: null, personId, reason: 'signed-out-everywhere' });
    },

    async organisation(actor: Actor): Promise<{ name: string; settings: OrganisationSettings }> {
      requireDeed(actor, 'organisation.edit');
      const profile = await database.people.findProfile(actor.organisationId, actor.personId);
      if (profile === null) throw notFound('organisation');
      const { name, settings } = profile.organisation;
      return { name, settings };
    },

    async saveOrganisation(
      actor: Actor,
      body: { name: string; settings: OrganisationSettings },
      caller: Caller,
      version: string | null = null,
    ): Promise<void> {
      requireDeed(actor, 'organisation.edit');
      await database.transaction(async (on) => {
        await on.organisations.takeTurn(actor.organisationId);
        const held = await on.people.findProfile(actor.organisationId, actor.personId);
        if (held === null) throw notFound('organisation');
        const { name, settings } = held.organisation;
        requireEdition(version, { name, settings }, 'the settings');
        const before = await on.organisations.settings(actor.organisationId);
        await on.organisations.rename(actor.organisationId, body.name, body.settings);
        await on.audit.append({
          ...entry(actor, caller, 'organisation.changed', actor.organisationId, { before, after: body.settings }),
          subjectKind: 'organisation',
        });
      });
    },
  };
}
export type PeopleService = ReturnType<typeof createPeopleService>;
