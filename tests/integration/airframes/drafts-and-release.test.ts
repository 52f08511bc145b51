import { readFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { airframeDetailSchema, draftSchema, valueHistorySchema } from '#shared/contracts/airframe-editing.ts';
import { airframePageSchema, airframeRevisionSchema } from '#shared/contracts/airframes.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import { type Client, startTestServer, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let engineer: Client;
let colleague: Client;
let instructor: Client;
let trainee: Client;

const shipped = (slug: string): Record<string, unknown> =>
  JSON.parse(readFileSync(`scenarios/airframes/${slug}.json`, 'utf8')) as Record<string, unknown>; // a shipped object

beforeAll(async () => {
  server = await startTestServer();
  [engineer, colleague, instructor, trainee] = await Promise.all(
    ['a.reyes', 'a.reyes', 'm.okafor', 'j.lindqvist'].map((mailbox) => server.client(mailbox)),
  );
  // A second engineer: the demonstration has one, so an instructor is given the role too.
  await server.sql(
    `INSERT INTO person_role SELECT id, 'engineer', NOW(3) FROM person WHERE display_name = 'H. Brandt'`,
  );
  colleague = await server.client('h.brandt');
});
afterAll(() => server.close());

async function newDraft(name: string): Promise<{ slug: string; revision: number; document: Record<string, unknown> }> {
  const document = { ...shipped('light-twin'), name };
  const made = await engineer('POST', '/api/airframes', { json: { document, tags: ['test'] } });
  expect(made.status).toBe(201);
  const { slug, revision } = made.body as { slug: string; revision: number };
  return { slug, revision, document };
}
const draftAt = async (by: Client, slug: string, revision: number) =>
  draftSchema.parse((await by('GET', `/api/airframes/${slug}/drafts/${revision}`)).body);
const problem = (body: unknown) => problemSchema.parse(body);
const deedsOf = async (slug: string): Promise<string[]> =>
  (await server.sql(`SELECT deed FROM audit_entry WHERE subject_id = ? ORDER BY id`, [slug])).map((row) =>
    String(row['deed']),
  );

describe('a new airframe', () => {
  it('gets a short name from its name, with a number where that is taken', async () => {
    const first = await newDraft('Ébauche à deux moteurs');
    const second = await newDraft('Ébauche à deux moteurs');
    expect([first.slug, second.slug]).toEqual(['ebauche-a-deux-moteurs', 'ebauche-a-deux-moteurs-2']);
  });

  it('is refused a short name that is taken, beside the field', async () => {
    const answer = await engineer('POST', '/api/airframes', { json: { slug: 'light-twin', document: {} } });
    expect(answer.status).toBe(409);
    expect(problem(answer.body).errors?.[0]).toMatchObject({ field: '/slug', rule: 'unique' });
  });

  it('may be unfinished, and is listed with what can be read of it', async () => {
    const made = await engineer('POST', '/api/airframes', {
      json: { document: { name: 'Half a glider', class: 7, engines: [{ kind: 'jet' }] } },
    });
    expect(made.status).toBe(201);
    const list = airframePageSchema.parse((await engineer('GET', '/api/airframes?search=half+a')).body);
    expect(list.items[0]).toMatchObject({
      slug: 'half-a-glider',
      class: '',
      engines: 1,
      engineKind: 'jet',
      status: 'draft',
    });
    const read = await engineer('GET', '/api/airframes/half-a-glider/revisions/1');
    expect(read.status).toBe(422);
    expect(problem(read.body).errors?.length).toBeGreaterThan(0);
  });

  it.each([
    ['another format', '{"document":{"format":"sidewash.airframe/2"}}', 422, '/document/format'],
    ['a number beyond what is kept', '{"document":{"mass":{"mass_kg":1e999}}}', 422, '/document/mass/mass_kg'],
    ['NaN', '{"document":{"mass":{"mass_kg":NaN}}}', 400, undefined],
    ['a control character', '{"document":{"name":"a\\u0000b"}}', 422, '/document/name'],
    ['members nested without end', `{"document":{"x":${'['.repeat(5000)}${']'.repeat(5000)}}}`, 422, undefined],
    ['no document', '{"note":"none"}', 422, '/document'],
    ['an unknown member of the request', '{"document":{},"status":"released"}', 422, '/status'],
  ])('is refused with %s', async (_what, text, status, field) => {
    const answer = await engineer('POST', '/api/airframes', {
      bytes: Buffer.from(text),
      type: 'application/json',
    });
    expect(answer.status).toBe(status);
    const { errors } = problem(answer.body);
    if (field !== undefined) expect(errors?.[0]?.field).toBe(field);
  });

  it('is refused beyond 512 KiB', async () => {
    const answer = await engineer('POST', '/api/airframes', { json: { document: { name: 'x'.repeat(600_000) } } });
    expect(answer.status).toBe(413);
    expect(problem(answer.body).detail).toContain('512 KiB');
  });

  it('is made beside many others at the same time, each under a name of its own', async () => {
    const make = (i: number) =>
      (i % 2 === 0 ? engineer : colleague)('POST', '/api/airframes', {
        json: { document: { name: `Parallel ${i % 3}` }, tags: [`t${i}`] },
      });
    const answers = await Promise.all(Array.from({ length: 16 }, (_, i) => make(i)));
    expect(answers.map(({ status }) => status)).toEqual(Array.from({ length: 16 }, () => 201));
    const slugs = new Set(answers.map(({ body }) => (body as { slug: string }).slug));
    expect(slugs.size).toBe(16);
    const list = airframePageSchema.parse((await engineer('GET', '/api/airframes?search=parallel')).body);
    expect(list.total).toBe(16);
  });

  it('is duplicated under another name, as a draft', async () => {
    const answer = await engineer('POST', '/api/airframes/four-jet/duplicate', {
      json: { revision: 1, name: 'Study copy' },
    });
    expect(answer.body).toEqual({ slug: 'study-copy', revision: 1 });
    const draft = await draftAt(engineer, 'study-copy', 1);
    expect(draft.document).toEqual({ ...shipped('four-jet'), name: 'Study copy' });
    expect(draft.note).toBe('Copy of four-jet, revision 1.');
  });
});

describe('two engineers on one draft', () => {
  it('tells the second who saved, and loses nothing', async () => {
    const { slug, document } = await newDraft('Shared draft');
    const mine = await draftAt(engineer, slug, 1);
    const theirs = await draftAt(colleague, slug, 1);
    const first = await colleague('PUT', `/api/airframes/${slug}/drafts/1`, {
      json: { document: { ...document, description: 'theirs' } },
      headers: { 'if-match': `"${theirs.version}"` },
    });
    expect(first.status).toBe(200);
    const second = await engineer('PUT', `/api/airframes/${slug}/drafts/1`, {
      json: { document: { ...document, description: 'mine' } },
      headers: { 'if-match': `"${mine.version}"` },
    });
    expect(second.status).toBe(412);
    expect(problem(second.body)).toMatchObject({ code: 'changed-meanwhile' });
    expect(problem(second.body).detail).toContain('H. Brandt saved this draft');
    const now = await draftAt(engineer, slug, 1);
    expect(now.document['description']).toBe('theirs');
    expect(now.changedBy).toBe('H. Brandt');
    const again = await engineer('PUT', `/api/airframes/${slug}/drafts/1`, {
      json: { document: { ...document, description: 'both' } },
      headers: { 'if-match': `"${now.version}"` },
    });
    expect(draftSchema.parse(again.body).document['description']).toBe('both');
  });

  it('lets exactly one of two simultaneous saves through', async () => {
    const { slug, document } = await newDraft('Raced draft');
    const { version } = await draftAt(engineer, slug, 1);
    const save = (by: Client, description: string) =>
      by('PUT', `/api/airframes/${slug}/drafts/1`, {
        json: { document: { ...document, description } },
        headers: { 'if-match': `"${version}"` },
      });
    const answers = await Promise.all([save(engineer, 'a'), save(colleague, 'b')]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 412]);
  });

  it('asks for the version that was read', async () => {
    const { slug, document } = await newDraft('Unversioned draft');
    const answer = await engineer('PUT', `/api/airframes/${slug}/drafts/1`, { json: { document } });
    expect(answer.status).toBe(428);
  });

  it('does not take the version of a discarded draft for that of a new one with its number', async () => {
    const { slug, document } = await newDraft('Renewed draft');
    await engineer('POST', `/api/airframes/${slug}/drafts`, { json: { from: 1 } });
    const old = await draftAt(engineer, slug, 2);
    await engineer('DELETE', `/api/airframes/${slug}/drafts/2`);
    await colleague('POST', `/api/airframes/${slug}/drafts`, { json: { from: 1 } });
    const answer = await engineer('PUT', `/api/airframes/${slug}/drafts/2`, {
      json: { document },
      headers: { 'if-match': `"${old.version}"` },
    });
    expect(answer.status).toBe(412);
  });
});

