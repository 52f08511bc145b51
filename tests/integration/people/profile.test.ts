/** What a person changes of their own: name, units, zone, address; and the sessions open in their name. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openSessionsSchema } from '#shared/contracts/account.ts';
import { meSchema } from '#shared/contracts/session.ts';
import { openClient, startTestServer, type Client, type TestServer } from '../../support/test-server.ts';
import { openMailSink, type MailSink } from '../../support/mail-sink.ts';

const PASSWORD = 'balanced-line-26';
let shift = 0;
let server: TestServer;
let mail: MailSink;
let trainee: Client;

beforeAll(async () => {
  server = await startTestServer({ now: () => new Date(Date.now() + shift) });
  mail = await openMailSink(server.services);
  trainee = await server.client('j.lindqvist');
});
afterAll(async () => {
  await mail.close();
  await server.close();
});
const nobody = (): Promise<Client> => openClient(server.address, undefined);
const sessionsOf = async (client: Client) => openSessionsSchema.parse((await client('GET', '/api/session/open')).body);
const profile = (json: unknown) => trainee('PUT', '/api/session/profile', { json });
const confirm = async (token: string) => (await nobody())('POST', '/api/session/link/confirm', { json: { token } });
const signIn = async (email: string) =>
  (await nobody())('POST', '/api/session', { json: { email, password: PASSWORD } });
const ask = (email: string, password = PASSWORD) =>
  trainee('POST', '/api/session/address', { json: { email, password } });

describe('open sessions', () => {
  it('are listed with this one marked, and one of them is ended by its owner', async () => {
    const other = await server.client('j.lindqvist');
    const before = await sessionsOf(trainee);
    expect(before.length).toBe(2);
    expect(before.filter(({ here }) => here)).toHaveLength(1);
    expect(before.every(({ address }) => address !== null)).toBe(true);
    const theirs = before.find(({ here }) => !here);
    expect((await trainee('DELETE', `/api/session/open/${theirs?.id}`)).status).toBe(204);
    expect((await other('GET', '/api/session')).status).toBe(401);
    expect((await trainee('GET', '/api/session')).status).toBe(200);
    expect((await trainee('DELETE', `/api/session/open/${theirs?.id}`)).status).toBe(404);
    expect(await sessionsOf(trainee)).toHaveLength(1);
  });

  it('of others are neither seen nor ended, except by an administrator', async () => {
    const engineer = await server.client('a.reyes');
    const [own] = await sessionsOf(engineer);
    expect((await trainee('DELETE', `/api/session/open/${own.id}`)).status).toBe(404);
    const me = meSchema.parse((await engineer('GET', '/api/session')).body);
    const path = `/api/people/${me.person.id}/sessions`;
    expect((await trainee('GET', path)).status).toBe(403);
    expect((await trainee('DELETE', `${path}/${own.id}`)).status).toBe(403);
    const administrator = await server.client('s.virtanen');
    const seen = openSessionsSchema.parse((await administrator('GET', path)).body);
    expect(seen).toMatchObject([{ id: own.id, here: false }]);
    const elsewhere = meSchema.parse((await trainee('GET', '/api/session')).body).person.id;
    expect((await administrator('DELETE', `/api/people/${elsewhere}/sessions/${own.id}`)).status).toBe(404);
    expect((await administrator('DELETE', `${path}/${own.id}`)).status).toBe(204);
    expect((await engineer('GET', '/api/session')).status).toBe(401);
    const [{ n }] = await server.sql(`SELECT COUNT(*) AS n FROM audit_entry WHERE deed = 'session.ended'`);
    expect(Number(n)).toBe(2);
  });

  it('that ran out for want of use are not listed', async () => {
    await server.client('d.santos');
    shift = 8 * 24 * 3600 * 1000;
    const later = await server.client('d.santos');
    expect(await sessionsOf(later)).toHaveLength(1);
    shift = 0;
  });
});

describe('a profile', () => {
  it('is kept on the server and holds a name in any script', async () => {
    const saved = await profile({ displayName: '  Ｊ.  عمر Ünal ', units: 'si', timeZone: 'Asia/Kathmandu' });
    expect(saved.status).toBe(200);
    const again = await server.client('j.lindqvist');
    expect(meSchema.parse((await again('GET', '/api/session')).body).person).toMatchObject({
      displayName: 'Ｊ. عمر Ünal',
      units: 'si',
      timeZone: 'Asia/Kathmandu',
    });
    const back = await profile({ displayName: 'J. Lindqvist', units: null, timeZone: null });
    expect(meSchema.parse(back.body).person).toMatchObject({ units: null, timeZone: null });
  });

  it.each([
    ['an empty name', { displayName: ' \u3000 ', units: null, timeZone: null }, '/displayName'],
    ['a name that turns the line around', { displayName: 'a\u202Eb', units: null, timeZone: null }, '/displayName'],
    ['a zone that is none', { displayName: 'J', units: null, timeZone: 'Mars/Base' }, '/timeZone'],
    ['units that are none', { displayName: 'J', units: 'furlongs', timeZone: null }, '/units'],
  ])('refuses %s beside its field', async (_what, body, field) => {
    const answer = await profile(body);
    expect(answer.status).toBe(422);
    expect(JSON.stringify(answer.body)).toContain(`"field":"${field}"`);
  });
});

describe('an address', () => {
  it('changes when the link in the new mailbox is opened, once, and the old mailbox is told', async () => {
    expect((await ask('jonas@new.example', 'not the password')).status).toBe(422);
    expect((await ask('jonas@new')).status).toBe(422);
    expect((await ask('ｊｏｎａｓ＠ｎｅｗ.example')).status).toBe(204);
    const token = await mail.linkTo('jonas@new.example');
    expect((await signIn('jonas@new.example')).status).toBe(401);
    const look = await (await nobody())('POST', '/api/session/link/look', { json: { token } });
    expect(look.body).toMatchObject({ kind: 'address', email: 'jonas@new.example' });
    const taken = await (
      await nobody()
    )('POST', '/api/session/link/take', {
      json: { token, password: 'four words are enough' },
    });
    expect(taken.status).toBe(409);
    expect((await confirm(token)).status).toBe(204);
    expect((await signIn('JONAS@new.example')).status).toBe(200);
    expect((await signIn('j.lindqvist@fieldschool.example')).status).toBe(401);
    expect((await confirm(token)).status).toBe(409);
    const told = await mail.messagesTo('j.lindqvist@fieldschool.example');
    expect(told[0]).toContain('jonas@new.example');
  });

  it('of somebody else is never taken, in whatever letters, and the asker learns nothing', async () => {
    for (const theirs of ['A.REYES@fieldschool.example', 'ａ.ｒｅｙｅｓ@FieldSchool.example']) {
      expect((await ask(theirs)).status).toBe(204);
    }
    expect(await mail.messagesTo('a.reyes@fieldschool.example')).toEqual([]);
    // Two ask for the same free address; the first to confirm has it.
    const other = await server.client('k.nowak');
    const json = { email: 'free@new.example', password: PASSWORD };
    expect((await other('POST', '/api/session/address', { json })).status).toBe(204);
    const first = await mail.linkTo('free@new.example');
    expect((await ask('Free@new.example')).status).toBe(204);
    const second = await mail.linkTo('Free@new.example');
    expect(second).not.toBe(first);
    expect((await Promise.all([confirm(first), confirm(second)])).map(({ status }) => status).sort()).toEqual([
      204, 409,
    ]);
  });

  it('link runs out after a day, and a password link changes no address', async () => {
    const person = await server.client('e.weiss');
    await person('POST', '/api/session/address', { json: { email: 'emil@new.example', password: PASSWORD } });
    const token = await mail.linkTo('emil@new.example');
    shift = 25 * 3600 * 1000;
    const late = await confirm(token);
    shift = 0;
    expect(JSON.stringify(late.body)).toContain('has run out');
    await (
      await nobody()
    )('POST', '/api/session/reset', { json: { email: 'e.weiss@fieldschool.example' } });
    const reset = await mail.linkTo('e.weiss@fieldschool.example');
    expect((await confirm(reset)).status).toBe(409);
  });
});
