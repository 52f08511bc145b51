import { setTimeout as delay } from 'node:timers/promises';
import { io } from 'socket.io-client';
import type { AttemptHold } from '#shared/contracts/class-socket.ts';
import { createChunkWriter } from '../../load/chunk-writer.ts';
import { gatherCrowd, openLoadClass, request, startLoadProduct, takeAttempt } from '../../load/crowd.ts';
import { telemetryAt, until } from '../../support/class-client.ts';
import { openClient } from '../../support/test-server.ts';
import { defineBench, quantile, type BenchContext } from '../harness.ts';
import { startRelay } from '../kernels/relay-process.ts';

const TRAINEES = 300;
const TELEMETRY_HZ = 10;
const SECONDS = 12;
const BARE_SECONDS = 5;
const SIGN_INS = 60;
const GOAL_BOARD_MS = 150;
const GOAL_LOOP_MS = 50;

/** Telemetry of three hundred with durable chunks, while sixty people sign in; beside a bare relay of the same telemetry. */
export default defineBench({
  name: 'board-300',
  claim: `${TRAINEES} trainees at ${TELEMETRY_HZ} Hz telemetry and a durable chunk a second each, while ${SIGN_INS} sign in`,
  async run({ note, cleanUp }) {
    const bare = await bareRelay(cleanUp);
    const { server, sql } = await startLoadProduct(cleanUp);
    const setup = { mode: 'everyone-flies', seats: TRAINEES, scenario: 'engine-cut-in-the-climb' } as const;
    const { pass, instructor } = await openLoadClass(server.address, setup, cleanUp);
    const { classId } = pass;
    const crowd = await gatherCrowd(server.address, pass, TRAINEES, cleanUp);
    await instructor.request('board:follow', { classId, follow: true });
    await instructor.control({ deed: 'start', countdownS: 1 });
    await until(() => instructor.state.run !== null);
    const takenFrom = performance.now();
    const holds: AttemptHold[] = await Promise.all(crowd.map((one) => takeAttempt(one, classId, 1)));
    note(`${TRAINEES} attempts began in ${((performance.now() - takenFrom) / 1000).toFixed(1)} s`);

    const sentAt = new Map<string, number>();
    const boardMs: number[] = [];
    instructor.socket.on('board:rows', ({ rows }) => {
      for (const { member, telemetry } of rows) {
        const at = sentAt.get(`${member} ${telemetry.tick}`);
        if (at !== undefined) boardMs.push(performance.now() - at);
      }
    });
    const writers = holds.map((hold) => createChunkWriter(hold, 2));
    const acknowledged: { attemptId: string; index: number }[] = [];
    const chunkMs: number[] = [];
    const failures: string[] = [];
    const pending: Promise<void>[] = [];
    const sendChunk = async (i: number): Promise<void> => {
      const { attemptId } = holds[i];
      const { index, hash, bytes } = writers[i]();
      const from = performance.now();
      try {
        const body = { classId, attemptId, index, hash, bytes: Buffer.from(bytes).toString('base64') };
        await request(crowd[i].socket, 'run:chunk', body);
        chunkMs.push(performance.now() - from);
        acknowledged.push({ attemptId, index });
      } catch (error) {
        failures.push(error instanceof Error ? error.message : String(error));
      }
    };

    await delay(1500);
    await server.loopDelay();
    const cpuFrom = server.cpuS();
    const from = performance.now();
    const signIns = signInAll(server.address);
    const steps = SECONDS * TELEMETRY_HZ;
    for (let step = 0; step < steps; step += 1) {
      // Each trainee at a moment of their own within the tenth, each tenth of them a chunk.
      for (let part = 0; part < TELEMETRY_HZ; part += 1) {
        for (let i = part; i < TRAINEES; i += TELEMETRY_HZ) {
          sentAt.set(`${crowd[i].member} ${step}`, performance.now());
          crowd[i].socket.emit('run:telemetry', { classId, run: 1, telemetry: telemetryAt(step) });
          if (step % TELEMETRY_HZ === part) pending.push(sendChunk(i));
        }
        const due = from + (step + (part + 1) / TELEMETRY_HZ) * (1000 / TELEMETRY_HZ);
        await delay(Math.max(0, due - performance.now()));
      }
    }
    const loop = await server.loopDelay();
    const cpu = (server.cpuS() - cpuFrom) / ((performance.now() - from) / 1000);
    const signInMs = await signIns;
    await Promise.all(pending);
    await delay(500);
    const rows = await sql('SELECT attempt_id, chunk_index FROM attempt_chunk');
    const stored = new Set(rows.map((row) => `${String(row['attempt_id'])} ${String(row['chunk_index'])}`));
    const lost = acknowledged.filter(({ attemptId, index }) => !stored.has(`${attemptId} ${index}`)).length;
    if (failures.length > 0) note(`${failures.length} chunks were refused, first: ${failures[0]}`);
    const p95 = quantile(boardMs, 0.95);
    return {
      value: p95,
      unit: 'ms p95',
      ratio: p95 / bare.p95,
      baseline: `the same rows through a bare socket.io relay: p95 ${bare.p95.toFixed(1)} ms (unbatched), ${(100 * bare.cpu).toFixed(0)} % of a core`,
      goal: `board p95 ≤ ${GOAL_BOARD_MS} ms, loop delay p99 ≤ ${GOAL_LOOP_MS} ms, nothing acknowledged lost`,
      met: p95 <= GOAL_BOARD_MS && loop.p99Ms <= GOAL_LOOP_MS && lost === 0 && failures.length === 0,
      details: [
        { label: 'event-loop delay p99', value: loop.p99Ms, unit: 'ms' },
        { label: 'event-loop delay, largest', value: loop.maxMs, unit: 'ms' },
        { label: 'chunk stored and acknowledged, p95', value: quantile(chunkMs, 0.95), unit: 'ms' },
        { label: 'chunks acknowledged', value: acknowledged.length, unit: '' },
        { label: 'acknowledged chunks lost', value: lost, unit: '' },
        { label: 'rows on the board of those sent', value: (100 * boardMs.length) / (steps * TRAINEES), unit: '%' },
        { label: 'server CPU', value: 100 * cpu, unit: '% of a core' },
        { label: `${SIGN_INS} sign-ins, median`, value: quantile(signInMs, 0.5), unit: 'ms' },
      ],
    };
  },
});

