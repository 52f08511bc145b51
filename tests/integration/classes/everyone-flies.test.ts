import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { attemptDetailSchema, attemptPageSchema } from '#shared/contracts/attempts.ts';
import { classDetailSchema, classPassSchema, doorSchema, type ClassPass } from '#shared/contracts/classes.ts';
import type { BoardRow } from '#shared/contracts/class-socket.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { ClassClient, play, SocketRefusal, telemetryAt, until } from '../../support/class-client.ts';
import { addOrganisation } from '../../support/more-organisations.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let instructorHttp: Client;
let firstHttp: Client;
let secondHttp: Client;
let guestHttp: Client;
let pass: ClassPass;
let instructor: ClassClient;
let first: ClassClient;
let second: ClassClient;
let guest: ClassClient;
const clients: ClassClient[] = [];

const make = (http: Client): ClassClient => {
  const made = new ClassClient(http, server.address, pass.classId);
  clients.push(made);
  return made;
};
const join = (http: Client, more: Record<string, unknown> = {}) =>
  http('POST', '/api/classes/join', { json: { code: pass.joinCode, ...more } });
const codeOf = async (work: Promise<unknown>): Promise<string> => {
  try {
    await work;
    return 'ok';
  } catch (error) {
    if (error instanceof SocketRefusal) return error.code;
    throw error;
  }
};
beforeAll(async () => {
  server = await startTestServer();
  await server.sql(`UPDATE organisation SET settings = JSON_SET(settings, '$.guests', true)`);
  [instructorHttp, firstHttp, secondHttp] = await Promise.all(
    ['m.okafor', 'j.lindqvist', 'a.bauer'].map((mailbox) => server.client(mailbox)),
  );
  guestHttp = await server.client();
  const opened = await instructorHttp('POST', '/api/classes', {
    json: {
      title: 'Thursday',
      playlist: [{ scenarioSlug: 'left-engine-cut-after-lift-off' }],
      mode: 'everyone-flies',
      seats: 3,
      guests: true,
    },
  });
  pass = classPassSchema.parse(opened.body);
  for (const http of [firstHttp, secondHttp]) await join(http);
  instructor = await make(instructorHttp).connect();
  first = await make(firstHttp).connect();
  second = await make(secondHttp).connect();
});
afterAll(async () => {
  for (const one of clients) one.close();
  await server.close();
});

describe('the door', () => {
  it('says what a code opens, refuses a wrong one, and lets a guest wait for the instructor', async () => {
    const door = await guestHttp('GET', `/api/classes/door/${pass.joinCode?.toLowerCase()}`);
    expect(doorSchema.parse(door.body)).toMatchObject({ title: 'Thursday', guests: true, guestsAsk: true });
    expect((await guestHttp('GET', '/api/classes/door/222222')).status).toBe(404);
    expect((await guestHttp('GET', '/api/classes/door/0O1I00')).status).toBe(422);
    expect(problemSchema.parse((await join(guestHttp)).body).errors?.[0].field).toBe('/displayName');
    const waiting = await join(guestHttp, { displayName: 'Visitor 1' });
    expect(classPassSchema.parse(waiting.body)).toMatchObject({ role: 'guest', admitted: false, joinCode: null });
    guest = await make(guestHttp).connect();
    expect(guest.entries).toEqual([]);
    expect(await codeOf(guest.request('class:entries', { classId: pass.classId, since: 0 }))).toBe('not-a-member');
    await until(() => instructor.state.members.some(({ standing }) => standing === 'asking'));
    const asking = instructor.state.members.find(({ standing }) => standing === 'asking');
    await instructor.control({ deed: 'admit', member: asking?.id ?? '' });
    guest.close();
    guest = await make(guestHttp).connect();
    expect(guest.entered?.pass).toMatchObject({ admitted: true, role: 'guest', name: 'Visitor 1' });
    expect(guest.state.members.filter(({ standing }) => standing === 'in')).toHaveLength(4);
    expect((await guestHttp('GET', '/api/attempts')).status).toBe(401);
    expect((await guestHttp('GET', `/api/classes/${pass.classId}/scenarios/0`)).status).toBe(200);
    expect((await guestHttp('GET', `/api/classes/${pass.classId}/scenarios/7`)).status).toBe(404);
  });

  it('is closed to people elsewhere, when full, and when locked', async () => {
    await addOrganisation(server, 'eve', ['instructor']);
    const elsewhere = await server.client();
    const { DEMONSTRATION } = await import('../../../server/data/seeds/demonstration-people.ts');
    const json = { email: 'eve@elsewhere.example', password: DEMONSTRATION.password };
    expect((await elsewhere('POST', '/api/session', { json })).status).toBe(200);
    expect((await elsewhere('GET', `/api/classes/${pass.classId}`)).status).toBe(404);
    const stranger = make(elsewhere);
    await stranger.connect().catch(() => undefined);
    expect(await codeOf(stranger.request('class:enter', { classId: pass.classId, since: 0 }))).toBe('not-found');
    const third = await server.client('s.chandran');
    expect(problemSchema.parse((await join(third)).body)).toMatchObject({ code: 'conflict' });
    await instructor.control({ deed: 'options', options: { locked: true } });
    expect(problemSchema.parse((await join(third)).body).detail).toContain('closed');
    await instructor.control({ deed: 'options', options: { locked: false } });
    const away = make(third);
    await away.connect().catch(() => undefined);
    expect(await codeOf(away.request('class:enter', { classId: pass.classId, since: 0 }))).toBe('not-a-member');
  });
});

