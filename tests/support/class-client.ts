import { setTimeout as delay } from 'node:timers/promises';
import { randomUUID } from 'node:crypto';
import { io, type Socket } from 'socket.io-client';
import { classScenarioSchema, type ClassScenario } from '#shared/contracts/classes.ts';
import type { ClassControl, Entered, Telemetry } from '#shared/contracts/class-socket.ts';
import type { ClientEvents, ServerEvents } from '#shared/contracts/socket-events.ts';
import { decodeChunk, type RecordedChunk } from '#shared/scenario/recording.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { ControlSample, RunSpec } from '#shared/scenario/run-types.ts';
import { clockOffset, type ClockAnswer } from '#shared/scenario/class-clock.ts';
import { ClassFlight } from '#shared/scenario/class-flight.ts';
import { Follower, type Difference } from '#shared/scenario/class-follow.ts';
import { decodeFrame } from '#shared/scenario/class-frames.ts';
import type { ClassEntry } from '#shared/scenario/class-log.ts';
import { branchesOf, EMPTY_CLASS, foldEntry, type ClassRun, type ClassState } from '#shared/scenario/class-state.ts';
import type { Client } from './test-server.ts';

type Answered<T> = { ok: true; data: T } | { ok: false; code: string; detail: string };

/** A refused request of the socket. */
export class SocketRefusal extends Error {
  constructor(
    readonly code: string,
    detail: string,
  ) {
    super(`${code}: ${detail}`);
  }
}

/** Some control deed without its class and key. */
export type Deed = ClassControl extends infer C ? (C extends ClassControl ? Omit<C, 'classId' | 'key'> : never) : never;

/** A browser in a class, without its screen: it enters, keeps the log, flies or looks on, and comes back by itself. */
export class ClassClient {
  readonly socket: Socket<ServerEvents, ClientEvents>;
  state: ClassState = EMPTY_CLASS;
  entries: ClassEntry[] = [];
  entered: Entered | null = null;
  offsetMs = 0;
  roundTripMs = 0;
  flight: ClassFlight | null = null;
  attemptId: string | null = null;
  follower: Follower | null = null;
  readonly differences: Difference[] = [];
  readonly acknowledged: { attemptId: string; index: number }[] = [];
  readonly closed: string[] = [];
  /** Times from the sending of a chunk to its acknowledgement, ms. */
  readonly chunkMs: number[] = [];
  steer: (sample: ControlSample) => void = (sample) => void (sample.pedal = 6000);
  private followed: string | null = null;
  private readonly specs = new Map<number, ClassScenario>();
  private unsent: RecordedChunk[] = [];
  private sending = false;
  private early: { attemptId: string; frame: string }[] = [];
  private catching = false;
  private caughtMs = 0;
  private refusal: SocketRefusal | null = null;
  private inside = false;
  private entering: Promise<void> | null = null;

  constructor(
    readonly http: Client,
    address: string,
    readonly classId: string,
    /** What this browser's clock is off by, ms. */
    private readonly clockErrorMs = 0,
  ) {
    this.socket = io(address, {
      transports: ['websocket'],
      extraHeaders: { cookie: http.cookie(), origin: address },
      reconnectionDelay: 50,
      reconnectionDelayMax: 300,
      autoConnect: false,
    });
    this.socket.on('class:appended', ({ entries }) => this.take(entries));
    this.socket.on('class:beat', ({ seq }) => {
      if (seq > this.state.seq) void this.fill();
    });
    this.socket.on('class:closed', ({ reason }) => void this.closed.push(reason));
    this.socket.on('run:inputs', (news) => this.frame(news));
    this.socket.on('disconnect', () => {
      this.inside = false;
    });
    this.socket.on('connect', () => void this.comeIn().catch(() => undefined));
  }

  now(): number {
    return Date.now() + this.clockErrorMs;
  }
  serverNow(): number {
    return this.now() + this.offsetMs;
  }

  async request<T>(event: keyof ClientEvents, body: unknown, withinMs = 8000): Promise<T> {
    // Events are typed by the contract; tests send wrong ones on purpose.
    const emit = this.socket.timeout(withinMs).emitWithAck.bind(this.socket.timeout(withinMs)) as unknown as (
      event: string,
      body: unknown,
    ) => Promise<Answered<T>>;
    const answer = await emit(event, body);
    if (!answer.ok) throw new SocketRefusal(answer.code, answer.detail);
    return answer.data;
  }

  control(deed: Deed, key: string = randomUUID()): Promise<{ entries: ClassEntry[] }> {
    return this.request('class:control', { classId: this.classId, key, ...deed });
  }

  async connect(): Promise<this> {
    const came = new Promise<void>((resolve, reject) => {
      this.socket.once('connect_error', reject);
      this.socket.once('connect', () => resolve());
    });
    this.socket.connect();
    await came;
    await this.entering;
    return this;
  }

  private comeIn(): Promise<void> {
    this.entering = this.enterAgain();
    this.entering.catch(() => undefined);
    return this.entering;
  }