async function signInAll(address: string): Promise<number[]> {
  const times: number[] = [];
  let next = 0;
  const mailboxes = ['j.lindqvist', 'a.bauer', 'h.brandt', 's.chandran'];
  const worker = async (): Promise<void> => {
    while (next < SIGN_INS) {
      const mailbox = mailboxes[next++ % mailboxes.length];
      const from = performance.now();
      await openClient(address, mailbox);
      times.push(performance.now() - from);
    }
  };
  await Promise.all(Array.from({ length: 6 }, worker));
  return times;
}

/** The same telemetry through nothing but socket.io, row by row. */
async function bareRelay(cleanUp: BenchContext['cleanUp']): Promise<{ p95: number; cpu: number }> {
  const relay = await startRelay();
  cleanUp(() => relay.stop());
  const connect = async () => {
    const socket = io(relay.address, { transports: ['websocket'], forceNew: true });
    await new Promise<void>((resolve) => socket.once('connect', () => resolve()));
    return socket;
  };
  const board = await connect();
  board.emit('board');
  const senders = [];
  for (let i = 0; i < TRAINEES; i += 1) senders.push(await connect());
  const times: number[] = [];
  board.on('row', ({ sentMs }: { sentMs: number }) => void times.push(performance.now() - sentMs));
  const cpuFrom = relay.cpuS();
  const from = performance.now();
  for (let step = 0; step < BARE_SECONDS * TELEMETRY_HZ; step += 1) {
    for (let part = 0; part < TELEMETRY_HZ; part += 1) {
      for (let i = part; i < TRAINEES; i += TELEMETRY_HZ) {
        senders[i].emit('row', { member: i, telemetry: telemetryAt(step), sentMs: performance.now() });
      }
      const due = from + (step + (part + 1) / TELEMETRY_HZ) * (1000 / TELEMETRY_HZ);
      await delay(Math.max(0, due - performance.now()));
    }
  }
  const cpu = (relay.cpuS() - cpuFrom) / ((performance.now() - from) / 1000);
  for (const socket of [...senders, board]) socket.disconnect();
  relay.stop();
  return { p95: quantile(times, 0.95), cpu };
}