describe('release', () => {
  it('asks for an answer to every warning and a note, then keeps the revision for ever', async () => {
    const { slug, document } = await newDraft('To be released');
    const parsed = parseAirframe(document);
    const warnings = parsed.ok ? parsed.warnings : [];
    const weak = structuredClone(document);
    Reflect.deleteProperty(weak['mass'] as object, 'Iyy_kgm2'); // the shipped file has a mass
    const { version } = await draftAt(engineer, slug, 1);
    await engineer('PUT', `/api/airframes/${slug}/drafts/1`, {
      json: { document: weak },
      headers: { 'if-match': `"${version}"` },
    });
    const bare = await engineer('POST', `/api/airframes/${slug}/revisions/1/release`, {
      json: { note: 'First data.', answers: [] },
    });
    expect(bare.status).toBe(422);
    const open = problem(bare.body).errors ?? [];
    expect(open.map(({ field }) => field)).toContain('/mass/Iyy_kgm2');
    expect(open.length).toBe(warnings.length + (warnings.some((w) => w.field === '/mass/Iyy_kgm2') ? 0 : 1));
    const answers = open.map(({ field, rule }) => ({ field, rule, answer: 'Known and accepted.' }));
    const short = await engineer('POST', `/api/airframes/${slug}/revisions/1/release`, {
      json: { note: 'x', answers },
    });
    expect(problem(short.body).errors?.[0].field).toBe('/note');
    const stale = await engineer('POST', `/api/airframes/${slug}/revisions/1/release`, {
      json: { note: 'First data.', answers },
      headers: { 'if-match': `"${version}"` },
    });
    expect(stale.status).toBe(412);
    const done = await engineer('POST', `/api/airframes/${slug}/revisions/1/release`, {
      json: { note: 'First data.', answers },
    });
    expect(airframeRevisionSchema.parse(done.body)).toMatchObject({ status: 'released', note: 'First data.' });

    const detail = airframeDetailSchema.parse((await engineer('GET', `/api/airframes/${slug}`)).body);
    expect(detail.revisions[0]).toMatchObject({ status: 'released', releasedBy: 'A. Reyes', name: 'To be released' });
    expect(detail.revisions[0].answers).toHaveLength(answers.length);
    const late = await engineer('PUT', `/api/airframes/${slug}/drafts/1`, {
      json: { document },
      headers: { 'if-match': `"${version}"` },
    });
    expect(late.status).toBe(409);
    expect((await engineer('DELETE', `/api/airframes/${slug}/drafts/1`)).status).toBe(409);
    const where = `WHERE airframe_id = (SELECT id FROM airframe WHERE slug = '${slug}')`;
    for (const change of [
      `document = '{}'`,
      `note = 'other'`,
      `release_answers = '[]'`,
      'version = 9',
      `status = 'draft'`,
    ]) {
      await expect(server.sql(`UPDATE airframe_revision SET ${change} ${where}`)).rejects.toThrow('never changes');
    }
    await expect(server.sql(`DELETE FROM airframe_revision ${where}`)).rejects.toThrow('never deleted');
    expect(await deedsOf(slug)).toEqual(['airframe.created', 'airframe.draft-saved', 'airframe.released']);
  });

  it('is refused while the data has errors, with each beside its field', async () => {
    const { slug, document } = await newDraft('Faulty');
    const { version } = await draftAt(engineer, slug, 1);
    const faulty = { ...document, class: 'V', surplus: 1 };
    await engineer('PUT', `/api/airframes/${slug}/drafts/1`, {
      json: { document: faulty },
      headers: { 'if-match': `"${version}"` },
    });
    const answer = await engineer('POST', `/api/airframes/${slug}/revisions/1/release`, {
      json: { note: 'Anyway.', answers: [] },
    });
    expect(answer.status).toBe(422);
    const fields = (problem(answer.body).errors ?? []).map(({ field }) => field);
    expect(fields).toContain('/class');
    expect(fields).toContain('/surplus');
  });

  it('retires a revision, which stays with what uses it', async () => {
    const retired = await engineer('POST', '/api/airframes/no-such-airframe/revisions/1/retire');
    expect(retired.status).toBe(404);
    const slug = 'light-twin';
    const before = airframeDetailSchema.parse((await engineer('GET', `/api/airframes/${slug}`)).body);
    expect(before.usedBy.length).toBeGreaterThan(0);
    expect(before.usedBy[0]).toMatchObject({ kind: 'scenario', status: 'published', airframeRevision: 1 });
    expect((await engineer('POST', `/api/airframes/${slug}/revisions/1/retire`)).status).toBe(200);
    expect((await engineer('POST', `/api/airframes/${slug}/revisions/1/retire`)).status).toBe(409);
    const after = airframeDetailSchema.parse((await engineer('GET', `/api/airframes/${slug}`)).body);
    expect(after.usedBy).toEqual(before.usedBy);
    expect(after.revisions[0].status).toBe('retired');
    const list = airframePageSchema.parse((await engineer('GET', '/api/airframes?status=retired')).body);
    expect(list.items.map((item) => item.slug)).toEqual([slug]);
  });
});

