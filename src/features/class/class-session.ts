/**
 * One browser in a class: enters, keeps the log, measures the server's clock, flies or looks on, and comes back by
 * itself after a lost connection. Nothing here runs by itself: `step()` is called once a picture.
 */
import type { ClassPass, ClassScenario } from '#shared/contracts/classes.ts';
import type { BoardRow, ClassControl, MemberStatus, PresentedView, Telemetry } from '#shared/contracts/class-socket.ts';
import { ClassFlight } from '#shared/scenario/class-flight.ts';
import { Follower } from '#shared/scenario/class-follow.ts';
import { decodeFrame, fromBase64, toBase64 } from '#shared/scenario/class-frames.ts';
import type { ClassEntry } from '#shared/scenario/class-log.ts';
import { type ClassRun, type ClassState, EMPTY_CLASS, branchesOf, foldEntry } from '#shared/scenario/class-state.ts';
import { type RecordedChunk, decodeChunk } from '#shared/scenario/recording.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { ControlSample, Run, RunSpec } from '#shared/scenario/run-types.ts';
import { type ClassSocket, SocketRefusal, request } from '../../services/class-socket.ts';
import { ServerClock } from './server-clock.ts';

type Without<C> = C extends ClassControl ? Omit<C, 'classId' | 'key'> : never;
/** A deed of the instructor without its class and key. */
export type Deed = Without<ClassControl>;

export interface ClassSessionEvents {
  /** The log, the presence or the connection has changed. */
  changed: () => void;
  board: (run: number, rows: readonly BoardRow[]) => void;
  view: (view: PresentedView) => void;
  closed: (reason: 'removed' | 'ended' | 'replaced') => void;
  /** Something to say in a line. */
  said: (text: string) => void;
  /** After every tick of one's own flight. */
  tick: (run: Run) => void;
}

export interface ClassSessionSetup {
  socket: ClassSocket;
  classId: string;
  scenario: (index: number) => Promise<ClassScenario>;
  newKey: () => string;
  /** Renews the sign-in when it has run out while the connection was away; false when that was in vain. */
  renew: () => Promise<boolean>;
  /** This browser's clock, ms. */
  now?: () => number;
  events: ClassSessionEvents;
}

const RETRY_MS = 400;
/** A press of the instructor is tried again for so long while the connection comes back. */
const PRESS_MS = 6000;
/** Between two tries to come in again where the server answered and refused. */
const AGAIN_MS = 1000;
/** Refusals of entering that stay refusals. */
const FINAL = new Set(['not-a-member', 'class-ended', 'class-full', 'class-locked', 'not-found', 'forbidden']);
const CATCH_UP_EVERY_MS = 500;
/** Passes over the class clock that end a flight whose run is over; each flies a few seconds at the most. */
const LAST_PASSES = 50;
/** Refusals after which the same chunk may yet be taken. */
const PASSING = new Set(['internal', 'unreachable', 'not-a-member', 'throttled', 'unavailable']);

/** A recording of one's own that is not delivered yet; a new run does not wait for it. */
interface Recording {
  attemptId: string;
  flight: ClassFlight;
  unsent: RecordedChunk[];
  /** The server has taken it as whole, or never will. */
  done: boolean;
}

export class ClassSession {
  state: ClassState = EMPTY_CLASS;
  entries: ClassEntry[] = [];
  pass: ClassPass | null = null;
  present = new Set<string>();
  readonly statuses = new Map<string, MemberStatus>();
  view: PresentedView | null = null;
  private again: ReturnType<typeof setTimeout> | null = null;
  /** Entered, with a live connection. */
  inside = false;
  flight: ClassFlight | null = null;
  attemptId: string | null = null;
  follower: Follower | null = null;
  /** Attempt looked on at. */
  followed: string | null = null;
  /** Attempt whose inputs arrive, known before anybody asked for it. */
  heard: string | null = null;
  unacknowledged = 0;
  private readonly scenarios = new Map<number, Promise<ClassScenario>>();
  private recordings: Recording[] = [];
  private sending = false;
  private steer: (sample: ControlSample) => void = () => undefined;
  private catching = false;
  private caughtMs = 0;
  private early: { attemptId: string; frame: string }[] = [];
  private closed = false;
  private taking = false;
  private readonly setup: ClassSessionSetup;
  private readonly clock: ServerClock;

