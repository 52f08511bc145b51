import { createHash } from 'node:crypto';
import { writeFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { airframeDetailSchema } from '#shared/contracts/airframe-editing.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { studyPageSchema, studySchema } from '#shared/contracts/studies.ts';
import { type Client, startTestServer, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let engineer: Client;
let instructor: Client;
let trainee: Client;

beforeAll(async () => {
  server = await startTestServer();
  [engineer, instructor, trainee] = await Promise.all(
    ['a.reyes', 'm.okafor', 'j.lindqvist'].map((mailbox) => server.client(mailbox)),
  );
});
afterAll(() => server.close());

const problem = (body: unknown) => problemSchema.parse(body);
const STATE = { tab: 'modes', airframe: 'light-twin', revision: '1', ias: '100', shifts: 'Cn_beta:0.02' };
async function newStudy(name: string, state: Record<string, string> = STATE) {
  const answer = await engineer('POST', '/api/studies', { json: { name, state } });
  expect(answer.status).toBe(201);
  const study = studySchema.parse(answer.body);
  expect(answer.headers.get('etag')).toBe(`"${study.version}"`);
  return study;
}

describe('a study', () => {
  it('reopens exactly, for everyone who may read, and is listed where its airframe is', async () => {
    const study = await newStudy('Less fin', { ...STATE, compare: 'twin-jet:1' });
    const opened = studySchema.parse((await instructor('GET', `/api/studies/${study.id}`)).body);
    expect(opened.state).toEqual({ ...STATE, compare: 'twin-jet:1' });
    expect(opened).toMatchObject({ name: 'Less fin', author: 'A. Reyes', mayEdit: false });
    expect(opened.airframes.map(({ slug, revision }) => [slug, revision])).toEqual([
      ['light-twin', 1],
      ['twin-jet', 1],
    ]);
    for (const slug of ['light-twin', 'twin-jet']) {
      const detail = airframeDetailSchema.parse((await instructor('GET', `/api/airframes/${slug}`)).body);
      expect(detail.usedBy).toContainEqual({
        kind: 'study',
        id: study.id,
        title: 'Less fin',
        revision: null,
        status: 'saved',
        airframeRevision: 1,
      });
    }
    const list = studyPageSchema.parse((await instructor('GET', '/api/studies?airframe=twin-jet&search=fin')).body);
    expect(list.items.map(({ id }) => id)).toEqual([study.id]);
    expect(studyPageSchema.parse((await engineer('GET', '/api/studies?airframe=four-jet')).body).total).toBe(0);
  });

  it('pins the latest revision where none is named', async () => {
    const study = await newStudy('Latest', { airframe: 'four-jet' });
    expect(study.state).toEqual({ airframe: 'four-jet', revision: '1' });
  });

  it('keeps a draft that it pins from being discarded', async () => {
    await engineer('POST', '/api/airframes/single-trainer/drafts', { json: { from: 1 } });
    const study = await newStudy('On a draft', { airframe: 'single-trainer', revision: '2' });
    const refused = await engineer('DELETE', '/api/airframes/single-trainer/drafts/2');
    expect(refused.status).toBe(409);
    expect(problem(refused.body).detail).toContain('“On a draft”');
    expect((await engineer('DELETE', `/api/studies/${study.id}`)).status).toBe(204);
    expect((await engineer('DELETE', '/api/airframes/single-trainer/drafts/2')).status).toBe(204);
  });

  it('saved by two is kept as the first saved it', async () => {
    const study = await newStudy('Shared');
    const save = (name: string, version: string | null) =>
      engineer('PUT', `/api/studies/${study.id}`, {
        json: { name, state: { ...STATE, ias: '120' } },
        headers: version === null ? {} : { 'if-match': `"${version}"` },
      });
    expect((await save('x', null)).status).toBe(428);
    const first = await save('First', study.version);
    expect(studySchema.parse(first.body)).toMatchObject({ name: 'First', state: { ias: '120' } });
    const second = await save('Second', study.version);
    expect(second.status).toBe(412);
    expect(problem(second.body).detail).toContain('A. Reyes saved this study');
    expect(studySchema.parse((await engineer('GET', `/api/studies/${study.id}`)).body).name).toBe('First');
  });

  it.each([
    ['no airframe', { tab: 'modes' }, '/state/airframe'],
    ['an airframe that is not there', { airframe: 'no-such' }, '/state/airframe'],
    ['a revision that is not there', { airframe: 'light-twin', revision: '99' }, '/state/airframe'],
    ['a compared one that is not there', { airframe: 'light-twin', compare: 'x:1' }, '/state/compare'],
    ['a member with an odd name', { airframe: 'light-twin', '<b>': '1' }, undefined],
    [
      'more than 8 KB',
      { airframe: 'light-twin', a: 'x'.repeat(4000), b: 'x'.repeat(4000), c: 'x'.repeat(400) },
      '/state',
    ],
  ])('with %s is refused beside the field', async (_what, state, field) => {
    const answer = await engineer('POST', '/api/studies', { json: { name: 'Wrong', state } });
    expect(answer.status).toBe(422);
    if (field !== undefined) expect(problem(answer.body).errors?.[0].field).toBe(field);
  });

  it('is written by engineers only and hidden from trainees and other organisations', async () => {
    const study = await newStudy('Guarded');
    const json = { name: 'Mine', state: STATE };
    expect((await instructor('POST', '/api/studies', { json })).status).toBe(403);
    const headers = { 'if-match': `"${study.version}"` };
    expect((await instructor('PUT', `/api/studies/${study.id}`, { json, headers })).status).toBe(403);
    expect((await instructor('DELETE', `/api/studies/${study.id}`)).status).toBe(403);
    expect((await trainee('GET', `/api/studies/${study.id}`)).status).toBe(403);
    await server.sql(`INSERT INTO organisation SELECT UUID(), 'other', 'Other', settings, 0, NOW(3) FROM organisation`);
    await server.sql(
      `UPDATE study SET organisation_id = (SELECT id FROM organisation WHERE slug = 'other') WHERE id = ?`,
      [study.id],
    );
    expect((await engineer('GET', `/api/studies/${study.id}`)).status).toBe(404);
    expect((await engineer('GET', '/api/studies/not-an-id')).status).toBe(404);
  });
});

describe('a report', () => {
  it.each([
    ['of a study', 'light-twin', true],
    ['of a state', 'four-jet', false],
  ])('%s is a numbered PDF file and leaves its trail', async (_what, airframe, saved) => {
    const state = { ...STATE, airframe, compare: 'twin-jet:1' };
    const json = saved ? { study: (await newStudy('Printed', state)).id } : { state };
    const answer = await engineer('POST', '/api/reports/analysis', { json });
    expect(answer.status).toBe(200);
    expect(answer.headers.get('content-type')).toBe('application/pdf');
    expect(answer.headers.get('content-disposition')).toMatch(/AR-000\d-/);
    expect(answer.bytes.subarray(0, 5).toString()).toBe('%PDF-');
    if (process.env.KEEP_PDF) writeFileSync(`${process.env.KEEP_PDF}/${airframe}.pdf`, answer.bytes);
    const exported = await engineer('GET', `/api/airframes/${airframe}/revisions/1/export.json`);
    const [entry] = await server.sql(`SELECT detail FROM audit_entry WHERE deed = 'report.printed' ORDER BY id DESC`);
    const detail: unknown = typeof entry['detail'] === 'string' ? JSON.parse(entry['detail']) : entry['detail'];
    expect(detail).toMatchObject({
      airframe,
      digest: createHash('sha256').update(exported.bytes).digest('hex'),
      sha256: createHash('sha256').update(answer.bytes).digest('hex'),
    });
  });

  it('prints an aeroplane without engines too', async () => {
    const document = {
      ...((await engineer('GET', '/api/airframes/light-twin/revisions/1/export.json')).body as object),
      engines: [],
    };
    await engineer('POST', '/api/airframes', { json: { slug: 'glider', document } });
    const answer = await engineer('POST', '/api/reports/analysis', { json: { state: { airframe: 'glider' } } });
    expect(answer.status).toBe(200);
    if (process.env.KEEP_PDF) writeFileSync(`${process.env.KEEP_PDF}/glider.pdf`, answer.bytes);
  });

  it('is refused in words for an unfinished draft, an unknown study and a trainee', async () => {
    await engineer('POST', '/api/airframes', { json: { slug: 'unfinished', document: { name: 'Unfinished' } } });
    const draft = await engineer('POST', '/api/reports/analysis', { json: { state: { airframe: 'unfinished' } } });
    expect(draft.status).toBe(422);
    expect(problem(draft.body).errors?.length).toBeGreaterThan(0);
    const json = { study: 'b1a7b7a0-0000-4000-8000-000000000000' };
    expect((await engineer('POST', '/api/reports/analysis', { json })).status).toBe(404);
    expect((await trainee('POST', '/api/reports/analysis', { json: { state: STATE } })).status).toBe(403);
    expect((await engineer('POST', '/api/reports/analysis', { json: {} })).status).toBe(422);
  });
});
