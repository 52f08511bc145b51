import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import type { BoardRow, MemberStatus, PresentedView, Telemetry } from '#shared/contracts/class-socket.ts';
import type { ClassEntry } from '#shared/scenario/class-log.ts';
import type { Logger } from '../config/log.ts';
import { redacted } from '../services/classes/class-pages.ts';
import type { KnownClass } from '../services/classes/class-log-store.ts';
import type { ClassServices } from '../services/classes/create-class-services.ts';
import { ClassPresence, type Change } from './class-presence.ts';
import { boardRoom, classRoom, doorRoom, instructorsRoom, memberRoom } from './rooms.ts';
import type { ClassSocket, Seat, Sockets } from './socket-types.ts';

const BOARD_EVERY_MS = 100;
const STATUSES_EVERY_MS = 500;
const REFRESH_EVERY_MS = 1000;
const BEAT_EVERY_MS = 2000;
const TIDY_EVERY_MS = 10_000;
/** Frames of inputs that are kept for those who come late: ten seconds. */
const KEPT_FRAMES = 300;

/** What this process keeps of a class beside its log; all of it can be lost. */
interface Scene {
  frames: { attemptId: string; frames: string[] } | null;
  view: PresentedView | null;
  rows: Map<string, Telemetry>;
  rowsRun: number;
  statuses: Map<string, MemberStatus>;
  changedStatuses: Set<string>;
  refused: number;
}

const frameSchema = z.object({ classId: z.uuid(), attemptId: z.uuid(), frame: z.string() });
const viewSchema = z.object({ classId: z.uuid(), view: z.custom<PresentedView>((value) => typeof value === 'object') });
const censusSchema = z.object({ process: z.uuid(), classes: z.record(z.string(), z.array(z.string())) });

export interface HubSetup {
  io: Sockets;
  classes: ClassServices;
  log: Logger;
  /** Other processes serve the same classes. */
  several: boolean;
}