  private async enterAgain(): Promise<void> {
    const answers: ClockAnswer[] = [];
    for (let i = 0; i < 4; i += 1) {
      const askedMs = this.now();
      const answer = await this.socket.timeout(5000).emitWithAck('clock:ask');
      if (answer.ok) answers.push({ askedMs, serverMs: answer.data.serverTimeMs, answeredMs: this.now() });
    }
    ({ offsetMs: this.offsetMs, roundTripMs: this.roundTripMs } = clockOffset(answers));
    this.entered = await this.request<Entered>('class:enter', { classId: this.classId, since: this.state.seq });
    this.inside = this.entered.pass.admitted;
    this.take(this.entered.entries);
    if (this.followed !== null) await this.catchUp(this.followed);
    if (this.unsent.length > 0) void this.send();
  }

  private take(entries: readonly ClassEntry[]): void {
    for (const entry of entries) {
      if (entry.seq <= this.state.seq) continue;
      if (entry.seq !== this.state.seq + 1) {
        void this.fill();
        return;
      }
      this.state = foldEntry(this.state, entry);
      this.entries.push(entry);
    }
    const { run } = this.state;
    if (run === null) return;
    this.flight?.update(run);
    this.follower?.update(run, this.serverNow());
  }

  private async fill(): Promise<void> {
    try {
      const { entries } = await this.request<{ entries: ClassEntry[] }>('class:entries', {
        classId: this.classId,
        since: this.state.seq,
      });
      this.take(entries);
    } catch {
      // The next beat asks again.
    }
  }

  get run(): ClassRun {
    if (this.state.run === null) throw new Error('No run was started.');
    return this.state.run;
  }
  get member(): string {
    if (this.entered === null) throw new Error('Not entered.');
    return this.entered.pass.member;
  }

  async spec(): Promise<RunSpec> {
    const { index, seed, drawn } = this.run;
    let scenario = this.specs.get(index);
    if (!scenario) {
      const answer = await this.http('GET', `/api/classes/${this.classId}/scenarios/${index}`);
      scenario = classScenarioSchema.parse(answer.body);
      this.specs.set(index, scenario);
    }
    return {
      scenario: scenario.scenario,
      airframe: scenario.airframe.airframe,
      seed,
      drawn,
      branches: branchesOf(this.run),
    };
  }

  /** Takes the attempt of the present run and flies it when `fly` is called. */
  async takeControls(broadcast: boolean): Promise<ClassFlight> {
    const { run } = this;
    const hold = await this.request<{
      attemptId: string;
      chunkKey: string;
      nextIndex: number;
      lastHash: string;
      nextTick: number;
    }>('run:take', { classId: this.classId, run: run.run });
    this.attemptId = hold.attemptId;
    const { chunks } = await this.chunksOf(hold.attemptId);
    const spec = await this.spec();
    const engines = spec.airframe.engines.length;
    const recorded = chunks.slice(0, hold.nextIndex).map(({ bytes }) => {
      const decoded = decodeChunk(Buffer.from(bytes, 'base64'), engines);
      if (!decoded.ok) throw new Error(decoded.reason);
      return decoded.content;
    });
    const follower = this.follower;
    this.flight = new ClassFlight({
      run: createRun(spec),
      classRun: this.run,
      member: this.member,
      hold,
      recorded,
      flown: (line) => {
        if (follower === null || this.followed !== hold.attemptId) return;
        const from = this.run.controls.at(-1)?.tick ?? 0;
        const sample = line.run.neutralSample();
        for (let tick = line.head; tick < Math.min(from, follower.line.head); tick += 1) {
          follower.line.sampleInto(sample, tick);
          line.add(sample);
        }
      },
      events: {
        chunk: (chunk) => {
          this.unsent.push(chunk);
          void this.send();
        },
        frame: (frame) => {
          // What is lost while the connection is away comes with the chunks.
          if (this.inside) this.socket.emit('run:inputs', { classId: this.classId, attemptId: hold.attemptId, frame });
        },
        stands: (tick) => {
          this.request('run:stands', { classId: this.classId, run: this.run.run, tick }).catch(() => undefined);
        },
      },
    });
    this.flight.broadcast = broadcast;
    return this.flight;
  }

  private async send(): Promise<void> {
    if (this.sending || this.attemptId === null) return;
    this.sending = true;
    const attemptId = this.attemptId;
    try {
      while (this.unsent.length > 0 && this.socket.connected) {
        const [chunk] = this.unsent;
        const from = performance.now();
        await this.request('run:chunk', {
          classId: this.classId,
          attemptId,
          index: chunk.index,
          hash: chunk.hash,
          bytes: Buffer.from(chunk.bytes).toString('base64'),
        });
        this.chunkMs.push(performance.now() - from);
        this.unsent.shift();
        this.acknowledged.push({ attemptId, index: chunk.index });
      }
    } catch (error) {
      if (error instanceof SocketRefusal && !['internal', 'not-a-member', 'throttled'].includes(error.code)) {
        this.refusal = error;
        throw error;
      }
      await delay(100);
      if (this.socket.connected) setImmediate(() => void this.send().catch(() => undefined));
    } finally {
      this.sending = false;
    }
  }

