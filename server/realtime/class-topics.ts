import type { z } from 'zod';
import {
  boardFollowSchema,
  classControlSchema,
  classEnterSchema,
  classEntriesSchema,
  classLeaveSchema,
  memberTellSchema,
  runCatchUpSchema,
  runChunkSchema,
  runCompleteSchema,
  runDiffersSchema,
  runInputsSchema,
  runStandsSchema,
  runTakeSchema,
  runTelemetrySchema,
  viewMoveSchema,
  type ClassClientEvents,
  type Entered,
} from '#shared/contracts/class-socket.ts';
import { decodeFrame } from '#shared/scenario/class-frames.ts';
import { controlsAt, tickAt } from '#shared/scenario/class-state.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import type { Logger } from '../config/log.ts';
import { ClassProblem } from '../services/classes/class-problem.ts';
import { redacted } from '../services/classes/class-pages.ts';
import type { ClassServices } from '../services/classes/create-class-services.ts';
import { requireClassEvent } from '../services/permissions.ts';
import { ProblemError } from '../services/problem-error.ts';
import type { ClassHub } from './class-hub.ts';
import { boardRoom } from './rooms.ts';
import type { ClassSocket, Seat } from './socket-types.ts';

type ClassEvent = keyof ClassClientEvents;
/** A frame may lie this far ahead of the class clock: lead of a coarse clock. */
const FRAME_TOLERANCE_TICKS = TICK_RATE_HZ;

export interface TopicsSetup {
  classes: ClassServices;
  hub: ClassHub;
  log: Logger;
  /** A refusal of this socket; too many end its connection. */
  refuse: (socket: ClassSocket, classId: string | null, why: string) => void;
}