  constructor(setup: ClassSessionSetup) {
    this.setup = setup;
    this.clock = new ServerClock(setup.socket, setup.now);
    const { socket, classId } = setup;
    socket.on('connect', () => {
      if (!this.closed) void this.enter();
    });
    socket.on('disconnect', () => {
      this.inside = false;
      setup.events.changed();
      // Where the server has hung up, the socket does not try again by itself.
      if (!socket.active) this.comeAgain('hung-up');
    });
    socket.on('connect_error', (error) => {
      setup.events.changed();
      if (!socket.active) this.comeAgain(error.message === 'unauthenticated' ? 'unauthenticated' : 'failed');
    });
    socket.on('class:appended', (news) => {
      if (news.classId !== classId) return;
      const letIn = news.entries.some((entry) => entry.kind === 'joined' && entry.member === this.pass?.member);
      // A guest at the door has no log yet: it comes with entering.
      if (this.pass?.admitted === false) {
        if (letIn) void this.enter();
      } else this.take(news.entries);
    });
    socket.on('class:beat', ({ classId: id, seq, serverTimeMs }) => {
      if (id !== classId) return;
      this.clock.hear(serverTimeMs);
      if (seq > this.state.seq) void this.fill();
    });
    socket.on('class:presence', ({ classId: id, member, here }) => {
      if (id !== classId) return;
      if (here) this.present.add(member);
      else this.present.delete(member);
      setup.events.changed();
    });
    socket.on('class:statuses', ({ classId: id, statuses }) => {
      if (id !== classId) return;
      for (const { member, status } of statuses) this.statuses.set(member, status);
      setup.events.changed();
    });
    socket.on('class:closed', ({ classId: id, reason }) => {
      if (id !== classId) return;
      this.closed = true;
      setup.events.closed(reason);
    });
    socket.on('run:inputs', (news) => this.frame(news));
    socket.on('board:rows', ({ classId: id, run, rows }) => {
      if (id === classId) setup.events.board(run, rows);
    });
    socket.on('view:moved', ({ classId: id, view }) => {
      if (id !== classId) return;
      this.view = view;
      setup.events.view(view);
    });
  }

  open(): void {
    this.setup.socket.connect();
  }
  close(): void {
    this.closed = true;
    if (this.again !== null) clearTimeout(this.again);
    this.setup.socket.disconnect();
  }

  /** Comes in again in a moment: connects, or enters where the connection stands. */
  private comeAgain(why: 'failed' | 'hung-up' | 'unauthenticated'): void {
    if (this.closed || this.again !== null) return;
    const inMs = AGAIN_MS * (1 + Math.random());
    this.again = setTimeout(() => {
      this.again = null;
      void this.returnFrom(why);
    }, inMs);
  }

  private async returnFrom(why: 'failed' | 'hung-up' | 'unauthenticated'): Promise<void> {
    const { socket, renew, events } = this.setup;
    if (why !== 'failed') {
      try {
        const signedIn = await renew();
        // A guest has a pass instead, which the handshake looks at.
        if (!signedIn && why === 'unauthenticated') return events.said('Sign in again to come back to this class.');
      } catch {
        return this.comeAgain(why);
      }
    }
    if (this.closed) return;
    if (!socket.connected) socket.connect();
    else if (why === 'unauthenticated') socket.disconnect().connect();
    else void this.enter();
  }

  get run(): ClassRun | null {
    return this.state.run;
  }
  get member(): string {
    return this.pass?.member ?? '';
  }
  serverNow(): number {
    return this.clock.now();
  }
  get roundTripMs(): number {
    return this.clock.roundTripMs;
  }
  /** The aeroplane to draw: one's own, or the one looked on at. */
  get shown(): Run | null {
    return this.follower?.line.run ?? this.flight?.line.run ?? null;
  }

