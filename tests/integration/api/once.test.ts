/** Creations under an idempotency key. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { problemSchema } from '#shared/contracts/problem.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

let shiftMs = 0;
let server: TestServer;
let instructor: Client;
beforeAll(async () => {
  server = await startTestServer({ now: () => new Date(Date.now() + shiftMs) });
  instructor = await server.client('m.okafor');
});
afterAll(() => server.close());

const playlist = (name: string) => ({ name, note: '', scenarios: ['left-engine-cut-after-lift-off'] });
const create = (client: Client, key: string, json: unknown) =>
  client('POST', '/api/playlists', { json, headers: { 'idempotency-key': key } });
const count = async (name: string): Promise<number> => {
  const [{ n }] = await server.sql('SELECT COUNT(*) AS n FROM playlist WHERE name = ?', [name]);
  return Number(n);
};

describe('a creation with a key', () => {
  it('is carried out once and answered alike twice', async () => {
    const first = await create(instructor, 'monday-0001', playlist('Once'));
    expect(first.status).toBe(201);
    expect(first.headers.get('idempotency-replayed')).toBeNull();
    const second = await create(instructor, 'monday-0001', playlist('Once'));
    expect(second.status).toBe(201);
    expect(second.headers.get('idempotency-replayed')).toBe('true');
    expect(second.headers.get('etag')).toBe(first.headers.get('etag'));
    expect(second.body).toEqual(first.body);
    expect(await count('Once')).toBe(1);
  });

  it('sent ten times at the same moment is carried out once', async () => {
    const answers = await Promise.all(
      Array.from({ length: 10 }, () => create(instructor, 'ten-at-once', playlist('Ten'))),
    );
    expect(await count('Ten')).toBe(1);
    const made = answers.filter(({ status }) => status === 201);
    expect(made.length).toBeGreaterThan(0);
    for (const { status, body } of answers)
      if (status !== 201) expect([status, problemSchema.parse(body).code]).toEqual([409, 'conflict']);
    expect(new Set(made.map(({ body }) => JSON.stringify(body))).size).toBe(1);
  });

  it('refuses another request under the same key, and keeps what was made', async () => {
    await create(instructor, 'another-body', playlist('First body'));
    const other = await create(instructor, 'another-body', playlist('Second body'));
    expect(other.status).toBe(422);
    expect(problemSchema.parse(other.body).errors?.[0]).toMatchObject({
      field: 'idempotency-key',
      remedy: 'Take a new key.',
    });
    expect(await count('Second body')).toBe(0);
  });

  it('that was refused frees its key', async () => {
    const wrong = await create(instructor, 'freed-again', { ...playlist('Freed'), scenarios: [] });
    expect(wrong.status).toBe(422);
    expect((await create(instructor, 'freed-again', playlist('Freed'))).status).toBe(201);
  });

  it('is another’s own affair, and free again after a day', async () => {
    await create(instructor, 'same-key-1', playlist('Okafor’s'));
    const brandt = await server.client('h.brandt');
    const theirs = await create(brandt, 'same-key-1', playlist('Brandt’s'));
    expect([theirs.status, theirs.headers.get('idempotency-replayed')]).toEqual([201, null]);
    shiftMs = 24 * 3600 * 1000 + 60_000;
    const later = await server.client('m.okafor');
    const after = await create(later, 'same-key-1', playlist('A day later'));
    shiftMs = 0;
    expect([after.status, after.headers.get('idempotency-replayed')]).toEqual([201, null]);
  });

  it.each(['short', 'with space in it', 'x'.repeat(201)])('is refused the key %s', async (key) => {
    const answer = await create(instructor, key, playlist('Never'));
    expect(answer.status).toBe(422);
    expect(await count('Never')).toBe(0);
  });

  it('answers a deed without a body twice as well', async () => {
    const administrator = await server.client('s.virtanen');
    const [{ id }] = await server.sql("SELECT id FROM person WHERE email LIKE 'y.tanaka@%'");
    const end = () =>
      administrator('POST', `/api/people/${String(id)}/sign-out`, { headers: { 'idempotency-key': 'sign-out-1' } });
    expect((await end()).status).toBe(204);
    const again = await end();
    expect([again.status, again.headers.get('idempotency-replayed')]).toEqual([204, 'true']);
  });
});
