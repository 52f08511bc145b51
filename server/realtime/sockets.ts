import type { Server as HttpServer } from 'node:http';
import { parse as parseCookies } from 'cookie';
import { Server } from 'socket.io';
import type { ClientEvents, ServerEvents } from '#shared/contracts/socket-events.ts';
import { ACCESS_COOKIE } from '#shared/contracts/wire-names.ts';
import type { Logger } from '../config/log.ts';
import { originAllowed } from '../config/origins.ts';
import type { Actor } from '../services/permissions.ts';
import { ProblemError } from '../services/problem-error.ts';
import type { SessionsService } from '../services/sessions/sessions.service.ts';
import { personRoom, sessionRoom } from './rooms.ts';

interface SocketData {
  actor: Actor;
}
type Sockets = Server<ClientEvents, ServerEvents, Record<string, never>, SocketData>;

const LARGEST_MESSAGE_BYTES = 100_000;

export interface SocketsSetup {
  http: HttpServer;
  sessions: SessionsService;
  log: Logger;
  publicOrigins: readonly string[];
}

/** The socket server on the product's own port. Only signed-in people of a page of this server get in. */
export function attachSockets({ http, sessions, log, publicOrigins }: SocketsSetup): { close: () => Promise<void> } {
  const io: Sockets = new Server(http, {
    path: '/socket.io',
    serveClient: false,
    maxHttpBufferSize: LARGEST_MESSAGE_BYTES,
    allowRequest: (request, decide) => decide(null, originAllowed(request.headers, publicOrigins)),
  });

  io.use((socket, next) => {
    const cookies = parseCookies(socket.handshake.headers.cookie ?? '');
    sessions.authenticate(cookies[ACCESS_COOKIE]).then(
      (actor) => {
        socket.data.actor = actor;
        next();
      },
      (error: unknown) => {
        if (!(error instanceof ProblemError)) log.error({ err: error }, 'socket handshake failed');
        next(new Error(error instanceof ProblemError ? error.code : 'internal'));
      },
    );
  });

  io.on('connection', (socket) => {
    const { actor } = socket.data;
    void socket.join([personRoom(actor.personId), sessionRoom(actor.sessionId)]);
    socket.on('clock:ask', (acknowledge) => {
      if (typeof acknowledge === 'function') acknowledge({ ok: true, data: { serverTimeMs: Date.now() } });
    });
  });

  const stopListening = sessions.onRevoked(({ personId, sessionId, reason }) => {
    const room = sessionId === null ? personRoom(personId) : sessionRoom(sessionId);
    io.to(room).emit('session:revoked', { reason });
    io.in(room).disconnectSockets();
  });

  return {
    close: async () => {
      stopListening();
      await io.close();
    },
  };
}
