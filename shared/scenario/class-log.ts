/**
 * The append-only log of a class. Everything a class is follows from its entries and the server's time; processes and
 * browsers only keep copies of it. What the entries add up to: class-state.ts; clocks and ticks: class-clock.ts.
 */
import { z } from 'zod';
import { eventSchema } from './scenario-format.ts';

export const CLASS_MODES = ['demonstration', 'everyone-flies'] as const;
export const classModeSchema = z.enum(CLASS_MODES);
export type ClassMode = z.infer<typeof classModeSchema>;

export const MEMBER_ROLES = ['instructor', 'trainee', 'guest'] as const;
export const memberRoleSchema = z.enum(MEMBER_ROLES);
export type MemberRole = z.infer<typeof memberRoleSchema>;

/** Speeds of the class clock that the controls offer; any rate above 0 and up to 1 is legal. */
export const CLASS_RATES = [1, 0.5, 0.25] as const;
export const MAX_SEATS = 300;
export const MAX_PLAYLIST = 40;
export const MAX_MESSAGE_LENGTH = 400;
export const MAX_MEMBER_NAME = 40;
/** Longest run of a class in ticks, an hour. */
export const MAX_RUN_TICKS = 432_000;

const member = z.uuid();
const tick = z.number().int().min(0).max(MAX_RUN_TICKS);
const serverMs = z.number().int().min(0);

export const classOptionsSchema = z.strictObject({
  /** Nobody new gets in. Members who are known come back all the same. */
  locked: z.boolean(),
  /** Whether somebody new may enter while a run is in progress. */
  lateJoiners: z.boolean(),
  /** Whether guests wait at the door until they are let in. */
  guestsAsk: z.boolean(),
  namesHidden: z.boolean(),
});
export type ClassOptions = z.infer<typeof classOptionsSchema>;

export const playlistItemSchema = z.strictObject({
  slug: z.string(),
  revision: z.number().int().min(1),
  title: z.string(),
  durationTicks: tick.min(1),
});
export type PlaylistItem = z.infer<typeof playlistItemSchema>;

/** Members that every entry has beside those of its kind. */
const common = {
  /** Counts the entries of a class from 1 without gaps. */
  seq: z.number().int().min(1),
  /** Server's time when it was stored, ms since 1970. */
  atMs: serverMs,
  /** Who did it; null for the server itself. */
  by: member.nullable(),
};

export const classEntrySchema = z.discriminatedUnion('kind', [
  z.strictObject({
    ...common,
    kind: z.literal('opened'),
    title: z.string(),
    playlist: z.array(playlistItemSchema).min(1).max(MAX_PLAYLIST),
    seats: z.number().int().min(1).max(MAX_SEATS),
    mode: classModeSchema,
    /** Whether the organisation lets guests in. */
    guests: z.boolean(),
    options: classOptionsSchema,
    /** Instructor who opened it. */
    instructor: z.strictObject({ member, name: z.string() }),
    /** Seats kept for people of a cohort who have not joined yet. */
    expected: z.array(z.strictObject({ member, name: z.string(), seat: z.number().int().min(1) })),
  }),
  /** A guest stands at the door. */
  z.strictObject({ ...common, kind: z.literal('asked'), member, name: z.string() }),
  /** Instructors take no seat (0). */
  z.strictObject({
    ...common,
    kind: z.literal('joined'),
    member,
    name: z.string(),
    role: memberRoleSchema,
    seat: z.number().int().min(0).max(MAX_SEATS),
  }),
  /** Left by their own choice; a lost connection is no entry. */
  z.strictObject({ ...common, kind: z.literal('left'), member }),
  /** Sent out, or refused at the door. */
  z.strictObject({ ...common, kind: z.literal('removed'), member }),
  z.strictObject({ ...common, kind: z.literal('options'), options: classOptionsSchema }),
  /** How the next run is flown. */
  z.strictObject({ ...common, kind: z.literal('mode'), mode: classModeSchema }),
  /** The scenario of the next run, by its place in the playlist. */
  z.strictObject({
    ...common,
    kind: z.literal('scenario'),
    index: z
      .number()
      .int()
      .min(0)
      .max(MAX_PLAYLIST - 1),
  }),
  /** A run was started; its first tick is flown at `startMs`, which lies ahead: the countdown. */
  z.strictObject({
    ...common,
    kind: z.literal('started'),
    /** Counts the runs of the class from 1. */
    run: z.number().int().min(1),
    mode: classModeSchema,
    index: z.number().int().min(0),
    /** One seed for the whole class, and the values drawn from it. */
    seed: z.number().int().min(0),
    drawn: z.record(z.string(), z.record(z.string(), z.number())),
    startMs: serverMs,
    /** In a demonstration: the attempt that holds its inputs, and the member who has the controls. */
    attempt: z.uuid().nullable(),
    controls: member.nullable(),
    /** The run it repeats, with the same seed. */
    restartOf: z.number().int().min(1).nullable(),
  }),
  /** A segment of the class clock: at `fromMs` it stands at `tick`, and runs on at `rate` (0: frozen). */
  z.strictObject({
    ...common,
    kind: z.literal('clock'),
    fromMs: serverMs,
    tick,
    rate: z.number().min(0).max(1),
    why: z.enum(['freeze', 'resume', 'rate', 'rewind', 'scenario', 'countdown']),
  }),
  /** From `tick` of branch `from` the run goes another way. The first branch is 0. */
  z.strictObject({
    ...common,
    kind: z.literal('branched'),
    branch: z.number().int().min(1),
    from: z.number().int().min(0),
    tick,
  }),
  /** An event was added at `tick` of the present branch; it fires there, or later by its own trigger (armed). */
  z.strictObject({ ...common, kind: z.literal('injected'), tick, event: eventSchema }),
  /** An injected event is taken back at `tick`, in every run in which it has not fired by then. */
  z.strictObject({ ...common, kind: z.literal('disarmed'), id: z.string(), tick }),
  /** Whose aeroplane everybody sees; null: each their own, or the demonstration. */
  z.strictObject({ ...common, kind: z.literal('shown'), member: member.nullable() }),
  /** From `tick` on the demonstration is flown by this member. */
  z.strictObject({ ...common, kind: z.literal('controls'), member, tick }),
  z.strictObject({
    ...common,
    kind: z.literal('message'),
    text: z.string(),
    /** Null: to all. */
    to: member.nullable(),
  }),
  /** A viewer found another state than the one flown and integrated again from the recorded inputs. */
  z.strictObject({
    ...common,
    kind: z.literal('differed'),
    member,
    attempt: z.uuid(),
    tick,
    expected: z.string(),
    found: z.string(),
  }),
  /** The run is over at `tick`. */
  z.strictObject({ ...common, kind: z.literal('over'), run: z.number().int().min(1), tick }),
  z.strictObject({ ...common, kind: z.literal('ended') }),
]);
export type ClassEntry = z.infer<typeof classEntrySchema>;
export type ClassEntryKind = ClassEntry['kind'];
export type EntryOf<K extends ClassEntryKind> = Extract<ClassEntry, { kind: K }>;

type Body<E> = E extends ClassEntry ? Omit<E, 'seq' | 'atMs' | 'by'> : never;
/** An entry before it is stored. */
export type ClassDeed = Body<ClassEntry>;
