import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { classPassSchema, type ClassPass } from '#shared/contracts/classes.ts';
import type { BoardRow } from '#shared/contracts/class-socket.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import { headTickAt, phaseAt } from '#shared/scenario/class-state.ts';
import { ClassClient, play, telemetryAt, until } from '../../support/class-client.ts';
import { startRedis, startServerProcess, type RedisProcess, type ServerProcess } from '../../support/server-process.ts';
import { freshDatabase, openClient } from '../../support/test-server.ts';
import { createConnection } from 'mysql2/promise';

let fresh: Awaited<ReturnType<typeof freshDatabase>>;
let redis: RedisProcess | null = null;
const processes: ServerProcess[] = [];
const clients: ClassClient[] = [];

beforeAll(async () => {
  fresh = await freshDatabase();
  redis = await startRedis();
});
afterAll(async () => {
  for (const client of clients) client.close();
  for (const one of processes) await one.stop();
  await redis?.stop();
  await fresh.drop();
});

async function storedChunks(attemptId: string): Promise<number[]> {
  const connection = await createConnection(fresh.url);
  const [rows] = await connection.query(
    'SELECT chunk_index AS n FROM attempt_chunk WHERE attempt_id = ? ORDER BY chunk_index',
    [attemptId],
  );
  await connection.end();
  return (rows as { n: number }[]).map(({ n }) => n); // a select gives rows
}

async function openClass(
  address: string,
  mode: string,
  /** Fifteen seconds; a class that is held up for longer needs a longer one. */
  scenarioSlug = 'left-engine-cut-after-lift-off',
): Promise<{ pass: ClassPass; http: Awaited<ReturnType<typeof openClient>> }> {
  const http = await openClient(address, 'm.okafor');
  const opened = await http('POST', '/api/classes', {
    json: { title: 'Across', playlist: [{ scenarioSlug }], mode },
  });
  return { pass: classPassSchema.parse(opened.body), http };
}

async function member(address: string, mailbox: string, pass: ClassPass): Promise<ClassClient> {
  const http = await openClient(address, mailbox);
  const joined = await http('POST', '/api/classes/join', { json: { code: pass.joinCode } });
  if (joined.status !== 200) throw new Error(JSON.stringify(joined.body));
  const client = new ClassClient(http, address, pass.classId);
  clients.push(client);
  return client.connect();
}

const everyAcknowledgedIsStored = async (client: ClassClient): Promise<void> => {
  for (const attemptId of new Set(client.acknowledged.map((one) => one.attemptId))) {
    const stored = new Set(await storedChunks(attemptId));
    const lost = client.acknowledged.filter((one) => one.attemptId === attemptId && !stored.has(one.index));
    expect(lost).toEqual([]);
  }
};

