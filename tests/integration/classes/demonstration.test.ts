import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { classDetailSchema, classPassSchema, type ClassPass } from '#shared/contracts/classes.ts';
import { ClassClient, play, until } from '../../support/class-client.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let instructorHttp: Client;
let traineeHttp: Client;
let secondHttp: Client;
let pass: ClassPass;
let instructor: ClassClient;
let trainee: ClassClient;
const clients: ClassClient[] = [];

const client = async (http: Client): Promise<ClassClient> => {
  const made = new ClassClient(http, server.address, pass.classId);
  clients.push(made);
  return made.connect();
};
const join = (http: Client) => http('POST', '/api/classes/join', { json: { code: pass.joinCode } });
const headOf = ({ flight }: ClassClient): number => flight?.line.head ?? -1;
/** The same tick, the same state. */
const sameState = (a: ClassClient, b: ClassClient): void => {
  const one = a.flight?.line ?? a.follower?.line;
  const other = b.follower?.line ?? b.flight?.line;
  if (!one || !other) throw new Error('Neither flies nor follows.');
  one.standAt(other.run.tick);
  expect(other.run.tick).toBeGreaterThan(0);
  expect(one.run.stateHash()).toBe(other.run.stateHash());
};

beforeAll(async () => {
  server = await startTestServer();
  [instructorHttp, traineeHttp, secondHttp] = await Promise.all(
    ['m.okafor', 'j.lindqvist', 'a.bauer'].map((mailbox) => server.client(mailbox)),
  );
  const opened = await instructorHttp('POST', '/api/classes', {
    json: {
      title: 'Tuesday',
      playlist: [
        { scenarioSlug: 'left-engine-cut-after-lift-off' },
        { scenarioSlug: 'left-engine-cut-after-lift-off' },
      ],
      seats: 4,
    },
  });
  expect(opened.status).toBe(201);
  pass = classPassSchema.parse(opened.body);
  for (const http of [traineeHttp, secondHttp]) expect((await join(http)).status).toBe(200);
  instructor = await client(instructorHttp);
  trainee = await client(traineeHttp);
});
afterAll(async () => {
  for (const one of clients) one.close();
  await server.close();
});

describe('a demonstration', () => {
  it('is seen by a viewer in the same state; freeze, event, rewind and branch reach both alike', async () => {
    await instructor.control({ deed: 'start', countdownS: 0.3 });
    await until(() => trainee.state.run !== null);
    await instructor.takeControls(true);
    await trainee.follow(instructor.run.attempt ?? '');
    await play([instructor, trainee], 2500);
    expect(instructor.flight?.line.head).toBeGreaterThan(180);
    sameState(instructor, trainee);

    await instructor.control({ deed: 'freeze' });
    await play([instructor, trainee], 800);
    expect(trainee.follower?.line.run.tick).toBe(instructor.flight?.line.head);
    sameState(instructor, trainee);

    const gust = { lane: 'air', kind: 'gust', axis: 'lateral', shape: 'step', from: 'right', peak_kt: 12, over_s: 0.5 };
    await instructor.control({ deed: 'inject', event: { ...gust, at: { time_s: 0 } } });
    await instructor.control({ deed: 'resume' });
    await play([instructor, trainee], 1500);
    expect(trainee.follower?.line.run.fired.some(({ id }) => id === 'live-1')).toBe(true);
    sameState(instructor, trainee);

    await instructor.control({ deed: 'rewind', tick: 100 });
    await play([instructor, trainee], 600);
    expect([instructor.flight?.line.run.tick, trainee.follower?.line.run.tick]).toEqual([100, 100]);
    await instructor.control({ deed: 'rate', rate: 0.5 });
    await play([instructor, trainee], 2000);
    expect(instructor.run.branch).toBe(1);
    expect(trainee.follower?.line.run.fired.some(({ id }) => id === 'live-1')).toBe(false);
    sameState(instructor, trainee);
    expect(trainee.differences).toEqual([]);
  });

  it('is reached by a late joiner in the same state', async () => {
    const second = await client(secondHttp);
    const from = performance.now();
    await second.follow(second.run.attempt ?? '');
    second.step();
    const took = performance.now() - from;
    await play([instructor, trainee, second], 600);
    sameState(trainee, second);
    expect(second.differences).toEqual([]);
    expect(took).toBeLessThan(5000);
  });

  it('is reached again after the connection was lost', async () => {
    trainee.socket.io.engine.close();
    await play([instructor], 1200);
    await until(() => trainee.socket.connected);
    await play([instructor, trainee], 1200);
    sameState(instructor, trainee);
    expect(trainee.differences).toEqual([]);
  });

  it('begins again for a viewer whose state differs, and both ends log it', async () => {
    trainee.follower?.line.run.plant.addGust({ axis: 'lateral', shape: 'step', peak: 5, overS: 0.1 });
    await play([instructor, trainee], 2500);
    expect(trainee.differences.length).toBeGreaterThan(0);
    await until(() => trainee.state.differences > 0);
    await play([instructor, trainee], 500);
    sameState(instructor, trainee);
  });

  it('is handed to a trainee and back', async () => {
    await instructor.control({ deed: 'controls', member: trainee.member });
    await until(() => trainee.run.controls.at(-1)?.member === trainee.member);
    await play([instructor, trainee], 700);
    await instructor.delivered();
    await instructor.follow(instructor.run.attempt ?? '');
    instructor.flight = null;
    await trainee.takeControls(true);
    trainee.follower = null;
    trainee.steer = (sample) => void (sample.pedal = -9000);
    await play([instructor, trainee], 2500);
    sameState(trainee, instructor);
    expect(instructor.differences).toEqual([]);
    await instructor.control({ deed: 'controls', member: instructor.member });
    await play([instructor, trainee], 700);
    await trainee.delivered();
    await instructor.takeControls(true);
    await play([instructor, trainee], 1500);
    expect(headOf(instructor)).toBeGreaterThan(headOf(trainee));
  });

  it('ends in an attempt whose recomputation agrees, and the class goes on to the next scenario without joining again', async () => {
    await instructor.control({ deed: 'scenario' });
    await play([instructor], 300);
    const answer = await instructor.complete();
    expect(answer).toMatchObject({ result: { statesAgree: true } });
    expect(instructor.state.index).toBe(1);
    trainee.flight = null;
    await instructor.control({ deed: 'start', countdownS: 0.3 });
    await until(() => trainee.state.run?.run === 2);
    await instructor.takeControls(true);
    await trainee.follow(instructor.run.attempt ?? '');
    await play([instructor, trainee], 1500);
    sameState(instructor, trainee);
    await instructor.control({ deed: 'end' });
    await play([instructor], 200);
    await instructor.complete();
    const detail = classDetailSchema.parse((await instructorHttp('GET', `/api/classes/${pass.classId}`)).body);
    expect(detail).toMatchObject({ status: 'ended', joinCode: null, runs: 2 });
    expect(detail.runsFlown.map(({ attempts }) => attempts.map(({ status }) => status))).toEqual([
      ['complete'],
      ['complete'],
    ]);
    expect(detail.runsFlown[0].branches).toHaveLength(2);
  });
});
