/**
 * Which attempts are being flown in some open tab. A tab that finds an unfinished attempt asks the others before it
 * closes it as left; a frozen or hidden tab still answers.
 */
export interface FlightClaims {
  claim(attemptId: string): void;
  release(attemptId: string): void;
  /** True when another tab answers that it flies this attempt. */
  flownElsewhere(attemptId: string): Promise<boolean>;
  close(): void;
}

interface Channel {
  postMessage(message: unknown): void;
  addEventListener(type: 'message', listener: (event: { data: unknown }) => void): void;
  close(): void;
}

export const ANSWER_WITHIN_MS = 400;

interface ClaimMessage {
  kind: 'who' | 'me';
  attemptId: string;
}

function parse(data: unknown): ClaimMessage | null {
  if (typeof data !== 'object' || data === null || !('kind' in data) || !('attemptId' in data)) return null;
  const { kind, attemptId } = data;
  if ((kind !== 'who' && kind !== 'me') || typeof attemptId !== 'string') return null;
  return { kind, attemptId };
}

export function createFlightClaims(
  channel: Channel | null,
  wait: (ms: number) => Promise<void> = (ms) => new Promise((resolve) => setTimeout(resolve, ms)),
): FlightClaims {
  const mine = new Set<string>();
  const answered = new Set<string>();
  channel?.addEventListener('message', (event) => {
    const message = parse(event.data);
    if (!message) return;
    if (message.kind === 'who' && mine.has(message.attemptId)) {
      channel.postMessage({ kind: 'me', attemptId: message.attemptId });
    } else if (message.kind === 'me') answered.add(message.attemptId);
  });
  return {
    claim(attemptId) {
      mine.add(attemptId);
    },
    release(attemptId) {
      mine.delete(attemptId);
    },
    async flownElsewhere(attemptId) {
      if (mine.has(attemptId)) return true;
      if (!channel) return false;
      answered.delete(attemptId);
      channel.postMessage({ kind: 'who', attemptId });
      await wait(ANSWER_WITHIN_MS);
      return answered.has(attemptId);
    },
    close() {
      channel?.close();
    },
  };
}
