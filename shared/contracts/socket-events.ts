/** Event maps of the socket, shared by server, client and tests. Server events are `topic:past-tense`. */

export interface ServerEvents {
  /** This person's sessions were ended (sign out everywhere, deactivation); the client signs out. */
  'session:revoked': (notice: {
    reason: 'signed-out' | 'signed-out-everywhere' | 'token-reused' | 'deactivated' | 'roles-changed';
  }) => void;
}

/** Acknowledgement of every request: data, or an error code of problem.ts. */
export type Acknowledge<T> = (answer: { ok: true; data: T } | { ok: false; code: string; detail: string }) => void;

export interface ClientEvents {
  /** Round trip for the clock offset; answers with the server's time in ms since 1970, UTC. */
  'clock:ask': (acknowledge: Acknowledge<{ serverTimeMs: number }>) => void;
}
