/** Personal access tokens: what they open, what they never open, and how they end. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { problemSchema } from '#shared/contracts/problem.ts';
import { madeTokenSchema, MOST_TOKENS, tokenListSchema, type TokenScope } from '#shared/contracts/tokens.ts';
import { addOrganisation } from '../../support/more-organisations.ts';
import { startTestServer, type Answer, type Client, type TestServer } from '../../support/test-server.ts';

const DAY_MS = 24 * 3600 * 1000;
let shiftMs = 0;
let server: TestServer;
let instructor: Client;
beforeAll(async () => {
  server = await startTestServer({ now: () => new Date(Date.now() + shiftMs) });
  instructor = await server.client('m.okafor');
});
afterAll(() => server.close());

const make = async (client: Client, scopes: readonly TokenScope[], days = 30, name = 'nightly export') =>
  client('POST', '/api/tokens', { json: { name, scopes, days } });
const tokenOf = async (client: Client, scopes: readonly TokenScope[], days = 30) =>
  madeTokenSchema.parse((await make(client, scopes, days)).body);
const code = ({ body }: Answer): string => problemSchema.parse(body).code;

/** A program: no cookies, no page's token, no origin. */
async function program(token: string, method: string, where: string, json?: unknown): Promise<Answer> {
  const response = await fetch(server.address + where, {
    method,
    headers: {
      authorization: `Bearer ${token}`,
      ...(json === undefined ? {} : { 'content-type': 'application/json' }),
    },
    body: json === undefined ? undefined : JSON.stringify(json),
  });
  const text = await response.text();
  const isJson = (response.headers.get('content-type') ?? '').includes('json');
  const body: unknown = isJson && text !== '' ? JSON.parse(text) : text;
  return { status: response.status, headers: response.headers, body, bytes: Buffer.from(text) };
}
const PLAYLIST = { name: 'By a program', note: '', scenarios: ['left-engine-cut-after-lift-off'] };

