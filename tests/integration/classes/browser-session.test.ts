import { randomUUID } from 'node:crypto';
import { io, type Socket } from 'socket.io-client';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { attemptDetailSchema } from '#shared/contracts/attempts.ts';
import { classDetailSchema, classPassSchema, classScenarioSchema, type ClassPass } from '#shared/contracts/classes.ts';
import { headTickAt } from '#shared/scenario/class-state.ts';
import { ClassSession } from '../../../src/features/class/class-session.ts';
import { until } from '../../support/class-client.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let instructorHttp: Client;
let pass: ClassPass;
const sessions: ClassSession[] = [];
const sockets = new Map<ClassSession, Socket>();

interface Wrong {
  clockMs: number;
  renewed: number;
}
function sessionOf(http: Client, wrong: Wrong = { clockMs: 0, renewed: 0 }): ClassSession {
  const socket = io(server.address, {
    transports: ['websocket'],
    extraHeaders: { cookie: http.cookie(), origin: server.address },
    forceNew: true,
    autoConnect: false,
  });
  const session = new ClassSession({
    socket,
    classId: pass.classId,
    scenario: async (index) =>
      classScenarioSchema.parse((await http('GET', `/api/classes/${pass.classId}/scenarios/${index}`)).body),
    newKey: randomUUID,
    renew: () => {
      wrong.renewed += 1;
      socket.io.opts.extraHeaders = { cookie: http.cookie(), origin: server.address };
      return Promise.resolve(true);
    },
    now: () => Date.now() + wrong.clockMs,
    events: {
      changed: () => undefined,
      board: () => undefined,
      view: () => undefined,
      closed: () => undefined,
      said: () => undefined,
      tick: () => undefined,
    },
  });
  sessions.push(session);
  sockets.set(session, socket);
  session.open();
  return session;
}
const socketOf = (session: ClassSession): Socket => {
  const socket = sockets.get(session);
  if (!socket) throw new Error('No session of these tests.');
  return socket;
};

/** Sixty pictures a second for a time, as a page draws them. */
async function play(session: ClassSession, ms: number): Promise<void> {
  const end = performance.now() + ms;
  while (performance.now() < end) {
    session.step((sample) => void (sample.pedal = 5000));
    void session.send();
    await new Promise((resolve) => setTimeout(resolve, 16));
  }
}

beforeAll(async () => {
  server = await startTestServer();
  await server.sql(`UPDATE organisation SET settings = JSON_SET(settings, '$.guests', true)`);
  instructorHttp = await server.client('m.okafor');
  const json = {
    title: 'Browsers',
    playlist: [{ scenarioSlug: 'left-engine-cut-after-lift-off' }, { scenarioSlug: 'rudder-ratio-stuck' }],
    mode: 'everyone-flies',
    guests: true,
  };
  pass = classPassSchema.parse((await instructorHttp('POST', '/api/classes', { json })).body);
});
afterAll(async () => {
  for (const session of sessions) session.close();
  await server.close();
});

