import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { playlistPageSchema, playlistSchema } from '#shared/contracts/playlists.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let instructor: Client;
let trainee: Client;
let slugs: string[];

beforeAll(async () => {
  server = await startTestServer();
  [instructor, trainee] = await Promise.all([server.client('m.okafor'), server.client('j.lindqvist')]);
  slugs = (await server.sql('SELECT slug FROM scenario ORDER BY slug LIMIT 3')).map((row) => String(row['slug']));
});
afterAll(() => server.close());

const create = (json: Record<string, unknown>) => instructor('POST', '/api/playlists', { json });

describe('playlists', () => {
  it('keep the order given, and change it with the version that was read', async () => {
    const [a, b, c] = slugs;
    const made = await create({ name: 'Engine-out day', scenarios: [c, a, b] });
    expect(made.status).toBe(201);
    const list = playlistSchema.parse(made.body);
    expect(list.scenarios.map(({ slug }) => slug)).toEqual([c, a, b]);
    expect(list).toMatchObject({ author: 'M. Okafor', scenarios: [{ revision: 1 }, { revision: 1 }, { revision: 1 }] });
    const headers = { 'if-match': `"${list.version}"` };
    const json = { name: 'Engine-out day', note: 'Before lunch.', scenarios: [b, c] };
    const saved = await instructor('PUT', `/api/playlists/${list.id}`, { json, headers });
    expect(playlistSchema.parse(saved.body).scenarios.map(({ slug }) => slug)).toEqual([b, c]);
    const stale = await instructor('PUT', `/api/playlists/${list.id}`, { json, headers });
    expect(stale.status).toBe(412);
    const page = playlistPageSchema.parse((await instructor('GET', '/api/playlists?search=out')).body);
    expect(page).toMatchObject({ total: 1, items: [{ note: 'Before lunch.' }] });
    expect((await instructor('DELETE', `/api/playlists/${list.id}`)).status).toBe(204);
    expect((await instructor('GET', `/api/playlists/${list.id}`)).status).toBe(404);
  });

  it('are refused without scenarios, with one twice, with an unknown one, and under a name in use', async () => {
    const refusal = async (json: Record<string, unknown>) => {
      const answer = await create(json);
      expect(answer.status).toBe(422);
      return problemSchema.parse(answer.body).errors?.[0];
    };
    expect(await refusal({ name: 'Empty', scenarios: [] })).toMatchObject({ field: '/scenarios' });
    expect(await refusal({ name: 'Twice', scenarios: [slugs[0], slugs[0]] })).toMatchObject({ field: '/scenarios' });
    expect(await refusal({ name: 'Odd', scenarios: [slugs[0], 'no-such'] })).toMatchObject({ field: '/scenarios/1' });
    await create({ name: 'Crosswinds', scenarios: [slugs[0]] });
    expect(await refusal({ name: 'CROSSWINDS', scenarios: [slugs[0]] })).toMatchObject({ rule: 'taken' });
  });

  it('are for instructors', async () => {
    expect((await trainee('GET', '/api/playlists')).status).toBe(403);
    expect((await trainee('POST', '/api/playlists', { json: { name: 'Mine', scenarios: slugs } })).status).toBe(403);
    const nobody = await server.client();
    expect((await nobody('GET', '/api/playlists')).status).toBe(401);
  });
});
