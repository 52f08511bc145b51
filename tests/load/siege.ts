/** A small class that goes on whatever happens to its servers, and an account of what was lost. */
import { randomUUID } from 'node:crypto';
import { setTimeout as delay } from 'node:timers/promises';
import type { ClassControl } from '#shared/contracts/class-socket.ts';
import { classPassSchema, type ClassPass } from '#shared/contracts/classes.ts';
import type { ClassEntry } from '#shared/scenario/class-log.ts';
import type { Deed } from '../../src/features/class/class-session.ts';
import { request } from '../../src/services/class-socket.ts';
import { until } from '../support/class-client.ts';
import { openClient } from '../support/test-server.ts';
import type { LoadProduct } from './crowd.ts';
import { publishLongScenario } from './long-scenario.ts';
import { Member } from './member.ts';

export interface Loss {
  entriesAcknowledged: number;
  entriesLost: number;
  chunksAcknowledged: number;
  chunksLost: number;
  attemptsThatDisagree: number;
  /** Attempts without a result. */
  attemptsMissing: number;
  membersWithAnotherLog: number;
  differences: number;
  /** Furthest that an aeroplane is from the class clock of the instructor's browser, ticks. */
  latenessTicks: number;
  /** Seconds of the class clock at the end. */
  runS: number;
}

const MAILBOXES = ['j.lindqvist', 'a.bauer', 's.chandran'];

export class Siege {
  readonly trainees: Member[] = [];
  private readonly acknowledged: ClassEntry[] = [];
  private stopped = false;
  private loops: Promise<void>[] = [];

  private constructor(
    readonly product: LoadProduct,
    readonly pass: ClassPass,
    readonly instructor: Member,
    private readonly random: () => number,
  ) {}

  /** Opens a class of three trainees, each at one of the addresses in turn, and starts it. */
  static async begin(
    product: LoadProduct,
    instructorAt: string,
    traineesAt: readonly string[],
    random: () => number,
    clockErrorsMs: readonly number[] = [],
  ): Promise<Siege> {
    const home = product.server.address;
    const http = await openClient(home, 'm.okafor');
    const scenarioSlug = await publishLongScenario(http);
    const opened = await http('POST', '/api/classes', {
      json: { title: 'Siege', playlist: [{ scenarioSlug }], mode: 'everyone-flies', seats: 12 },
    });
    const pass = classPassSchema.parse(opened.body);
    const siege = new Siege(product, pass, new Member(http, instructorAt, pass.classId), random);
    siege.instructor.session.open();
    for (const [i, mailbox] of MAILBOXES.entries()) {
      const own = await openClient(home, mailbox);
      await own('POST', '/api/classes/join', { json: { code: pass.joinCode } });
      const member = new Member(own, traineesAt[i % traineesAt.length], pass.classId, clockErrorsMs[i] ?? 0);
      member.session.open();
      siege.trainees.push(member);
    }
    await until(() => siege.everybody.every(({ session }) => session.inside), 30_000);
    await siege.surely({ deed: 'start', countdownS: 1 });
    await until(() => siege.trainees.every(({ session }) => session.run !== null), 20_000);
    for (const { session } of siege.trainees) await session.takeControls();
    return siege;
  }

