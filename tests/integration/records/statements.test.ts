import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { endpointSchema } from '#shared/contracts/records.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { startFakeStore, type FakeStore } from '../../support/fake-statement-store.ts';
import { deliverAttempt, flyAttempt } from '../../support/flown-attempt.ts';
import { publishedStatementSchema } from '../../support/statement-schema.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

const SLUG = 'left-engine-cut-after-lift-off';
let shift = 0;
let server: TestServer;
let store: FakeStore;
let trainee: Client;
let instructor: Client;
let administrator: Client;

beforeAll(async () => {
  store = await startFakeStore();
  server = await startTestServer({ now: () => new Date(Date.now() + shift) });
  [trainee, instructor, administrator] = await Promise.all(
    ['j.lindqvist', 'm.okafor', 's.virtanen'].map((mailbox) => server.client(mailbox)),
  );
});
afterAll(async () => {
  await server.close();
  await store.close();
});

const fly = async (): Promise<string> => {
  const attempt = await flyAttempt(server, trainee, SLUG, 'hands-off');
  expect((await deliverAttempt(trainee, attempt)).status).toBe(200);
  return attempt.id;
};
const endpoint = async () => endpointSchema.parse((await administrator('GET', '/api/records/endpoint')).body);
const deliver = () => server.services.records.deliver();
const save = (over: Record<string, unknown> = {}) =>
  administrator('PUT', '/api/records/endpoint', {
    json: { address: store.address, userName: 'school', secret: 'p:ss wörd', active: true, ...over },
  });

describe('statements to an endpoint', () => {
  it('are set up by an administrator; the secret is kept sealed and never told', async () => {
    expect((await instructor('GET', '/api/records/endpoint')).status).toBe(403);
    const bad = await save({ address: 'ftp://store.example' });
    expect(problemSchema.parse(bad.body).errors?.[0]).toMatchObject({ field: '/address' });
    const early = await fly();
    const saved = await save();
    expect(endpointSchema.parse(saved.body)).toMatchObject({ hasSecret: true, waiting: 0 });
    expect(saved.bytes.toString()).not.toContain('wörd');
    const [row] = await server.sql('SELECT secret FROM statement_endpoint');
    expect(String(row['secret'])).not.toContain('wörd');
    expect((await administrator('POST', '/api/records/endpoint/push')).body).toEqual({ queued: 1 });
    expect((await administrator('POST', '/api/records/endpoint/push')).body).toEqual({ queued: 0 });
    expect(await deliver()).toBe(1);
    expect(store.requests[0]).toMatchObject({
      authorization: `Basic ${Buffer.from('school:p:ss wörd').toString('base64')}`,
      version: '1.0.3',
    });
    expect([...store.stored.values()]).toMatchObject([{ context: { registration: early } }]);
  });

  it('go by themselves when an attempt is complete, signed or set aside, and keep the published rules', async () => {
    const id = await fly();
    const json = { kind: 'sign-off', verdict: 'not-met', heldControls: true, note: '' };
    await instructor('POST', `/api/attempts/${id}/sign-offs`, { json });
    const set = (effect: string) =>
      instructor('POST', `/api/records/attempts/${id}/corrections`, { json: { effect, reason: 'Wrong seat.' } });
    await set('set-aside');
    expect(await deliver()).toBe(3);
    await set('restored');
    expect(await deliver()).toBe(1);
    const statements = [...store.stored.values()];
    expect(statements).toHaveLength(5);
    for (const statement of statements) expect(publishedStatementSchema.safeParse(statement).error).toBeUndefined();
    const verbs = statements.map((statement) => publishedStatementSchema.parse(statement).verb.id.split('/').at(-1));
    expect(verbs.sort()).toEqual(['failed', 'failed', 'failed', 'sign-off', 'voided']);
    for (const [key, statement] of store.stored) expect(publishedStatementSchema.parse(statement).id).toBe(key);
  });

  it('are tried again after no answer and a busy endpoint, later each time, and are stored once', async () => {
    const before = store.stored.size;
    await fly();
    store.next.push('store-then-hang-up', 'busy');
    expect(await deliver()).toBe(0);
    expect((await endpoint()).lastProblem).toContain('No answer');
    expect(await deliver()).toBe(0);
    shift += 6_000;
    expect(await deliver()).toBe(0);
    expect((await endpoint()).lastProblem).toContain('503');
    shift += 6_000;
    expect(await deliver()).toBe(0);
    shift += 6_000;
    expect(await deliver()).toBe(1);
    expect(store.stored.size).toBe(before + 1);
    expect(await endpoint()).toMatchObject({ waiting: 0, lastProblem: '' });
  });

  it('wait for credentials to be mended, and what the endpoint finds wrong is kept and can be sent again', async () => {
    await fly();
    store.next.push('unauthorised');
    await deliver();
    expect(await endpoint()).toMatchObject({ waiting: 1, refused: 0 });
    store.next.push('refuse');
    shift += 6_000;
    await deliver();
    expect(await endpoint()).toMatchObject({ waiting: 0, refused: 1, lastProblem: 'The endpoint answered 400.' });
    expect((await administrator('POST', '/api/records/endpoint/push')).body).toEqual({ queued: 1 });
    expect(await deliver()).toBe(1);
  });

  it('go once when several servers deliver at the same time', async () => {
    await fly();
    await fly();
    const before = store.requests.length;
    await Promise.all([deliver(), deliver(), deliver(), deliver()]);
    const ids = store.requests.slice(before).map(({ id }) => id);
    expect(ids).toHaveLength(2);
    expect(new Set(ids).size).toBe(2);
  });

  it('an address that is switched off gets nothing; a new address does not get the old secret', async () => {
    await save({ active: false, secret: undefined });
    await fly();
    expect(await deliver()).toBe(0);
    const moved = await save({ address: 'http://127.0.0.1:9/other', secret: undefined, active: false });
    expect(endpointSchema.parse(moved.body)).toMatchObject({ hasSecret: false });
  });
});

describe('the published rules', () => {
  it('catch what is not a statement', () => {
    const [good] = [...store.stored.values()].map((statement) => publishedStatementSchema.parse(statement));
    const breaks = [
      { ...good, id: 'x' },
      { ...good, extra: 1 },
      { ...good, actor: { name: 'nobody' } },
      { ...good, actor: { ...good.actor, mbox: 'mailto:a@b.example' } },
      { ...good, verb: { id: 'passed' } },
      { ...good, result: { ...good.result, duration: '30 s' } },
      { ...good, result: { ...good.result, score: { scaled: 1.2 } } },
      { ...good, result: { ...good.result, success: null } },
      { ...good, timestamp: 'yesterday' },
    ];
    for (const bad of breaks) expect(publishedStatementSchema.safeParse(bad).success, JSON.stringify(bad)).toBe(false);
  });
});