/** What concerns all sockets of the classes here: news of the log, presence, frames, board. */
export function createClassHub({ io, classes, log, several }: HubSetup) {
  const processId = randomUUID();
  const presence = new ClassPresence();
  const scenes = new Map<string, Scene>();
  const timers: NodeJS.Timeout[] = [];
  let closed = false;

  function sceneOf(classId: string): Scene {
    let scene = scenes.get(classId);
    if (!scene) {
      scene = {
        frames: null,
        view: null,
        rows: new Map(),
        rowsRun: 0,
        statuses: new Map(),
        changedStatuses: new Set(),
        refused: 0,
      };
      scenes.set(classId, scene);
    }
    return scene;
  }

  const publish = (topic: string, message: unknown): void => {
    if (several) io.serverSideEmit('bus', topic, message);
  };

  function keepFrame(classId: string, attemptId: string, frame: string): void {
    const scene = sceneOf(classId);
    if (scene.frames?.attemptId !== attemptId) scene.frames = { attemptId, frames: [] };
    scene.frames.frames.push(frame);
    if (scene.frames.frames.length > KEPT_FRAMES) scene.frames.frames.shift();
  }

  function tellPresence({ classId, member, here }: Change): void {
    io.local.to(classRoom(classId)).emit('class:presence', { classId, member, here });
  }

  function tellCensus(): void {
    publish('census', { process: processId, classes: presence.census() });
  }

  /** Whoever was sent out or has left is out with all sockets here. */
  function putOut(classId: string, memberId: string): void {
    io.local.in([memberRoom(memberId), doorRoom(memberId)]).emit('class:closed', { classId, reason: 'removed' });
    for (const socket of io.sockets.sockets.values()) {
      if (socket.data.seats.get(classId)?.memberId === memberId) leave(socket, classId);
    }
    io.local.in(doorRoom(memberId)).socketsLeave(doorRoom(memberId));
  }

  function leave(socket: ClassSocket, classId: string): void {
    const seat = socket.data.seats.get(classId);
    if (!seat) return;
    socket.data.seats.delete(classId);
    for (const room of [classRoom, instructorsRoom, boardRoom]) void socket.leave(room(classId));
    void socket.leave(memberRoom(seat.memberId));
    if (presence.depart(classId, seat.memberId, socket.id)) {
      tellPresence({ classId, member: seat.memberId, here: false });
      tellCensus();
    }
    if (!presence.isHosted(classId)) scenes.delete(classId);
  }

  function tellEntries(classId: string, entries: readonly ClassEntry[]): void {
    const all = [...entries];
    const personal = all.flatMap((entry) =>
      entry.kind === 'message' && entry.to !== null ? [memberRoom(entry.to)] : [],
    );
    if (personal.length === 0) {
      io.local.to(classRoom(classId)).emit('class:appended', { classId, entries: all });
      return;
    }
    const knowing = [...personal, instructorsRoom(classId)];
    io.local.to(knowing).emit('class:appended', { classId, entries: all });
    const others = all.map((entry) => redacted(entry, null));
    io.local.to(classRoom(classId)).except(knowing).emit('class:appended', { classId, entries: others });
  }

  const stopListening = classes.log.onAppended(({ record }: KnownClass, entries) => {
    tellEntries(record.id, entries);
    for (const entry of entries) {
      if (entry.kind === 'joined') {
        io.local.to(doorRoom(entry.member)).emit('class:appended', { classId: record.id, entries: [entry] });
      } else if (entry.kind === 'removed' || entry.kind === 'left') putOut(record.id, entry.member);
      else if (entry.kind === 'started' || entry.kind === 'shown') sceneOf(record.id).frames = null;
    }
  });

  /** What other processes say. */
  io.on('bus', (topic: string, message: unknown) => {
    if (closed) return;
    if (topic === 'appended') {
      const classId = z.uuid().safeParse(message);
      if (classId.success && presence.isHosted(classId.data)) refresh([classId.data]);
    } else if (topic === 'frame') {
      const news = frameSchema.safeParse(message);
      if (!news.success || !presence.isHosted(news.data.classId)) return;
      const { classId, attemptId, frame } = news.data;
      keepFrame(classId, attemptId, frame);
      io.local.to(classRoom(classId)).emit('run:inputs', { attemptId, frame });
    } else if (topic === 'view') {
      const news = viewSchema.safeParse(message);
      if (!news.success || !presence.isHosted(news.data.classId)) return;
      sceneOf(news.data.classId).view = news.data.view;
      io.local.to(classRoom(news.data.classId)).volatile.emit('view:moved', news.data);
    } else if (topic === 'census') {
      const news = censusSchema.safeParse(message);
      if (!news.success) return;
      for (const change of presence.hear(news.data.process, news.data.classes, Date.now())) tellPresence(change);
    } else if (topic === 'who') tellCensus();
  });

  function refresh(classIds: readonly string[]): void {
    classes.log.refresh(classIds).catch((error: unknown) => {
      if (!closed) log.warn({ err: error }, 'the log of a class could not be read; tried again in a second');
    });
  }

  const every = (ms: number, work: () => void): void => {
    const timer = setInterval(work, ms);
    timer.unref();
    timers.push(timer);
  };

  every(BOARD_EVERY_MS, () => {
    for (const [classId, scene] of scenes) {
      if (scene.rows.size === 0) continue;
      const rows: BoardRow[] = [...scene.rows].map(([member, telemetry]) => ({ member, telemetry }));
      scene.rows.clear();
      io.to(boardRoom(classId)).volatile.emit('board:rows', { classId, run: scene.rowsRun, rows });
    }
  });
  every(STATUSES_EVERY_MS, () => {
    for (const [classId, scene] of scenes) {
      if (scene.changedStatuses.size === 0) continue;
      const statuses = [...scene.changedStatuses].flatMap((member) => {
        const status = scene.statuses.get(member);
        return status ? [{ member, status }] : [];
      });
      scene.changedStatuses.clear();
      io.to(instructorsRoom(classId)).volatile.emit('class:statuses', { classId, statuses });
    }
  });
  every(REFRESH_EVERY_MS, () => {
    const hosted = presence.hosted();
    if (hosted.length > 0) refresh(hosted);
  });
  every(BEAT_EVERY_MS, () => {
    for (const classId of presence.hosted()) {
      const seq = classes.log.peek(classId)?.state.seq ?? 0;
      io.local.to(classRoom(classId)).emit('class:beat', { classId, seq, serverTimeMs: classes.nowMs() });
    }
    tellCensus();
    for (const change of presence.forgetSilent(Date.now())) tellPresence(change);
    for (const [classId, scene] of scenes) {
      if (scene.refused === 0) continue;
      const { refused } = scene;
      scene.refused = 0;
      classes.addRefused(classId, refused).catch((error: unknown) => log.warn({ err: error }, 'refusals not counted'));
    }
  });
  every(TIDY_EVERY_MS, () => {
    classes.log.tidy(new Set(presence.hosted()));
    const failed = (error: unknown): void => {
      if (!closed) log.warn({ err: error }, 'tidying up after classes failed; tried again');
    };
    classes.attempts.completeLeftBehind().catch(failed);
    classes.tidy().catch(failed);
  });
  publish('who', null);

  return {
    /** A socket comes in, admitted. */
    enter(socket: ClassSocket, seat: Seat): void {
      const { classId, memberId, role } = seat;
      socket.data.seats.set(classId, seat);
      void socket.join([classRoom(classId), memberRoom(memberId)]);
      void socket.leave(doorRoom(memberId));
      if (role === 'instructor') void socket.join(instructorsRoom(classId));
      else {
        // One seat, one browser: the latest.
        const others = io.in(memberRoom(memberId)).except(socket.id);
        others.emit('class:closed', { classId, reason: 'replaced' });
        others.socketsLeave([classRoom(classId), memberRoom(memberId)]);
      }
      if (presence.arrive(classId, memberId, socket.id)) {
        tellPresence({ classId, member: memberId, here: true });
        tellCensus();
      }
      sceneOf(classId);
    },
    wait: (socket: ClassSocket, memberId: string): void => void socket.join(doorRoom(memberId)),
    leave,
    gone(socket: ClassSocket): void {
      for (const classId of [...socket.data.seats.keys()]) leave(socket, classId);
    },
    present: (classId: string): string[] => presence.present(classId),
    sceneOf,
    appended: (classId: string): void => publish('appended', classId),
    frame(socket: ClassSocket, classId: string, attemptId: string, frame: string): void {
      keepFrame(classId, attemptId, frame);
      socket.to(classRoom(classId)).local.emit('run:inputs', { attemptId, frame });
      publish('frame', { classId, attemptId, frame });
    },
    view(socket: ClassSocket, classId: string, view: PresentedView): void {
      sceneOf(classId).view = view;
      socket.to(classRoom(classId)).local.volatile.emit('view:moved', { classId, view });
      publish('view', { classId, view });
    },
    refused(classId: string | null): void {
      if (classId !== null && scenes.has(classId)) sceneOf(classId).refused += 1;
    },
    close(): void {
      closed = true;
      stopListening();
      for (const timer of timers) clearInterval(timer);
    },
  };
}
export type ClassHub = ReturnType<typeof createClassHub>;