describe('history, tags and lists', () => {
  it('follows one value through the revisions with who, when and source', async () => {
    const { slug, document } = await newDraft('Followed value');
    await engineer('POST', `/api/airframes/${slug}/drafts`, { json: { from: 1, note: 'Heavier.' } });
    const { version } = await draftAt(colleague, slug, 2);
    const heavier = structuredClone(document);
    Reflect.set(heavier['mass'] as object, 'mass_kg', 1800); // the shipped file has a mass
    heavier['sources'] = [{ field: '/mass', text: 'Weighed', uncertainty_pct: 1 }];
    await colleague('PUT', `/api/airframes/${slug}/drafts/2`, {
      json: { document: heavier },
      headers: { 'if-match': `"${version}"` },
    });
    const answer = await instructor('GET', `/api/airframes/${slug}/history?field=%2Fmass%2Fmass_kg`);
    const { entries } = valueHistorySchema.parse(answer.body);
    expect(entries.map(({ revision, value, changed, by }) => [revision, value, changed, by])).toEqual([
      [2, 1800, true, 'H. Brandt'],
      [1, (document['mass'] as { mass_kg: number }).mass_kg, true, 'A. Reyes'],
    ]);
    expect(entries[0]).toMatchObject({ source: 'Weighed', uncertaintyPct: 1, note: 'Heavier.' });
    expect((await engineer('GET', `/api/airframes/${slug}/history?field=mass`)).status).toBe(422);
  });

  it('keeps tags once, whatever their case, and finds by them', async () => {
    const { slug } = await newDraft('Tagged');
    const answer = await engineer('PUT', `/api/airframes/${slug}/tags`, { json: { tags: ['Spare', 'spare', 'jet '] } });
    expect(answer.body).toEqual({ tags: ['jet', 'Spare'] });
    const list = airframePageSchema.parse((await engineer('GET', '/api/airframes?tag=spare')).body);
    expect(list.items.map((item) => item.slug)).toEqual([slug]);
    expect((await engineer('PUT', `/api/airframes/${slug}/tags`, { json: { tags: [''] } })).status).toBe(422);
  });

  it('filters by class and kind of engines, searches sources, and follows a draft’s name', async () => {
    const { slug, document } = await newDraft('Renamed later');
    const { version } = await draftAt(engineer, slug, 1);
    const renamed = { ...document, name: 'Now renamed', class: 'IV', engines: [] };
    await engineer('PUT', `/api/airframes/${slug}/drafts/1`, {
      json: { document: { ...renamed, sources: [{ field: '*', text: 'Tunnel campaign 17%' }] } },
      headers: { 'if-match': `"${version}"` },
    });
    const found = async (query: string) =>
      airframePageSchema.parse((await engineer('GET', `/api/airframes?${query}`)).body).items.map((item) => item.slug);
    expect(await found('class=IV&engineKind=none')).toEqual([slug]);
    expect(await found('search=campaign+17%25')).toEqual([slug]);
    expect(await found('search=campaign+1_%25')).toEqual([]);
    expect(await found('search=now+renamed&sort=-updatedAt')).toEqual([slug]);
    expect((await engineer('GET', '/api/airframes?class=V')).status).toBe(422);
    const jets = await found('engineKind=jet&pageSize=100');
    expect(jets).toContain('four-jet');
    expect(jets).not.toContain('light-twin');
  });

  it('removes an airframe with its only draft, and keeps its trail', async () => {
    const { slug } = await newDraft('Short-lived');
    expect((await engineer('DELETE', `/api/airframes/${slug}/drafts/1`)).status).toBe(204);
    expect((await engineer('GET', `/api/airframes/${slug}`)).status).toBe(404);
    expect(await deedsOf(slug)).toEqual(['airframe.created', 'airframe.draft-discarded']);
  });
});

