/** Tells the open sockets of this process that sessions have ended. */
export interface Revocation {
  personId: string;
  /** Null: every session of the person. */
  sessionId: string | null;
  reason: 'signed-out' | 'signed-out-everywhere' | 'token-reused' | 'deactivated' | 'roles-changed';
}

export interface SessionNotices {
  announce(revocation: Revocation): void;
  /** @returns a function that ends the listening */
  listen(listener: (revocation: Revocation) => void): () => void;
}

export function createSessionNotices(): SessionNotices {
  const listeners = new Set<(revocation: Revocation) => void>();
  return {
    announce: (revocation) => {
      for (const listener of listeners) listener(revocation);
    },
    listen: (listener) => {
      listeners.add(listener);
      return () => void listeners.delete(listener);
    },
  };
}
