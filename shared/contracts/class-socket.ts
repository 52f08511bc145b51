/**
 * What travels over the socket in a class. Requests are acknowledged, and what they change is stored before that.
 * `run:inputs`, `run:telemetry`, `view:move` and `member:tell` are not: a lost one is made good by the next or by the chunks.
 */
import { z } from 'zod';
import {
  classEntrySchema,
  classModeSchema,
  classOptionsSchema,
  MAX_MESSAGE_LENGTH,
  MAX_PLAYLIST,
  MAX_RUN_TICKS,
  type ClassEntry,
} from '../scenario/class-log.ts';
import { attemptResultSchema, endReasonSchema, hash16Schema, MAX_CHUNK_BYTES, type AttemptResult } from './attempts.ts';
import type { ClassPass } from './classes.ts';

/** Base64 of the largest chunk. */
const MAX_CHUNK_TEXT = Math.ceil(MAX_CHUNK_BYTES / 3) * 4;
/** Base64 of one frame of inputs (class-frames.ts); twelve ticks of eight engines flown wildly stay below it. */
export const MAX_FRAME_TEXT = 1400;
/** Chunks in one answer of run:catch-up. */
export const CATCH_UP_CHUNKS = 400;
export const MAX_COUNTDOWN_S = 3600;

const classId = z.uuid();
const attemptId = z.uuid();
const member = z.uuid();
const tick = z.number().int().min(0).max(MAX_RUN_TICKS);
const seq = z.number().int().min(0);
const fraction = z.number().min(-10).max(10);
const angleDeg = z.number().min(-180).max(180);

/** Why a request was refused, beside the codes of problem.ts. */
export const CLASS_REFUSALS = [
  'not-a-member',
  'not-admitted',
  'class-ended',
  'class-locked',
  'class-full',
  'no-run',
  'run-in-progress',
  'run-over',
  'not-your-controls',
  'not-shown',
  'bad-event',
  'chunk-refused',
  'too-many',
] as const;
export type ClassRefusal = (typeof CLASS_REFUSALS)[number];

export const classEnterSchema = z.strictObject({ classId, since: seq });
export const classLeaveSchema = z.strictObject({ classId });
export const classEntriesSchema = z.strictObject({ classId, since: seq });

const control = {
  classId,
  /** Made by the client once per press: a repeated request does nothing twice. */
  key: z.uuid(),
};
const countdownS = z.number().min(0).max(MAX_COUNTDOWN_S);
/** The instructor's controls. */
export const classControlSchema = z.discriminatedUnion('deed', [
  z.strictObject({ ...control, deed: z.literal('options'), options: classOptionsSchema.partial() }),
  /** Lets a guest in. */
  z.strictObject({ ...control, deed: z.literal('admit'), member }),
  /** Sends a member out, or refuses a guest at the door. */
  z.strictObject({ ...control, deed: z.literal('remove'), member }),
  z.strictObject({ ...control, deed: z.literal('mode'), mode: classModeSchema }),
  /** Another scenario of the playlist for the next run; the next one when no index is given. Ends a run in progress. */
  z.strictObject({
    ...control,
    deed: z.literal('scenario'),
    index: z
      .number()
      .int()
      .min(0)
      .max(MAX_PLAYLIST - 1)
      .optional(),
  }),
  /** Starts a run with a seed of its own. Ends a run in progress. */
  z.strictObject({ ...control, deed: z.literal('start'), countdownS: countdownS.default(5) }),
  /** The same run again: same seed, no injected events. */
  z.strictObject({ ...control, deed: z.literal('restart'), countdownS: countdownS.default(3) }),
  /** During the countdown only: `countdownS` from now. */
  z.strictObject({ ...control, deed: z.literal('countdown'), countdownS }),
  /** Stops the clock, the countdown too. */
  z.strictObject({ ...control, deed: z.literal('freeze') }),
  /** Goes on; from an earlier moment as a new branch. */
  z.strictObject({ ...control, deed: z.literal('resume') }),
  z.strictObject({ ...control, deed: z.literal('rate'), rate: z.number().min(0.05).max(1) }),
  /** Everybody stands, frozen, at an earlier tick of this branch (or later again, up to its head). */
  z.strictObject({ ...control, deed: z.literal('rewind'), tick }),
  /** A new branch from a tick of the present one, frozen there; what comes after that tick is left behind at once. */
  z.strictObject({ ...control, deed: z.literal('branch'), tick }),
  /** `event` as in a scenario, without an id: `at: {time_s: 0}` fires at once, a later time or a condition arms it. */
  z.strictObject({ ...control, deed: z.literal('inject'), event: z.record(z.string(), z.unknown()) }),
  z.strictObject({ ...control, deed: z.literal('disarm'), id: z.string().max(64) }),
  /** A trainee's aeroplane for everybody; null ends it. */
  z.strictObject({ ...control, deed: z.literal('show'), member: member.nullable() }),
  /** Hands the demonstration's controls to a member; to oneself takes them back. */
  z.strictObject({ ...control, deed: z.literal('controls'), member }),
  z.strictObject({
    ...control,
    deed: z.literal('message'),
    text: z.string().trim().min(1).max(MAX_MESSAGE_LENGTH),
    to: member.nullable().default(null),
  }),
  /** The run is over here. */
  z.strictObject({ ...control, deed: z.literal('stop') }),
  z.strictObject({ ...control, deed: z.literal('end') }),
]);
export type ClassControl = z.input<typeof classControlSchema>;
export type ClassControlDeed = ClassControl['deed'];

