import type { Server as HttpServer } from 'node:http';
import { parse as parseCookies } from 'cookie';
import { Server } from 'socket.io';
import { ACCESS_COOKIE, GUEST_COOKIE } from '#shared/contracts/wire-names.ts';
import type { Logger } from '../config/log.ts';
import { originAllowed } from '../config/origins.ts';
import type { ClassServices } from '../services/classes/create-class-services.ts';
import { ProblemError } from '../services/problem-error.ts';
import type { SessionsService } from '../services/sessions/sessions.service.ts';
import { createClassHub } from './class-hub.ts';
import { attachClassTopics } from './class-topics.ts';
import { Bucket, createRateLimits, MOST_REFUSED } from './rate-limits.ts';
import type { RedisLink } from './redis.ts';
import { personRoom, sessionRoom } from './rooms.ts';
import type { ClassSocket, SocketData, Sockets } from './socket-types.ts';

const LARGEST_MESSAGE_BYTES = 100_000;
/** Windows of one person or guest that may be open at once, in this process. */
const MOST_SOCKETS = 20;
/** A browser that is gone is noticed within these two together. */
const PING_EVERY_MS = 5000;
const PING_ANSWER_MS = 6000;

export interface SocketsSetup {
  http: HttpServer;
  sessions: SessionsService;
  classes: ClassServices;
  log: Logger;
  publicOrigins: readonly string[];
  /** Shared with other processes; null: this process is alone. */
  redis?: RedisLink | null;
}

/** The socket server on the product's own port. Only people and guests on a page of this server get in. */
export function attachSockets(setup: SocketsSetup): { close: () => Promise<void> } {
  const { http, sessions, classes, log, publicOrigins, redis = null } = setup;
  const io: Sockets = new Server(http, {
    path: '/socket.io',
    serveClient: false,
    maxHttpBufferSize: LARGEST_MESSAGE_BYTES,
    pingInterval: PING_EVERY_MS,
    pingTimeout: PING_ANSWER_MS,
    // Chunks and frames are compressed already, or small.
    perMessageDeflate: false,
    allowRequest: (request, decide) => decide(null, originAllowed(request.headers, publicOrigins)),
    ...(redis === null ? {} : { adapter: redis.adapter }),
  });

  async function authenticate(cookieHeader: string | undefined): Promise<SocketData> {
    const cookies = parseCookies(cookieHeader ?? '');
    const guest = classes.guestPasses.check(cookies[GUEST_COOKIE]);
    const data: SocketData = { actor: null, guest, seats: new Map(), refused: 0 };
    try {
      data.actor = await sessions.authenticate(cookies[ACCESS_COOKIE]);
    } catch (error) {
      if (guest === null) throw error;
    }
    return data;
  }

  io.use((socket, next) => {
    authenticate(socket.handshake.headers.cookie).then(
      (data) => {
        socket.data = data;
        next();
      },
      (error: unknown) => {
        if (!(error instanceof ProblemError)) log.error({ err: error }, 'socket handshake failed');
        next(new Error(error instanceof ProblemError ? error.code : 'internal'));
      },
    );
  });

  const open = new Map<string, number>();
  const hub = createClassHub({ io, classes, log, several: redis !== null });

  io.on('connection', (socket: ClassSocket) => {
    const { actor, guest } = socket.data;
    const who = actor?.personId ?? guest?.memberId ?? socket.id;
    const windows = (open.get(who) ?? 0) + 1;
    open.set(who, windows);
    socket.on('disconnect', () => {
      const left = (open.get(who) ?? 1) - 1;
      if (left > 0) open.set(who, left);
      else open.delete(who);
    });
    if (windows > MOST_SOCKETS) {
      socket.disconnect(true);
      return;
    }
    if (actor !== null) void socket.join([personRoom(actor.personId), sessionRoom(actor.sessionId)]);
    const limits = createRateLimits(Date.now);
    const patience = new Bucket(MOST_REFUSED, Date.now());
    const refuse = (from: ClassSocket, classId: string | null, why: string): void => {
      from.data.refused += 1;
      log.info({ person: from.data.actor?.personId, guest: from.data.guest?.memberId, classId, why }, 'socket refused');
      hub.refused(classId ?? from.data.seats.keys().next().value ?? null);
      if (patience.take(Date.now())) return;
      log.warn({ person: from.data.actor?.personId, guest: from.data.guest?.memberId, why }, 'socket cut off');
      from.disconnect(true);
    };
    socket.use(([event, ...args], next) => {
      const verdict = limits(event);
      if (verdict === 'ok') {
        next();
        return;
      }
      refuse(socket, null, `${verdict}: ${String(event).slice(0, 40)}`);
      const acknowledge: unknown = args.at(-1);
      if (typeof acknowledge === 'function') {
        const detail = verdict === 'unknown' ? 'There is no such event.' : 'Too many requests; wait a moment.';
        acknowledge({ ok: false, code: verdict === 'unknown' ? 'bad-request' : 'throttled', detail });
      }
    });
    socket.on('clock:ask', (acknowledge) => {
      if (typeof acknowledge === 'function') acknowledge({ ok: true, data: { serverTimeMs: classes.nowMs() } });
    });
    attachClassTopics(socket, { classes, hub, log, refuse });
    socket.on('disconnect', () => hub.gone(socket));
  });

  const stopListening = sessions.onRevoked(({ personId, sessionId, reason }) => {
    const room = sessionId === null ? personRoom(personId) : sessionRoom(sessionId);
    io.to(room).emit('session:revoked', { reason });
    io.in(room).disconnectSockets();
  });

  return {
    close: async () => {
      stopListening();
      hub.close();
      await io.close();
      redis?.close();
    },
  };
}