describe('a token', () => {
  it('is shown once, kept as a digest, listed by its beginning, and audited', async () => {
    const made = await tokenOf(instructor, ['records:read']);
    expect(made.token).toMatch(/^swt_[\w-]{40}$/);
    const listed = await instructor('GET', '/api/tokens');
    expect(JSON.stringify(listed.body)).not.toContain(made.token);
    expect(tokenListSchema.parse(listed.body).items.find(({ id }) => id === made.id)).toMatchObject({
      beginning: made.token.slice(0, 10),
      state: 'valid',
      lastUsedAt: null,
    });
    const rows = await server.sql('SELECT * FROM access_token WHERE id = ?', [made.id]);
    expect(JSON.stringify(rows)).not.toContain(made.token);
    const trail = await server.sql("SELECT deed FROM audit_entry WHERE subject_kind = 'token' AND subject_id = ?", [
      made.id,
    ]);
    expect(trail).toEqual([{ deed: 'token.made' }]);
  });

  it('reads with the scope of the area and is told which scope it lacks', async () => {
    const { token, id } = await tokenOf(instructor, ['scenarios:read']);
    expect((await program(token, 'GET', '/api/scenarios?pageSize=2')).status).toBe(200);
    const lacks = await program(token, 'GET', '/api/records/choices');
    expect([lacks.status, code(lacks)]).toEqual([403, 'forbidden']);
    expect(problemSchema.parse(lacks.body).detail).toContain('records:read');
    const writes = await program(token, 'POST', '/api/scenarios', {});
    expect(problemSchema.parse(writes.body).detail).toContain('scenarios:write');
    const [{ last_used_at: used }] = await server.sql('SELECT last_used_at FROM access_token WHERE id = ?', [id]);
    expect(used).not.toBeNull();
  });

  it('writes without a page’s token, under the person’s role and no other', async () => {
    const { token } = await tokenOf(instructor, ['playlists:write', 'people:read', 'airframes:write']);
    const made = await program(token, 'POST', '/api/playlists', PLAYLIST);
    expect(made.status).toBe(201);
    expect((await program(token, 'GET', '/api/playlists')).status).toBe(200);
    // The scope is there, the role is not.
    expect((await program(token, 'GET', '/api/people')).status).toBe(403);
    expect((await program(token, 'DELETE', '/api/airframes/light-twin/skin')).status).toBe(403);
  });

  it.each(['/api/tokens', '/api/session', '/api/session/everywhere', '/api/classes'])(
    'never opens %s, even beside the cookies of a browser',
    async (where) => {
      const { token } = await tokenOf(instructor, ['scenarios:write']);
      const method = where.endsWith('everywhere') ? 'DELETE' : 'GET';
      const alone = await program(token, method, where);
      expect([401, 403]).toContain(alone.status);
      if (where === '/api/tokens') {
        const beside = await instructor('POST', where, {
          headers: { authorization: `Bearer ${token}` },
          json: { name: 'more', scopes: ['people:write'], days: 1 },
        });
        expect(beside.status).toBe(403);
      }
    },
  );

  it('does not turn off the page’s token where tokens do not reach', async () => {
    const answer = await fetch(`${server.address}/api/session/everywhere`, {
      method: 'DELETE',
      headers: { authorization: 'Bearer swt_x', cookie: instructor.cookie(), origin: server.address },
    });
    expect(answer.status).toBe(403);
    expect((await instructor('GET', '/api/session')).status).toBe(200);
  });

  it('of nobody, broken, or with no word behind it opens nothing', async () => {
    for (const token of ['swt_AAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAA', 'x', '%00'])
      expect((await program(token, 'GET', '/api/scenarios')).status, token).toBe(401);
    const answer = await fetch(`${server.address}/api/scenarios`, {
      headers: { authorization: 'Basic abc', cookie: instructor.cookie() },
    });
    expect(answer.status).toBe(401);
  });

  it('ends when it is revoked, expires, or its person is deactivated', async () => {
    const first = await tokenOf(instructor, ['scenarios:read'], 2);
    expect((await instructor('DELETE', `/api/tokens/${first.id}`)).status).toBe(204);
    expect((await program(first.token, 'GET', '/api/scenarios')).status).toBe(401);
    expect((await instructor('DELETE', `/api/tokens/${first.id}`)).status).toBe(404);

    const second = await tokenOf(instructor, ['scenarios:read'], 2);
    shiftMs = 2 * DAY_MS + 1000;
    const late = await program(second.token, 'GET', '/api/scenarios');
    expect([late.status, problemSchema.parse(late.body).detail]).toEqual([401, expect.stringContaining('expired')]);
    shiftMs = 0;

    const brandt = await server.client('h.brandt');
    const third = await tokenOf(brandt, ['scenarios:read']);
    expect((await program(third.token, 'GET', '/api/scenarios')).status).toBe(200);
    await server.sql("UPDATE person SET status = 'deactivated' WHERE email LIKE 'h.brandt@%'");
    expect((await program(third.token, 'GET', '/api/scenarios')).status).toBe(401);
    await server.sql("UPDATE person SET status = 'active' WHERE email LIKE 'h.brandt@%'");
  });

  it('of another person or organisation is not found, and sees its own organisation only', async () => {
    const mine = await tokenOf(instructor, ['scenarios:read']);
    const brandt = await server.client('h.brandt');
    expect((await brandt('DELETE', `/api/tokens/${mine.id}`)).status).toBe(404);
    await addOrganisation(server, 'programs', ['instructor']);
    const other = await server.client('programs@elsewhere.example');
    const { token } = await tokenOf(other, ['scenarios:read', 'attempts:read']);
    const list = await program(token, 'GET', '/api/scenarios');
    expect(list.body).toMatchObject({ total: 0 });
  });

  it.each([
    ['no name', { name: ' ', scopes: ['audit:read'], days: 1 }, 'name'],
    ['no scope', { name: 'x', scopes: [], days: 1 }, 'scopes'],
    ['a scope that is none', { name: 'x', scopes: ['session:write'], days: 1 }, 'scopes'],
    ['more than a year', { name: 'x', scopes: ['audit:read'], days: 400 }, 'days'],
    ['half a day', { name: 'x', scopes: ['audit:read'], days: 0.5 }, 'days'],
  ])('with %s is refused beside the field', async (_what, json, field) => {
    const answer = await instructor('POST', '/api/tokens', { json });
    expect(answer.status).toBe(422);
    expect(problemSchema.parse(answer.body).errors?.[0]?.field).toContain(field);
  });

  it('is one of a bounded number', async () => {
    const engineer = await server.client('a.reyes');
    for (let i = 0; i < MOST_TOKENS; i++) expect((await make(engineer, ['airframes:read'])).status).toBe(201);
    const over = await make(engineer, ['airframes:read']);
    expect([over.status, code(over)]).toEqual([409, 'conflict']);
  });
});
