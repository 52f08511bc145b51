/** A member of a besieged class: the browser's own session over a real socket, and what it was promised. */
import { randomUUID } from 'node:crypto';
import { io } from 'socket.io-client';
import { classScenarioSchema } from '#shared/contracts/classes.ts';
import { headTickAt } from '#shared/scenario/class-state.ts';
import { ClassSession } from '../../src/features/class/class-session.ts';
import type { ClassSocket } from '../../src/services/class-socket.ts';
import type { Client } from '../support/test-server.ts';

export interface Promised {
  attemptId: string;
  index: number;
}

export class Member {
  readonly session: ClassSession;
  readonly socket: ClassSocket;
  /** Chunks whose storing was acknowledged. */
  readonly chunks: Promised[] = [];
  /** Results of attempts that were completed: whether the server came to the same states. */
  readonly agreed: boolean[] = [];
  differences = 0;
  private flown = 0;

  constructor(
    readonly http: Client,
    address: string,
    readonly classId: string,
    /** What this browser's clock is off by, ms. */
    clockErrorMs = 0,
  ) {
    this.socket = io(address, {
      transports: ['websocket'],
      extraHeaders: { cookie: http.cookie(), origin: address },
      forceNew: true,
      reconnectionDelay: 50,
      reconnectionDelayMax: 300,
      autoConnect: false,
    });
    this.watch();
    this.session = new ClassSession({
      socket: this.socket,
      classId,
      scenario: async (index) =>
        classScenarioSchema.parse((await http('GET', `/api/classes/${classId}/scenarios/${index}`)).body),
      newKey: randomUUID,
      renew: async () => (await http('GET', '/api/session')).status === 200,
      now: () => Date.now() + clockErrorMs,
      events: {
        changed: () => undefined,
        board: () => undefined,
        view: () => undefined,
        closed: () => undefined,
        said: (text) => {
          if (text.includes('differed')) this.differences += 1;
        },
        tick: () => undefined,
      },
    });
  }

  /** Looks at every acknowledgement on its way to the session. */
  private watch(): void {
    const emit = this.socket.emit.bind(this.socket) as (event: string, ...given: unknown[]) => ClassSocket;
    const watched = (event: string, ...given: unknown[]): ClassSocket => {
      const acknowledge = given.at(-1);
      if (typeof acknowledge !== 'function') return emit(event, ...given);
      const body = given[0] as { attemptId: string; index: number }; // of the events looked at below
      return emit(
        event,
        ...given.slice(0, -1),
        (answer: { ok: boolean; data?: { result?: { statesAgree: boolean } } }) => {
          if (event === 'run:chunk' && answer.ok) this.chunks.push({ attemptId: body.attemptId, index: body.index });
          if (event === 'run:complete' && answer.ok) this.agreed.push(answer.data?.result?.statesAgree === true);
          (acknowledge as (answer: unknown) => void)(answer);
        },
      );
    };
    this.socket.emit = watched as typeof this.socket.emit; // the same signature, seen through
  }

  /** One picture: the pedal goes to and fro. */
  step(): void {
    this.flown += 1;
    const pedal = this.flown % 240 < 120 ? 3000 : -3000;
    this.session.step((sample) => void (sample.pedal = pedal));
  }

  /**
   * How far this aeroplane is from where the class clock is, ticks; null when it does not fly.
   *
   * @param serverMs  The server's time as another browser has measured it; asked once this one has flown.
   */
  lateness(serverMs: () => number): number | null {
    this.step();
    const { run, flight } = this.session;
    if (!run || !flight || flight.line.run.ended !== null) return null;
    return Math.abs(flight.line.head - headTickAt(run, serverMs()));
  }

  close(): void {
    this.session.close();
  }
}
