/** Edits of things without a counter of their own: the version that was read guards what another saved meanwhile. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { editionOf } from '#shared/contracts/edition.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let administrator: Client;
beforeAll(async () => {
  server = await startTestServer();
  administrator = await server.client('s.virtanen');
});
afterAll(() => server.close());

const SETTINGS = { units: 'aviation', recognitionTimeS: null, guests: false, caution: '' };
const EDITS = [
  ['/api/organisation', { name: 'One', settings: SETTINGS }, { name: 'Two', settings: SETTINGS }],
  ['/api/records/retention', { recordingDays: 400 }, { recordingDays: 500 }],
  [
    '/api/records/endpoint',
    { address: 'http://127.0.0.1:9/one', userName: 'a', active: false },
    { address: 'http://127.0.0.1:9/two', userName: 'b', active: false },
  ],
] as const;

describe.each(EDITS)('%s', (where, first, second) => {
  const put = (json: unknown, version?: string) =>
    administrator('PUT', where, { json, headers: version === undefined ? {} : { 'if-match': version } });

  it('takes the version that was read, refuses an older one and keeps what stands', async () => {
    const read = (await administrator('GET', where)).headers.get('etag') ?? '';
    expect(read).toMatch(/^"[0-9a-f]{16}"$/);
    expect((await put(first, read)).status).toBeLessThan(300);
    const late = await put(second, read);
    expect([late.status, problemSchema.parse(late.body).code]).toEqual([412, 'changed-meanwhile']);
    const now = await administrator('GET', where);
    expect(now.body).toMatchObject(first);
    expect(now.headers.get('etag')).not.toBe(read);
    expect((await put(second, now.headers.get('etag') ?? '')).status).toBeLessThan(300);
    expect((await put(first, 'not quoted')).status).toBe(428);
  });

  it('sent twice at once with one version is taken once', async () => {
    const read = (await administrator('GET', where)).headers.get('etag') ?? '';
    const statuses = (await Promise.all([put(first, read), put({ ...second, ...extra(where) }, read)])).map(
      ({ status }) => status,
    );
    expect(statuses.filter((status) => status < 300)).toHaveLength(1);
    expect(statuses).toContain(412);
  });
});
/** Another content than both, so that the second of two simultaneous edits differs from what was read. */
const extra = (where: string): object =>
  where.endsWith('organisation')
    ? { name: 'Three' }
    : where.endsWith('retention')
      ? { recordingDays: 600 }
      : { userName: 'c' };

it('roles are guarded by the roles that were read', async () => {
  const [{ id }] = await server.sql("SELECT id FROM person WHERE email LIKE 'h.brandt@%'");
  const put = (roles: string[], read: string[]) =>
    administrator('PUT', `/api/people/${String(id)}/roles`, {
      json: { roles },
      headers: { 'if-match': `"${editionOf([...read].sort())}"` },
    });
  expect((await put(['instructor', 'engineer'], ['instructor'])).status).toBe(204);
  expect((await put(['trainee'], ['instructor'])).status).toBe(412);
  expect((await put(['instructor'], ['engineer', 'instructor'])).status).toBe(204);
});

it('an edition is that of the content, whatever the order of its members', () => {
  expect(editionOf({ a: 1, b: [2, { c: null, d: 'x' }] })).toBe(editionOf({ b: [2, { d: 'x', c: null }], a: 1 }));
  expect(editionOf({ a: 1 })).not.toBe(editionOf({ a: 2 }));
  expect(editionOf(['a', 'b'])).not.toBe(editionOf(['b', 'a']));
  expect(editionOf({ a: undefined })).toBe(editionOf({}));
});
