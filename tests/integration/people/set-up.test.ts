/** The first set-up: once, by who sits at the server or holds its code, whole or not at all. */
import { request } from 'node:http';
import { afterEach, describe, expect, it } from 'vitest';
import { problemSchema } from '#shared/contracts/problem.ts';
import { setUpStateSchema } from '#shared/contracts/set-up.ts';
import { startTestServer, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
afterEach(() => server.close());

const BODY = {
  organisation: 'École du Nord 北',
  units: 'si',
  library: false,
  name: 'Ada Moe',
  email: 'Ada@Nord.example',
  password: 'four words are enough',
};
const run = async (json: unknown, headers: Record<string, string> = {}) =>
  (await server.client())('POST', '/api/set-up', { json, headers });
const state = async (headers: Record<string, string> = {}) =>
  setUpStateSchema.parse((await (await server.client())('GET', '/api/set-up', { headers })).body);
/** As through a proxy on this machine. */
const REMOTE = { 'x-forwarded-for': '203.0.113.7' };
const rows = async () => Number((await server.sql('SELECT COUNT(*) AS n FROM organisation'))[0].n);

describe('the first set-up', () => {
  it('makes the organisation and its administrator, states no recognition time, and cannot be run twice', async () => {
    server = await startTestServer({ seed: false });
    expect(await state()).toEqual({ open: true, codeNeeded: false });
    expect((await run(BODY)).status).toBe(204);
    expect(await state()).toEqual({ open: false, codeNeeded: false });
    const client = await server.client();
    const json = { email: 'ada@nord.example', password: BODY.password };
    const signedIn = await client('POST', '/api/session', { json });
    expect(signedIn.body).toMatchObject({
      roles: ['administrator'],
      organisation: { name: BODY.organisation, settings: { units: 'si', recognitionTimeS: null, guests: false } },
    });
    const again = await run({ ...BODY, organisation: 'Another', email: 'b@c.example' });
    expect(again.status).toBe(409);
    expect(problemSchema.parse(again.body).detail).toContain('set up already');
    expect(await rows()).toBe(1);
    expect(await server.services.setUp.code()).toBeNull();
    const deeds = await server.sql('SELECT deed FROM audit_entry WHERE subject_kind = ?', ['organisation']);
    expect(deeds).toEqual([{ deed: 'organisation.set-up' }]);
  });

  it('of two at once makes one', async () => {
    server = await startTestServer({ seed: false });
    const answers = await Promise.all(
      [1, 2, 3].map((n) => run({ ...BODY, organisation: `Organisation ${n}`, email: `a${n}@nord.example` })),
    );
    expect(answers.map(({ status }) => status).sort()).toEqual([204, 409, 409]);
    expect(await rows()).toBe(1);
  });

  it('from another machine, through a proxy or under a foreign name needs the code that was printed', async () => {
    server = await startTestServer({ seed: false });
    expect(await state(REMOTE)).toEqual({ open: true, codeNeeded: true });
    const port = new URL(server.address).port;
    const foreign = await new Promise<unknown>((resolve, reject) => {
      request({ port, path: '/api/set-up', headers: { host: `elsewhere.example:${port}` } }, (answer) => {
        let text = '';
        answer.on('data', (part: Buffer) => (text += part.toString())).on('end', () => resolve(JSON.parse(text)));
      })
        .on('error', reject)
        .end();
    });
    expect(foreign).toEqual({ open: true, codeNeeded: true });
    for (const code of ['', 'ABCD-EFGH-JKLM']) {
      const refused = await run({ ...BODY, code }, REMOTE);
      expect([refused.status, problemSchema.parse(refused.body).errors?.[0]?.field]).toEqual([422, '/code']);
    }
    expect(await rows()).toBe(0);
    const code = (await server.services.setUp.code()) ?? '';
    expect(code).toMatch(/^[2-9A-Z]{4}-[2-9A-Z]{4}-[2-9A-Z]{4}$/);
    expect((await run({ ...BODY, code: ` ${code.toLowerCase()} ` }, REMOTE)).status).toBe(204);
  });

  it('names what is wrong beside its field and writes nothing', async () => {
    server = await startTestServer({ seed: false });
    for (const [field, json] of [
      ['/organisation', { ...BODY, organisation: ' ' }],
      ['/email', { ...BODY, email: 'ada@nord' }],
      ['/password', { ...BODY, password: 'short' }],
      ['/name', { ...BODY, name: '\u0000' }],
    ] as const) {
      const refused = await run(json);
      expect([refused.status, problemSchema.parse(refused.body).errors?.[0]?.field]).toEqual([422, field]);
    }
    expect(await rows()).toBe(0);
  });

  it('puts the shipped library in when it is wanted, and is closed where the demonstration is', async () => {
    server = await startTestServer({ seed: false });
    expect((await run({ ...BODY, library: true })).status).toBe(204);
    const [{ n }] = await server.sql(`SELECT COUNT(*) AS n FROM scenario_revision WHERE status = 'published'`);
    expect(Number(n)).toBeGreaterThan(5);
    expect(Number((await server.sql('SELECT COUNT(*) AS n FROM person'))[0].n)).toBe(1);
    await server.close();
    server = await startTestServer();
    expect((await state()).open).toBe(false);
    expect((await run(BODY)).status).toBe(409);
  });
});
