import { readFileSync } from 'node:fs';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { attemptDetailSchema, startedAttemptSchema } from '#shared/contracts/attempts.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import {
  createdScenarioSchema,
  scenarioFileSchema,
  scenarioDetailSchema,
  scenarioDraftSchema,
  scenarioLineSchema,
} from '#shared/contracts/scenario-editing.ts';
import { scenarioPageSchema, scenarioRevisionSchema } from '#shared/contracts/scenarios.ts';
import { addOrganisation } from '../../support/more-organisations.ts';
import { startTestServer, type Answer, type Client, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let instructor: Client;
let second: Client;
let trainee: Client;
let engineer: Client;
beforeAll(async () => {
  server = await startTestServer();
  [instructor, second, trainee, engineer] = await Promise.all(
    ['m.okafor', 'h.brandt', 'j.lindqvist', 'a.reyes'].map((mailbox) => server.client(mailbox)),
  );
});
afterAll(() => server.close());

const shipped = (): Record<string, unknown> => {
  const file = path.join(import.meta.dirname, '../../../scenarios/engine-cut-in-the-climb.json');
  return { ...(JSON.parse(readFileSync(file, 'utf8')) as object) }; // a shipped file is a JSON object
};
const create = async (document: Record<string, unknown>, client = instructor) =>
  client('POST', '/api/scenarios', { json: { document } });
const made = (answer: Answer) => {
  expect(answer.status).toBe(201);
  return createdScenarioSchema.parse(answer.body);
};
const draftAt = ({ slug, revision }: { slug: string; revision: number }): string =>
  `/api/scenarios/${slug}/drafts/${revision}`;
const read = async (at: { slug: string; revision: number }, client = instructor) =>
  scenarioDraftSchema.parse((await client('GET', draftAt(at))).body);
const save = (at: { slug: string; revision: number }, version: string, document: object, client = instructor) =>
  client('PUT', draftAt(at), { json: { document }, headers: { 'if-match': `"${version}"` } });
const publish = (at: { slug: string; revision: number }, client = instructor) =>
  client('POST', `/api/scenarios/${at.slug}/revisions/${at.revision}/publish`, { json: { note: 'First of its kind.' } });
const errorsOf = (answer: Answer) => problemSchema.parse(answer.body).errors ?? [];

describe('a new scenario', () => {
  it('is a draft for instructors only, gets a short name of its own, and is flown once it is published', async () => {
    const document = { ...shipped(), title: 'Cut in the climb, class B' };
    const one = made(await create(document));
    const two = made(await create(document, second));
    expect([one.slug, two.slug]).toEqual(['cut-in-the-climb-class-b', 'cut-in-the-climb-class-b-2']);
    const drafts = scenarioPageSchema.parse((await instructor('GET', '/api/scenarios?status=draft')).body);
    expect(drafts.items.map(({ slug }) => slug)).toEqual(expect.arrayContaining([one.slug, two.slug]));
    expect((await trainee('GET', '/api/scenarios?status=draft')).status).toBe(403);
    expect((await trainee('GET', `/api/scenarios/${one.slug}`)).status).toBe(404);
    expect((await trainee('GET', draftAt(one))).status).toBe(403);
    expect((await trainee('POST', '/api/attempts', { json: { scenarioSlug: one.slug } })).status).toBe(404);

    const line = scenarioLineSchema.parse((await publish(one)).body);
    expect(line).toMatchObject({ status: 'published', publishedBy: 'M. Okafor', airframeRevision: 1 });
    const started = await trainee('POST', '/api/attempts', { json: { scenarioSlug: one.slug } });
    expect(startedAttemptSchema.parse(started.body).scenario.title).toBe('Cut in the climb, class B');
  });

  it('comes back from the store exactly as it was given', async () => {
    const document = { ...shipped(), title: 'Round trip' };
    const at = made(await create(document));
    expect((await read(at)).document).toEqual(document);
    await publish(at);
    const published = scenarioRevisionSchema.parse((await trainee('GET', `/api/scenarios/${at.slug}`)).body);
    expect(published.scenario.title).toBe('Round trip');
  });

  it('is exported as it was given, letter by letter, and comes in again identical', async () => {
    const document = { ...shipped(), title: 'There and back' };
    const file = async (at: { slug: string; revision: number }) =>
      scenarioFileSchema.parse((await instructor('GET', `/api/scenarios/${at.slug}/revisions/${at.revision}/file`)).body)
        .document;
    const at = made(await create(document));
    expect(JSON.stringify(await file(at))).toBe(JSON.stringify(document));
    await publish(at);
    const exported = await file(at);
    expect(JSON.stringify(exported)).toBe(JSON.stringify(document));
    const again = made(await create(exported, second));
    await publish(again, second);
    expect(JSON.stringify(await file(again))).toBe(JSON.stringify(document));
    const path = `/api/scenarios/${at.slug}/revisions/1/file`;
    expect((await engineer('GET', path)).status).toBe(200);
    expect((await trainee('GET', path)).status).toBe(403);
  });

  it('keeps its talking point from trainees', async () => {
    const at = made(await create({ ...shipped(), title: 'Secret', talkingPoint: 'Ask why it rolled.' }));
    await publish(at);
    const seen = async (client: Client) =>
      scenarioRevisionSchema.parse((await client('GET', `/api/scenarios/${at.slug}`)).body).scenario.talkingPoint;
    expect(await seen(instructor)).toBe('Ask why it rolled.');
    expect(await seen(trainee)).toBe('');
    const started = await trainee('POST', '/api/attempts', { json: { scenarioSlug: at.slug } });
    expect(startedAttemptSchema.parse(started.body).scenario.talkingPoint).toBe('');
  });

  it('draws its times by the attempt’s seed, inside the range, and the attempt stores what was drawn', async () => {
    const vary = { time_s: [2, 9] };
    const events = [{ id: 'cut', lane: 'engines', at: { time_s: 3 }, kind: 'engine-failure', engine: 'left', vary }];
    const at = made(await create({ ...shipped(), title: 'Drawn', events, criteria: [] }));
    await publish(at);
    const times: number[] = [];
    for (let i = 0; i < 4; i += 1) {
      const started = startedAttemptSchema.parse(
        (await trainee('POST', '/api/attempts', { json: { scenarioSlug: at.slug } })).body,
      );
      const stored = attemptDetailSchema.parse((await trainee('GET', `/api/attempts/${started.id}`)).body);
      expect(stored.drawn).toEqual(started.drawn);
      times.push(started.drawn['cut']['time_s']);
    }
    for (const time of times) {
      expect(time).toBeGreaterThanOrEqual(2);
      expect(time).toBeLessThanOrEqual(9);
    }
    expect(new Set(times).size).toBe(4);
  });

  it('is refused to those who do not write scenarios', async () => {
    for (const client of [trainee, engineer]) {
      expect((await create(shipped(), client)).status).toBe(403);
      expect((await client('POST', '/api/scenarios/engine-cut-in-the-climb/archive')).status).toBe(403);
    }
  });

  it('of another version, of an unknown airframe or too large is refused with field, rule and remedy', async () => {
    const other = await create({ ...shipped(), format: 'sidewash.scenario/9' });
    expect(errorsOf(other)[0]).toMatchObject({ field: '/document/format', rule: 'format-version' });
    const unknown = await create({ ...shipped(), airframe: { slug: 'no-such-airframe', revision: 1 } });
    expect(errorsOf(unknown)[0]).toMatchObject({ field: '/airframe', rule: 'known-airframe' });
    const none = await create({ ...shipped(), airframe: 'light twin' });
    expect(errorsOf(none)[0]).toMatchObject({ field: '/airframe', rule: 'named' });
    const event = { id: 'x', lane: 'notes', at: { time_s: 1 }, kind: 'marker', text: 'again' };
    const many = await create({ ...shipped(), events: Array.from({ length: 10_000 }, (_, i) => ({ ...event, id: `x${i}` })) });
    expect(many.status).toBe(413);
  });
});

describe('a draft', () => {
  it('may be unfinished, is saved as it stands, and is published only without errors', async () => {
    const at = made(await create({ ...shipped(), title: 'Half done', events: [{ id: 'x' }] }));
    const refused = await publish(at);
    expect(refused.status).toBe(422);
    expect(errorsOf(refused)[0].field).toMatch(/^\/events\/0/);
    const draft = await read(at);
    expect((await save(at, draft.version, { ...shipped(), title: 'Done' })).status).toBe(200);
    expect((await publish(at)).status).toBe(200);
    // A published revision never changes, neither here nor in the database.
    expect((await save(at, draft.version, shipped())).status).toBe(409);
    await expect(server.sql(`UPDATE scenario_revision SET title = 'other' WHERE status = 'published'`)).rejects.toThrow(
      'A published scenario revision never changes.',
    );
  });

  it('saved by two instructors keeps the first and tells the second by name', async () => {
    const at = made(await create({ ...shipped(), title: 'Two hands' }));
    const [mine, theirs] = await Promise.all([read(at), read(at, second)]);
    expect((await save(at, theirs.version, { ...shipped(), title: 'Theirs' }, second)).status).toBe(200);
    const late = await save(at, mine.version, { ...shipped(), title: 'Mine' });
    expect(late.status).toBe(412);
    expect(problemSchema.parse(late.body).detail).toContain('H. Brandt');
    expect((await read(at)).document['title']).toBe('Theirs');
    expect((await instructor('PUT', draftAt(at), { json: { document: shipped() } })).status).toBe(428);
  });

  it('whose start no trim can hold is not published', async () => {
    const start = { ias_kt: 1, height_ft: 3000, levers: [1, 0] };
    const at = made(await create({ ...shipped(), title: 'Too slow', start }));
    const refused = await publish(at);
    expect(refused.status).toBe(422);
    expect(errorsOf(refused)[0]).toMatchObject({ field: '/start', rule: 'trim-beyond-travel' });
  });

  it('of an engine that the airframe lacks is not published', async () => {
    const document = shipped();
    const events = [{ id: 'cut', lane: 'engines', at: { time_s: 2 }, kind: 'engine-failure', engine: 'third' }];
    const at = made(await create({ ...document, title: 'Third engine', events, criteria: [] }));
    const refused = await publish(at);
    expect(refused.status).toBe(422);
    expect(errorsOf(refused)[0]).toMatchObject({ field: '/events/0/engine' });
  });

  it('is discarded, and an unpublished scenario with it', async () => {
    const at = made(await create({ ...shipped(), title: 'Gone again' }));
    expect((await instructor('DELETE', draftAt(at))).status).toBe(204);
    expect((await instructor('GET', `/api/scenarios/${at.slug}/detail`)).status).toBe(404);
  });
});

describe('revisions', () => {
  it('follow each other; archived ones are no longer flown, and come back', async () => {
    const at = made(await create({ ...shipped(), title: 'Two revisions' }));
    await publish(at);
    const next = made(await instructor('POST', `/api/scenarios/${at.slug}/drafts`, { json: { from: 1, note: 'slower' } }));
    expect(next.revision).toBe(2);
    const draft = await read(next);
    await save(next, draft.version, { ...draft.document, summary: 'Slower.' });
    await publish(next);
    const latest = scenarioRevisionSchema.parse((await trainee('GET', `/api/scenarios/${at.slug}`)).body);
    expect(latest).toMatchObject({ revision: 2, scenario: { summary: 'Slower.' } });

    expect((await instructor('POST', `/api/scenarios/${at.slug}/archive`)).status).toBe(200);
    expect((await trainee('GET', `/api/scenarios/${at.slug}`)).status).toBe(404);
    const archived = scenarioPageSchema.parse((await trainee('GET', '/api/scenarios?status=archived')).body);
    expect(archived.items.map(({ slug }) => slug)).toContain(at.slug);
    expect((await trainee('POST', '/api/attempts', { json: { scenarioSlug: at.slug, revision: 2 } })).status).toBe(409);
    const detail = scenarioDetailSchema.parse((await instructor('POST', `/api/scenarios/${at.slug}/restore`)).body);
    expect(detail.revisions.map(({ revision, status }) => [revision, status])).toEqual([
      [2, 'published'],
      [1, 'published'],
    ]);
  });

  it('offer the airframe revision that an engineer has released since', async () => {
    const at = made(await create({ ...shipped(), title: 'Upgrade' }));
    await publish(at);
    const before = scenarioDetailSchema.parse((await trainee('GET', `/api/scenarios/${at.slug}/detail`)).body);
    expect(before.newerAirframe).toBeNull();
    const slug = before.revisions[0].airframeSlug;
    const draft = await engineer('POST', `/api/airframes/${slug}/drafts`, { json: { from: 1, note: 'again' } });
    expect(draft.status).toBe(201);
    // A draft of an airframe is not offered, and cannot be pinned.
    const pinned = await create({ ...shipped(), airframe: { slug, revision: 2 } });
    expect(errorsOf(pinned)[0]).toMatchObject({ field: '/airframe', rule: 'released' });
    const release = (given: object[]) =>
      engineer('POST', `/api/airframes/${slug}/revisions/2/release`, { json: { note: 'For a test.', answers: given } });
    const asked = await release([]);
    if (asked.status !== 200) {
      const given = errorsOf(asked).map(({ field, rule }) => ({ field, rule, answer: 'Known and wanted.' }));
      expect((await release(given)).status).toBe(200);
    }
    const after = scenarioDetailSchema.parse((await instructor('GET', `/api/scenarios/${at.slug}/detail`)).body);
    expect(after.newerAirframe).toEqual({ slug, revision: 2 });
    expect(after.mayEdit).toBe(true);
  });

  it('of another organisation are not found', async () => {
    await addOrganisation(server, 'author', ['instructor']);
    const foreign = await server.client('author@elsewhere.example');
    for (const address of ['', '/detail', '/revisions/1', '/drafts/1'])
      expect((await foreign('GET', `/api/scenarios/engine-cut-in-the-climb${address}`)).status).toBe(404);
    expect((await foreign('POST', '/api/scenarios/engine-cut-in-the-climb/archive')).status).toBe(404);
  });
});