describe('two processes with Redis', () => {
  it('serve one class: same state on both, board, presence; a killed one loses nothing', async (context) => {
    if (redis === null) return context.skip('redis-server is not installed');
    const one = await startServerProcess({ databaseUrl: fresh.url, redisUrl: redis.url });
    const two = await startServerProcess({ databaseUrl: fresh.url, redisUrl: redis.url });
    processes.push(one, two);
    const { pass, http } = await openClass(one.address, 'demonstration');
    const instructor = await new ClassClient(http, one.address, pass.classId).connect();
    clients.push(instructor);
    const here: string[] = [];
    instructor.socket.on('class:presence', ({ member: id, here: is }) => void here.push(`${id} ${is}`));
    const trainee = await member(two.address, 'j.lindqvist', pass);
    await until(() => here.includes(`${trainee.member} true`));
    const rows: BoardRow[] = [];
    instructor.socket.on('board:rows', (news) => void rows.push(...news.rows));
    await instructor.request('board:follow', { classId: pass.classId, follow: true });

    await instructor.control({ deed: 'start', countdownS: 0.3 });
    await until(() => trainee.state.run !== null);
    const flight = await instructor.takeControls(true);
    const seen = await trainee.follow(instructor.run.attempt ?? '');
    await play([instructor, trainee], 2000);
    trainee.telemetry(telemetryAt(120));
    await until(() => rows.some(({ member: id, telemetry }) => id === trainee.member && telemetry.tick === 120));
    flight.line.standAt(seen.line.run.tick);
    expect(seen.line.run.tick).toBeGreaterThan(100);
    expect(seen.line.run.stateHash()).toBe(flight.line.run.stateHash());

    await two.kill();
    await play([instructor], 1500);
    const restarted = two.start();
    await instructor.control({ deed: 'message', text: 'Meanwhile' });
    await play([instructor], 4000);
    await restarted;
    await until(() => trainee.socket.connected && trainee.state.messages.length > 0, 20_000);
    await play([instructor, trainee], 1500);
    flight.line.standAt(seen.line.run.tick);
    expect(seen.line.run.tick).toBeGreaterThan(700);
    expect(seen.line.run.stateHash()).toBe(flight.line.run.stateHash());
    expect(trainee.differences).toEqual([]);

    await redis.restart();
    await instructor.control({ deed: 'message', text: 'Without Redis for a moment' });
    await until(() => trainee.state.messages.length > 1, 10_000);

    await one.kill();
    await play([instructor, trainee], 800);
    const again = one.start();
    await play([instructor, trainee], 3000);
    await again;
    await until(() => instructor.socket.connected, 20_000);
    await play([instructor, trainee], 2000);
    await instructor.control({ deed: 'stop' });
    await play([instructor, trainee], 500);
    expect(await instructor.complete()).toMatchObject({ result: { statesAgree: true } });
    await everyAcknowledgedIsStored(instructor);
    expect(instructor.acknowledged.length).toBeGreaterThan(8);
    expect(trainee.entries.map(({ seq }) => seq)).toEqual(trainee.entries.map((_, i) => i + 1));
  }, 120_000);
});

describe('one process without Redis', () => {
  it('killed in the middle of a run: browsers come back by themselves, the class goes on at the right time', async () => {
    const one = await startServerProcess({ databaseUrl: fresh.url });
    processes.push(one);
    const { pass, http } = await openClass(one.address, 'everyone-flies', 'rudder-ratio-stuck');
    const instructor = await new ClassClient(http, one.address, pass.classId).connect();
    clients.push(instructor);
    const trainee = await member(one.address, 'j.lindqvist', pass);
    await instructor.control({ deed: 'start', countdownS: 0.3 });
    await until(() => trainee.state.run !== null);
    const flight = await trainee.takeControls(false);
    await play([trainee], 2200);
    for (let kill = 1; kill <= 2; kill += 1) {
      await one.kill();
      const back = one.start();
      await play([trainee], 3000);
      await back;
      await until(() => trainee.socket.connected && instructor.socket.connected, 20_000);
      await play([trainee], 500);
    }
    // What a busy machine holds up is flown in one picture, at most four seconds of the class clock at a time; what is then
    // left is the error of two measurements of the clock, half of a round trip each, and the rounding of a tick.
    expect(phaseAt(instructor.run, instructor.serverNow())).toBe('running');
    for (let behind = Infinity; behind > 0;) behind = flight.advance(trainee.serverNow(), trainee.steer);
    const late = Math.abs(flight.line.head - headTickAt(instructor.run, instructor.serverNow()));
    expect(late).toBeLessThanOrEqual(2 + ((trainee.roundTripMs + instructor.roundTripMs) / 2) * (TICK_RATE_HZ / 1000));
    await instructor.control({ deed: 'freeze' });
    await play([trainee], 600);
    await instructor.control({ deed: 'stop' });
    await play([trainee], 300);
    expect(await trainee.complete()).toMatchObject({ result: { statesAgree: true } });
    await everyAcknowledgedIsStored(trainee);
  }, 120_000);
});
