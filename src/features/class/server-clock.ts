/** The server's time as a browser of a class knows it: measured on entering, and again when a message contradicts it. */
import {
  type ClockAnswer,
  type ClockOffset,
  betterOffset,
  clockOffset,
  contradicts,
} from '#shared/scenario/class-clock.ts';
import type { ClassSocket } from '../../services/class-socket.ts';

const ASKS = 5;
const ANSWER_MS = 3000;
const AGAIN_AFTER_MS = 5000;

export class ServerClock {
  private known: ClockOffset = { offsetMs: 0, roundTripMs: Number.POSITIVE_INFINITY };
  private doubtedMs = Number.NEGATIVE_INFINITY;
  private readonly socket: ClassSocket;
  private readonly own: () => number;

  /** @param own  This browser's clock, ms; by default the one that nobody sets. It may stop while the machine sleeps. */
  constructor(socket: ClassSocket, own: () => number = () => performance.timeOrigin + performance.now()) {
    this.socket = socket;
    this.own = own;
  }

  now(): number {
    return this.own() + this.known.offsetMs;
  }
  /** Of the measurement gone by; 0 before the first. */
  get roundTripMs(): number {
    return Number.isFinite(this.known.roundTripMs) ? this.known.roundTripMs : 0;
  }

  async measure(): Promise<void> {
    const answers: ClockAnswer[] = [];
    for (let i = 0; i < ASKS; i += 1) {
      const askedMs = this.own();
      const serverMs = await new Promise<number | null>((resolve) => {
        const timer = setTimeout(() => resolve(null), ANSWER_MS);
        this.socket.emit('clock:ask', (answer) => {
          clearTimeout(timer);
          resolve(answer.ok ? answer.data.serverTimeMs : null);
        });
      });
      if (serverMs !== null) answers.push({ askedMs, serverMs, answeredMs: this.own() });
    }
    if (answers.length > 0) this.known = betterOffset(this.known, clockOffset(answers));
  }

  /** A time that the server has just told: a clock that stood still meanwhile, or was measured badly, is measured again. */
  hear(serverMs: number): void {
    const passedMs = performance.now() - this.doubtedMs;
    if (passedMs < AGAIN_AFTER_MS || !contradicts(this.known, serverMs, this.own())) return;
    this.doubtedMs = performance.now();
    this.measure().catch(() => undefined);
  }
}