  private request<E extends Parameters<typeof request>[1]>(event: E, body: Parameters<typeof request<E>>[2]) {
    return request(this.setup.socket, event, body);
  }

  async control(deed: Deed): Promise<void> {
    // A deed with its class and key is a control: the union is taken apart and put together again.
    const body = { classId: this.setup.classId, key: this.setup.newKey(), ...deed } as ClassControl;
    const giveUpMs = performance.now() + PRESS_MS;
    for (;;) {
      try {
        if (!this.inside)
          throw new SocketRefusal('unreachable', 'The connection is lost; press again when it is back.');
        const { entries } = await this.request('class:control', body);
        this.take(entries);
        return;
      } catch (error) {
        // The same press has the same key: what was done already is not done twice.
        const passing = error instanceof SocketRefusal && PASSING.has(error.code);
        if (!passing || this.closed || performance.now() > giveUpMs) throw error;
        await new Promise((resolve) => setTimeout(resolve, RETRY_MS));
      }
    }
  }

  async followBoard(follow: boolean): Promise<void> {
    await this.request('board:follow', { classId: this.setup.classId, follow });
  }
  moveView(view: PresentedView): void {
    if (this.inside) this.setup.socket.emit('view:move', { classId: this.setup.classId, view });
  }
  tell(status: MemberStatus): void {
    if (this.inside) this.setup.socket.emit('member:tell', { classId: this.setup.classId, status });
  }
  telemetry(telemetry: Telemetry): void {
    const { run } = this.state;
    if (this.inside && run)
      this.setup.socket.emit('run:telemetry', { classId: this.setup.classId, run: run.run, telemetry });
  }
  async leave(): Promise<void> {
    await this.request('class:leave', { classId: this.setup.classId });
    this.close();
  }

  private async enter(): Promise<void> {
    try {
      await this.clock.measure();
      const entered = await this.request('class:enter', { classId: this.setup.classId, since: this.state.seq });
      this.pass = entered.pass;
      this.inside = entered.pass.admitted;
      this.present = new Set(entered.present);
      for (const { member, status } of entered.statuses) this.statuses.set(member, status);
      if (entered.view) {
        this.view = entered.view;
        this.setup.events.view(entered.view);
      }
      this.take(entered.entries);
      if (this.followed !== null) await this.catchUp(this.followed);
      void this.send();
    } catch (error) {
      const code = error instanceof SocketRefusal ? error.code : 'internal';
      if (code === 'not-a-member') this.setup.events.closed('removed');
      if (FINAL.has(code))
        this.setup.events.said(error instanceof Error ? error.message : 'The class cannot be entered.');
      else this.comeAgain(code === 'unauthenticated' ? 'unauthenticated' : 'failed');
    }
    this.setup.events.changed();
  }

  private take(entries: readonly ClassEntry[]): void {
    for (const entry of entries) {
      if (entry.seq <= this.state.seq) continue;
      if (entry.seq !== this.state.seq + 1) {
        void this.fill();
        return;
      }
      const before = this.state.run?.run ?? 0;
      this.state = foldEntry(this.state, entry);
      this.entries.push(entry);
      if (entry.kind === 'over' || entry.kind === 'ended') this.endFlight();
      if ((this.state.run?.run ?? 0) !== before) this.newRun();
      if (entry.kind === 'shown' || entry.kind === 'controls') this.heard = null;
      if (entry.kind === 'removed' && entry.member === this.member) this.inside = false;
      if (entry.kind === 'joined' && entry.member === this.member && this.pass)
        this.pass = { ...this.pass, admitted: true };
    }
    const { run } = this.state;
    if (run) {
      this.flight?.update(run);
      this.follower?.update(run, this.serverNow());
    }
    this.setup.events.changed();
  }

  /** The run is over: what was flown up to there is recorded before anything else begins. */
  private endFlight(): void {
    const { run } = this.state;
    if (!run || !this.flight) return;
    this.flight.update(run);
    for (let pass = 0; pass < LAST_PASSES && !this.flight.finished; pass += 1)
      this.flight.advance(this.serverNow(), this.steer);
  }

