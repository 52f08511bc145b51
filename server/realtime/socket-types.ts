import type { BroadcastOperator, DefaultEventsMap, Server, Socket } from 'socket.io';
import type { ClientEvents, ServerEvents } from '#shared/contracts/socket-events.ts';
import type { MemberRole } from '#shared/scenario/class-log.ts';
import type { GuestPass } from '../services/classes/guest-passes.ts';
import type { Actor } from '../services/permissions.ts';

/** What a socket is in a class that it has entered. */
export interface Seat {
  classId: string;
  memberId: string;
  role: MemberRole;
}

export interface SocketData {
  /** Null for a guest without an account. */
  actor: Actor | null;
  guest: GuestPass | null;
  seats: Map<string, Seat>;
  /** Frames and events of this socket that were refused. */
  refused: number;
}

/** Between processes. */
export interface BetweenServers extends DefaultEventsMap {
  bus: (topic: string, message: unknown) => void;
}

export type Sockets = Server<ClientEvents, ServerEvents, BetweenServers, SocketData>;
export type ClassSocket = Socket<ClientEvents, ServerEvents, BetweenServers, SocketData>;
export type Emitter = Pick<BroadcastOperator<ServerEvents, SocketData>, 'emit'>;
