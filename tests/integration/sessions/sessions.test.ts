import jwt from 'jsonwebtoken';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { problemSchema } from '#shared/contracts/problem.ts';
import { ACCESS_COOKIE, REFRESH_COOKIE } from '#shared/contracts/wire-names.ts';
import { DEMONSTRATION } from '../../../server/data/seeds/demonstration-people.ts';
import { ACCESS_TOKEN_S } from '../../../server/services/sessions/access-tokens.ts';
import {
  REUSE_GRACE_S,
  SESSION_IDLE_S,
  SESSION_LONGEST_S,
} from '../../../server/services/sessions/sessions.service.ts';
import { startTestServer, type Answer, type Client, type TestServer } from '../../support/test-server.ts';

let shiftS = 0;
let server: TestServer;
beforeAll(async () => {
  server = await startTestServer({ now: () => new Date(Date.now() + shiftS * 1000) });
});
afterEach(() => {
  shiftS = 0;
});
afterAll(() => server.close());

const { password } = DEMONSTRATION;
const mail = (mailbox: string): string => `${mailbox}@${DEMONSTRATION.domain}`;
const refusal = ({ body }: Answer) => problemSchema.parse(body);
const look = (client: Client, headers: Record<string, string> = {}) => client('GET', '/api/session', { headers });
const refresh = (client: Client, headers: Record<string, string> = {}) =>
  client('POST', '/api/session/refresh', { headers });
const signIn = async (email: string, secret: string) =>
  (await server.client())('POST', '/api/session', { json: { email, password: secret } });

describe('signing in', () => {
  it('takes the address in any letter case and gives cookies that no script reads', async () => {
    const answer = await signIn(mail('J.LINDQVIST').toUpperCase(), password);
    expect(answer.status).toBe(200);
    const given = answer.headers.getSetCookie();
    for (const name of [ACCESS_COOKIE, REFRESH_COOKIE]) {
      expect(given.find((cookie) => cookie.startsWith(`${name}=`))).toMatch(/HttpOnly/i);
    }
    expect(JSON.stringify(answer.body)).not.toMatch(/password|hash/i);
  });

  it('answers a wrong password and an unknown person alike', async () => {
    const [wrong, unknown] = [await signIn(mail('m.okafor'), 'no'), await signIn('nobody@nowhere.example', 'no')];
    expect([wrong.status, refusal(wrong).code]).toEqual([401, 'wrong-credentials']);
    expect(unknown.status).toBe(401);
    expect(refusal(unknown).detail).toBe(refusal(wrong).detail);
  });

  it('tells a deactivated person so, only after the right password, and ends the sessions there are', async () => {
    const client = await server.client('y.tanaka');
    await server.sql("UPDATE person SET status = 'deactivated' WHERE email = ?", [mail('y.tanaka')]);
    expect(refusal(await signIn(mail('y.tanaka'), 'no')).code).toBe('wrong-credentials');
    const right = await signIn(mail('y.tanaka'), password);
    expect([right.status, refusal(right).code]).toEqual([403, 'deactivated']);
    expect((await look(client)).status).toBe(403);
    expect((await refresh(client)).status).toBe(403);
  });
});

describe('an access token', () => {
  it('ends after ten minutes, and the refresh token gives the next one', async () => {
    const client = await server.client('m.okafor');
    shiftS = ACCESS_TOKEN_S + 1;
    const late = await look(client);
    expect([late.status, refusal(late).code]).toEqual([401, 'session-expired']);
    expect((await refresh(client)).status).toBe(200);
    expect((await look(client)).status).toBe(200);
  });

  it('signed by somebody else, or by nobody, is none', async () => {
    const client = await server.client('m.okafor');
    const own = new RegExp(`${ACCESS_COOKIE}=([^;]+)`).exec(client.cookie())?.[1] ?? '';
    const claims = jwt.decode(own);
    if (claims === null || typeof claims === 'string') throw new Error('The access cookie holds no claims.');
    const forged = [jwt.sign(claims, 'x'.repeat(40)), jwt.sign(claims, '', { algorithm: 'none' }), 'nonsense'];
    for (const token of forged) {
      const answer = await look(client, { cookie: `${ACCESS_COOKIE}=${token}` });
      expect([answer.status, refusal(answer).code]).toEqual([401, 'unauthenticated']);
    }
  });
});

describe('a refresh token', () => {
  it('is exchanged each time; used again by a thief, it ends the session for both', async () => {
    const client = await server.client('a.reyes');
    const stolen = client.cookie();
    expect((await refresh(client)).status).toBe(200);
    expect(client.cookie()).not.toBe(stolen);
    // Two tabs at the same moment are no theft.
    expect((await refresh(client, { cookie: stolen })).status).toBe(200);
    shiftS = REUSE_GRACE_S + 1;
    expect((await refresh(client, { cookie: stolen })).status).toBe(401);
    expect((await refresh(client)).status).toBe(401);
    const rows = await server.sql("SELECT COUNT(*) AS n FROM audit_entry WHERE deed = 'session.token-reused'");
    expect(Number(rows[0]['n'])).toBe(1);
  });

  it('ends unused after seven days, and the session after thirty however it is used', async () => {
    const idle = await server.client('h.brandt');
    shiftS = SESSION_IDLE_S + 1;
    expect((await refresh(idle)).status).toBe(401);
    shiftS = 0;
    const busy = await server.client('h.brandt');
    const stepS = SESSION_IDLE_S - 60;
    for (shiftS = stepS; shiftS < SESSION_LONGEST_S; shiftS += stepS) expect((await refresh(busy)).status).toBe(200);
    expect((await refresh(busy)).status).toBe(401);
  });
});

describe('signing out', () => {
  it('ends this session at once, and everywhere ends them all', async () => {
    const [one, two, three] = await Promise.all([1, 2, 3].map(() => server.client('j.lindqvist')));
    const held = one.cookie();
    expect((await one('DELETE', '/api/session')).status).toBe(204);
    expect((await look(one, { cookie: held })).status).toBe(401);
    expect((await look(two)).status).toBe(200);
    expect((await two('DELETE', '/api/session/everywhere')).status).toBe(204);
    expect((await look(three)).status).toBe(401);
    expect((await refresh(three)).status).toBe(401);
  });

  it('asked for by a page of another server, or without this page’s token, is refused', async () => {
    const client = await server.client('j.lindqvist');
    const other = await client('DELETE', '/api/session', { headers: { origin: 'https://elsewhere.example' } });
    expect([other.status, refusal(other).code]).toEqual([403, 'origin-refused']);
    const bare = await client('DELETE', '/api/session', { headers: { 'x-sidewash-csrf': 'no' } });
    expect([bare.status, refusal(bare).code]).toEqual([403, 'csrf-refused']);
    expect((await look(client)).status).toBe(200);
  });
});