  private newRun(): void {
    this.flight = null;
    this.follower = null;
    this.followed = null;
    this.heard = null;
    this.attemptId = null;
    this.early = [];
  }

  private async fill(): Promise<void> {
    try {
      const { entries } = await this.request('class:entries', { classId: this.setup.classId, since: this.state.seq });
      this.take(entries);
    } catch {
      // The next beat asks again.
    }
  }

  scenarioOf(index: number): Promise<ClassScenario> {
    let known = this.scenarios.get(index);
    if (!known) {
      known = this.setup.scenario(index);
      known.catch(() => this.scenarios.delete(index));
      this.scenarios.set(index, known);
    }
    return known;
  }

  private async spec(run: ClassRun): Promise<RunSpec> {
    const { scenario, airframe } = await this.scenarioOf(run.index);
    return { scenario, airframe: airframe.airframe, seed: run.seed, drawn: run.drawn, branches: branchesOf(run) };
  }

  /** Takes the controls of the present run: one's own aeroplane, or the demonstration's while one has them. */
  async takeControls(): Promise<ClassFlight | null> {
    const { run } = this.state;
    if (!run || this.taking || this.flight) return this.flight;
    this.taking = true;
    try {
      const { classId } = this.setup;
      const hold = await this.request('run:take', { classId, run: run.run });
      const { chunks } = await this.chunksOf(hold.attemptId);
      const spec = await this.spec(run);
      const engines = spec.airframe.engines.length;
      const recorded = chunks.slice(0, hold.nextIndex).flatMap(({ bytes }) => {
        const raw = fromBase64(bytes);
        const decoded = raw ? decodeChunk(raw, engines) : null;
        return decoded?.ok ? [decoded.content] : [];
      });
      if (this.state.run?.run !== run.run) return null;
      const before = this.followed === hold.attemptId ? this.follower : null;
      const from = this.state.run.controls.at(-1)?.tick ?? 0;
      this.attemptId = hold.attemptId;
      const unsent: RecordedChunk[] = [];
      const flight = new ClassFlight({
        run: createRun(spec),
        classRun: this.state.run,
        member: this.member,
        hold,
        recorded,
        flown: (line) => {
          if (!before) return;
          const sample = line.run.neutralSample();
          for (let tick = line.head; tick < Math.min(from, before.line.head); tick += 1) {
            before.line.sampleInto(sample, tick);
            line.add(sample);
          }
        },
        events: {
          chunk: (chunk) => {
            unsent.push(chunk);
            void this.send();
          },
          frame: (frame) => {
            // What is lost while the connection is away comes with the chunks.
            if (this.inside) this.setup.socket.emit('run:inputs', { classId, attemptId: hold.attemptId, frame });
          },
          tick: (flown) => this.setup.events.tick(flown),
          stands: (tick) => {
            this.request('run:stands', { classId, run: run.run, tick }).catch(() => undefined);
          },
        },
      });
      this.flight = flight;
      this.recordings.push({ attemptId: hold.attemptId, flight, unsent, done: false });
      this.follower = null;
      this.followed = null;
      this.setup.events.changed();
      return this.flight;
    } finally {
      this.taking = false;
    }
  }

  /** Lets go of the controls: another has them now. */
  dropControls(): void {
    this.flight = null;
  }

  /** Sends what is recorded, chunk by chunk, and says so when a recording is whole. */
  async send(): Promise<void> {
    if (this.sending || !this.inside) return;
    this.sending = true;
    try {
      for (const recording of [...this.recordings]) {
        await this.deliver(recording);
        if (recording.done) this.recordings = this.recordings.filter((one) => one !== recording);
      }
    } catch {
      setTimeout(() => void this.send(), RETRY_MS);
    } finally {
      this.sending = false;
      this.unacknowledged = this.recordings.reduce((sum, { unsent }) => sum + unsent.length, 0);
    }
  }