  /** Resolves when every chunk is acknowledged. */
  async delivered(withinMs = 10_000): Promise<void> {
    const until = performance.now() + withinMs;
    while (this.unsent.length > 0) {
      if (performance.now() > until || this.refusal !== null)
        throw this.refusal ?? new Error(`${this.unsent.length} chunks were not acknowledged.`);
      void this.send().catch(() => undefined);
      await delay(20);
    }
  }

  private async chunksOf(attemptId: string, from = 0) {
    const chunks: { index: number; bytes: string; hash: string }[] = [];
    let frames: string[] = [];
    for (let more = true; more;) {
      const page = await this.request<{
        chunks: { index: number; bytes: string; hash: string }[];
        more: boolean;
        frames: string[];
      }>('run:catch-up', { classId: this.classId, attemptId, from: from + chunks.length });
      chunks.push(...page.chunks);
      ({ more, frames } = page);
    }
    return { chunks, frames };
  }

  /** Looks on at an attempt: everything stored first, then the frames. */
  async follow(attemptId: string): Promise<Follower> {
    const spec = await this.spec();
    this.followed = attemptId;
    this.follower = new Follower(createRun(spec), this.run, (difference) => {
      this.differences.push(difference);
      this.request('run:differs', {
        classId: this.classId,
        attemptId,
        tick: difference.tick,
        expected: difference.expected,
        found: difference.found,
      }).catch(() => undefined);
      void this.catchUp(attemptId).catch(() => undefined);
    });
    await this.catchUp(attemptId);
    return this.follower;
  }

  private async catchUp(attemptId: string): Promise<void> {
    const { follower } = this;
    if (this.catching || follower === null) return;
    this.catching = true;
    this.caughtMs = performance.now();
    try {
      const { chunks, frames } = await this.chunksOf(attemptId);
      const engines = follower.line.run.plant.engineCount;
      follower.clear();
      for (const { bytes } of chunks) {
        const decoded = decodeChunk(Buffer.from(bytes, 'base64'), engines);
        if (decoded.ok) follower.addChunk(decoded.content);
      }
      this.catching = false;
      for (const frame of frames) this.frame({ attemptId, frame });
      for (const news of this.early.splice(0)) this.frame(news);
    } finally {
      this.catching = false;
    }
  }

  private frame(news: { attemptId: string; frame: string }): void {
    if (this.catching) {
      this.early.push(news);
      return;
    }
    const { follower } = this;
    if (follower === null || news.attemptId !== this.followed) return;
    const frame = decodeFrame(news.frame, follower.line.run.plant.engineCount);
    if (frame) follower.addFrame(frame);
    if (follower.gap && performance.now() - this.caughtMs > 500)
      void this.catchUp(news.attemptId).catch(() => undefined);
  }

  /** One picture's worth of work. */
  step(): void {
    const serverMs = this.serverNow();
    this.flight?.advance(serverMs, this.steer);
    this.follower?.advance(serverMs);
  }

  telemetry(telemetry: Telemetry): void {
    this.socket.emit('run:telemetry', { classId: this.classId, run: this.run.run, telemetry });
  }

  async complete(): Promise<unknown> {
    await this.delivered();
    if (this.flight === null || this.attemptId === null) throw new Error('Nothing was flown.');
    return this.request('run:complete', {
      classId: this.classId,
      attemptId: this.attemptId,
      chunkCount: this.flight.chunkCount,
      ended: this.flight.line.run.ended ?? 'left',
    });
  }

  close(): void {
    this.socket.disconnect();
  }
}

/** Lets some clients work for a time, sixty pictures a second. */
export async function play(clients: readonly ClassClient[], ms: number): Promise<void> {
  const until = performance.now() + ms;
  while (performance.now() < until) {
    for (const client of clients) client.step();
    await delay(16);
  }
}

/** Waits until something is so. */
export async function until(what: () => boolean, withinMs = 5000): Promise<void> {
  const end = performance.now() + withinMs;
  while (!what()) {
    if (performance.now() > end) throw new Error(`Not so within ${withinMs} ms: ${what.toString()}`);
    await delay(10);
  }
}

/** Made-up telemetry of a tick. */
export const telemetryAt = (tick: number): Telemetry => ({
  tick,
  ended: null,
  betaDeg: 1.5,
  wantedBetaDeg: 0,
  ballWidths: 0.1,
  wantedBallWidths: 0,
  pedal: 0.2,
  wantedPedal: 0.3,
  rudderShare: 0.2,
  phiDeg: 1,
  wantedPhiDeg: 2,
  headingDeviationDeg: 0.5,
  iasKt: 88,
  heightFt: 300,
  deadSide: 1,
  peakBetaDeg: 3,
  firstPedalS: 0.8,
  stillS: 0,
  verdict: 'balanced',
});