describe('who may', () => {
  it('lets instructors read and refuses them every deed', async () => {
    const { slug, document } = await newDraft('Read only');
    const detail = airframeDetailSchema.parse((await instructor('GET', `/api/airframes/${slug}`)).body);
    expect(detail.mayEdit).toBe(false);
    const { version } = await draftAt(instructor, slug, 1);
    const at = `/api/airframes/${slug}`;
    const deeds: [string, string, object][] = [
      ['POST', '/api/airframes', { json: { document } }],
      ['POST', `${at}/duplicate`, { json: { revision: 1, name: 'x' } }],
      ['POST', `${at}/drafts`, { json: { from: 1 } }],
      ['PUT', `${at}/drafts/1`, { json: { document }, headers: { 'if-match': `"${version}"` } }],
      ['DELETE', `${at}/drafts/1`, {}],
      ['POST', `${at}/revisions/1/release`, { json: { note: 'because', answers: [] } }],
      ['POST', `${at}/revisions/1/retire`, {}],
      ['PUT', `${at}/tags`, { json: { tags: [] } }],
      ['PUT', `${at}/skin?name=a.glb`, { bytes: Buffer.from('glTF') }],
      ['DELETE', `${at}/skin`, {}],
      ['PUT', '/api/airframes/read-sheet?name=a.csv', { bytes: Buffer.from('a,b') }],
    ];
    for (const [method, where, setup] of deeds)
      expect([method, where, (await instructor(method, where, setup)).status]).toEqual([method, where, 403]);
    expect(await deedsOf(slug)).toEqual(['airframe.created']);
    expect((await trainee('GET', at)).status).toBe(403);
    expect((await (await server.client())('GET', at)).status).toBe(401);
  });
});