  private async deliver(recording: Recording): Promise<void> {
    const { classId } = this.setup;
    const { attemptId, flight, unsent } = recording;
    try {
      while (unsent.length > 0) {
        const [{ index, hash, bytes }] = unsent;
        await this.request('run:chunk', { classId, attemptId, index, hash, bytes: toBase64(bytes) });
        unsent.shift();
      }
      if (!flight.finished || this.runIsOpen(attemptId)) return;
      const ended = flight.line.run.ended ?? 'left';
      await this.request('run:complete', { classId, attemptId, chunkCount: flight.chunkCount, ended });
      recording.done = true;
    } catch (error) {
      if (!(error instanceof SocketRefusal) || PASSING.has(error.code)) throw error;
      // Whoever takes the controls later records what this flight did not deliver; the server completes what is left behind.
      recording.done = true;
      if (error.code === 'chunk-refused')
        this.setup.events.said(`A second of this flight was refused: ${error.message}`);
    }
  }

  /** Whether an attempt belongs to the run in progress, which may still be rewound. */
  private runIsOpen(attemptId: string): boolean {
    return this.attemptId === attemptId && this.state.run?.overAt === null;
  }

  private async chunksOf(attemptId: string) {
    const chunks: { bytes: string }[] = [];
    let frames: string[] = [];
    for (let more = true; more;) {
      const page = await this.request('run:catch-up', {
        classId: this.setup.classId,
        attemptId,
        from: chunks.length,
      });
      chunks.push(...page.chunks);
      ({ more, frames } = page);
    }
    return { chunks, frames };
  }

  /** Looks on at an attempt: everything stored first, then the frames. */
  async follow(attemptId: string): Promise<void> {
    const { run } = this.state;
    if (!run || this.followed === attemptId) return;
    this.followed = attemptId;
    const spec = await this.spec(run);
    if (this.followed !== attemptId || !this.state.run) return;
    this.follower = new Follower(createRun(spec), this.state.run, (difference) => {
      this.setup.events.said('This picture differed from the one flown and was built again.');
      this.request('run:differs', {
        classId: this.setup.classId,
        attemptId,
        tick: difference.tick,
        expected: difference.expected,
        found: difference.found,
      }).catch(() => undefined);
      void this.catchUp(attemptId);
    });
    await this.catchUp(attemptId);
    this.setup.events.changed();
  }
  stopFollowing(): void {
    this.follower = null;
    this.followed = null;
  }

  private async catchUp(attemptId: string): Promise<void> {
    const { follower } = this;
    if (this.catching || !follower) return;
    this.catching = true;
    this.caughtMs = performance.now();
    try {
      const { chunks, frames } = await this.chunksOf(attemptId);
      const engines = follower.line.run.plant.engineCount;
      follower.clear();
      for (const { bytes } of chunks) {
        const raw = fromBase64(bytes);
        const decoded = raw ? decodeChunk(raw, engines) : null;
        if (decoded?.ok) follower.addChunk(decoded.content);
      }
      this.catching = false;
      for (const frame of frames) this.frame({ attemptId, frame });
      for (const news of this.early.splice(0)) this.frame(news);
    } catch {
      // Asked again with the next frame that leaves a gap, or at the next entering.
    } finally {
      this.catching = false;
    }
  }

  private frame(news: { attemptId: string; frame: string }): void {
    if (this.heard !== news.attemptId) {
      this.heard = news.attemptId;
      this.setup.events.changed();
    }
    if (this.catching) {
      if (this.early.length < 400) this.early.push(news);
      return;
    }
    const { follower } = this;
    if (!follower || news.attemptId !== this.followed) return;
    const frame = decodeFrame(news.frame, follower.line.run.plant.engineCount);
    if (frame) follower.addFrame(frame);
    // The chunks that fill a gap are stored within a second: asking at every frame would only be refused.
    if (follower.gap && performance.now() - this.caughtMs > CATCH_UP_EVERY_MS) void this.catchUp(news.attemptId);
  }

  /** One picture's worth of work; `steer` fills in what the pilot holds. */
  step(steer: (sample: ControlSample) => void): void {
    const serverMs = this.serverNow();
    this.steer = steer;
    this.flight?.advance(serverMs, steer);
    this.follower?.advance(serverMs);
  }
}