describe('everyone flies', () => {
  it('by the same clock with the same event, each their own attempt; the board sees all', async () => {
    const rows: BoardRow[] = [];
    instructor.socket.on('board:rows', (news) => void rows.push(...news.rows));
    await instructor.request('board:follow', { classId: pass.classId, follow: true });
    await instructor.control({ deed: 'start', countdownS: 0.4 });
    await until(() => [first, second, guest].every(({ state }) => state.run !== null));
    for (const one of [first, second, guest]) await one.takeControls(false);
    second.steer = (sample) => void (sample.pedal = -12_000);
    await play([first, second, guest], 1500);
    const gust = { lane: 'air', kind: 'gust', axis: 'lateral', shape: 'step', from: 'right', peak_kt: 12, over_s: 0.5 };
    await instructor.control({ deed: 'inject', event: { ...gust, at: { time_s: 0 } } });
    await play([first, second, guest], 800);
    for (const one of [first, second, guest]) one.telemetry(telemetryAt(100));
    await until(() => new Set(rows.map(({ member }) => member)).size === 3);
    const fired = [first, second, guest].map(
      (one) => one.flight?.line.run.fired.find(({ id }) => id === 'live-1')?.tick,
    );
    expect(new Set(fired).size).toBe(1);
    expect(fired[0]).toBeGreaterThan(100);
  });

  it('is shown to all: one trainee seen by the others in the same state', async () => {
    await first.delivered();
    expect(await codeOf(second.follow(first.attemptId ?? ''))).toBe('not-shown');
    second.follower = null;
    await instructor.control({ deed: 'show', member: first.member });
    await until(() => first.run.shown === first.member);
    if (first.flight) first.flight.broadcast = true;
    await play([first, second, guest], 300);
    await instructor.follow(first.attemptId ?? '');
    await play([first, second, guest, instructor], 1200);
    const seen = instructor.follower?.line;
    const line = first.flight?.line;
    line?.standAt(seen?.run.tick ?? 0);
    expect(seen?.run.tick).toBeGreaterThan(200);
    expect(seen?.run.stateHash()).toBe(line?.run.stateHash());
    expect(instructor.differences).toEqual([]);
    await instructor.control({ deed: 'show', member: null });
    if (first.flight) first.flight.broadcast = false;
  });

  it('rewinds for all and goes on as a branch; every run is an attempt, the guest’s as the class’s own', async () => {
    await instructor.control({ deed: 'rewind', tick: 150 });
    await play([first, second, guest], 500);
    expect([first, second, guest].map(({ flight }) => flight?.line.run.tick)).toEqual([150, 150, 150]);
    await instructor.control({ deed: 'resume' });
    await play([first, second, guest], 1500);
    await instructor.control({ deed: 'stop' });
    await play([first, second, guest], 300);
    for (const one of [first, second, guest])
      expect(await one.complete()).toMatchObject({ result: { statesAgree: true, ended: 'left' } });
    const detail = classDetailSchema.parse((await instructorHttp('GET', `/api/classes/${pass.classId}`)).body);
    expect(detail.runsFlown[0].attempts.map(({ role, status }) => [role, status])).toEqual([
      ['trainee', 'complete'],
      ['trainee', 'complete'],
      ['guest', 'complete'],
    ]);
    const mine = classDetailSchema.parse((await firstHttp('GET', `/api/classes/${pass.classId}`)).body);
    expect(mine.runsFlown[0].attempts.map(({ member }) => member)).toEqual([first.member]);
    expect(mine.joinCode).toBeNull();
    const page = attemptPageSchema.parse((await firstHttp('GET', '/api/attempts')).body);
    expect(page.items.map(({ id }) => id)).toEqual([first.attemptId]);
    const one = attemptDetailSchema.parse((await firstHttp('GET', `/api/attempts/${first.attemptId}`)).body);
    expect(one.liveClass).toMatchObject({ id: pass.classId, title: 'Thursday', run: 1 });
    expect(one.liveClass?.branches).toHaveLength(2);
    const guests = attemptDetailSchema.parse((await instructorHttp('GET', `/api/attempts/${guest.attemptId}`)).body);
    expect(guests.person.displayName).toBe('Visitor 1 (guest)');
    expect((await secondHttp('GET', `/api/attempts/${guest.attemptId}`)).status).toBe(404);
  });

  it('is completed by the server for a browser that went away', async () => {
    await instructor.control({ deed: 'restart', countdownS: 0.3 });
    await until(() => second.state.run?.run === 2);
    second.flight = null;
    await second.takeControls(false);
    await play([second], 2500);
    const left = second.attemptId;
    second.close();
    await instructor.control({ deed: 'stop' });
    await server.sql('UPDATE attempt SET last_chunk_at = NOW(3) - INTERVAL 1 HOUR WHERE id = ?', [left]);
    expect(await server.services.classes.attempts.completeLeftBehind()).toBe(1);
    const detail = attemptDetailSchema.parse((await secondHttp('GET', `/api/attempts/${left}`)).body);
    expect(detail).toMatchObject({ status: 'complete', result: { statesAgree: true } });
    await second.connect();
  });
});

