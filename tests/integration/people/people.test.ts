import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { mkdtemp, readdir, readFile, rm } from 'node:fs/promises';
import os from 'node:os';
import path from 'node:path';
import { SMTPServer } from 'smtp-server';
import {
  auditCheckSchema,
  auditPageSchema,
  outboxPageSchema,
  peoplePageSchema,
  rosterAnswerSchema,
} from '#shared/contracts/administration.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { createCourier } from '../../../server/mail/courier.ts';
import { type LocalSink, startLocalSink } from '../../../server/mail/local-sink.ts';
import { openClient, startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

const DAY_MS = 24 * 3600 * 1000;
const PASSWORD = 'long enough for all';
let shift = 0;
let server: TestServer;
let administrator: Client;
let sink: LocalSink;
let folder: string;

beforeAll(async () => {
  server = await startTestServer({ now: () => new Date(Date.now() + shift) });
  administrator = await server.client('s.virtanen');
  folder = await mkdtemp(path.join(os.tmpdir(), 'sidewash-mail-'));
  sink = await startLocalSink(folder);
});
afterEach(() => {
  shift = 0;
});
afterAll(async () => {
  await sink.close();
  await rm(folder, { recursive: true, force: true });
  await server.close();
});

const row = (line: number, name: string, email: string, roles = '', cohort = '') => ({
  line,
  name,
  email,
  roles,
  cohort,
});
async function roster(rows: unknown[], invite: boolean) {
  const answer = await administrator('POST', '/api/people/roster', { json: { rows, invite } });
  expect(answer.status, JSON.stringify(answer.body)).toBe(200);
  return rosterAnswerSchema.parse(answer.body);
}
async function personOf(search: string) {
  const answer = await administrator('GET', `/api/people?search=${encodeURIComponent(search)}`);
  return peoplePageSchema.parse(answer.body).items[0];
}
/** Sends all that is due; the link in the newest message to `email`. */
async function mailedLink(email: string): Promise<string> {
  const courier = createCourier(sink.url, 'Sidewash <sidewash@localhost>');
  await server.services.sendMail(courier);
  courier.close();
  for (const name of (await readdir(folder)).sort().reverse()) {
    const raw = (await readFile(path.join(folder, name), 'utf8')).replace(/=\r?\n/g, '');
    if (!raw.includes(email)) continue;
    const found = /\/welcome\/([\w-]+)/.exec(raw);
    if (found?.[1]) return found[1];
  }
  throw new Error(`No message to ${email}.`);
}
const refusal = (body: unknown) => problemSchema.parse(body);
const nobody = () => openClient(server.address, undefined);
const take = async (token: string, password: string) =>
  (await nobody())('POST', '/api/session/link/take', { json: { token, password } });
const signIn = async (email: string, password: string) =>
  (await nobody())('POST', '/api/session', { json: { email, password } });

describe('a roster', () => {
  it('is judged row by row, and only the good rows are invited', async () => {
    const rows = [
      row(2, 'Ines Aldana', 'i.aldana@fieldschool.example', 'trainee', '26-C'),
      row(3, 'Oskar Brandt', 'o.brandt@fieldschool'),
      row(4, '李 文', 'w.li@fieldschool.example'),
      row(5, 'J. Lindqvist', 'J.LINDQVIST@FieldSchool.example'),
      row(6, 'Sam Osei', 's.osei@fieldschool.example', 'pilot'),
      row(7, 'Again', 'I.Aldana@fieldschool.example'),
      row(8, '', 'm.vidal@fieldschool.example'),
      row(9, 'Mara Vidal', 'm.vidal@fieldschool.example', 'Instructor; engineer'),
    ];
    const judged = await roster(rows, false);
    expect(judged.invited).toBe(0);
    expect(judged.rows.map(({ verdict }) => verdict)).toEqual([
      ...['good', 'wrong', 'good', 'here', 'wrong', 'wrong', 'wrong', 'good'],
    ]);
    expect(judged.rows[4].words).toContain('“pilot” is not a role');
    expect(judged.rows[5].words).toContain('line 2');
    expect(await personOf('i.aldana')).toBeUndefined();

    expect((await roster(rows, true)).invited).toBe(3);
    expect(await personOf('i.aldana')).toMatchObject({ state: 'invited', roles: ['trainee'], cohorts: ['26-C'] });
    expect(await personOf('m.vidal')).toMatchObject({ roles: ['engineer', 'instructor'] });
    expect(await personOf('李')).toMatchObject({ displayName: '李 文' });
    expect((await roster(rows, true)).invited).toBe(0);
  });

  it('is refused to others', async () => {
    const instructor = await server.client('m.okafor');
    const json = { rows: [row(2, 'A', 'a@b.example')], invite: true };
    expect((await instructor('POST', '/api/people/roster', { json })).status).toBe(403);
    for (const address of ['/api/people', '/api/outbox', '/api/audit', '/api/audit.csv', '/api/organisation']) {
      expect((await instructor('GET', address)).status, address).toBe(403);
    }
  });
});

describe('an invitation', () => {
  it('opens the account once, with a password that is long enough', async () => {
    await roster([row(2, 'Nora Falk', 'n.falk@fieldschool.example')], true);
    const token = await mailedLink('n.falk@fieldschool.example');
    const looked = await (await nobody())('POST', '/api/session/link/look', { json: { token } });
    expect(looked.body).toMatchObject({ kind: 'invitation', displayName: 'Nora Falk' });
    expect((await take(token, 'short')).status).toBe(422);
    expect((await take(token, 'ü'.repeat(37))).status).toBe(422); // 74 bytes; bcrypt reads 72
    expect((await take(token, PASSWORD)).status).toBe(204);
    expect((await signIn('N.Falk@fieldschool.example', PASSWORD)).status).toBe(200);
    const second = await take(token, PASSWORD);
    expect(second.status).toBe(409);
    expect(refusal(second.body).detail).toContain('has been used');
    expect((await personOf('n.falk'))?.state).toBe('active');
  });

  it('runs out after seven days, and a new one replaces it', async () => {
    await roster([row(2, 'Late Comer', 'l.comer@fieldschool.example')], true);
    const first = await mailedLink('l.comer@fieldschool.example');
    shift = 8 * DAY_MS;
    administrator = await server.client('s.virtanen');
    const late = await take(first, PASSWORD);
    expect(refusal(late.body).detail).toContain('has run out');
    const person = await personOf('l.comer');
    expect((await administrator('POST', `/api/people/${person?.id}/invitation`, {})).status).toBe(204);
    const fresh = await mailedLink('l.comer@fieldschool.example');
    expect(fresh).not.toBe(first);
    expect((await take(fresh, PASSWORD)).status).toBe(204);
    shift = 0;
    administrator = await server.client('s.virtanen');
  });
});

describe('a password', () => {
  it('is reset by mail; an unknown address gets the same answer and no message', async () => {
    const ask = async (email: string) => (await nobody())('POST', '/api/session/reset', { json: { email } });
    const before = await server.sql('SELECT COUNT(*) AS n FROM outbox_mail');
    expect((await ask('nobody@elsewhere.example')).status).toBe(204);
    expect(await server.sql('SELECT COUNT(*) AS n FROM outbox_mail')).toEqual(before);
    expect((await ask('n.falk@fieldschool.example')).status).toBe(204);
    const token = await mailedLink('n.falk@fieldschool.example');
    expect((await take(token, 'another long password')).status).toBe(204);
    expect((await signIn('n.falk@fieldschool.example', PASSWORD)).status).toBe(401);
    expect((await signIn('n.falk@fieldschool.example', 'another long password')).status).toBe(200);
  });

  it('is changed by its owner, which ends the other sessions', async () => {
    const open = async () => {
      const client = await nobody();
      await client('POST', '/api/session', {
        json: { email: 'n.falk@fieldschool.example', password: 'another long password' },
      });
      return client;
    };
    const [here, there] = [await open(), await open()];
    const wrong = await here('PUT', '/api/session/password', { json: { current: 'no', password: PASSWORD } });
    expect(refusal(wrong.body).errors?.[0]?.field).toBe('/current');
    const json = { current: 'another long password', password: PASSWORD };
    expect((await here('PUT', '/api/session/password', { json })).status).toBe(204);
    expect((await here('GET', '/api/session')).status).toBe(200);
    expect((await there('GET', '/api/session')).status).toBe(401);
  });
});

describe('roles and deactivation', () => {
  it('take effect at once, and one administrator always remains', async () => {
    const person = await personOf('n.falk');
    const roles = { json: { roles: ['trainee', 'administrator'] } };
    expect((await administrator('PUT', `/api/people/${person?.id}/roles`, roles)).status).toBe(204);
    const other = await nobody();
    await other('POST', '/api/session', { json: { email: 'n.falk@fieldschool.example', password: PASSWORD } });
    expect((await other('GET', '/api/people')).status).toBe(200);

    // Two administrators remove each other at the same time: one of the two stands.
    const self = await personOf('s.virtanen');
    const answers = await Promise.all([
      administrator('POST', `/api/people/${person?.id}/deactivation`, {}),
      other('POST', `/api/people/${self?.id}/deactivation`, {}),
    ]);
    expect(answers.map(({ status }) => status).sort()).not.toEqual([204, 204]);
    const [{ n }] = await server.sql(
      `SELECT COUNT(*) AS n FROM person p INNER JOIN person_role r ON r.person_id = p.id AND r.role = 'administrator'
       WHERE p.status = 'active'`,
    );
    expect(Number(n)).toBeGreaterThanOrEqual(1);
    await server.sql(`UPDATE person SET status = 'active' WHERE id IN (?, ?)`, [self?.id, person?.id]);
    administrator = await server.client('s.virtanen');

    expect((await administrator('POST', `/api/people/${person?.id}/deactivation`, {})).status).toBe(204);
    expect((await other('GET', '/api/people')).status).toBeGreaterThanOrEqual(401);
    const last = await administrator('PUT', `/api/people/${self?.id}/roles`, { json: { roles: ['trainee'] } });
    expect(last.status).toBe(409);
    expect(refusal(last.body).detail).toContain('last administrator');
    expect((await administrator('DELETE', `/api/people/${person?.id}/deactivation`, {})).status).toBe(204);
    expect((await personOf('n.falk'))?.state).toBe('active');
  });
});

describe('the mail queue', () => {
  it('tries again while the server is down, gives up on its refusal, and sends each message once', async () => {
    const arrived: string[] = [];
    let answer: { code: number; text: string } | null = { code: 451, text: 'later' };
    const fake = new SMTPServer({
      authOptional: true,
      disabledCommands: ['STARTTLS'],
      onRcptTo: (_to, _session, done) =>
        done(answer ? Object.assign(new Error(answer.text), { responseCode: answer.code }) : null),
      onData: (stream, session, done) => {
        arrived.push(...session.envelope.rcptTo.map(({ address }) => address));
        stream.resume().on('end', () => done());
      },
    });
    await new Promise<void>((resolve) => fake.listen(0, '127.0.0.1', resolve));
    const bound = fake.server.address();
    const port = typeof bound === 'object' && bound ? bound.port : 0;
    const send = async (to = port) => {
      const courier = createCourier(`smtp://127.0.0.1:${to}`, 'Sidewash <sidewash@localhost>');
      const sent = await server.services.sendMail(courier);
      courier.close();
      return sent;
    };
    // Read after the clock has been put back: the session ends when it is put forward by hours.
    const state = async (email: string) => {
      const then = shift;
      shift = 0;
      const page = outboxPageSchema.parse((await administrator('GET', `/api/outbox?search=${email}`)).body);
      shift = then;
      return page.items[0];
    };
    await roster([row(2, 'Que Ue', 'queue@fieldschool.example')], true);
    expect(await send(1)).toBe(0); // nobody listens there
    expect(await state('queue@')).toMatchObject({ state: 'waiting', tries: 1 });
    expect(await send()).toBe(0); // not due yet
    shift = 60_000;
    expect(await send()).toBe(0);
    expect((await state('queue@'))?.lastError).toContain('451');
    answer = null;
    shift = 3600_000;
    const together = await Promise.all([send(), send()]);
    expect(together[0] + together[1]).toBe(1);
    shift = 7200_000;
    expect(await send()).toBe(0);
    expect(arrived).toEqual(['queue@fieldschool.example']);
    expect(await state('queue@')).toMatchObject({ state: 'sent', lastError: null });

    answer = { code: 550, text: 'no such box' };
    shift = 0;
    await roster([row(2, 'Gone', 'gone@fieldschool.example')], true);
    await send();
    const refused = await state('gone@');
    expect(refused).toMatchObject({ state: 'refused' });
    answer = null;
    expect((await administrator('POST', `/api/outbox/${refused?.id}/again`, {})).status).toBe(204);
    expect(await send()).toBe(1);
    shift = 0;
    await new Promise<void>((resolve) => fake.close(resolve));
  });
});

describe('the audit trail', () => {
  it('is searched, exported and sealed; what is altered behind its back is found', async () => {
    const found = auditPageSchema.parse((await administrator('GET', '/api/audit?kind=person&search=invited')).body);
    expect(found.total).toBeGreaterThan(3);
    expect(found.items.every(({ kind }) => kind === 'person')).toBe(true);
    expect(found.kinds).toContain('session');
    const csv = await administrator('GET', '/api/audit.csv?kind=person');
    expect(csv.headers.get('content-type')).toContain('text/csv');
    expect(csv.bytes.toString().split('\r\n')[0]).toContain('time,who,kind');

    const check = async () => auditCheckSchema.parse((await administrator('POST', '/api/audit/check', {})).body);
    shift = 60_000;
    while ((await server.services.auditChain.seal()) > 0);
    shift = 0;
    const whole = await check();
    expect(whole.firstBreak).toBeNull();
    expect(whole.sealed).toBeGreaterThan(10);
    expect(whole.lastSeal).toMatch(/^[0-9a-f]{64}$/);

    const [entry] = await server.sql(`SELECT id FROM audit_entry ORDER BY id LIMIT 1 OFFSET 4`);
    await expect(server.sql(`UPDATE audit_entry SET deed = 'x' WHERE id = ?`, [entry.id])).rejects.toThrow();
    await expect(server.sql(`DELETE FROM audit_seal`)).rejects.toThrow();
    const [trigger] = await server.sql(`SHOW TRIGGERS WHERE \`Table\` = 'audit_entry' AND Event = 'UPDATE'`);
    await server.sql(`DROP TRIGGER ${String(trigger['Trigger'])}`);
    await server.sql(`UPDATE audit_entry SET deed = 'x' WHERE id = ?`, [entry.id]);
    expect((await check()).firstBreak).toMatchObject({ id: String(entry.id) });
  });
});