describe('the browser’s session of a class', () => {
  it('of a guest at the door enters by itself once it is let in', async () => {
    const instructor = sessionOf(instructorHttp);
    await until(() => instructor.inside);
    const guestHttp = await server.client();
    await guestHttp('POST', '/api/classes/join', { json: { code: pass.joinCode, displayName: 'Visitor' } });
    const guest = sessionOf(guestHttp);
    await until(() => guest.pass !== null);
    expect([guest.inside, guest.state.seq]).toEqual([false, 0]);
    await instructor.control({ deed: 'admit', member: guest.member });
    await until(() => guest.inside);
    expect(guest.state.seq).toBe(instructor.state.seq);
    expect(guest.state.members.find(({ id }) => id === guest.member)).toMatchObject({ standing: 'in', seat: 1 });
  });

  it('delivers a run to its last tick and completes it, although the next one begins at once', async () => {
    const [instructor] = sessions;
    const http = await server.client('j.lindqvist');
    await http('POST', '/api/classes/join', { json: { code: pass.joinCode } });
    const trainee = sessionOf(http);
    await until(() => trainee.inside);
    await instructor.control({ deed: 'start', countdownS: 0.3 });
    await until(() => trainee.run !== null);
    await trainee.takeControls();
    await play(trainee, 1800);
    const attempt = trainee.attemptId ?? '';
    await instructor.control({ deed: 'restart', countdownS: 0.3 });
    await until(() => trainee.run?.run === 2);
    await trainee.takeControls();
    await play(trainee, 1500);
    expect(trainee.attemptId).not.toBe(attempt);
    const read = async () => attemptDetailSchema.parse((await http('GET', `/api/attempts/${attempt}`)).body);
    // The first recomputation of a server also starts its thread.
    let detail = await read();
    for (let i = 0; i < 50 && detail.status !== 'complete'; i += 1) {
      await play(trainee, 200);
      detail = await read();
    }
    expect(detail).toMatchObject({ status: 'complete', result: { statesAgree: true } });
    const { runsFlown } = classDetailSchema.parse((await instructorHttp('GET', `/api/classes/${pass.classId}`)).body);
    const overAt = runsFlown[0].overAtTick ?? 0;
    expect(overAt).toBeGreaterThan(120);
    expect(detail.result?.durationS).toBeCloseTo(overAt / 120, 3);
    expect(runsFlown[1]).toMatchObject({ seed: runsFlown[0].seed, mode: 'everyone-flies' });
  });

  it('comes back by itself when its sign-in has run out while the connection was away, and when the server hangs up', async () => {
    const http = await server.client('a.bauer');
    await http('POST', '/api/classes/join', { json: { code: pass.joinCode } });
    const wrong = { clockMs: 0, renewed: 0 };
    const session = sessionOf(http, wrong);
    await until(() => session.inside);
    const socket = socketOf(session);
    // As after ten minutes: the cookie of the session is gone, the handshake is refused, and nothing tries again by itself.
    socket.io.opts.extraHeaders = { origin: server.address };
    socket.io.engine.close();
    await until(() => !session.inside);
    await until(() => session.inside, 10_000);
    expect(wrong.renewed).toBe(1);
    // Somebody’s broken extension floods: the server hangs up, and the honest page comes in again.
    for (let i = 0; i < 500; i += 1) socket.emit('nonsense', {});
    await until(() => !session.inside);
    await until(() => session.inside, 10_000);
    expect(wrong.renewed).toBe(2);
    const [instructor] = sessions;
    await until(() => instructor.inside, 10_000);
    await instructor.control({ deed: 'message', text: 'Everybody here again' });
    await until(() => session.state.seq === instructor.state.seq);
  });

  it('flies at the right time by a clock that is two minutes off, and that stands still for a while', async () => {
    const [instructor] = sessions;
    await instructor.control({ deed: 'stop' }).catch(() => undefined);
    const http = await server.client('s.chandran');
    await http('POST', '/api/classes/join', { json: { code: pass.joinCode } });
    const wrong = { clockMs: -120_000, renewed: 0 };
    const session = sessionOf(http, wrong);
    await until(() => session.inside);
    await instructor.control({ deed: 'scenario', index: 1 });
    await instructor.control({ deed: 'start', countdownS: 0.3 });
    await until(() => session.run !== null && session.run.overAt === null);
    const flight = await session.takeControls();
    const late = (): number => {
      const { run } = instructor;
      if (!run) throw new Error('Nothing runs.');
      session.step((sample) => void (sample.pedal = 5000));
      return Math.abs((flight?.line.head ?? 0) - headTickAt(run, instructor.serverNow()));
    };
    await play(session, 1500);
    // Half of both round trips on loopback, in ticks of 8.3 ms, and one for the rounding.
    const bound = () => 2 + ((session.roundTripMs + instructor.roundTripMs) / 2) * 0.12;
    expect(late()).toBeLessThanOrEqual(bound());
    // The machine sleeps for nine seconds, and its clock with it.
    wrong.clockMs -= 9000;
    expect(instructor.serverNow() - session.serverNow()).toBeGreaterThan(8000);
    await play(session, 300);
    // A clock that is behind flies nothing: the class has gone on by some ticks.
    const asleep = flight?.line.head ?? 0;
    await until(() => instructor.serverNow() - session.serverNow() < 1000, 10_000);
    await play(session, 300);
    expect(flight?.line.head).toBeGreaterThan(asleep);
    // Word of the server's time comes every two seconds.
    for (let i = 0; i < 40 && late() > bound(); i += 1) await play(session, 200);
    expect(late()).toBeLessThanOrEqual(bound());
    expect(flight?.line.head).toBeGreaterThan(200);
    await instructor.control({ deed: 'stop' });
    await play(session, 500);
  });
});
