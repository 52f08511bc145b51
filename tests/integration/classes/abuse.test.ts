/** A trainee who sends what no browser sends, while the others are in the middle of a demonstration. */
import { randomUUID } from 'node:crypto';
import { io, type Socket } from 'socket.io-client';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { classPassSchema, type ClassPass } from '#shared/contracts/classes.ts';
import { encodeFrame } from '#shared/scenario/class-frames.ts';
import { ClassClient, play, SocketRefusal, telemetryAt, until } from '../../support/class-client.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let pass: ClassPass;
let instructor: ClassClient;
let viewer: ClassClient;
let badHttp: Client;
const sockets: { disconnect(): unknown }[] = [];

const enter = async (http: Client): Promise<ClassClient> => {
  const made = new ClassClient(http, server.address, pass.classId);
  sockets.push(made.socket);
  return made.connect();
};
const codeOf = (work: Promise<unknown>): Promise<string> =>
  work.then(
    () => 'ok',
    (error: unknown) => (error instanceof SocketRefusal ? error.code : String(error)),
  );
const lineOf = ({ flight }: ClassClient) => flight?.line;
const raw = (): Socket => {
  const socket = io(server.address, {
    transports: ['websocket'],
    extraHeaders: { cookie: badHttp.cookie(), origin: server.address },
    forceNew: true,
    reconnection: false,
  });
  sockets.push(socket);
  return socket;
};
/** The class goes on exactly: the viewer has the instructor's state, nobody differed, the log grew by nothing unasked. */
async function unharmed(): Promise<void> {
  await play([instructor, viewer], 700);
  const { flight } = instructor;
  const seen = viewer.follower?.line;
  if (!flight || !seen) throw new Error('The demonstration is not on.');
  flight.line.standAt(seen.run.tick);
  expect(seen.run.tick).toBeGreaterThan(60);
  expect(seen.run.stateHash()).toBe(flight.line.run.stateHash());
  expect([viewer.differences, instructor.state.differences]).toEqual([[], 0]);
  expect(await codeOf(viewer.request('class:entries', { classId: pass.classId, since: viewer.state.seq }))).toBe('ok');
}
const refusedSoFar = async (): Promise<number> => {
  const [row] = await server.sql('SELECT refused FROM live_class WHERE id = ?', [pass.classId]);
  return Number(row['refused']);
};

beforeAll(async () => {
  server = await startTestServer();
  const [instructorHttp, viewerHttp, bad] = await Promise.all(
    ['m.okafor', 'j.lindqvist', 'a.bauer'].map((mailbox) => server.client(mailbox)),
  );
  badHttp = bad;
  const json = { title: 'Besieged', playlist: [{ scenarioSlug: 'rudder-ratio-stuck' }], seats: 6 };
  pass = classPassSchema.parse((await instructorHttp('POST', '/api/classes', { json })).body);
  for (const http of [viewerHttp, badHttp]) await http('POST', '/api/classes/join', { json: { code: pass.joinCode } });
  instructor = await enter(instructorHttp);
  viewer = await enter(viewerHttp);
  await instructor.control({ deed: 'start', countdownS: 0.3 });
  await until(() => viewer.state.run !== null);
  await instructor.takeControls(true);
  await viewer.follow(instructor.run.attempt ?? '');
  await play([instructor, viewer], 1500);
});
afterAll(async () => {
  for (const socket of sockets) socket.disconnect();
  await server.close();
});

