/** The socket of the browser: typed by the contract, one connection a page. socket.io-client has its home here. */
import { io, type Socket } from 'socket.io-client';
import type { ClassClientEvents } from '#shared/contracts/class-socket.ts';
import type { ClientEvents, ServerEvents } from '#shared/contracts/socket-events.ts';

export type ClassSocket = Socket<ServerEvents, ClientEvents>;

/** A request that the server refused, or that got no answer. */
export class SocketRefusal extends Error {
  override readonly name = 'SocketRefusal';
  constructor(
    readonly code: string,
    detail: string,
  ) {
    super(detail);
  }
}

type Requests = {
  [E in keyof ClassClientEvents as Parameters<ClassClientEvents[E]>['length'] extends 2 ? E : never]: {
    body: Parameters<ClassClientEvents[E]>[0];
    data: AnswerOf<ClassClientEvents[E]>;
  };
};
type AnswerOf<F> = F extends (body: never, acknowledge: (answer: infer A) => void) => void
  ? Extract<A, { ok: true }> extends { data: infer D }
    ? D
    : never
  : never;

export function openClassSocket(): ClassSocket {
  return io({
    transports: ['websocket', 'polling'],
    reconnectionDelay: 300,
    reconnectionDelayMax: 3000,
    autoConnect: false,
  });
}

const WITHIN_MS = 8000;

/** Sends a request and waits for its acknowledgement. @throws {SocketRefusal} */
export function request<E extends keyof Requests>(
  socket: ClassSocket,
  event: E,
  body: Requests[E]['body'],
): Promise<Requests[E]['data']> {
  return new Promise((resolve, reject) => {
    const timer = setTimeout(() => reject(new SocketRefusal('unreachable', 'The server did not answer.')), WITHIN_MS);
    const acknowledge = (
      answer: { ok: true; data: Requests[E]['data'] } | { ok: false; code: string; detail: string },
    ): void => {
      clearTimeout(timer);
      if (answer.ok) resolve(answer.data);
      else reject(new SocketRefusal(answer.code, answer.detail));
    };
    // The event map above gives body and answer of each event; socket.io's own types cannot follow a generic name.
    (socket.emit as (event: string, body: unknown, acknowledge: unknown) => unknown).call(
      socket,
      event,
      body,
      acknowledge,
    );
  });
}
