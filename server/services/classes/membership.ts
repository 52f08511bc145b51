import { randomInt, randomUUID } from 'node:crypto';
import type { joinClassBodySchema, openClassBodySchema } from '#shared/contracts/classes.ts';
import { JOIN_CODE_ALPHABET, JOIN_CODE_LENGTH, type ClassPass, type Door } from '#shared/contracts/classes.ts';
import type { z } from 'zod';
import type { ClassDeed, MemberRole } from '#shared/scenario/class-log.ts';
import { EMPTY_CLASS, freeSeat, memberOf, phaseAt, type ClassState } from '#shared/scenario/class-state.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import type { Database } from '../../data/database.ts';
import { storedScenario } from '../attempts/attempt-data.ts';
import { may, requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import type { ClassLogStore, KnownClass } from './class-log-store.ts';
import { ClassProblem } from './class-problem.ts';
import type { GuestPass, GuestPasses } from './guest-passes.ts';
import type { createJoinThrottle } from './join-throttle.ts';

export interface MembershipSetup {
  database: Database;
  log: ClassLogStore;
  guestPasses: GuestPasses;
  throttle: ReturnType<typeof createJoinThrottle>;
  now: () => Date;
}

const CODE_TRIES = 20;

/** Random, and of characters that cannot be mistaken for one another. */
function newJoinCode(): string {
  return Array.from({ length: JOIN_CODE_LENGTH }, () => JOIN_CODE_ALPHABET[randomInt(JOIN_CODE_ALPHABET.length)]).join(
    '',
  );
}

export function passOf(known: KnownClass, memberId: string): ClassPass {
  const member = memberOf(known.state, memberId);
  if (member === null) throw new ClassProblem('not-a-member', 'You are not a member of this class.');
  const { id, name, role, standing } = member;
  return {
    classId: known.record.id,
    member: id,
    name,
    role,
    admitted: standing === 'in',
    joinCode: role === 'instructor' ? known.record.joinCode : null,
  };
}

/** Whether somebody new may come in now. */
function requireOpenDoor(state: ClassState, nowMs: number): void {
  if (state.options.locked) throw new ClassProblem('class-locked', 'The room is closed; ask the instructor.');
  const flying = state.run !== null && ['running', 'frozen'].includes(phaseAt(state.run, nowMs));
  if (flying && !state.options.lateJoiners) {
    throw new ClassProblem('class-locked', 'A run is in progress; nobody new gets in before its end.');
  }
}

function seatFor(state: ClassState): number {
  const seat = freeSeat(state);
  if (seat === null) throw new ClassProblem('class-full', 'Every seat of this class is taken.');
  return seat;
}

/** Opening, joining, and coming back into classes. */
export function createMembership({ database, log, guestPasses, throttle, now }: MembershipSetup) {
  const nameOf = async (actor: Actor): Promise<string> => {
    const profile = await database.people.findProfile(actor.organisationId, actor.personId);
    if (profile === null) throw notFound('person');
    return profile.person.displayName;
  };
  const guestsAllowed = (organisationId: string): Promise<boolean> =>
    database.organisations.settings(organisationId).then(({ guests }) => guests);

  /** Where somebody with a code gets to; a wrong code is counted. */
  async function classOfCode(code: string, address: string | null) {
    await throttle.check(address);
    const found = await database.classes.findByCode(code);
    if (found === null) {
      await throttle.wrong(address);
      throw new ProblemError('not-found', 'No class that is open has this code.');
    }
    return found;
  }

  /** Brings a person in, with the role they have now; entering again changes nothing. */
  async function enter(actor: Actor, classId: string, withCode: boolean): Promise<ClassPass> {
    requireDeed(actor, 'class.join');
    const role: MemberRole = may(actor, 'class.run') ? 'instructor' : 'trainee';
    const before = await log.read(classId);
    if (before.record.organisationId !== actor.organisationId) throw notFound('class');
    const row = await database.classes.memberOfPerson(classId, actor.personId);
    const standing = row === null ? null : memberOf(before.state, row.id);
    if (row !== null && standing?.standing === 'in' && standing.role === role) return passOf(before, row.id);
    if (before.record.endedAt !== null) throw new ClassProblem('class-ended', 'This class has ended.');
    const name = row?.name ?? (await nameOf(actor));
    let id = row?.id ?? randomUUID();
    await log.append(classId, id, null, async ({ known: { state }, on, atMs }) => {
      const again = await on.classes.memberOfPerson(classId, actor.personId);
      if (again === null)
        await on.classes.insertMembers([{ id, classId, personId: actor.personId, name }], new Date(atMs));
      else id = again.id;
      const member = again === null ? null : memberOf(state, again.id);
      if (member?.standing === 'in' && member.role === role) return [];
      if (state.ended) throw new ClassProblem('class-ended', 'This class has ended.');
      if (member?.standing === 'removed')
        throw new ClassProblem('class-locked', 'The instructor has sent you out of this class.');
      const invited = member?.standing === 'expected' || member?.standing === 'in';
      if (role !== 'instructor' && !invited) {
        if (!withCode) throw new ClassProblem('not-a-member', 'Join this class with its code first.');
        requireOpenDoor(state, atMs);
      }
      const seat =
        role === 'instructor'
          ? 0
          : member && member.seat > 0 && member.standing !== 'left'
            ? member.seat
            : seatFor(state);
      return [{ kind: 'joined', member: id, name, role, seat }];
    });
    return passOf(await log.known(classId), id);
  }

  return {
    async open(actor: Actor, body: z.output<typeof openClassBodySchema>, caller: Caller): Promise<ClassPass> {
      requireDeed(actor, 'class.run');
      const { organisationId, personId } = actor;
      if (body.key !== undefined) {
        const before = await database.classes.findByOpenKey(personId, body.key);
        if (before !== null) return enter(actor, before.id, false);
      }
      if (body.guests && !(await guestsAllowed(organisationId))) {
        throw new ProblemError('forbidden', 'Your organisation lets no guests in; an administrator can change that.');
      }
      const playlist = [];
      for (const { scenarioSlug, revision } of body.playlist) {
        const number = revision ?? (await database.scenarios.latestPublishedNumber(organisationId, scenarioSlug));
        const found =
          number === null ? null : await database.scenarios.findRevision(organisationId, scenarioSlug, number);
        if (found === null || found.status === 'draft') throw notFound(`scenario "${scenarioSlug}"`);
        const scenario = storedScenario(found.document);
        const durationTicks = Math.round(scenario.duration_s * TICK_RATE_HZ);
        playlist.push({ slug: found.slug, revision: found.revision, title: scenario.title, durationTicks });
      }
      const expectedPeople = await database.people.traineesOf(organisationId, body.cohorts);
      if (expectedPeople.length > body.seats) {
        throw new ProblemError('validation', `${expectedPeople.length} people need more than ${body.seats} seats.`, {
          errors: [
            {
              field: '/seats',
              rule: 'enough',
              message: `${expectedPeople.length} people are expected`,
              remedy: 'Give more seats, or choose fewer cohorts.',
            },
          ],
        });
      }
      const id = randomUUID();
      const instructor = { member: randomUUID(), name: await nameOf(actor) };
      const expected = expectedPeople.map(({ displayName, id: person }, i) => ({
        person,
        entry: { member: randomUUID(), name: displayName, seat: i + 1 },
      }));
      for (let attempt = 1; ; attempt += 1) {
        const joinCode = newJoinCode();
        if ((await database.classes.findByCode(joinCode)) === null) {
          await database.transaction(async (on) => {
            const at = now();
            await on.classes.insert({
              id,
              organisationId,
              instructorId: personId,
              title: body.title,
              joinCode,
              guests: body.guests,
              openKey: body.key ?? null,
              lastSeq: 0,
              refused: 0,
              openedAt: at,
              endedAt: null,
            });
            await on.classes.insertMembers(
              [
                { id: instructor.member, classId: id, personId, name: instructor.name },
                ...expected.map(({ person, entry }) => ({
                  id: entry.member,
                  classId: id,
                  personId: person,
                  name: entry.name,
                })),
              ],
              at,
            );
            await on.audit.append({
              organisationId,
              at,
              actorId: personId,
              deed: 'class.opened',
              subjectKind: 'class',
              subjectId: id,
              detail: { title: body.title, guests: body.guests },
              address: caller.address,
            });
          });
          break;
        }
        if (attempt === CODE_TRIES) throw new ProblemError('unavailable', 'No free join code was found; try again.');
      }
      const deed: ClassDeed = {
        kind: 'opened',
        title: body.title,
        playlist,
        seats: body.seats,
        mode: body.mode,
        guests: body.guests,
        options: { ...EMPTY_CLASS.options, ...body.options },
        instructor,
        expected: expected.map(({ entry }) => entry),
      };
      await log.append(id, instructor.member, null, () => [deed]);
      return passOf(await log.known(id), instructor.member);
    },

    /** What a code opens. */
    async door(code: string, caller: Caller): Promise<Door> {
      const found = await classOfCode(code, caller.address);
      const { state } = await log.read(found.id);
      const { guestsAsk, locked } = state.options;
      const guests = found.guests && (await guestsAllowed(found.organisationId));
      return {
        title: found.title,
        organisation: found.organisation,
        instructor: found.instructor,
        guests,
        guestsAsk,
        locked,
      };
    },

    /** Joins with a code: as a member of the organisation, else as a guest, who gets a pass to keep. */
    async join(
      actor: Actor | null,
      guest: GuestPass | null,
      body: z.output<typeof joinClassBodySchema>,
      caller: Caller,
    ): Promise<{ pass: ClassPass; token: string | null }> {
      const found = await classOfCode(body.code, caller.address);
      if (actor !== null && actor.organisationId === found.organisationId) {
        return { pass: await enter(actor, found.id, true), token: null };
      }
      if (!found.guests || !(await guestsAllowed(found.organisationId))) {
        throw new ProblemError(
          actor === null ? 'unauthenticated' : 'forbidden',
          'This class lets no guests in; sign in first.',
        );
      }
      if (guest !== null && guest.classId === found.id) {
        const known = await log.read(found.id);
        const before = memberOf(known.state, guest.memberId);
        if (before?.standing === 'in' || before?.standing === 'asking')
          return { pass: passOf(known, guest.memberId), token: guestPasses.sign(guest) };
      }
      const name = body.displayName;
      if (name === undefined) {
        throw new ProblemError('validation', 'Give a name for the roster.', {
          errors: [
            {
              field: '/displayName',
              rule: 'needed',
              message: 'a guest gives a name',
              remedy: 'Give a name for the roster.',
            },
          ],
        });
      }
      const memberId = randomUUID();
      await log.append(found.id, memberId, null, async ({ known: { state }, on, atMs }) => {
        if (state.ended) throw new ClassProblem('class-ended', 'This class has ended.');
        requireOpenDoor(state, atMs);
        const waiting = state.members.filter(({ standing }) => standing === 'asking').length;
        if (waiting >= state.seats) throw new ClassProblem('class-full', 'Too many are waiting at the door.');
        await on.classes.insertMembers([{ id: memberId, classId: found.id, personId: null, name }], new Date(atMs));
        return state.options.guestsAsk
          ? [{ kind: 'asked', member: memberId, name }]
          : [{ kind: 'joined', member: memberId, name, role: 'guest', seat: seatFor(state) }];
      });
      const token = guestPasses.sign({ classId: found.id, memberId });
      return { pass: passOf(await log.known(found.id), memberId), token };
    },

    /** Comes in over the socket, without a code. */
    enter: (actor: Actor, classId: string): Promise<ClassPass> => enter(actor, classId, false),

    /** A guest comes in over the socket. */
    async enterAsGuest(guest: GuestPass, classId: string): Promise<ClassPass> {
      if (guest.classId !== classId) throw new ClassProblem('not-a-member', 'You are not a member of this class.');
      const known = await log.read(classId);
      const pass = passOf(known, guest.memberId);
      const standing = memberOf(known.state, guest.memberId)?.standing;
      if (standing !== 'in' && standing !== 'asking')
        throw new ClassProblem('not-a-member', 'The instructor has sent you out of this class.');
      return pass;
    },

    async leave(classId: string, memberId: string): Promise<void> {
      await log.append(classId, memberId, null, ({ known: { state } }) => {
        const member = memberOf(state, memberId);
        return member?.standing === 'in' && member.role !== 'instructor' && !state.ended
          ? [{ kind: 'left', member: memberId }]
          : [];
      });
    },
  };
}
export type Membership = ReturnType<typeof createMembership>;