describe('a trainee who forges', () => {
  it('can do none of the instructor’s deeds, and none of them leaves a trace in the log', async () => {
    const bad = await enter(badHttp);
    const before = instructor.state.seq;
    const deeds = [
      { deed: 'start' },
      { deed: 'restart' },
      { deed: 'stop' },
      { deed: 'freeze' },
      { deed: 'rate', rate: 0.5 },
      { deed: 'rewind', tick: 0 },
      { deed: 'branch', tick: 10 },
      { deed: 'inject', event: { lane: 'engines', kind: 'engine-failure', engine: 'left', at: { time_s: 0 } } },
      { deed: 'show', member: bad.member },
      { deed: 'controls', member: bad.member },
      { deed: 'remove', member: viewer.member },
      { deed: 'options', options: { locked: true } },
      { deed: 'message', text: 'I am the instructor' },
      { deed: 'end' },
    ] as const;
    for (const deed of deeds) expect(await codeOf(bad.control(deed)), deed.deed).toBe('forbidden');
    const { classId } = pass;
    const run = instructor.run.run;
    expect(await codeOf(bad.request('run:stands', { classId, run, tick: 100 }))).toBe('not-your-controls');
    expect(await codeOf(bad.request('run:take', { classId, run }))).toBe('not-your-controls');
    const attemptId = instructor.run.attempt;
    const chunk = { classId, attemptId, index: 0, hash: '0'.repeat(16), bytes: 'AAAA' };
    expect(await codeOf(bad.request('run:chunk', chunk))).toBe('not-your-controls');
    expect(instructor.state.seq).toBe(before);
    await unharmed();
  });

  it('sends well-formed frames of another’s aeroplane: nobody gets them, they are counted', async () => {
    const bad = await enter(badHttp);
    const heard: string[] = [];
    viewer.socket.on('run:inputs', ({ frame }) => void heard.push(frame));
    const head = instructor.flight?.line.head ?? 0;
    const engineCount = instructor.flight?.line.run.plant.engineCount ?? 2;
    const channels = Array.from({ length: 4 + 2 * engineCount }, () => new Int16Array(4).fill(30_000));
    const frame = encodeFrame({ branch: 0, startTick: head, tickCount: 4, engineCount, channels, stateHash: null });
    const before = await refusedSoFar();
    for (let i = 0; i < 20; i += 1)
      bad.socket.emit('run:inputs', { classId: pass.classId, attemptId: instructor.run.attempt ?? '', frame });
    await unharmed();
    expect(heard).not.toContain(frame);
    expect(heard.length).toBeGreaterThan(0);
    await play([instructor, viewer], 2500);
    expect(await refusedSoFar()).toBeGreaterThanOrEqual(before + 20);
  });

  it('who had the controls and gave them back can put nothing into the flight any more', async () => {
    const bad = await enter(badHttp);
    await instructor.control({ deed: 'controls', member: bad.member });
    await until(() => bad.state.run?.controls.at(-1)?.member === bad.member);
    await play([instructor, viewer], 700);
    await instructor.delivered();
    await instructor.follow(instructor.run.attempt ?? '');
    instructor.flight = null;
    await instructor.control({ deed: 'controls', member: instructor.member });
    await play([instructor, viewer], 600);
    await instructor.takeControls(true);
    instructor.follower = null;
    await play([instructor, viewer], 1200);
    const heard: string[] = [];
    viewer.socket.on('run:inputs', ({ frame }) => void heard.push(frame));
    const line = lineOf(instructor);
    const engineCount = line?.run.plant.engineCount ?? 2;
    const channels = Array.from({ length: 4 + 2 * engineCount }, () => new Int16Array(4).fill(-30_000));
    const startTick = line?.head ?? 0;
    const frame = encodeFrame({ branch: 0, startTick, tickCount: 4, engineCount, channels, stateHash: null });
    for (let i = 0; i < 20; i += 1)
      bad.socket.emit('run:inputs', { classId: pass.classId, attemptId: instructor.run.attempt ?? '', frame });
    await unharmed();
    expect(heard).not.toContain(frame);
  });
});

describe('a trainee who floods', () => {
  const nonsense = (): unknown[] => [
    null,
    7,
    'x'.repeat(2000),
    [],
    { classId: 'none' },
    { classId: pass.classId, attemptId: randomUUID(), frame: '%%%%' },
    { classId: pass.classId, run: 1e9, telemetry: { ...telemetryAt(1), betaDeg: Number.NaN } },
    JSON.parse(`${'['.repeat(400)}${']'.repeat(400)}`),
    Buffer.alloc(900, 255),
    { __proto__: null, constructor: { prototype: {} } },
  ];

  it('with malformed bodies of every event is cut off, and the class never notices', async () => {
    const socket = raw();
    await until(() => socket.connected);
    const events = ['run:inputs', 'run:telemetry', 'view:move', 'member:tell', 'class:enter', 'run:chunk', 'toString'];
    for (let i = 0; i < 60; i += 1) for (const event of events) for (const body of nonsense()) socket.emit(event, body);
    await until(() => !socket.connected, 10_000);
    await unharmed();
  });

  it('with huge frames, with bytes that are no packets, and with more windows than anybody has', async () => {
    const huge = raw();
    await until(() => huge.connected);
    huge.emit('run:chunk', { bytes: 'A'.repeat(2_000_000) });
    await until(() => !huge.connected);
    const broken = raw();
    await until(() => broken.connected);
    // What comes to the websocket is no packet of the protocol.
    broken.io.engine.write('\u0000\uffff{{{{');
    // The websocket beneath, which no page reaches past the protocol.
    (broken.io.engine as unknown as { transport: { ws: { send(data: string): void } } }).transport.ws.send('9".[[');
    await until(() => !broken.connected, 10_000);
    const windows = Array.from({ length: 30 }, raw);
    await until(() => windows.filter(({ disconnected }) => disconnected).length >= 10, 10_000);
    await unharmed();
    for (const socket of windows) socket.disconnect();
    await unharmed();
  });
});