/** Everything that a socket may send about a class. */
export function attachClassTopics(socket: ClassSocket, { classes, hub, log, refuse }: TopicsSetup): void {
  // Typed by the schemas: whatever arrives is unknown until they have parsed it.
  const listen = socket.on.bind(socket) as (event: string, listener: (...args: unknown[]) => void) => unknown;

  function problem(error: unknown): { ok: false; code: string; detail: string } {
    if (error instanceof ProblemError) return { ok: false, code: error.code, detail: error.message };
    if (error instanceof ClassProblem) return { ok: false, code: error.reason, detail: error.message };
    log.error({ err: error }, 'a socket request failed');
    return { ok: false, code: 'internal', detail: 'The server failed; try again.' };
  }

  function seatIn(classId: string, event: ClassEvent): Seat {
    const seat = socket.data.seats.get(classId);
    if (!seat) throw new ClassProblem('not-a-member', 'Enter this class first.');
    requireClassEvent(seat.role, event);
    return seat;
  }

  /** A request with an acknowledgement. */
  function request<S extends z.ZodType<{ classId: string }>, T>(
    event: ClassEvent,
    schema: S,
    work: (body: z.output<S>, seat: Seat) => Promise<T> | T,
  ): void {
    listen(event, (given, acknowledge) => {
      const answer = (value: unknown): void => {
        if (typeof acknowledge === 'function') acknowledge(value);
      };
      const parsed = schema.safeParse(given);
      if (!parsed.success) {
        const { path, message } = parsed.error.issues[0];
        refuse(socket, null, 'malformed');
        answer({ ok: false, code: 'validation', detail: `${path.join('.') || 'The request'}: ${message}` });
        return;
      }
      const body = parsed.data;
      Promise.resolve()
        .then(() => work(body, seatIn(body.classId, event)))
        .then(
          (data) => answer({ ok: true, data }),
          (error: unknown) => {
            if (isRefusal(error)) refuse(socket, body.classId, `${event}: ${String(error)}`);
            answer(problem(error));
          },
        );
    });
  }

  /** A message that nobody waits for. */
  function message<S extends z.ZodType<{ classId: string }>>(
    event: ClassEvent,
    schema: S,
    work: (body: z.output<S>, seat: Seat) => void,
  ): void {
    listen(event, (given) => {
      const parsed = schema.safeParse(given);
      if (!parsed.success) {
        refuse(socket, null, 'malformed');
        return;
      }
      try {
        work(parsed.data, seatIn(parsed.data.classId, event));
      } catch (error) {
        if (!(error instanceof ProblemError || error instanceof ClassProblem)) log.error({ err: error }, event);
        // A frame of a moment after one has left is honest.
        if (isRefusal(error) || (error instanceof ClassProblem && error.reason === 'not-shown'))
          refuse(socket, parsed.data.classId, `${event}: ${String(error)}`);
      }
    });
  }

  listen('class:enter', (given, acknowledge) => {
    const answer = (value: unknown): void => {
      if (typeof acknowledge === 'function') acknowledge(value);
    };
    const parsed = classEnterSchema.safeParse(given);
    if (!parsed.success) {
      refuse(socket, null, 'malformed');
      answer({ ok: false, code: 'validation', detail: 'The request is not a class and a number.' });
      return;
    }
    enter(parsed.data).then(
      (data) => answer({ ok: true, data }),
      (error: unknown) => answer(problem(error)),
    );
  });

  async function enter({ classId, since }: z.output<typeof classEnterSchema>): Promise<Entered> {
    const { actor, guest } = socket.data;
    const asGuest = guest !== null && (actor === null || guest.classId === classId);
    // The pass of another class does not stand in for a sign-in that has run out.
    if (actor === null && guest?.classId !== classId) throw new ProblemError('unauthenticated', 'Sign in first.');
    const pass = asGuest
      ? await classes.membership.enterAsGuest(guest, classId)
      : await classes.membership.enter(actor ?? missing(), classId);
    requireClassEvent(pass.role, 'class:enter');
    const known = await classes.log.read(classId);
    const scene = hub.sceneOf(classId);
    const nothing = { pass, present: [], statuses: [], view: null, serverTimeMs: classes.nowMs() };
    if (!pass.admitted) {
      hub.wait(socket, pass.member);
      return { ...nothing, entries: [] };
    }
    if (!socket.connected) return { ...nothing, entries: [] };
    hub.enter(socket, { classId, memberId: pass.member, role: pass.role });
    // From here on the room tells what is appended; what came before is in this answer.
    const { entries } = classes.log.peek(classId) ?? known;
    const reader = pass.role === 'instructor' ? 'all' : pass.member;
    return {
      pass,
      entries: entries.filter(({ seq }) => seq > since).map((entry) => redacted(entry, reader)),
      present: hub.present(classId),
      statuses: pass.role === 'instructor' ? [...scene.statuses].map(([member, status]) => ({ member, status })) : [],
      view: scene.view,
      serverTimeMs: classes.nowMs(),
    };
  }

  request('class:leave', classLeaveSchema, async ({ classId }, { memberId }) => {
    await classes.membership.leave(classId, memberId);
    hub.leave(socket, classId);
    hub.appended(classId);
    return {};
  });

  request('class:entries', classEntriesSchema, async ({ classId, since }, { memberId, role }) => {
    const { entries } = await classes.log.read(classId);
    const reader = role === 'instructor' ? 'all' : memberId;
    return { entries: entries.filter(({ seq }) => seq > since).map((entry) => redacted(entry, reader)) };
  });

  request('class:control', classControlSchema, async (control, { memberId }) => {
    const entries = await classes.controls.control(control.classId, memberId, control);
    hub.appended(control.classId);
    return { entries };
  });

  request('board:follow', boardFollowSchema, async ({ classId, follow }) => {
    await (follow ? socket.join(boardRoom(classId)) : socket.leave(boardRoom(classId)));
    return {};
  });

  request('run:take', runTakeSchema, async ({ classId, run }, { memberId }) => {
    const hold = await classes.attempts.take(classId, memberId, run);
    await classes.chunks.prepare(classId, hold.attemptId);
    return hold;
  });

  request('run:chunk', runChunkSchema, ({ classId, attemptId, index, hash, bytes }, { memberId }) =>
    classes.chunks.store(classId, memberId, attemptId, { index, hash, bytes: Buffer.from(bytes, 'base64') }),
  );

  request('run:catch-up', runCatchUpSchema, async ({ classId, attemptId, from }, { memberId, role }) => {
    await requireSight(classId, attemptId, memberId, role === 'instructor');
    const chunks = await classes.attempts.chunksFrom(classId, attemptId, from);
    const { frames } = hub.sceneOf(classId);
    // Read after the chunks: together they leave no gap.
    return { ...chunks, frames: !chunks.more && frames?.attemptId === attemptId ? [...frames.frames] : [] };
  });

  request('run:complete', runCompleteSchema, async ({ classId, attemptId, chunkCount }, { memberId }) => ({
    result: await classes.attempts.complete(classId, memberId, attemptId, chunkCount),
  }));

  request('run:differs', runDiffersSchema, async ({ classId, attemptId, tick, expected, found }, { memberId }) => {
    await classes.attempts.ofClass(classId, attemptId);
    log.warn({ classId, memberId, attemptId, tick, expected, found }, 'a viewer differed and begins again');
    await classes.controls.differed(classId, memberId, { attempt: attemptId, tick, expected, found });
    hub.appended(classId);
    return {};
  });

  request('run:stands', runStandsSchema, async ({ classId, run, tick }, { memberId }) => {
    const entries = await classes.controls.stands(classId, memberId, run, tick);
    hub.appended(classId);
    return { entries };
  });

  message('run:inputs', runInputsSchema, ({ classId, attemptId, frame }, { memberId }) => {
    const run = classes.log.peek(classId)?.state.run ?? null;
    const recording = classes.chunks.recordingOf(attemptId);
    if (recording === null) {
      classes.chunks.prepare(classId, attemptId).catch(() => refuse(socket, classId, 'not of this class'));
      return;
    }
    const holders = run?.controls.slice(-2).map(({ member }) => member) ?? [];
    const mine = recording.demonstration ? holders.includes(memberId) : recording.memberId === memberId;
    if (!mine) throw new ClassProblem('not-your-controls', 'Another flies this aeroplane.');
    if (run === null || run.run !== recording.run) return;
    const seen = recording.demonstration ? run.attempt === attemptId : run.shown === memberId;
    if (!seen) return;
    const decoded = decodeFrame(frame, recording.engineCount);
    const latest = tickAt(run, classes.nowMs()) + FRAME_TOLERANCE_TICKS;
    if (decoded === null || decoded.branch >= run.branches.length || decoded.startTick > latest)
      throw new ClassProblem('not-shown', 'The frame is none of this run.');
    // Whoever had the controls before delivers what they flew; what lies behind it came late, or is forged.
    const flies = run.controls.at(-1)?.member ?? memberId;
    if (recording.demonstration && flies !== memberId && controlsAt(run, decoded.startTick) !== memberId) return;
    hub.frame(socket, classId, attemptId, frame);
  });

  message('run:telemetry', runTelemetrySchema, ({ classId, run, telemetry }, { memberId }) => {
    if (classes.log.peek(classId)?.state.run?.run !== run) return;
    const scene = hub.sceneOf(classId);
    if (scene.rowsRun !== run) scene.rows.clear();
    scene.rowsRun = run;
    scene.rows.set(memberId, telemetry);
  });

  message('view:move', viewMoveSchema, ({ classId, view }) => hub.view(socket, classId, view));

  message('member:tell', memberTellSchema, ({ classId, status }, { memberId }) => {
    const scene = hub.sceneOf(classId);
    scene.statuses.set(memberId, status);
    scene.changedStatuses.add(memberId);
  });

  /** One's own attempt, the demonstration's, and the one that is shown to all. */
  async function requireSight(classId: string, attemptId: string, memberId: string, all: boolean): Promise<void> {
    const record = await classes.attempts.ofClass(classId, attemptId);
    if (all || record.demonstration || record.memberId === memberId) return;
    const { state } = await classes.log.known(classId);
    if (state.run?.run !== record.run || state.run.shown !== record.memberId)
      throw new ClassProblem('not-shown', 'This aeroplane is not shown to all.');
  }
}

function missing(): never {
  throw new ProblemError('unauthenticated', 'Sign in first.');
}

/** What an honest browser does not run into: counted against its socket. Who comes a moment late is honest. */
function isRefusal(error: unknown): boolean {
  if (error instanceof ClassProblem) return error.reason === 'not-your-controls';
  return error instanceof ProblemError && ['forbidden', 'not-found', 'chunk-refused'].includes(error.code);
}
