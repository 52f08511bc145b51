import { writeFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { attemptResultSchema } from '#shared/contracts/attempts.ts';
import { debriefSchema, receivedRemarkPageSchema, type Debrief } from '#shared/contracts/debrief.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { deliverAttempt, flyAttempt } from '../../support/flown-attempt.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let trainee: Client;
let other: Client;
let instructor: Client;
let second: Client;
let flown: string;

beforeAll(async () => {
  server = await startTestServer();
  [trainee, other, instructor, second] = await Promise.all(
    ['j.lindqvist', 'a.bauer', 'm.okafor', 'h.brandt'].map((mailbox) => server.client(mailbox)),
  );
  const attempt = await flyAttempt(server, trainee, 'left-engine-cut-after-lift-off', { delayS: 1 });
  const done = await deliverAttempt(trainee, attempt);
  expect(attemptResultSchema.parse(done.body)).toMatchObject({ passed: true, statesAgree: true });
  flown = attempt.id;
});
afterAll(() => server.close());

const read = async (client: Client): Promise<Debrief> =>
  debriefSchema.parse((await client('GET', `/api/attempts/${flown}/debrief`)).body);
const signing = (over: Record<string, unknown> = {}) => ({
  json: { kind: 'sign-off', verdict: 'met', heldControls: true, ...over },
});

describe('remarks', () => {
  it('are written by an instructor at a moment, read by the trainee, and hidden from other trainees', async () => {
    const answer = await instructor('POST', `/api/attempts/${flown}/remarks`, {
      json: { tick: 480, text: 'Pedal first, then bank.' },
    });
    expect(answer.status).toBe(201);
    expect((await read(trainee)).remarks).toMatchObject([
      { tick: 480, text: 'Pedal first, then bank.', author: { displayName: 'M. Okafor' }, mayWithdraw: false },
    ]);
    expect((await other('GET', `/api/attempts/${flown}/debrief`)).status).toBe(404);
    const page = receivedRemarkPageSchema.parse((await trainee('GET', '/api/remarks')).body);
    expect(page).toMatchObject({ total: 1, items: [{ attemptId: flown, author: 'M. Okafor' }] });
    expect(receivedRemarkPageSchema.parse((await other('GET', '/api/remarks')).body).total).toBe(0);
  });

  it('are refused to trainees, without text, and outside the attempt', async () => {
    expect((await trainee('POST', `/api/attempts/${flown}/remarks`, { json: { tick: 1, text: 'x' } })).status).toBe(
      403,
    );
    const empty = await instructor('POST', `/api/attempts/${flown}/remarks`, { json: { tick: 1, text: '  ' } });
    expect(problemSchema.parse(empty.body).errors?.[0]).toMatchObject({ field: '/text' });
    const late = await instructor('POST', `/api/attempts/${flown}/remarks`, { json: { tick: 99_999, text: 'late' } });
    expect(problemSchema.parse(late.body).errors?.[0]).toMatchObject({ field: '/tick', rule: 'within-attempt' });
  });

  it('are withdrawn by their author only, and leave their place', async () => {
    const [remark] = (await read(instructor)).remarks;
    expect((await second('POST', `/api/attempts/${flown}/remarks/${remark.id}/withdraw`)).status).toBe(403);
    const after = debriefSchema.parse(
      (await instructor('POST', `/api/attempts/${flown}/remarks/${remark.id}/withdraw`)).body,
    );
    expect(after.remarks).toMatchObject([{ id: remark.id, text: '', mayWithdraw: false }]);
    expect(after.remarks[0].withdrawnAt).not.toBeNull();
    await expect(server.sql("UPDATE remark SET text = 'changed'")).rejects.toThrow('A remark can only be withdrawn.');
    await expect(server.sql('DELETE FROM remark')).rejects.toThrow('A remark is never deleted.');
  });
});

describe('signatures', () => {
  it('need an instructor, a complete attempt and the word that the trainee held the controls', async () => {
    expect((await trainee('POST', `/api/attempts/${flown}/sign-offs`, signing())).status).toBe(403);
    const without = await instructor('POST', `/api/attempts/${flown}/sign-offs`, signing({ heldControls: false }));
    expect(problemSchema.parse(without.body).errors?.[0]).toMatchObject({ field: '/heldControls' });
    const early = await second('POST', `/api/attempts/${flown}/sign-offs`, signing({ kind: 'counter-signature' }));
    expect(problemSchema.parse(early.body)).toMatchObject({ code: 'conflict' });
  });

  it('stand once, are counter-signed by a second instructor, and are corrected by new entries with a reason', async () => {
    expect((await instructor('POST', `/api/attempts/${flown}/sign-offs`, signing())).status).toBe(201);
    expect((await read(instructor)).mayCounterSign).toBe(false);
    expect((await read(second)).mayCounterSign).toBe(true);
    const counter = signing({ kind: 'counter-signature' });
    expect((await second('POST', `/api/attempts/${flown}/sign-offs`, counter)).status).toBe(201);
    const silent = await instructor('POST', `/api/attempts/${flown}/sign-offs`, signing({ verdict: 'not-met' }));
    expect(problemSchema.parse(silent.body).errors?.[0]).toMatchObject({ field: '/note', rule: 'reason-needed' });
    const reason = signing({ verdict: 'not-met', note: 'The other trainee helped with the pedal.' });
    expect((await instructor('POST', `/api/attempts/${flown}/sign-offs`, reason)).status).toBe(201);
    const { signOffs } = await read(trainee);
    expect(signOffs.map(({ kind, verdict, standing }) => [kind, verdict, standing])).toEqual([
      ['sign-off', 'met', false],
      ['counter-signature', 'met', true],
      ['sign-off', 'not-met', true],
    ]);
    await expect(server.sql("UPDATE sign_off SET verdict = 'met'")).rejects.toThrow('A signature never changes.');
  });
});

describe('the printed sheet', () => {
  it('is a PDF of the attempt for those who may read it', async () => {
    const answer = await trainee('GET', `/api/attempts/${flown}/sheet.pdf`);
    expect(answer.status).toBe(200);
    expect(answer.headers.get('content-type')).toBe('application/pdf');
    expect(answer.bytes.subarray(0, 5).toString()).toBe('%PDF-');
    if (process.env['SIDEWASH_KEEP']) writeFileSync(process.env['SIDEWASH_KEEP'], answer.bytes);
    expect((await other('GET', `/api/attempts/${flown}/sheet.pdf`)).status).toBe(404);
  });
});