/** Asks for the attempt to record into: one's own of this run, or the demonstration's while one has the controls. */
export const runTakeSchema = z.strictObject({ classId, run: z.number().int().min(1) });
export const runChunkSchema = z.strictObject({
  classId,
  attemptId,
  index: z.number().int().min(0).max(100_000),
  hash: hash16Schema,
  bytes: z.base64().max(MAX_CHUNK_TEXT),
});
export const runInputsSchema = z.strictObject({ classId, attemptId, frame: z.base64().min(4).max(MAX_FRAME_TEXT) });
export const runCatchUpSchema = z.strictObject({
  classId,
  attemptId,
  /** First chunk wanted. */
  from: z.number().int().min(0).max(100_000),
});
export const runCompleteSchema = z.strictObject({
  classId,
  attemptId,
  chunkCount: z.number().int().min(0).max(100_000),
  ended: endReasonSchema,
});
export const runDiffersSchema = z.strictObject({
  classId,
  attemptId,
  tick,
  expected: hash16Schema,
  found: hash16Schema,
});
/** The aeroplane with the controls met a `freeze` event of the scenario at this tick. */
export const runStandsSchema = z.strictObject({ classId, run: z.number().int().min(1), tick });

/** One trainee's state for the board. Angles in degrees, right and nose right positive. */
export const telemetrySchema = z.strictObject({
  tick,
  ended: endReasonSchema.nullable(),
  betaDeg: angleDeg,
  wantedBetaDeg: angleDeg,
  ballWidths: fraction,
  wantedBallWidths: fraction,
  pedal: fraction,
  wantedPedal: fraction,
  rudderShare: fraction,
  phiDeg: z.number().min(-720).max(720),
  wantedPhiDeg: z.number().min(-720).max(720),
  headingDeviationDeg: z.number().min(-10_000).max(10_000),
  iasKt: z.number().min(-100).max(2000),
  heightFt: z.number().min(-10_000).max(200_000),
  deadSide: z.union([z.literal(-1), z.literal(0), z.literal(1)]),
  /** Largest sideslip since the first engine failed, or since the start. */
  peakBetaDeg: z.number().min(0).max(180),
  /** Seconds from the first engine failure (or the first event) to the first correct pedal; null before it. */
  firstPedalS: z.number().min(0).max(3600).nullable(),
  /** Seconds without any movement of pedal and stick. */
  stillS: z.number().min(0).max(3600),
  /** Balance verdict as the strip settles it. */
  verdict: z.enum(['balanced', 'dead', 'live']),
});
export type Telemetry = z.infer<typeof telemetrySchema>;
export const runTelemetrySchema = z.strictObject({
  classId,
  run: z.number().int().min(1),
  telemetry: telemetrySchema,
});
export interface BoardRow {
  member: string;
  telemetry: Telemetry;
}

/** What a member's browser says about itself in the lobby. */
export const memberStatusSchema = z.strictObject({
  ready: z.boolean(),
  device: z.enum(['pedals', 'gamepad', 'keyboard', 'touch']),
  doing: z.enum(['ready', 'loading', 'calibrating', 'flying', 'watching', 'holding']),
  /** Share loaded, 0…1. */
  loaded: z.number().min(0).max(1),
  roundTripMs: z.number().min(0).max(60_000),
});
export type MemberStatus = z.infer<typeof memberStatusSchema>;
export const memberTellSchema = z.strictObject({ classId, status: memberStatusSchema });

