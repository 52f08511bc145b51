/** Event maps of the socket, shared by server, client and tests. Server events are `topic:past-tense` or a noun. */
import type { Acknowledge, ClassClientEvents, ClassServerEvents } from './class-socket.ts';

export type { Acknowledge } from './class-socket.ts';

export interface ServerEvents extends ClassServerEvents {
  /** This person's sessions were ended (sign out everywhere, deactivation); the client signs out. */
  'session:revoked': (notice: {
    reason: 'signed-out' | 'signed-out-everywhere' | 'token-reused' | 'deactivated' | 'roles-changed';
  }) => void;
}

export interface ClientEvents extends ClassClientEvents {
  /** Round trip for the clock offset; answers with the server's time in ms since 1970, UTC. */
  'clock:ask': (acknowledge: Acknowledge<{ serverTimeMs: number }>) => void;
}