describe('what does not belong', () => {
  it('is refused and counted: another’s chunks, forged frames, wrong roles, malformed and unknown events', async () => {
    await instructor.control({ deed: 'start', countdownS: 0 });
    await until(() => first.state.run?.run === 3 && second.state.run?.run === 3);
    first.flight = null;
    second.flight = null;
    await first.takeControls(false);
    await play([first], 1200);
    const { classId } = pass;
    const forged = { classId, attemptId: first.attemptId, index: 0, hash: '0'.repeat(16), bytes: 'AAAA' };
    expect(await codeOf(second.request('run:chunk', forged))).toBe('not-your-controls');
    expect(await codeOf(second.request('class:control', { classId, key: randomUUID(), deed: 'freeze' }))).toBe(
      'forbidden',
    );
    expect(await codeOf(second.request('class:control', { classId, key: 'x', deed: 'freeze' }))).toBe('validation');
    expect(await codeOf(second.request('board:follow', { classId, follow: true }))).toBe('forbidden');
    expect(
      await codeOf(
        second.request('run:complete', { classId, attemptId: first.attemptId, chunkCount: 0, ended: 'left' }),
      ),
    ).toBe('not-found');
    expect(await codeOf(second.request('run:take', { classId, run: 99 }))).toBe('run-over');
    expect(await codeOf(second.request('nonsense' as 'run:take', {}))).toBe('bad-request');
    expect(await codeOf(second.request('class:enter', { classId: randomUUID(), since: 0 }))).toBe('not-found');
    expect(
      await codeOf(instructor.control({ deed: 'inject', event: { kind: 'gust', lane: 'air', at: { time_s: 0 } } })),
    ).toBe('bad-event');
    const wrongEngine = { kind: 'engine-failure', lane: 'engines', engine: 'centre', at: { time_s: 0 } };
    expect(await codeOf(instructor.control({ deed: 'inject', event: wrongEngine }))).toBe('bad-event');
    const wrongCondition = { kind: 'marker', lane: 'notes', text: 'x', at: { when: 'process.exit()' } };
    expect(await codeOf(instructor.control({ deed: 'inject', event: wrongCondition }))).toBe('bad-event');
    const frames: string[] = [];
    instructor.socket.on('run:inputs', ({ frame }) => void frames.push(frame));
    for (let i = 0; i < 5; i += 1)
      second.socket.emit('run:inputs', { classId, attemptId: first.attemptId ?? '', frame: 'AAAA' });
    await play([first], 400);
    expect(frames).toEqual([]);
    await play([], 2500);
    const [row] = await server.sql('SELECT refused FROM live_class WHERE id = ?', [classId]);
    expect(Number(row['refused'])).toBeGreaterThanOrEqual(9);
    expect(
      (await server.sql('SELECT COUNT(*) AS n FROM attempt_chunk WHERE attempt_id = ?', [first.attemptId]))[0]['n'],
    ).not.toBe('0');
  });

  it('cannot change the log', async () => {
    await expect(server.sql(`UPDATE class_entry SET kind = 'ended'`)).rejects.toThrow('never changes');
    await expect(server.sql('DELETE FROM class_entry')).rejects.toThrow('never deleted');
  });

  it('does one press once, however often it is sent', async () => {
    const key = randomUUID();
    const before = instructor.state.seq;
    const answers = await Promise.all(
      [1, 2, 3].map(() => instructor.control({ deed: 'message', text: 'Look left' }, key)),
    );
    expect(new Set(answers.map(({ entries }) => entries[0].seq)).size).toBe(1);
    await until(() => instructor.state.seq > before);
    expect(instructor.state.seq).toBe(before + 1);
  });

  it('keeps a message to one from the others', async () => {
    await instructor.control({ deed: 'message', text: 'Well held', to: first.member });
    await until(() => second.state.seq === instructor.state.seq);
    const textOf = (one: ClassClient) => one.state.messages.at(-1)?.text;
    expect([textOf(first), textOf(second), textOf(instructor)]).toEqual(['Well held', '', 'Well held']);
  });

  it('is cut off when it floods, and the class goes on', async () => {
    const flood = make(secondHttp);
    await flood.connect();
    for (let i = 0; i < 2000; i += 1) flood.socket.emit('view:move', { classId: pass.classId } as never);
    await until(() => !flood.socket.connected);
    flood.close();
    const huge = make(secondHttp);
    await huge.connect();
    huge.socket.emit('run:inputs', { classId: pass.classId, attemptId: 'x', frame: 'A'.repeat(300_000) });
    await until(() => !huge.socket.connected);
    huge.close();
    expect(await codeOf(instructor.control({ deed: 'freeze' }))).toBe('ok');
  });

  it('leaves at once: sent out by the instructor, or signed out everywhere', async () => {
    await instructor.control({ deed: 'remove', member: guest.member });
    await until(() => guest.closed.includes('removed'));
    expect(await codeOf(guest.request('class:entries', { classId: pass.classId, since: 0 }))).toBe('not-a-member');
    expect(await codeOf(guest.request('class:enter', { classId: pass.classId, since: 0 }))).toBe('not-a-member');
    const revoked: string[] = [];
    first.socket.on('session:revoked', ({ reason }) => void revoked.push(reason));
    expect((await firstHttp('DELETE', '/api/session/everywhere')).status).toBe(204);
    await until(() => !first.socket.connected);
    expect(revoked).toEqual(['signed-out-everywhere']);
  });

  it('does not get past the handshake: another origin, no session', async () => {
    const { io } = await import('socket.io-client');
    const refused = (extraHeaders: Record<string, string>): Promise<string> =>
      new Promise((resolve) => {
        const socket = io(server.address, { transports: ['websocket'], extraHeaders, reconnection: false });
        socket.on('connect_error', (error) => resolve(error.message));
        socket.on('connect', () => resolve('connected'));
      });
    expect(await refused({ cookie: instructorHttp.cookie(), origin: 'https://elsewhere.example' })).not.toBe(
      'connected',
    );
    expect(await refused({ origin: server.address })).toBe('unauthenticated');
  });

  it('wrong codes are throttled over all processes', async () => {
    const { WRONG_CODES } = await import('../../../server/services/classes/join-throttle.ts');
    await server.sql(`UPDATE throttle_count SET count = ?`, [WRONG_CODES]);
    expect(problemSchema.parse((await guestHttp('GET', '/api/classes/door/333333')).body).code).toBe('throttled');
  });

  it('a class that everybody has forgotten is ended, its code with it', async () => {
    const json = { title: 'Forgotten', playlist: [{ scenarioSlug: 'left-engine-cut-after-lift-off' }] };
    const forgotten = classPassSchema.parse((await instructorHttp('POST', '/api/classes', { json })).body);
    await server.services.classes.controls.endForgotten(forgotten.classId, Date.now() - 60_000);
    expect((await instructorHttp('GET', `/api/classes/${forgotten.classId}/qr.svg`)).status).toBe(200);
    await server.services.classes.controls.endForgotten(forgotten.classId, Date.now());
    expect((await instructorHttp('GET', `/api/classes/${forgotten.classId}`)).body).toMatchObject({
      status: 'ended',
      joinCode: null,
    });
    const [entry] = await server.sql(`SELECT COUNT(*) AS n FROM audit_entry WHERE deed = 'class.opened'`);
    expect(Number(entry['n'])).toBe(2);
  });

  it('ends: the code opens nothing any more', async () => {
    await server.sql('DELETE FROM throttle_count');
    await instructor.control({ deed: 'end' });
    expect((await join(secondHttp)).status).toBe(404);
    expect(await codeOf(instructor.control({ deed: 'start', countdownS: 0 }))).toBe('class-ended');
    const list = await instructorHttp('GET', '/api/classes?status=ended');
    expect(list.body).toMatchObject({
      total: 2,
      items: [{ title: 'Forgotten' }, { title: 'Thursday', status: 'ended', people: 3, runs: 3 }],
    });
    expect((await guestHttp('GET', '/api/classes')).status).toBe(401);
    const qr = await instructorHttp('GET', `/api/classes/${pass.classId}/qr.svg`);
    expect(qr.status).toBe(404);
  });
});