/** What the presenter looks at and points to. */
export const presentedViewSchema = z.strictObject({
  camera: z.string().max(20),
  /** Turned by hand, from where the camera of this name stands: about the aeroplane, and its distance as a share. */
  turned: z
    .strictObject({
      azimuthRad: z.number().min(-7).max(7),
      elevationRad: z.number().min(-4).max(4),
      zoom: z.number().min(0.05).max(20),
    })
    .nullable(),
  arrows: z.array(z.string().max(8)).max(20),
  /** In the picture, 0…1 from the upper left; null when there is none. */
  pointer: z.tuple([z.number().min(0).max(1), z.number().min(0).max(1)]).nullable(),
});
export type PresentedView = z.infer<typeof presentedViewSchema>;
export const viewMoveSchema = z.strictObject({ classId, view: presentedViewSchema });

/** The board: only for instructors of the organisation. */
export const boardFollowSchema = z.strictObject({ classId, follow: z.boolean() });

export const attemptHoldSchema = z.strictObject({
  attemptId,
  /** Start of the chunk hash chain. */
  chunkKey: hash16Schema,
  /** Where the recording stands: number of the next chunk, hash it follows, tick it starts at. */
  nextIndex: z.number().int().min(0),
  lastHash: hash16Schema,
  nextTick: tick,
});
export type AttemptHold = z.infer<typeof attemptHoldSchema>;

export interface CaughtUp {
  chunkKey: string;
  chunks: { index: number; startTick: number; tickCount: number; hash: string; bytes: string }[];
  /** More chunks are stored: ask again from the next. */
  more: boolean;
  /** Latest frames of inputs, which reach beyond the last chunk. */
  frames: string[];
}

export const entriesAnswerSchema = z.object({ entries: z.array(classEntrySchema) });
export const completeAnswerSchema = z.object({ result: attemptResultSchema });

export interface Entered {
  pass: ClassPass;
  /** Entries after `since`. */
  entries: ClassEntry[];
  present: string[];
  statuses: { member: string; status: MemberStatus }[];
  /** The view presented now; null before the first. */
  view: PresentedView | null;
  serverTimeMs: number;
}

/** Acknowledgement of every request: data, or a code of problem.ts or {@link CLASS_REFUSALS} with a sentence. */
export type Acknowledge<T> = (answer: { ok: true; data: T } | { ok: false; code: string; detail: string }) => void;
type Request<B, T> = (body: B, acknowledge: Acknowledge<T>) => void;
type In<S extends z.ZodType> = z.input<S>;

export interface ClassClientEvents {
  'class:enter': Request<In<typeof classEnterSchema>, Entered>;
  /** Gives the seat up. */
  'class:leave': Request<In<typeof classLeaveSchema>, Record<string, never>>;
  'class:entries': Request<In<typeof classEntriesSchema>, { entries: ClassEntry[] }>;
  'class:control': Request<ClassControl, { entries: ClassEntry[] }>;
  'board:follow': Request<In<typeof boardFollowSchema>, Record<string, never>>;
  'run:take': Request<In<typeof runTakeSchema>, AttemptHold>;
  'run:chunk': Request<In<typeof runChunkSchema>, { acknowledged: number; stored: number }>;
  'run:catch-up': Request<In<typeof runCatchUpSchema>, CaughtUp>;
  'run:complete': Request<In<typeof runCompleteSchema>, { result: AttemptResult }>;
  'run:differs': Request<In<typeof runDiffersSchema>, Record<string, never>>;
  'run:stands': Request<In<typeof runStandsSchema>, { entries: ClassEntry[] }>;
  'run:inputs': (body: In<typeof runInputsSchema>) => void;
  'run:telemetry': (body: In<typeof runTelemetrySchema>) => void;
  'view:move': (body: In<typeof viewMoveSchema>) => void;
  'member:tell': (body: In<typeof memberTellSchema>) => void;
}

export interface ClassServerEvents {
  'class:appended': (news: { classId: string; entries: ClassEntry[] }) => void;
  /** Every two seconds: a client that lacks entries asks for them. */
  'class:beat': (beat: { classId: string; seq: number; serverTimeMs: number }) => void;
  'class:presence': (news: { classId: string; member: string; here: boolean }) => void;
  /** Statuses that have changed, at most twice a second. */
  'class:statuses': (news: { classId: string; statuses: { member: string; status: MemberStatus }[] }) => void;
  /** One was sent out or the class has ended; the socket has left it. */
  'class:closed': (news: { classId: string; reason: 'removed' | 'ended' | 'replaced' }) => void;
  /** Inputs of the aeroplane that everybody sees. */
  'run:inputs': (news: { attemptId: string; frame: string }) => void;
  'board:rows': (news: { classId: string; run: number; rows: BoardRow[] }) => void;
  'view:moved': (news: { classId: string; view: PresentedView }) => void;
}
