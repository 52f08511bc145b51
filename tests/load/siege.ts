/** A small class that goes on whatever happens to its servers, and an account of what was lost. */
import { randomUUID } from 'node:crypto';
import { setTimeout as delay } from 'node:timers/promises';
import type { ClassPass } from '#shared/contracts/classes.ts';
import type { ClassEntry } from '#shared/scenario/class-log.ts';
import { headTickAt } from '#shared/scenario/class-state.ts';
import { ClassClient, until } from '../support/class-client.ts';
import { openClient } from '../support/test-server.ts';
import type { LoadProduct } from './crowd.ts';

const SCENARIO = 'rudder-ratio-stuck';

export interface Loss {
  entriesAcknowledged: number;
  entriesLost: number;
  chunksAcknowledged: number;
  chunksLost: number;
  attemptsThatDisagree: number;
  membersWithAnotherLog: number;
  differences: number;
}

export class Siege {
  readonly trainees: ClassClient[] = [];
  private readonly acknowledged: ClassEntry[] = [];
  private stopped = false;
  private loops: Promise<void>[] = [];

  private constructor(
    readonly product: LoadProduct,
    readonly pass: ClassPass,
    readonly instructor: ClassClient,
    private readonly random: () => number,
  ) {}

  /** Opens a class of some trainees, each at one of the addresses in turn, and starts it. */
  static async begin(
    product: LoadProduct,
    instructorAt: string,
    traineesAt: readonly string[],
    random: () => number,
    clockErrorsMs: readonly number[] = [],
  ): Promise<Siege> {
    const home = product.server.address;
    const http = await openClient(home, 'm.okafor');
    const opened = await http('POST', '/api/classes', {
      json: { title: 'Siege', playlist: [{ scenarioSlug: SCENARIO }], mode: 'everyone-flies', seats: 12 },
    });
    const pass = opened.body as ClassPass; // the server's own answer
    const instructor = new ClassClient(http, instructorAt, pass.classId);
    await instructor.connect();
    const siege = new Siege(product, pass, instructor, random);
    const mailboxes = ['j.lindqvist', 'a.bauer', 's.chandran'];
    for (const [i, mailbox] of mailboxes.entries()) {
      const own = await openClient(home, mailbox);
      await own('POST', '/api/classes/join', { json: { code: pass.joinCode } });
      const client = new ClassClient(own, traineesAt[i % traineesAt.length], pass.classId, clockErrorsMs[i] ?? 0);
      siege.trainees.push(await client.connect());
    }
    await siege.start();
    return siege;
  }

  private async start(): Promise<void> {
    await this.surely(() => this.instructor.control({ deed: 'start', countdownS: 1 }));
    const run = this.instructor.run.run;
    await until(() => this.trainees.every(({ state }) => state.run?.run === run), 20_000);
    for (const one of this.trainees) {
      one.flight = null;
      await one.takeControls(false);
    }
  }

  /** Lets everybody fly and the instructor press keys until `work` is done. */
  async during(work: Promise<unknown>): Promise<void> {
    this.stopped = false;
    this.loops = [this.fly(), this.press()];
    await work;
    this.stopped = true;
    await Promise.all(this.loops);
  }

  private async fly(): Promise<void> {
    while (!this.stopped) {
      for (const one of this.trainees) one.step();
      await delay(16);
    }
  }

  private async press(): Promise<void> {
    while (!this.stopped) {
      await delay(200 + 600 * this.random());
      const dice = this.random();
      const deed =
        dice < 0.5
          ? ({ deed: 'message', text: `Message ${Math.floor(1e6 * this.random())}`, to: null } as const)
          : dice < 0.7
            ? ({ deed: 'freeze' } as const)
            : ({ deed: 'resume' } as const);
      const key = randomUUID();
      await this.surely(() => this.instructor.control(deed, key));
    }
  }

  /** As a browser does it: the same press again until it is answered. */
  private async surely(press: () => Promise<{ entries: ClassEntry[] }>): Promise<void> {
    for (let tries = 0; tries < 200; tries += 1) {
      try {
        const { entries } = await press();
        this.acknowledged.push(...entries);
        return;
      } catch {
        if (this.stopped && !this.instructor.socket.connected) return;
        await delay(150);
      }
    }
    throw new Error('A press was never answered.');
  }

  /** Ends the run, completes every attempt and counts what is missing. */
  async account(): Promise<Loss> {
    const everybody = [this.instructor, ...this.trainees];
    await until(() => everybody.every(({ socket }) => socket.connected), 60_000);
    await this.surely(() => this.instructor.control({ deed: 'stop' }));
    const seq = this.acknowledged.at(-1)?.seq ?? 0;
    await until(() => everybody.every(({ state }) => state.seq >= seq), 30_000);
    let disagree = 0;
    for (const one of this.trainees) {
      one.step();
      await one.delivered(60_000);
      const { result } = (await one.complete()) as { result: { statesAgree: boolean } }; // the contract's answer
      if (!result.statesAgree) disagree += 1;
    }
    const { sql } = this.product;
    const rows = await sql('SELECT seq, body FROM class_entry WHERE class_id = ?', [this.pass.classId]);
    const stored = new Map(rows.map((row) => [Number(row['seq']), textOf(row['body'])]));
    const entriesLost = this.acknowledged.filter(({ seq: n, kind }) => !stored.get(n)?.includes(`"${kind}"`)).length;
    const chunkRows = await sql('SELECT attempt_id, chunk_index FROM attempt_chunk');
    const chunks = new Set(chunkRows.map((row) => `${String(row['attempt_id'])} ${String(row['chunk_index'])}`));
    const sent = this.trainees.flatMap(({ acknowledged }) => acknowledged);
    const log = (one: ClassClient): string => one.entries.map(({ seq: n, kind }) => `${n}${kind}`).join();
    return {
      entriesAcknowledged: this.acknowledged.length,
      entriesLost,
      chunksAcknowledged: sent.length,
      chunksLost: sent.filter(({ attemptId, index }) => !chunks.has(`${attemptId} ${index}`)).length,
      attemptsThatDisagree: disagree,
      membersWithAnotherLog: this.trainees.filter((one) => log(one) !== log(this.instructor)).length,
      differences: this.trainees.reduce((sum, { differences }) => sum + differences.length, 0),
    };
  }

  /** How far the aeroplanes are from where the class clock is, ticks. */
  lateness(): number {
    for (const one of this.trainees) one.step();
    const head = headTickAt(this.instructor.run, this.instructor.serverNow());
    return Math.max(...this.trainees.map(({ flight }) => Math.abs((flight?.line.head ?? 0) - head)));
  }
  close(): void {
    for (const one of [this.instructor, ...this.trainees]) one.close();
  }
}

const textOf = (body: unknown): string => (typeof body === 'string' ? body : JSON.stringify(body));