  get everybody(): Member[] {
    return [this.instructor, ...this.trainees];
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
      this.picture();
      await delay(16);
    }
  }

  private picture(): void {
    for (const one of this.trainees) {
      one.step();
      void one.session.send();
    }
  }

  private async press(): Promise<void> {
    while (!this.stopped) {
      await delay(200 + 600 * this.random());
      const dice = this.random();
      if (dice < 0.6) await this.surely({ deed: 'message', text: `Message ${Math.floor(1e6 * this.random())}` });
      else await this.surely(dice < 0.7 ? { deed: 'freeze' } : { deed: 'resume' });
    }
  }

  /** The same press again until it is answered; a deed is done once, however often it is sent. */
  private async surely(deed: Deed): Promise<void> {
    const body = { classId: this.pass.classId, key: randomUUID(), ...deed } as ClassControl; // a deed with class and key
    for (let tries = 0; tries < 200; tries += 1) {
      try {
        if (!this.instructor.session.inside) throw new Error('away');
        const { entries } = await request(this.instructor.socket, 'class:control', body);
        this.acknowledged.push(...entries);
        return;
      } catch {
        await delay(150);
      }
    }
    throw new Error('A press was never answered.');
  }

  private lateness(): number {
    const each = this.trainees.flatMap((one) => one.lateness(() => this.instructor.session.serverNow()) ?? []);
    return each.length === 0 ? Number.NaN : Math.max(...each);
  }

  /** Ends the run, lets every attempt be completed and counts what is missing. */
  async account(): Promise<Loss> {
    await until(() => this.everybody.every(({ session }) => session.inside), 60_000);
    await this.surely({ deed: 'resume' });
    // Some seconds for what was missed meanwhile to be flown.
    const settled = performance.now() + 4000;
    while (performance.now() < settled) {
      this.picture();
      await delay(16);
    }
    const latenessTicks = this.lateness();
    const attempts = this.trainees.map(({ session }) => session.attemptId);
    await this.surely({ deed: 'stop' });
    const seq = this.acknowledged.at(-1)?.seq ?? 0;
    await until(() => this.everybody.every(({ session }) => session.state.seq >= seq), 30_000);
    const end = performance.now() + 60_000;
    while (this.trainees.some(({ agreed }) => agreed.length === 0) && performance.now() < end) {
      this.picture();
      await delay(50);
    }
    const { sql } = this.product;
    const rows = await sql('SELECT seq, body FROM class_entry WHERE class_id = ?', [this.pass.classId]);
    const stored = new Map(rows.map((row) => [Number(row['seq']), entryOf(row['body'])]));
    const entriesLost = this.acknowledged.filter((entry) => !isSame(entry, stored.get(entry.seq))).length;
    const chunkRows = await sql('SELECT attempt_id, chunk_index FROM attempt_chunk');
    const chunks = new Set(chunkRows.map((row) => `${String(row['attempt_id'])} ${String(row['chunk_index'])}`));
    const sent = this.trainees.flatMap((one) => one.chunks);
    const log = (one: Member): string => one.session.entries.map(({ seq: n, kind }) => `${n}${kind}`).join();
    const complete = await sql("SELECT id FROM attempt WHERE status = 'complete'");
    const results = new Set(complete.map((row) => String(row['id'])));
    return {
      entriesAcknowledged: this.acknowledged.length,
      entriesLost,
      chunksAcknowledged: sent.length,
      chunksLost: sent.filter(({ attemptId, index }) => !chunks.has(`${attemptId} ${index}`)).length,
      attemptsThatDisagree: this.trainees.flatMap(({ agreed }) => agreed).filter((agrees) => !agrees).length,
      attemptsMissing: attempts.filter((id) => id === null || !results.has(id)).length,
      membersWithAnotherLog: this.trainees.filter((one) => log(one) !== log(this.instructor)).length,
      differences: this.everybody.reduce((sum, { differences }) => sum + differences, 0),
      latenessTicks,
      runS: (this.instructor.session.run?.overAt ?? 0) / 120,
    };
  }

  close(): void {
    for (const one of this.everybody) one.close();
  }
}

function entryOf(body: unknown): unknown {
  return typeof body === 'string' ? JSON.parse(body) : body;
}

/** Everything that the acknowledged entry says stands in the stored one. */
function isSame(entry: ClassEntry, stored: unknown): boolean {
  if (typeof stored !== 'object' || stored === null) return false;
  return Object.entries(entry).every(
    ([key, value]) => JSON.stringify(Reflect.get(stored, key)) === JSON.stringify(value),
  );
}
